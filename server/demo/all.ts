import { boosterStation } from './boosterStation.ts';
import type { Demo } from './demo.ts';
import { highLift } from './highLift.ts';
import { hilltopLift } from './hilltopLift.ts';
import { liftStation } from './liftStation.ts';

/** Any other would do as well. */
const SEED = 20_250_101;

/**
 * Four stations to play with, invented from names to flows: a wastewater lift station whose pumps are brought on too
 * early, a drinking-water booster station that throttles, a lift so high that drives cost more than they save, and a
 * station of unequal pumps, a jockey and a pair in series among them, brought on in an order that costs.
 *
 * @param seed  the same seed gives the same bytes
 */
export function demoStations(seed = SEED): Demo[] {
  return [liftStation(seed), boosterStation(seed + 1), hilltopLift(seed + 2), highLift(seed + 3)];
}
