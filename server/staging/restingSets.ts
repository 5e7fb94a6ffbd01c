import { systemHead } from '../hydraulics/systemCurve.ts';
import type { MixedPumps, Setting } from './mixedPumps.ts';
import { SLACK } from './state.ts';
import type { Strictness } from './strictness.ts';

/** A set of pumps at its lowest, which may rest for part of the time. */
export interface RestingSet {
  readonly settings: readonly Setting[];
  /** Flow at the static head it was found at [m³/s]. */
  readonly flow: number;
  /** Power over that flow [W per m³/s]. */
  readonly perFlow: number;
}

/**
 * Sets at their lowest that may share the time with rest, from the least flow up; of two that reach as far only the
 * cheaper per volume.
 *
 * @param least  flow that a set must at least give to be of use [m³/s]
 * @param only   places of the pumps that all have to run, where the set is given
 */
export function restingSets(
  pumps: MixedPumps,
  choice: Strictness,
  { least, only }: { least: number; only: readonly number[] | null },
): RestingSet[] {
  const { allowable } = pumps.station;
  const header = systemHead(pumps.station.friction, pumps.staticHead, least);
  const found: RestingSet[] = [];
  const seen = new Set<string>();
  const all = only ? only.reduce((sum, place) => sum + 2 ** place, 0) : 2 ** pumps.most - 1;
  for (let set = only ? all : 1; set <= all; set++) {
    const places = pumps.duty.map((_, place) => place).filter((place) => Math.floor(set / 2 ** place) % 2 === 1);
    const alike = places
      .map((place) => pumps.duty[place]!.make)
      .sort()
      .join('|');
    if (seen.has(alike)) continue;
    seen.add(alike);
    const settings = lowestSettings(pumps, places, choice.ranged ? allowable : null);
    if (settings === null || pumps.sent(settings, header) < least) continue;
    const state = pumps.pointOf(settings);
    if (state.count < places.length) continue; // a pump that would be dead-headed
    if (!choice.overload && state.doubts.overloaded) continue;
    if (choice.ranged && state.doubts.outsideAllowable) continue;
    found.push({ settings, flow: state.flow, perFlow: state.power / state.flow });
  }
  // Of two sets that reach as far, only the cheaper per volume can ever be the best.
  found.sort((a, b) => b.flow - a.flow || a.perFlow - b.perFlow);
  const kept: typeof found = [];
  let cheapest = Infinity;
  for (const rest of found) {
    if (rest.perFlow >= cheapest) continue;
    cheapest = rest.perFlow;
    kept.push(rest);
  }
  return kept.reverse();
}

/** A set at its lowest: driven pumps at least speed, raised until inside a range where one is given; null for never. */
function lowestSettings(
  pumps: MixedPumps,
  places: readonly number[],
  range: { readonly from: number; readonly to: number } | null,
): Setting[] | null {
  const at = (raise: number): Setting[] =>
    places.map((place) => {
      const pump = pumps.duty[place]!;
      if (!pump.hasDrive) return { place, speed: 1, onDrive: false };
      return { place, speed: pump.minSpeed + raise * (pump.maxSpeed - pump.minSpeed), onDrive: true };
    });
  const inside = (raise: number) => {
    const state = pumps.pointOf(at(raise));
    return state.count === places.length && (range === null || state.leastShareOfBest >= range.from * (1 - SLACK));
  };
  if (inside(0)) return at(0);
  // Pumps that cannot open their valves at least speed can be slowed down to no flow: nothing is shared with rest.
  if (range === null || !inside(1)) return null;
  let bad = 0;
  let good = 1;
  for (let i = 0; i < 40; i++) {
    const middle = (bad + good) / 2;
    if (inside(middle)) good = middle;
    else bad = middle;
  }
  return at(good);
}
