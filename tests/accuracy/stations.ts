import { firmCapacity } from '../../server/staging/firmCapacity.ts';
import type { StagedPumps } from '../../server/staging/stagedPumps.ts';
import { stagedPumpsOf } from '../../server/staging/stagedPumpsOf.ts';
import type { State } from '../../server/staging/state.ts';
import { Watch } from '../../server/staging/watch.ts';
import { readStation } from '../../server/station/readStation.ts';
import type { Station } from '../../server/station/station.ts';
import { type FileUnits, FLOW_UNITS, FOOT, GRAVITY } from '../../server/units.ts';
import { aStationFile } from '../support/aStation.ts';

/** Stations that stand for the examples of others: files in their units, read as any station is. */

export const US: FileUnits = { flow: 'gpm', head: 'ft', power: 'hp' };
export const CUBIC_METRES: FileUnits = { flow: 'm3/h', head: 'm', power: 'kW' };

export const GPM = FLOW_UNITS.gpm;
/** One cubic foot per second [m³/s], exact. */
export const CFS = FOOT ** 3;
/** A pound in kg, exact, and one per square inch in Pa. */
export const POUND = 0.45359237;
export const PSI = (POUND * GRAVITY) / 0.0254 ** 2;

/** Density [kg/m³] of 8⅓ lb to the US gallon, which the divisor 3960 of gpm · ft / hp stands for. */
export const EIGHT_AND_A_THIRD = ((25 / 3) * POUND) / (60 * GPM);

/** A motor that loses nothing, where an example speaks of shaft power. */
export const LOSSLESS = { efficiency: 1 };

/** A drive that loses nothing, where an example speaks of speed. */
export const LOSSLESS_DRIVE = { minSpeed: 0.05, efficiency: 1 };

/** What takes a while is made when it is first asked for, and kept. */
export function once<T>(make: () => T): () => T {
  let made: { readonly value: T } | null = null;
  return () => {
    made ??= { value: make() };
    return made.value;
  };
}

/** A station of a bank of pumps; `more` are further fields of the file. */
export function stationOf(
  units: FileUnits,
  system: object,
  pumps: readonly object[],
  more: Readonly<Record<string, unknown>> = {},
): Station {
  return readStation(aStationFile({ units, system, pumps, ...more }), 'station.json');
}

/** A system of this static head and no friction: the pumps give what they give at that head. */
export const against = (staticHead: number): object => ({ staticHead, friction: { coefficient: 0 } });

/** A curve of flow and head, for examples that print no efficiency (any number would do where no power is asked). */
export function headPoints(rows: readonly (readonly [number, number])[]): object {
  return { points: rows.map(([flow, head]) => ({ flow, head, efficiency: 0.7 })) };
}

/** Its duty pumps, as a rule asks them. */
export function pumpsOf(station: Station): StagedPumps {
  return stagedPumpsOf(station, station.duty);
}

/** The first n duty pumps at full speed, direct on line, where they meet the system. */
export function together(station: Station, count = station.duty.length): State {
  return pumpsOf(station).fixed(count);
}

/** The first n duty pumps at equal speed, trimmed to a flow [m³/s]. */
export function trimmed(station: Station, count: number, flow: number): State {
  const state = pumpsOf(station).trimmedState(count, flow);
  if (state === null) throw new Error(`${count} pumps cannot be trimmed to ${flow} m³/s`);
  return state;
}

/** Firm capacity of all duty pumps [m³/s]. */
export function firm(station: Station): number {
  return firmCapacity(station, station.duty);
}

/** Greatest velocity in the pipes of a station at a flow [m/s], as the result of a comparison has it. */
export function mainVelocity(station: Station, flow: number): number {
  const watch = new Watch(station, station.duty, false);
  watch.add(pumpsOf(station).throttled(1, flow), 1, Number.NaN);
  return watch.watched().main!.maxVelocityMs!;
}
