import { bestSetsOf } from './bestSets.ts';
import { FixedSet } from './fixedSet.ts';
import { lastWithin } from './lastWithin.ts';
import { MixedPumps } from './mixedPumps.ts';
import type { StagedPumps } from './stagedPumps.ts';
import { meanPower } from './state.ts';

/** Speed of each pump that runs at some flow: its place and its share of rated speed, 1 direct on line. */
export type SpeedsOfSet = readonly { readonly place: number; readonly speed: number; readonly onDrive: boolean }[];

/** A stretch of flow over which one set of pumps is the best. Flows in m³/s. */
export interface SetStep {
  readonly from: number;
  readonly to: number;
  /** Bit i stands for duty pump i. */
  readonly set: number;
  /** Places of the pumps in the station's order, those to add and those to drop as flow rises into this stretch. */
  readonly places: readonly number[];
  readonly add: readonly number[];
  readonly drop: readonly number[];
  /** Whether the set rests for part of the time over all of the stretch. */
  readonly rests: boolean;
  /** Mean power saved in the middle of the stretch against the station's own order [W]; null where that cannot meet it. */
  readonly savedPower: number | null;
  /** How one gets into this stretch from the one below it; null for the first. */
  readonly change: SetChange | null;
}

/** A change of sets with its dead band: as for counts, staying may cost the band more, within the two stretches. */
export interface SetChange {
  readonly bringOn: number;
  readonly dropOff: number;
  /** At `bringOn`, before and after the change. */
  readonly before: SpeedsOfSet;
  readonly after: SpeedsOfSet;
}

const STEPS = 300;

/**
 * Which set of different pumps is the best as flow rises, at one static head: the card for stations where a count does
 * not say who runs. Stretches shorter than a three-hundredth of the capacity are left out.
 *
 * @param band  share that staying may cost more before a change
 */
export function setLadder(pumps: StagedPumps, band: number): SetStep[] {
  if (!(pumps instanceof MixedPumps) || !pumps.onDrives) return [];
  const sets = bestSetsOf(pumps);
  const capacity = pumps.flatOut(pumps.most).flow;
  const setAt = (flow: number) => {
    const action = sets.best(flow);
    return action
      ? { set: action.high.set, rests: action.share > 0 && action.low.count === 0 }
      : { set: 0, rests: false };
  };
  const steps: Omit<SetStep, 'change'>[] = [];
  let from = 0;
  let now = setAt(capacity / STEPS / 2);
  const close = (to: number) => {
    const before = steps[steps.length - 1]?.places ?? [];
    const places = placesOf(now.set);
    const middle = (from + to) / 2;
    const own = ownOrderPower(pumps, middle);
    const best = sets.best(middle);
    steps.push({
      from,
      to,
      set: now.set,
      places,
      add: places.filter((place) => !before.includes(place)),
      drop: before.filter((place) => !places.includes(place)),
      rests: now.rests,
      savedPower: own === null || best === null ? null : own - meanPower(best),
    });
  };
  for (let i = 1; i <= STEPS; i++) {
    const flow = (capacity * (i - 1e-9)) / STEPS;
    const next = setAt(flow);
    if (next.set === now.set) continue;
    let low = (capacity * (i - 1)) / STEPS;
    let high = flow;
    for (let k = 0; k < 40; k++) {
      const middle = (low + high) / 2;
      if (setAt(middle).set === now.set) low = middle;
      else high = middle;
    }
    close(low);
    from = low;
    now = next;
  }
  close(capacity);
  const fixed = new Map(steps.map(({ set }) => [set, new FixedSet(pumps, set)]));
  return steps.map((step, i) => {
    const below = steps[i - 1];
    const change = below ? changeOf(fixed.get(below.set)!, fixed.get(step.set)!, { below, above: step, band }) : null;
    return { ...step, change };
  });
}

function changeOf(
  low: FixedSet,
  high: FixedSet,
  { below, above, band }: { below: Pick<SetStep, 'from'>; above: Pick<SetStep, 'from' | 'to'>; band: number },
): SetChange {
  const power = (set: FixedSet, flow: number) => {
    const figures = set.figuresAt(flow);
    return figures === null || figures.overloaded || !figures.inside ? Infinity : figures.power;
  };
  // A step of rounding up or down from the border itself may be where a set ends.
  const border = above.from;
  const bringOn = lastWithin(border, above.to, (q) => power(low, q) <= (1 + band) * power(high, q));
  const staying = lastWithin(border, below.from, (q) => power(high, q) <= (1 + band) * power(low, q));
  // A dead band of no width would hunt: the two flows keep at least the band apart.
  const dropOff = Math.min(staying, bringOn * (1 - band));
  return { bringOn, dropOff, before: speedsOf(low, bringOn), after: speedsOf(high, bringOn) };
}

function speedsOf(set: FixedSet, flow: number): SpeedsOfSet {
  const action = set.at(flow)?.action ?? set.at(flow * (1 - 1e-9))?.action;
  const places = placesOf(set.set);
  return (action?.high.running ?? []).map(({ speed, onDrive }, i) => ({
    place: places[i]!,
    speed: onDrive ? speed : 1,
    onDrive,
  }));
}

/** Least mean power of the first n pumps in the station's own order, over n. */
function ownOrderPower(pumps: MixedPumps, flow: number): number | null {
  let least = Infinity;
  for (let n = 1; n <= pumps.most; n++) {
    const trim = pumps.trim(n, flow);
    if (trim.feasible && trim.power < least) least = trim.power;
  }
  return least === Infinity ? null : least;
}

/** Places of the pumps of a set, told by its bits. */
export function placesOf(set: number): number[] {
  const places: number[] = [];
  for (let place = 0, left = set; left > 0; place++, left = Math.floor(left / 2))
    if (left % 2 === 1) places.push(place);
  return places;
}
