import type { Pump } from '../hydraulics/pump.ts';
import { dutyPumpsAreEqual, type Station } from '../station/station.ts';
import { EqualPumps } from './equalPumps.ts';
import { MixedPumps } from './mixedPumps.ts';
import type { StagedPumps } from './stagedPumps.ts';

/** The duty pumps of a station as the rules ask them: by closed forms where they are equal, one by one where they differ. */
export function stagedPumpsOf(station: Station, duty: readonly Pump[]): StagedPumps {
  return dutyPumpsAreEqual(duty) ? new EqualPumps(station, duty) : new MixedPumps(station, duty);
}
