import type { Pump } from '../hydraulics/pump.ts';
import { systemHead } from '../hydraulics/systemCurve.ts';
import type { Station } from '../station/station.ts';
import { stagedPumpsOf } from './stagedPumpsOf.ts';

/** What somebody read off gauges at one moment; what was not read is null. Flow of the station, head across the pumps. */
export interface SpotReading {
  readonly flow: number | null;
  readonly head: number | null;
  /** Electric power of the station [W]. */
  readonly power: number | null;
  /** Those that ran. */
  readonly pumps: readonly Pump[];
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
export function laySpotReadings(station: Station, readings: readonly SpotReading[]): LaidReading[] {
  return readings.map((reading) => {
    const pumps = stagedPumpsOf(station, reading.pumps);
    const count = pumps.most;
    const point = pumps.fixed(count);
    const { flow } = reading;
    const state = flow === null || flow <= 0 ? null : pumps.throttled(count, flow);
    const one = state?.running[0];
    // Beyond the operating point different pumps, and beyond the end of their curves equal ones, have no such state.
    const within = one && Math.abs(state.flow - flow!) <= 1e-9 * flow! && one.flow <= one.pump.endFlow(1);
    return {
      ...reading,
      curveHead: within ? one.pump.head(one.flow, 1) - one.pump.branchLoss * one.flow * one.flow : null,
      systemHead: flow === null ? null : systemHead(station.friction, station.staticHead, flow),
      curveFlow: point.flow,
      curvePower: (within ? state.power : point.power) + station.standbyPower,
    };
  });
}
