import type { Db } from '../db/open.ts';
import { findStation, insertStation, isEmpty, rememberTariff } from '../db/stations.ts';
import { insertTariff } from '../db/tariffs.ts';
import { publicHolidayDates } from './holidays.ts';
import { importRecord } from './importRecord.ts';
import { readStation } from './station/readStation.ts';
import { readTariff } from './tariff/tariffFile.ts';

/** A station to play with: the three files a person would bring. */
export interface DemoStation {
  readonly station: unknown;
  readonly tariff: unknown;
  readonly recordCsv: string;
}

/**
 * Puts the demo into an empty database, through the same doors as anybody's files and in one transaction.
 *
 * @param demos  makes the stations; not called where the database holds something already
 * @param nowMs  when, UTC [ms]
 * @returns      how many stations were loaded
 */
export function loadDemo(db: Db, demos: () => readonly DemoStation[], nowMs: number): number {
  const load = db.transaction(() => {
    if (!isEmpty(db)) return 0;
    const all = demos();
    for (const { station, tariff, recordCsv } of all) {
      const { name } = readStation(station, 'station.json');
      const stationId = insertStation(db, { name, file: station, demo: true, nowMs });
      const tariffName = readTariff(tariff, 'tariff.json', publicHolidayDates).name;
      rememberTariff(db, stationId, insertTariff(db, { name: tariffName, file: tariff, demo: true, nowMs }));
      const data = new TextEncoder().encode(recordCsv);
      importRecord(db, findStation(db, stationId)!, { name: 'A year of hours', fileName: 'record.csv', data }, nowMs);
    }
    return all.length;
  });
  return load.immediate();
}
