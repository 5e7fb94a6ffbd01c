import { leastOn } from '../hydraulics/roots.ts';

/** A smooth piece of power over flow, e.g. of one pump count: W at m³/s, on from ≤ flow ≤ to. */
export interface Branch {
  readonly from: number;
  readonly to: number;
  power(flow: number): number;
  /** The same solved at the flow itself, where `power` reads a table: ends of chords are settled by it. */
  readonly exact?: (flow: number) => number;
}

/** A point of the envelope: flow [m³/s] and power [W]. */
export interface HullPoint {
  readonly flow: number;
  readonly power: number;
  /** null for the origin: all pumps off. */
  readonly branch: Branch | null;
}

/** A stretch of the hull: a chord between two points that share the time, or a branch itself. */
export interface HullPiece {
  readonly from: HullPoint;
  readonly to: HullPoint;
  readonly chord: boolean;
}

const SAMPLES = 160;

/**
 * Lower convex envelope of several branches and of the origin: the least mean power at each mean flow when any two
 * states may share the time. Branches are sampled, the hull of the samples is taken, and the ends of every chord are
 * then slid along their branches until the chord touches.
 *
 * @returns  pieces from flow 0 upward, end to start; none where there is no branch
 */
export function lowerHull(branches: readonly Branch[]): HullPiece[] {
  const points: Sample[] = [{ flow: 0, power: 0, branch: null, low: 0, high: 0 }];
  for (const branch of branches) {
    const width = branch.to - branch.from;
    for (let i = 0; i <= SAMPLES; i++) {
      const at = (j: number) => branch.from + (width * Math.min(Math.max(j, 0), SAMPLES)) / SAMPLES;
      const flow = i === SAMPLES ? branch.to : at(i);
      const power = branch.power(flow);
      if (flow > 0 && Number.isFinite(power)) points.push({ flow, power, branch, low: at(i - 1), high: at(i + 1) });
      if (width <= 0) break;
    }
  }
  if (points.length === 1) return [];
  points.sort((a, b) => a.flow - b.flow || a.power - b.power);
  const hull = chain(points);
  const pieces: HullPiece[] = [];
  for (let i = 0; i + 1 < hull.length; i++) {
    const from = hull[i]!;
    const to = hull[i + 1]!;
    pieces.push({ from, to, chord: !followsBranch(from, to) });
  }
  return joined(touch(pieces));
}

interface Sample extends HullPoint {
  /** The samples beside it on its branch: how far it may slide. */
  readonly low: number;
  readonly high: number;
}

/** Andrew's monotone chain, lower half; of points at one flow the first is the least. */
function chain(points: readonly Sample[]): Sample[] {
  const hull: Sample[] = [];
  for (const p of points) {
    if (hull.length > 0 && hull[hull.length - 1]!.flow === p.flow) continue;
    while (hull.length >= 2) {
      const a = hull[hull.length - 2]!;
      const b = hull[hull.length - 1]!;
      if ((b.flow - a.flow) * (p.power - a.power) - (b.power - a.power) * (p.flow - a.flow) > 0) break;
      hull.pop();
    }
    hull.push(p);
  }
  return hull;
}

/** Whether the hull runs along a branch between two samples: they are neighbours, or the branch is straight there. */
function followsBranch(a: Sample, b: Sample): boolean {
  if (a.branch === null || a.branch !== b.branch) return false;
  if (b.flow <= a.high * (1 + 1e-12)) return true;
  const middle = (a.flow + b.flow) / 2;
  return a.branch.power(middle) <= ((a.power + b.power) / 2) * (1 + 1e-10);
}

/** Slides the ends of each chord along their branches to where the chord touches them. */
function touch(pieces: HullPiece[]): HullPiece[] {
  const result = [...pieces];
  for (let i = 0; i < result.length; i++) {
    const piece = result[i]!;
    if (!piece.chord) continue;
    let from = piece.from as Sample;
    let to = piece.to as Sample;
    for (let round = 0; round < 6; round++) {
      const slope = (to.power - from.power) / (to.flow - from.flow);
      const nextFrom = slid(from, piece.from as Sample, slope);
      const nextTo = slid(to, piece.to as Sample, slope);
      const moved = Math.abs(nextFrom.flow - from.flow) + Math.abs(nextTo.flow - to.flow);
      from = nextFrom;
      to = nextTo;
      if (moved <= 1e-9 * to.flow) break;
    }
    const slope = (to.power - from.power) / (to.flow - from.flow);
    from = slid(from, piece.from as Sample, slope, true);
    to = slid(to, piece.to as Sample, slope, true);
    result[i] = { from, to, chord: true };
    const before = result[i - 1];
    if (before && !before.chord) result[i - 1] = { ...before, to: from };
    const after = result[i + 1];
    if (after && !after.chord) result[i + 1] = { ...after, from: to };
  }
  return stitched(result);
}

/** Two chords that met in one sample may touch its branch in two places: between them the hull follows it. */
function stitched(pieces: readonly HullPiece[]): HullPiece[] {
  const result: HullPiece[] = [];
  for (const piece of pieces) {
    const last = result[result.length - 1];
    if (last && piece.from.flow > last.to.flow) result.push({ from: last.to, to: piece.from, chord: false });
    result.push(last && piece.from.flow < last.to.flow ? { ...piece, from: last.to } : piece);
  }
  return result;
}

/** Flows tried before the least is closed in on. */
const TRIED = 8;

/** The point of a branch, near the sample it began at, that lies lowest under lines of a slope. */
function slid(now: Sample, sample: Sample, slope: number, exact = false): Sample {
  const { branch } = now;
  if (branch === null || sample.high <= sample.low) return now;
  const powerAt = (exact && branch.exact) || ((q: number) => branch.power(q));
  const above = (q: number) => powerAt(q) - slope * q;
  // Where a curve kinks there may be more than one least; the lowest of some flows says which is meant.
  const step = (sample.high - sample.low) / TRIED;
  let middle = sample.low;
  let least = Infinity;
  for (let i = 0; i <= TRIED; i++) {
    const height = above(sample.low + i * step);
    if (height >= least) continue;
    least = height;
    middle = sample.low + i * step;
  }
  const flow = leastOn(above, Math.max(middle - step, sample.low), Math.min(middle + step, sample.high));
  const power = powerAt(flow);
  return power - slope * flow < now.power - slope * now.flow ? { ...now, flow, power } : now;
}

/** Neighbouring stretches of one branch as one piece. */
function joined(pieces: readonly HullPiece[]): HullPiece[] {
  const result: HullPiece[] = [];
  for (const piece of pieces) {
    const last = result[result.length - 1];
    const follows = last && !last.chord && !piece.chord && last.to.branch === piece.from.branch;
    if (follows) result[result.length - 1] = { from: last.from, to: piece.to, chord: false };
    else if (piece.to.flow > piece.from.flow) result.push(piece);
  }
  return result;
}

/** The piece that holds a flow, or null above the last. */
export function pieceAt(pieces: readonly HullPiece[], flow: number): HullPiece | null {
  let low = 0;
  let high = pieces.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (pieces[middle]!.to.flow < flow) low = middle + 1;
    else high = middle;
  }
  return pieces[low] ?? null;
}

/** Power of the hull at a flow within it. */
export function hullPower(piece: HullPiece, flow: number): number {
  const { from, to, chord } = piece;
  if (!chord) return from.branch!.power(flow);
  return from.power + ((flow - from.flow) / (to.flow - from.flow)) * (to.power - from.power);
}
