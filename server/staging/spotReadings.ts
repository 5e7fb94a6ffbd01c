import type { Pump } from '../hydraulics/pump.ts';
import { systemHead } from '../hydraulics/systemCurve.ts';
import type { Station } from '../station/station.ts';
import { EqualPumps } from './equalPumps.ts';

/** What somebody read off gauges at one moment; what was not read is null. Flow of the station, head across the pumps. */
export interface SpotReading {
  readonly flow: number | null;
  readonly head: number | null;
  /** Electric power of the station [W]. */
  readonly power: number | null;
  readonly pumpsOn: number;
}

/** A reading laid on the curves: what they give there, all direct on line at rated speed. */
export interface LaidReading extends SpotReading {
  /** Head of the pumps at the flow read [m]; null where no flow was read or it lies beyond their curves. */
  readonly curveHead: number | null;
  /** Head of the system at the flow read [m]. */
  readonly systemHead: number | null;
  /** Station flow at the operating point of so many pumps [m³/s]. */
  readonly curveFlow: number;
  /** Power at the flow read, or at the operating point where none was read; standby included [W]. */
  readonly curvePower: number;
}

/** Lays readings on the pump and system curves, to see whether these explain what was measured. */
export function laySpotReadings(
  station: Station,
  duty: readonly Pump[],
  readings: readonly SpotReading[],
): LaidReading[] {
  const pumps = new EqualPumps(station, duty);
  const { pump } = pumps;
  return readings.map((reading) => {
    const count = Math.min(Math.max(1, reading.pumpsOn), pumps.most);
    const point = pumps.fixed(count);
    const q = reading.flow === null ? null : reading.flow / count;
    const within = q !== null && q >= 0 && q <= pump.endFlow(1);
    const at = within ? q : point.flow / count;
    return {
      ...reading,
      curveHead: within ? pump.head(q, 1) - pump.branchLoss * q * q : null,
      systemHead: reading.flow === null ? null : systemHead(station.friction, station.staticHead, reading.flow),
      curveFlow: point.flow,
      curvePower: count * pump.electric(at, 1, false) + station.standbyPower,
    };
  });
}
