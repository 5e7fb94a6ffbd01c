import { GRID, gridCurve, onGrid } from './allocationGrid.ts';
import { limitsOf, passedAround, polished, slopesOf } from './allocationPolish.ts';
import { type Make, powerOf, type Share } from './shares.ts';

/** Which pumps carry a total flow at a header head, and how: the least total power of any subset and any split. */
export interface Allocation {
  /** Electric power [W], standby not included; Infinity where no subset can carry the flow. */
  readonly power: number;
  readonly shares: readonly Share[];
}

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
  const rough: Rough[] = [];
  const polish = (start: Share[], within: number) => {
    const { shares, convex } = polished(start, within, header);
    consider(shares);
    if (!convex) rough.push({ shares, reach: within, power: powerOf(shares, header) });
  };
  const curves = makes.map((make) => gridCurve(make, header, flow / GRID));
  const found = onGrid(curves, flow, header);
  if (found) {
    polish(found, reach);
    if (differAlike(found)) consider(passedAround(found, reach, header));
  }
  const held = best.power < Infinity ? onGrid(curves, flow, header, { price: best.power / flow }) : null;
  if (held) polish(held, 2 * reach);
  for (const tight of tightArrangements(makes, flow, header)) polish(tight, flow);
  for (const { shares, reach: within } of nearest(rough, best.power)) consider(passedAround(shares, within, header));
  // Where powers kink Newton's steps end short of the least, and pumps alike may do better at different flows.
  const apart = takenApart(best.shares, reach, header);
  const kinked = best.shares.length > 2 && best.shares.some((s) => s.least.heldBy(s.mode, s.flow, header) !== '');
  if (kinked || apart.length > best.shares.length) consider(passedAround(apart, reach, header));
  return best;
}

/** A split that is not convex, so that it may not yet be the least of its arrangement. */
interface Rough {
  readonly shares: readonly Share[];
  readonly reach: number;
  readonly power: number;
}

/** Passing flow around is slow: only the few that may still become the best are worth it. */
const MOST_ROUGH = 3;
const WORTH_A_PASS = 1.05;

function nearest(rough: readonly Rough[], best: number): readonly Rough[] {
  return rough
    .filter(({ power }) => power < WORTH_A_PASS * best)
    .sort((a, b) => a.power - b.power)
    .slice(0, MOST_ROUGH);
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
  const exact = (start: Share[], reach: number) => {
    const { shares, convex } = polished(start, reach, header);
    return convex ? shares : passedAround(shares, reach, header);
  };
  const starts = found ? [exact(found, (2 * flow) / GRID)] : [];
  for (const tight of tightArrangements(makes, flow, header)) {
    const running = tight.reduce((sum, share) => sum + share.count, 0);
    if (running === makes.reduce((sum, make) => sum + make.count, 0)) starts.push(exact(tight, flow));
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
