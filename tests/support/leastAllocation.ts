import { MixedInteger, type Sum } from './mixedInteger.ts';

/** A way in which a pump may carry flow [m³/s]: any from `low` to `high`, at a power [W] that is finite there. */
export interface Carrier {
  readonly pump: number;
  readonly low: number;
  readonly high: number;
  readonly power: (flow: number) => number;
}

/** Bounds of the least total power of any choice of carriers, one a pump at most, that carry a flow together. */
export interface Bounds {
  /** No choice is below this. */
  readonly least: number;
  /** This one can be had. */
  readonly most: number;
}

/** A stretch of a carrier on which its power is no more than `sag` below the straight line between the ends. */
interface Stretch {
  readonly carrier: Carrier;
  readonly from: number;
  readonly to: number;
  readonly powerFrom: number;
  readonly powerTo: number;
  readonly sag: number;
}

const STRETCHES = 12;

/** Steps in which the curvature of a stretch is measured. */
const STEPS = 6;

const ROUNDS = 24;

/** A stretch narrower than this share of the flow is not cut further: the solver takes no finer numbers. */
const NARROWEST = 1e-6;

/**
 * Who carries what at the least total power, as a mixed-integer program with power piecewise linear over flow. A
 * function whose second derivative is nowhere above D falls short of its chord of length h by D·h²/8 at most; with that
 * taken off each stretch the optimum of the program bounds the true one from below, and the true power of the flows
 * found bounds it from above. The stretches in use are cut in three until the two are within `gap` of each other.
 *
 * @param alike  whether all pumps are, so that their order may be chosen
 * @returns      null where no choice carries the flow
 */
export function leastAllocation(
  carriers: readonly Carrier[],
  flow: number,
  { gap, alike }: { readonly gap: number; readonly alike: boolean },
): Bounds | null {
  let stretches = carriers.flatMap((carrier) => cut(carrier, carrier.low, carrier.high, STRETCHES));
  let least = 0;
  let most = Infinity;
  for (let round = 0; round < ROUNDS; round++) {
    const found = solve(stretches, flow, alike);
    if (!found) return null;
    least = Math.max(least, found.least);
    most = Math.min(most, found.most);
    if (most - least <= gap * most) break;
    stretches = stretches.flatMap((stretch) =>
      found.used.has(stretch) && stretch.to - stretch.from > NARROWEST * flow
        ? cut(stretch.carrier, stretch.from, stretch.to, 3)
        : [stretch],
    );
  }
  return { least, most };
}

function cut(carrier: Carrier, low: number, high: number, pieces: number): Stretch[] {
  const width = (high - low) / pieces;
  if (!(width > 0)) return high > 0 ? [stretch(carrier, high, high)] : [];
  return Array.from({ length: pieces }, (_, i) =>
    stretch(carrier, low + i * width, i === pieces - 1 ? high : low + (i + 1) * width),
  );
}

function stretch(carrier: Carrier, from: number, to: number): Stretch {
  const step = (to - from) / STEPS;
  const powers = Array.from({ length: STEPS + 1 }, (_, i) => carrier.power(i === STEPS ? to : from + i * step));
  let bend = 0;
  for (let i = 1; i < STEPS; i++) bend = Math.max(bend, powers[i - 1]! - 2 * powers[i]! + powers[i + 1]!);
  return { carrier, from, to, powerFrom: powers[0]!, powerTo: powers[STEPS]!, sag: (bend * STEPS ** 2) / 8 };
}

function solve(stretches: readonly Stretch[], flow: number, alike: boolean) {
  const program = new MixedInteger();
  const unit = Math.max(...stretches.map(({ powerTo }) => powerTo));
  const carried: Sum[number][] = [];
  const running = new Map<number, Sum>();
  const ofPump = new Map<number, Sum>();
  stretches.forEach(({ carrier, from, to, powerFrom, powerTo, sag }, i) => {
    // Whether it is in use, and how far along it is.
    const on = program.binary(`on${i}`, (powerFrom - sag) / unit);
    const along = program.amount(`along${i}`, (powerTo - powerFrom) / unit);
    program.require(
      [
        [1, along],
        [-1, on],
      ],
      '<=',
      0,
    );
    const flows: Sum = [
      [from / flow, on],
      [(to - from) / flow, along],
    ];
    carried.push(...flows);
    running.set(carrier.pump, [...(running.get(carrier.pump) ?? []), [1, on]]);
    ofPump.set(carrier.pump, [...(ofPump.get(carrier.pump) ?? []), ...flows]);
  });
  program.require(carried, '=', 1);
  for (const sum of running.values()) program.require(sum, '<=', 1);
  if (alike) {
    const pumps = [...ofPump.keys()].sort((a, b) => a - b);
    pumps.slice(1).forEach((pump, i) => {
      const after: Sum = ofPump.get(pump)!.map(([factor, name]) => [-factor, name]);
      program.require([...ofPump.get(pumps[i]!)!, ...after], '>=', 0);
    });
  }
  const found = program.solve();
  if (!found) return null;
  const used = new Set<Stretch>();
  let most = 0;
  stretches.forEach((each, i) => {
    if (found.value(`on${i}`) < 0.5) return;
    used.add(each);
    const q = each.from + found.value(`along${i}`) * (each.to - each.from);
    most += each.carrier.power(Math.min(Math.max(q, each.from), each.to));
  });
  return { least: found.cost * unit, most, used };
}
