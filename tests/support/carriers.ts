import type { Carrier } from './leastAllocation.ts';
import type { PlainPump, PlainStation } from './plainModel.ts';
import { remembered } from './scan.ts';

/** What each pump of a station may do at a flow, as carriers for the mixed-integer program. */

/** All that the floor allows (model.md §5): each pump direct on line or on its drive, a valve beside it. */
export function floorCarriers(station: PlainStation, flow: number, { alike }: { readonly alike: boolean }): Carrier[] {
  const header = station.system(flow);
  const ofPump = (pump: PlainPump, i: number) => [
    ...upTo(i, Math.min(flow, pump.into(header, 1)), (q) => pump.linePower(q, header)),
    ...(pump.driven
      ? upTo(i, Math.min(flow, pump.into(header, pump.maxSpeed)), (q) => pump.drivePower(q, header, true))
      : []),
  ];
  if (!alike) return station.pumps.flatMap(ofPump);
  // Pumps that are alike share what has been worked out.
  const first = ofPump(station.pumps[0]!, 0).map((carrier) => ({ ...carrier, power: remembered(carrier.power) }));
  return station.pumps.flatMap((_, pump) => first.map((carrier) => ({ ...carrier, pump })));
}

/**
 * What best-count allows of pumps that differ (model.md §3 and §5): those with a drive on it, the others direct on line.
 * With a valve beside them they give any flow; without, a pump on its drive what its speeds give on the system curve, one
 * direct on line what it gives there.
 */
export function bestCountCarriers(station: PlainStation, flow: number): Carrier[] {
  const header = station.system(flow);
  const valve = !station.storage;
  return station.pumps.flatMap((pump, i): Carrier[] => {
    const power = (q: number) => (pump.driven ? pump.drivePower(q, header, valve) : pump.linePower(q, header));
    const most = pump.into(header, pump.maxSpeed);
    if (valve) return upTo(i, Math.min(flow, most), power);
    if (!pump.driven) return most > 0 ? [{ pump: i, low: most, high: most, power }] : [];
    const low = pump.into(header, pump.minSpeed);
    return low > 0 ? [{ pump: i, low, high: most, power }] : upTo(i, most, power);
  });
}

/** Below a millionth of its most a pump carries nothing. */
function upTo(pump: number, high: number, power: Carrier['power']): Carrier[] {
  return high > 0 ? [{ pump, low: 1e-6 * high, high, power }] : [];
}

/** The least mean power at which some set at its lowest, resting for part of the time, gives a flow (model.md §5). */
export function leastResting(station: PlainStation, flow: number): number {
  let least = Infinity;
  for (let set = 1; set < 2 ** station.pumps.length; set++) {
    const running = station.pumps
      .filter((_, i) => Math.floor(set / 2 ** i) % 2 === 1)
      .map((pump) => ({ pump, speed: pump.minSpeed }));
    const point = station.point(running);
    if (point.flow < flow || point.each.some((q) => q <= 0)) continue;
    const power = running.reduce((sum, { pump, speed }, i) => sum + pump.electric(point.each[i]!, speed, true), 0);
    least = Math.min(least, (power * flow) / point.flow);
  }
  return least;
}
