import type { Pump } from '../hydraulics/pump.ts';
import { leastOn } from '../hydraulics/roots.ts';

/** How a pump carries a flow: direct on line at rated speed, or on its drive. */
export type Mode = 'line' | 'drive';

/**
 * P̃(q; H): the least electric power with which a pump sends flow q into a header at head H, direct on line or on its
 * drive at any speed it may run at (model.md §5, floor). Its head may be more than is asked; a valve takes the rest.
 */
export class LeastPower {
  readonly pump: Pump;
  /** Whether power rises with speed at every flow, so that the lowest speed that lifts is the best. */
  private readonly slowestIsBest: boolean;

  constructor(pump: Pump) {
    this.pump = pump;
    this.slowestIsBest = !pump.hasDrive || powerRisesWithSpeed(pump);
  }

  /** Largest flow in a mode at header head H. */
  mostFlow(mode: Mode, header: number): number {
    const { pump } = this;
    if (mode === 'drive' && !pump.hasDrive) return 0;
    return pump.flowInto(header, mode === 'drive' ? pump.maxSpeed : 1);
  }

  /** Power in a mode at flow q > 0 and header head H [W]; Infinity where it cannot. */
  inMode(mode: Mode, q: number, header: number): number {
    const { pump } = this;
    const head = header + pump.branchLoss * q * q;
    if (mode === 'line') {
      const lifts = pump.head(q, 1) >= head - 1e-11 * (1 + Math.abs(head)) && q <= pump.endFlow(1) * (1 + 1e-12);
      return lifts ? pump.electric(q, 1, false) : Infinity;
    }
    if (!pump.hasDrive) return Infinity;
    const needed = pump.speedFor(q, head);
    if (needed > pump.maxSpeed * (1 + 1e-12)) return Infinity;
    const slowest = Math.min(Math.max(needed, pump.minSpeed), pump.maxSpeed);
    if (this.slowestIsBest) return pump.electric(q, slowest, true);
    return leastOverSpeed(pump, q, slowest);
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

  /** The lesser of the two modes. */
  at(q: number, header: number): { power: number; mode: Mode } {
    const line = this.inMode('line', q, header);
    const drive = this.inMode('drive', q, header);
    return drive < line ? { power: drive, mode: 'drive' } : { power: line, mode: 'line' };
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
