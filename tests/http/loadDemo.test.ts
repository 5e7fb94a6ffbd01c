import { describe, expect, it } from 'vitest';
import { listStations } from '../../db/stations.ts';
import { listTariffs } from '../../db/tariffs.ts';
import { loadDemo } from '../../server/loadDemo.ts';
import { aRecordCsv, aStationFile } from '../support/aStation.ts';
import { aTariffFile } from '../support/tariffs.ts';
import { NOW, rowCounts, served } from './support.ts';

const demo = (name: string, recordCsv = aRecordCsv()) => ({
  station: aStationFile({ name }),
  tariff: aTariffFile({ name: `${name} tariff` }),
  recordCsv,
});

describe('the demo', () => {
  it('goes into an empty database, each station with its record and tariff', () => {
    const { db } = served();
    expect(loadDemo(db, () => [demo('A'), demo('B')], NOW)).toBe(2);
    const tariffs = new Map(listTariffs(db).map((tariff) => [tariff.id, tariff]));
    for (const station of listStations(db)) {
      expect(station).toMatchObject({ demo: true, records: 1 });
      expect(tariffs.get(station.tariffId!)).toMatchObject({ demo: true, name: `${station.name} tariff` });
    }
  });

  it('never goes into one that holds something', async () => {
    const { db, http } = served();
    await http.post('/api/tariffs').send(aTariffFile()).expect(201);
    const notCalled = () => {
      throw new Error('called');
    };
    expect(loadDemo(db, notCalled, NOW)).toBe(0);
    expect(rowCounts(db)).toMatchObject({ station: 0, tariff: 1 });
  });

  it('leaves nothing where one of its files has a fault', () => {
    const { db } = served();
    expect(() => loadDemo(db, () => [demo('A'), demo('B', 'time,flow\n2025,x\n')], NOW)).toThrow();
    expect(rowCounts(db)).toEqual({ station: 0, record: 0, reading_block: 0, tariff: 0, comparison: 0 });
  });
});
