import { leastOn } from '../hydraulics/roots.ts';
import type { LeastPower, Mode } from './leastPower.ts';

/** Which pumps carry a total flow at a header head, and how: the least total power of any subset and any split. */
export interface Allocation {
  /** Electric power [W], standby not included; Infinity where no subset can carry the flow. */
  readonly power: number;
  readonly shares: readonly Share[];
}

/** Some pumps of one make in one mode, each at the same flow. */
export interface Share {
  readonly least: LeastPower;
  readonly mode: Mode;
  readonly count: number;
  readonly flow: number;
}

/** Pumps of one make: what they can do, and how many there are. */
export interface Make {
  readonly least: LeastPower;
  readonly count: number;
}

/** Divisible by every count up to six, so that equal splits lie on the grid. */
const GRID = 120;

/** So many tight arrangements are tried; a station of a few makes has fewer. */
const MOST_TIGHT = 40;

/**
 * Separable allocation (model.md §3): minimise Σ P̃_i(q_i; H) over Σ q_i = Q. An exact search on a grid of Q finds who
 * runs and roughly who carries what, whatever the shape of the P̃; the split is then polished between the groups. Equal
 * splits, and all but one at their limit, are tried beside it, so that no simple arrangement is missed by the grid.
 */
export function allocate(makes: readonly Make[], flow: number, header: number): Allocation {
  let best: Allocation = { power: Infinity, shares: [] };
  const consider = (shares: readonly Share[]) => {
    const power = powerOf(shares, header);
    if (power < best.power) best = { power, shares };
  };
  for (const { least, count } of makes) {
    for (const mode of ['line', 'drive'] as const) {
      for (let n = 1; n <= count; n++) consider([{ least, mode, count: n, flow: flow / n }]);
    }
    const limit = least.mostFlow('line', header);
    for (let n = 1; n < count && n * limit < flow; n++) {
      const rest = flow - n * limit;
      const atLimit: Share = { least, mode: 'line', count: n, flow: limit };
      consider([atLimit, { least, mode: 'line', count: 1, flow: rest }]);
      for (let m = 1; m <= count - n; m++) consider([atLimit, { least, mode: 'drive', count: m, flow: rest / m }]);
    }
  }
  const reach = (2 * flow) / GRID;
  const curves = makes.map((make) => gridCurve(make, header, flow / GRID));
  const found = onGrid(curves, flow, header);
  if (found) {
    consider(polished(found, reach, header));
    if (differAlike(found)) consider(passedAround(found, reach, header));
  }
  const held = best.power < Infinity ? onGrid(curves, flow, header, { price: best.power / flow }) : null;
  if (held) consider(polished(held, 2 * reach, header));
  for (const tight of tightArrangements(makes, flow, header)) consider(polished(tight, flow, header));
  // Where powers kink Newton's steps end short of the least, and pumps alike may do better at different flows.
  const apart = takenApart(best.shares, reach, header);
  const kinked = best.shares.length > 2 && best.shares.some((s) => s.least.heldBy(s.mode, s.flow, header) !== '');
  if (kinked || apart.length > best.shares.length) consider(passedAround(apart, reach, header));
  return best;
}

/** Pumps alike one by one, where their power is not convex about the flow they share. */
function takenApart(shares: readonly Share[], reach: number, header: number): readonly Share[] {
  return shares.flatMap((share) => {
    if (share.count === 1 || slopesOf(share, limitsOf(share, reach, header), header)) return [share];
    return Array.from({ length: share.count }, () => ({ ...share, count: 1 }));
  });
}

/** Whether pumps of one make in one mode carry different flows. */
function differAlike(shares: readonly Share[]): boolean {
  return shares.some((one) =>
    shares.some((two) => two.least === one.least && two.mode === one.mode && two.flow !== one.flow),
  );
}

/** The same where every pump must carry some of the flow. */
export function allocateToAll(makes: readonly Make[], flow: number, header: number): Allocation {
  const curves = makes.map((make) => gridCurve(make, header, flow / GRID));
  const found = onGrid(curves, flow, header, { least: 1 });
  const starts = found ? [polished(found, (2 * flow) / GRID, header)] : [];
  for (const tight of tightArrangements(makes, flow, header)) {
    const running = tight.reduce((sum, share) => sum + share.count, 0);
    if (running === makes.reduce((sum, make) => sum + make.count, 0)) starts.push(polished(tight, flow, header));
  }
  let best: Allocation = { power: Infinity, shares: [] };
  for (const shares of starts) {
    const power = powerOf(shares, header);
    if (power < best.power) best = { power, shares };
  }
  return best;
}

/**
 * Arrangements whose pumps must nearly all be at their limits to carry the flow: so little room is left between them
 * that the grid may step over it. Each starts with its flows in proportion to the limits.
 */
