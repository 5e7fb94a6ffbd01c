import { BestSets } from './bestSets.ts';
import { MixedPumps } from './mixedPumps.ts';
import type { StagedPumps } from './stagedPumps.ts';
import { meanPower } from './state.ts';

/** A stretch of flow over which one set of pumps is the best. Flows in m³/s. */
export interface SetStep {
  readonly from: number;
  readonly to: number;
  /** Places of the pumps in the station's order, those to add and those to drop as flow rises into this stretch. */
  readonly places: readonly number[];
  readonly add: readonly number[];
  readonly drop: readonly number[];
  /** Whether the set rests for part of the time over all of the stretch. */
  readonly rests: boolean;
  /** Mean power saved in the middle of the stretch against the station's own order [W]; null where that cannot meet it. */
  readonly savedPower: number | null;
}

const STEPS = 300;

/**
 * Which set of different pumps is the best as flow rises, at one static head: the card for stations where a count does
 * not say who runs. Stretches shorter than a three-hundredth of the capacity are left out.
 */
export function setLadder(pumps: StagedPumps): SetStep[] {
  if (!(pumps instanceof MixedPumps) || !pumps.onDrives) return [];
  const sets = new BestSets(pumps);
  const capacity = pumps.flatOut(pumps.most).flow;
  const setAt = (flow: number) => {
    const action = sets.best(flow);
    return action
      ? { set: action.high.set, rests: action.share > 0 && action.low.count === 0 }
      : { set: 0, rests: false };
  };
  const steps: SetStep[] = [];
  let from = 0;
  let now = setAt(capacity / STEPS / 2);
  const close = (to: number) => {
    const before = steps[steps.length - 1]?.places ?? [];
    const places = placesOf(now.set, pumps.most);
    const middle = (from + to) / 2;
    const own = ownOrderPower(pumps, middle);
    const best = sets.best(middle);
    steps.push({
      from,
      to,
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
  return steps;
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

function placesOf(set: number, most: number): number[] {
  return Array.from({ length: most }, (_, place) => place).filter((place) => Math.floor(set / 2 ** place) % 2 === 1);
}
