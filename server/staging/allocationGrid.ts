import type { LeastPower } from './leastPower.ts';
import type { Make, Share } from './shares.ts';

/** Divisible by every count up to six, so that equal splits lie on the grid. */
export const GRID = 120;

interface Search {
  /** Steps that each pump must carry: 0 where it may rest, 1 where it has to run. */
  readonly least?: number;
  /**
   * Given, each pump may also stand direct on line at the very end of its range, where it is cheapest; what that is off
   * the grid is counted at this price [W per m³/s], and the others then carry what is left.
   */
  readonly price?: number;
}

/** Least power of one pump of a make on the grid, j steps of flow each. */
export interface GridCurve {
  readonly make: Make;
  readonly power: Float64Array;
  readonly onDrive: Uint8Array;
  /** Largest j that it can carry. */
  readonly top: number;
}

/** @param step  of flow [m³/s] */
export function gridCurve(make: Make, header: number, step: number): GridCurve {
  const power = new Float64Array(GRID + 1).fill(Infinity);
  const onDrive = new Uint8Array(GRID + 1);
  power[0] = 0;
  let top = 0;
  for (let j = 1; j <= GRID; j++) {
    const line = make.least.inMode('line', j * step, header);
    const drive = make.least.inMode('drive', j * step, header);
    power[j] = Math.min(line, drive);
    if (power[j] === Infinity) continue;
    if (drive < line) onDrive[j] = 1;
    top = j;
  }
  return { make, power, onDrive, top };
}

/** The exact search: pumps one after another, the least power of carrying j/GRID of the flow with those so far. */
export function onGrid(
  curves: readonly GridCurve[],
  flow: number,
  header: number,
  { least = 0, price }: Search = {},
): Share[] | null {
  const step = flow / GRID;
  let table = new Float64Array(GRID + 1).fill(Infinity);
  table[0] = 0;
  const choices: { curve: GridCurve; end: End | null; taken: Uint8Array }[] = [];
  for (const curve of curves) {
    const { make } = curve;
    let { power, top } = curve;
    let end = price === undefined ? null : endOnLine(make.least, header, step);
    const endPower = end ? end.power + price! * (end.steps * step - end.flow) : Infinity;
    if (end && endPower < power[end.steps]!) {
      power = power.slice();
      power[end.steps] = endPower;
      top = Math.max(top, end.steps);
    } else end = null;
    for (let k = 0; k < make.count; k++) {
      const next = new Float64Array(GRID + 1).fill(Infinity);
      const taken = new Uint8Array(GRID + 1);
      for (let j = 0; j <= GRID; j++) {
        const most = Math.min(j, top);
        let best = Infinity;
        let steps = 0;
        for (let i = least; i <= most; i++) {
          const sum = table[j - i]! + power[i]!;
          if (sum < best) {
            best = sum;
            steps = i;
          }
        }
        next[j] = best;
        taken[j] = steps;
      }
      table = next;
      choices.push({ curve, end, taken });
    }
  }
  if (table[GRID] === Infinity) return null;
  const held: Share[] = [];
  const free: Share[] = [];
  let left = GRID;
  for (let c = choices.length - 1; c >= 0; c--) {
    const { curve, end, taken } = choices[c]!;
    const { least: pump } = curve.make;
    const i = taken[left]!;
    left -= i;
    if (i === 0) continue;
    if (end?.steps === i) held.push({ least: pump, mode: 'line', count: 1, flow: end.flow });
    else free.push({ least: pump, mode: curve.onDrive[i] === 1 ? 'drive' : 'line', count: 1, flow: i * step });
  }
  if (held.length === 0) return free;
  // What stands at its end is off the grid by part of a step; the others make up for it.
  const rest = held.reduce((sum, share) => sum - share.flow, flow);
  const carried = free.reduce((sum, share) => sum + share.flow, 0);
  if (!(rest > 0 && carried > 0)) return null;
  return [...held, ...free.map((share) => ({ ...share, flow: (share.flow * rest) / carried }))];
}

/** The end of a pump's range direct on line. */
interface End {
  readonly flow: number;
  readonly power: number;
  /** Steps of the grid it is nearest to. */
  readonly steps: number;
}

function endOnLine(least: LeastPower, header: number, step: number): End | null {
  const flow = least.mostFlow('line', header);
  const steps = Math.round(flow / step);
  if (!(flow > 0) || steps < 1 || steps > GRID) return null;
  return { flow, power: least.inMode('line', flow, header), steps };
}
