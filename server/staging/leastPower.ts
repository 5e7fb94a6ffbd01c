import type { Pump } from '../hydraulics/pump.ts';
import { leastOn } from '../hydraulics/roots.ts';
import { isInside, SLACK } from './state.ts';

/** How a pump carries a flow: direct on line at rated speed, or on its drive. */
export type Mode = 'line' | 'drive';

/** What a pump may do in an allocation; the floor allows all of it, a rule less. */
export interface Leave {
  /** Modes it may run in. */
  readonly modes: readonly Mode[];
  /** Whether its head may be more than is asked, a valve taking the rest. */
  readonly valve: boolean;
  /** Whether it may overload its motor. */
  readonly overload: boolean;
  /** Range of best-efficiency flow it must keep to; null for none. */
  readonly range: { readonly from: number; readonly to: number } | null;
}

/** All that the floor allows (model.md §5). */
const ANY_WAY: Leave = { modes: ['line', 'drive'], valve: true, overload: true, range: null };

/**
 * P̃(q; H): the least electric power with which a pump sends flow q into a header at head H, within what it may do: for
 * the floor direct on line or on its drive at any speed, its head being more than is asked where a valve takes the rest.
 */
export class LeastPower {
  readonly pump: Pump;
  readonly leave: Leave;
  /** Whether power rises with speed at every flow, so that the lowest speed that lifts is the best. */
  private readonly slowestIsBest: boolean;

  constructor(pump: Pump, leave: Leave = ANY_WAY) {
    this.pump = pump;
    this.leave = { ...leave, modes: leave.modes.filter((mode) => mode === 'line' || pump.hasDrive) };
    this.slowestIsBest = !leave.valve || !pump.hasDrive || powerRisesWithSpeed(pump);
  }

  /** Largest flow in a mode at header head H. */
  mostFlow(mode: Mode, header: number): number {
    if (!this.leave.modes.includes(mode)) return 0;
    return this.pump.flowInto(header, mode === 'drive' ? this.pump.maxSpeed : 1);
  }

  /** Least flow above 0 in a mode at header head H: without a valve it cannot be throttled further. */
  leastFlow(mode: Mode, header: number): number {
    if (this.leave.valve) return 0;
    return this.pump.flowInto(header, mode === 'drive' ? this.pump.minSpeed : 1);
  }

  /** Power in a mode at flow q > 0 and header head H [W]; Infinity where it cannot or may not. */
  inMode(mode: Mode, q: number, header: number): number {
    const { pump, leave } = this;
    if (!leave.modes.includes(mode)) return Infinity;
    const head = header + pump.branchLoss * q * q;
    let speed = 1;
    if (mode === 'line') {
      const spare = pump.head(q, 1) - head;
      const slack = 1e-11 * (1 + Math.abs(head));
      if (spare < -slack || q > pump.endFlow(1) * (1 + 1e-12)) return Infinity;
      if (!leave.valve && spare > 1e-9 * (1 + Math.abs(head)) && q < pump.endFlow(1) * (1 - 1e-12)) return Infinity;
    } else {
      const needed = pump.speedFor(q, head);
      if (needed > pump.maxSpeed * (1 + 1e-12)) return Infinity;
      if (!leave.valve && needed < pump.minSpeed * (1 - 1e-9)) return Infinity;
      speed = Math.min(Math.max(needed, pump.minSpeed), pump.maxSpeed);
    }
    const onDrive = mode === 'drive';
    if (!leave.overload && pump.overload(q, speed, onDrive) > 1 + SLACK) return Infinity;
    if (leave.range) {
      const least = pump.leastShareOfBest(q, speed, onDrive);
      if (!isInside(leave.range, least, pump.greatestShareOfBest(q, speed, onDrive))) return Infinity;
    }
    if (onDrive && !this.slowestIsBest) return leastOverSpeed(pump, q, speed);
    return pump.electric(q, speed, onDrive);
  }

  /**
   * What holds the pump back at a flow, so that power over flow kinks where it changes: the end of its curve, its least
   * speed, the header head; '' where nothing does.
   */
  heldBy(mode: Mode, q: number, header: number): 'end' | 'least-speed' | 'header' | '' {
    const { pump } = this;
    if (mode === 'line') return q >= this.mostFlow('line', header) * (1 - 1e-7) ? 'header' : '';
    const needed = pump.speedFor(q, header + pump.branchLoss * q * q);
    if (needed < pump.minSpeed) return 'least-speed';
    return q >= pump.endFlow(needed) * (1 - 1e-9) ? 'end' : '';
  }
}

/** Where power does not rise with speed throughout, the best speed is looked for on a grid, then polished. */
function leastOverSpeed(pump: Pump, q: number, slowest: number): number {
  const steps = 32;
  const width = (pump.maxSpeed - slowest) / steps;
  if (width <= 0) return pump.electric(q, slowest, true);
  let best = 0;
  let least = Infinity;
  for (let i = 0; i <= steps; i++) {
    const power = pump.electric(q, slowest + i * width, true);
    if (power < least) {
      least = power;
      best = i;
    }
  }
  const from = slowest + Math.max(best - 1, 0) * width;
  const to = slowest + Math.min(best + 1, steps) * width;
  return Math.min(
    least,
    pump.electric(
      q,
      leastOn((s) => pump.electric(q, s, true), from, to),
      true,
    ),
  );
}

function powerRisesWithSpeed(pump: Pump): boolean {
  const steps = 40;
  for (let i = 1; i <= steps; i++) {
    const q = (pump.endFlow(pump.maxSpeed) * i) / steps;
    const slowest = Math.max(pump.minSpeed, (q / pump.endFlow(pump.maxSpeed)) * pump.maxSpeed);
    let before = 0;
    for (let j = 0; j <= steps; j++) {
      const power = pump.electric(q, slowest + ((pump.maxSpeed - slowest) * j) / steps, true);
      if (power < before) return false;
      before = power;
    }
  }
  return true;
}