function tightArrangements(makes: readonly Make[], flow: number, header: number): Share[][] {
  const step = flow / GRID;
  const options = makes.map(({ least, count }) => {
    const limits = { line: least.mostFlow('line', header), drive: least.mostFlow('drive', header) };
    const ways: { shares: Share[]; capacity: number; pumps: number }[] = [];
    for (let line = 0; line <= count; line++) {
      for (let drive = 0; drive + line <= count; drive++) {
        if ((line > 0 && limits.line <= 0) || (drive > 0 && limits.drive <= 0)) continue;
        const shares: Share[] = [];
        if (line > 0) shares.push({ least, mode: 'line', count: line, flow: limits.line });
        if (drive > 0) shares.push({ least, mode: 'drive', count: drive, flow: limits.drive });
        ways.push({ shares, capacity: line * limits.line + drive * limits.drive, pumps: line + drive });
      }
    }
    return ways;
  });
  const most = options.map((ways) => ways.reduce((best, way) => Math.max(best, way.capacity), 0));
  const found: Share[][] = [];
  const extend = (make: number, shares: Share[], capacity: number, pumps: number) => {
    if (found.length >= MOST_TIGHT) return;
    const left = most.slice(make).reduce((sum, each) => sum + each, 0);
    if (capacity + left < flow || capacity > flow + 8 * step * Math.max(pumps, 1)) return;
    if (make === makes.length) {
      if (capacity <= 0 || capacity > flow + 2 * step * pumps) return;
      found.push(shares.map((share) => ({ ...share, flow: (share.flow * flow) / capacity })));
      return;
    }
    for (const way of options[make]!) {
      extend(make + 1, [...shares, ...way.shares], capacity + way.capacity, pumps + way.pumps);
    }
  };
  extend(0, [], 0, 0);
  return found;
}

/** Names an arrangement: who runs in which mode and what holds them back. Power over flow is smooth while it stays. */
export function arrangementOf({ shares }: Allocation, header: number): string {
  return shares
    .map((s) => `${s.least.pump.make}|${s.mode}|${s.count}|${s.least.heldBy(s.mode, s.flow, header)}`)
    .sort()
    .join('&');
}

function powerOf(shares: readonly Share[], header: number): number {
  let sum = 0;
  for (const { least, mode, count, flow } of shares) sum += count * least.inMode(mode, flow, header);
  return sum;
}

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
interface GridCurve {
  readonly make: Make;
  readonly power: Float64Array;
  readonly onDrive: Uint8Array;
  /** Largest j that it can carry. */
  readonly top: number;
}

