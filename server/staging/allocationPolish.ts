import { leastOn } from '../hydraulics/roots.ts';
import { powerOf, type Share } from './shares.ts';

/** A split, and whether every pump with room to move had a convex power where it ended. */
export interface Polished {
  readonly shares: readonly Share[];
  readonly convex: boolean;
}

/**
 * The split made exact: pumps alike in make and mode are set to their mean flow where that costs no more, then flow is
 * passed between the groups until all that can move have the same marginal power dP/dq. Where powers are not convex that
 * may end short of the least; `passedAround` goes on from there.
 *
 * @param reach  how far a flow may move [m³/s]: the grid has it right to a step or two
 */
export function polished(found: Share[], reach: number, header: number): Polished {
  const shares = grouped(found, header);
  if (shares.length === 1) return { shares, convex: true };
  if (shares.length === 2) return { shares: passedBetween(shares[0]!, shares[1]!, reach, header), convex: true };
  const moved = equalMarginals(shares, reach, header);
  return powerOf(moved.shares, header) < powerOf(shares, header) ? moved : { shares, convex: moved.convex };
}

/** Flow passed between every two groups in turn until nothing is gained: where powers are not convex. */
export function passedAround(start: readonly Share[], reach: number, header: number): readonly Share[] {
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
  const power = (d: number) =>
    one.count * one.least.inMode(one.mode, one.flow + d / one.count, header) +
    two.count * two.least.inMode(two.mode, two.flow - d / two.count, header);
  const d = leastOn(power, low, high);
  if (!(power(d) < power(0))) return [one, two];
  return [
    { ...one, flow: one.flow + d / one.count },
    { ...two, flow: two.flow - d / two.count },
  ];
}

/**
 * Newton's method on the condition that every group that can move has one marginal power: each step solves the
 * quadratic model under Σ n·δ = 0, groups at a limit that would leave it being held there.
 */
function equalMarginals(start: readonly Share[], reach: number, header: number): Polished {
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
export function limitsOf({ least, mode, flow }: Share, reach: number, header: number): { low: number; high: number } {
  return {
    low: Math.max(least.leastFlow(mode, header), 1e-3 * flow, flow - reach),
    high: Math.min(least.mostFlow(mode, header), flow + reach),
  };
}

/** First and second derivative of a pump's power over its flow, by differences; null where it is not convex there. */
export function slopesOf(
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

/** Pumps alike in make and mode together at their mean flow, where that costs no more. */
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
