import { DRIVE_NAMES, typicalDrive } from '../drive/driveTables.ts';
import { fullLoadEfficiency, MOTOR_NAMES, motorRange, motorTable } from '../drive/motorTables.ts';
import type { PartLoad } from '../drive/partLoad.ts';
import { shown } from '../readFile.ts';
import type { Reading } from './reading.ts';
import type { PartLoadEntry } from './stationFile.ts';

/**
 * Efficiency of a motor: a number, a table, or the name of a published table.
 *
 * @param rated  its rating [W], null where the file has none
 */
export function readMotorEfficiency(
  entry: PartLoadEntry,
  rated: number | null,
  at: string,
  reading: Reading,
): PartLoad {
  if (typeof entry !== 'string') return readPartLoad(entry, rated, at, reading);
  const name = named(entry, MOTOR_NAMES, rated, at, reading);
  if (name === null || rated === null) return 1;
  const { least, most } = motorRange(name);
  if (rated < least * (1 - 1e-6) || rated > most * (1 + 1e-6)) {
    const inUnit = (watts: number) => `${Number((watts / reading.power).toPrecision(4))}`;
    reading.fault(
      'out_of_range',
      at,
      `${name} for a rating of ${inUnit(rated)}`,
      `a rating from ${inUnit(least)} to ${inUnit(most)}, which the table of ${name} covers, or the efficiency itself`,
    );
    return 1;
  }
  return motorTable(fullLoadEfficiency(name, rated));
}

/** Efficiency of a drive; a named table goes by the rating of its motor [W]. */
export function readDriveEfficiency(
  entry: PartLoadEntry,
  rated: number | null,
  at: string,
  reading: Reading,
): PartLoad {
  if (typeof entry !== 'string') return readPartLoad(entry, rated, at, reading);
  const name = named(entry, DRIVE_NAMES, rated, at, reading);
  return name === null || rated === null ? 1 : typicalDrive(rated);
}

/** The name as the list writes it; small and capital letters are the same. */
function named<T extends string>(
  entry: string,
  names: readonly T[],
  rated: number | null,
  at: string,
  reading: Reading,
): T | null {
  const name = names.find((each) => each.toLowerCase() === entry.trim().toLowerCase());
  if (name === undefined) {
    reading.fault('unknown_name', at, shown(entry), `a number, a table over load, or one of ${names.join(', ')}`);
    return null;
  }
  if (rated === null) {
    reading.fault('missing_field', at, `${shown(entry)}, with no motor.ratedPower`, 'motor.ratedPower');
  }
  return name;
}

function readPartLoad(
  entry: Exclude<PartLoadEntry, string>,
  rated: number | null,
  at: string,
  reading: Reading,
): PartLoad {
  if (typeof entry === 'number') return entry;
  if (rated === null) {
    reading.fault('missing_field', at, 'a table over load, with no motor.ratedPower', 'motor.ratedPower');
  }
  entry.forEach((point, i) => {
    const before = entry[i - 1];
    if (before && point.load <= before.load) {
      reading.fault('out_of_range', `${at}[${i}].load`, `${point.load}`, `more than ${before.load}, the load before`);
    }
  });
  return entry;
}