function gridCurve(make: Make, header: number, step: number): GridCurve {
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
function onGrid(
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

/**
 * The split made exact: pumps alike in make and mode are set to their mean flow where that costs no more, then flow is
 * passed between the groups until all that can move have the same marginal power dP/dq.
 *
 * @param reach  how far a flow may move [m³/s]: the grid has it right to a step or two
 */
function polished(found: Share[], reach: number, header: number): readonly Share[] {
  const shares = grouped(found, header);
  if (shares.length === 1) return shares;
  if (shares.length === 2) return passedBetween(shares[0]!, shares[1]!, reach, header);
  const { shares: moved, convex } = equalMarginals(shares, reach, header);
  const better = powerOf(moved, header) < powerOf(shares, header) ? moved : shares;
  return convex ? better : passedAround(better, reach, header);
}

/** Flow passed between every two groups in turn until nothing is gained: where powers are not convex. */
function passedAround(start: readonly Share[], reach: number, header: number): readonly Share[] {
  const shares = [...start];
  let power = powerOf(shares, header);
  for (let round = 0; round < 12; round++) {
    for (let i = 0; i < shares.length; i++) {
      for (let j = i + 1; j < shares.length; j++) {
        const [one, two] = passedBetween(shares[i]!, shares[j]!, reach, header);
        shares[i] = one;
        shares[j] = two;
      }
    }
    const before = power;
    power = powerOf(shares, header);
    if (before - power <= 1e-9 * power) break;
  }
  return shares;
}

/** Flow passed from one group to another, by golden sections: sure whatever the shape of their powers. */
function passedBetween(one: Share, two: Share, reach: number, header: number): [Share, Share] {
  const room = (s: Share) => s.count * (s.least.mostFlow(s.mode, header) - s.flow);
  const spare = (s: Share) => s.count * (s.flow - Math.max(s.least.leastFlow(s.mode, header), 1e-3 * s.flow));
  const low = -Math.min(reach, spare(one), room(two));
  const high = Math.min(reach, spare(two), room(one));
  if (!(high > low)) return [one, two];
  const pass = (d: number): [Share, Share] => [
    { ...one, flow: one.flow + d / one.count },
    { ...two, flow: two.flow - d / two.count },
  ];
  const moved = pass(leastOn((d) => powerOf(pass(d), header), low, high));
  return powerOf(moved, header) < powerOf([one, two], header) ? moved : [one, two];
}

/**
 * Newton's method on the condition that every group that can move has one marginal power: each step solves the
 * quadratic model under Σ n·δ = 0, groups at a limit that would leave it being held there.
 *
 * @returns  the split, and whether every group with room to move was convex where it ended
 */
function equalMarginals(
  start: readonly Share[],
  reach: number,
  header: number,
): { shares: readonly Share[]; convex: boolean } {
  const limits = start.map((s) => limitsOf(s, reach, header));
  let shares = [...start];
  let power = powerOf(shares, header);
  let convex = true;
  for (let round = 0; round < 20; round++) {
    const slopes = shares.map((s, i) => slopesOf(s, limits[i]!, header));
    const stuck = limits.map(({ low, high }) => high <= low);
    const held = new Set<number>();
    slopes.forEach((slope, i) => {
      if (slope === null || stuck[i]) held.add(i);
    });
    convex = slopes.every((slope, i) => slope !== null || stuck[i]);
    let steps: number[] = [];
    for (let again = 0; again <= shares.length; again++) {
      let top = 0;
      let bottom = 0;
      shares.forEach((s, i) => {
        if (held.has(i)) return;
        top += (s.count * slopes[i]!.first) / slopes[i]!.second;
        bottom += s.count / slopes[i]!.second;
      });
      if (bottom === 0) return { shares, convex };
      const marginal = top / bottom;
      steps = shares.map((_, i) => (held.has(i) ? 0 : (marginal - slopes[i]!.first) / slopes[i]!.second));
      const before = held.size;
      steps.forEach((step, i) => {
        const { low, high } = limits[i]!;
        const flow = shares[i]!.flow;
        if ((step > 0 && flow >= high * (1 - 1e-12)) || (step < 0 && flow <= low * (1 + 1e-12))) held.add(i);
      });
      if (held.size === before) break;
    }
    // As far along the step as the limits let every group go, then halved until it gains.
    let scale = 1;
    steps.forEach((step, i) => {
      const { low, high } = limits[i]!;
      const flow = shares[i]!.flow;
      if (step > 0) scale = Math.min(scale, (high - flow) / step);
      if (step < 0) scale = Math.min(scale, (low - flow) / step);
    });
    let gained = false;
    for (let halving = 0; halving < 12 && scale > 0; halving++, scale /= 2) {
      const next = shares.map((s, i) => (steps[i] === 0 ? s : { ...s, flow: s.flow + scale * steps[i]! }));
      const nextPower = powerOf(next, header);
      if (nextPower >= power) continue;
      gained = power - nextPower > 1e-13 * power;
      shares = next;
      power = nextPower;
      break;
    }
    if (!gained) break;
  }
  return { shares, convex };
}

/** How far each pump's flow may move. */
function limitsOf({ least, mode, flow }: Share, reach: number, header: number): { low: number; high: number } {
  return {
    low: Math.max(least.leastFlow(mode, header), 1e-3 * flow, flow - reach),
    high: Math.min(least.mostFlow(mode, header), flow + reach),
  };
}

/** First and second derivative of a pump's power over its flow, by differences; null where it is not convex there. */
function slopesOf(
  { least, mode, flow }: Share,
  limit: { low: number; high: number },
  header: number,
): { first: number; second: number } | null {
  const h = Math.min(1e-3 * flow, (limit.high - limit.low) / 4);
  if (!(h > 0)) return null;
  const middle = Math.min(Math.max(flow, limit.low + h), limit.high - h);
  const before = least.inMode(mode, middle - h, header);
  const here = least.inMode(mode, middle, header);
  const after = least.inMode(mode, middle + h, header);
  const second = (after - 2 * here + before) / (h * h);
  if (!(second > 0) || !Number.isFinite(second)) return null;
  return { first: (after - before) / (2 * h) + second * (flow - middle), second };
}

function grouped(found: readonly Share[], header: number): Share[] {
  const groups: Share[] = [];
  for (const share of found) {
    const at = groups.findIndex((g) => g.least === share.least && g.mode === share.mode);
    const group = groups[at];
    if (!group) {
      groups.push(share);
      continue;
    }
    const count = group.count + share.count;
    const merged = { ...group, count, flow: (group.count * group.flow + share.count * share.flow) / count };
    if (powerOf([merged], header) <= powerOf([group, share], header) * (1 + 1e-12)) groups[at] = merged;
    else groups.push(share);
  }
  return groups;
}
