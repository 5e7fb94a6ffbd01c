import type { Pump } from '../hydraulics/pump.ts';
import { root } from '../hydraulics/roots.ts';
import { systemHead } from '../hydraulics/systemCurve.ts';
import type { Station } from '../station/station.ts';

/** Total flow [m³/s] of pumps at given speeds where they and the system meet; 0 where none lifts the static head. */
export function combinedFlow(
  station: Station,
  staticHead: number,
  running: readonly { readonly pump: Pump; readonly speed: number }[],
): number {
  const sent = (flow: number) => {
    const header = systemHead(station.friction, staticHead, flow);
    return running.reduce((sum, { pump, speed }) => sum + pump.flowInto(header, speed), 0);
  };
  if (sent(0) <= 0) return 0;
  const most = running.reduce((sum, { pump, speed }) => sum + pump.endFlow(speed), 0);
  return sent(most) >= most ? most : root((flow) => sent(flow) - flow, 0, most);
}

/**
 * Firm capacity [m³/s]: what the duty pumps deliver without the largest of them, at the highest speed allowed today (a
 * drive that is only proposed is not there yet) and the station's static head; no standby pump takes its place.
 */
export function firmCapacity(station: Station, duty: readonly Pump[]): number {
  const running = duty.map((pump) => ({ pump, speed: pump.driveFitted ? pump.maxSpeed : 1 }));
  if (running.length === 1) return 0;
  // The largest is the one whose loss costs most; equal pumps need one try.
  const makes = new Set<string>();
  let least = Infinity;
  running.forEach((one, i) => {
    if (makes.has(one.pump.make)) return;
    makes.add(one.pump.make);
    const others = running.filter((_, j) => j !== i);
    least = Math.min(least, combinedFlow(station, station.staticHead, others));
  });
  return least;
}
