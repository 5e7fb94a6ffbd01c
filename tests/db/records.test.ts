import { beforeEach, describe, expect, it } from 'vitest';
import { brokenPromises } from '../../db/checks.ts';
import { findComparison, insertComparison, listComparisons } from '../../db/comparisons.ts';
import { migrate } from '../../db/migrate.ts';
import { type Db, openDatabase } from '../../db/open.ts';
import { deleteRecord, findRecord, insertRecord, listRecords, readLog } from '../../db/records.ts';
import {
  deleteStation,
  findStation,
  insertStation,
  isEmpty,
  listStations,
  rememberTariff,
  replaceStation,
} from '../../db/stations.ts';
import { deleteTariff, insertTariff, listTariffs } from '../../db/tariffs.ts';
import type { ComparisonResult } from '../../server/staging/result.ts';
import { aLog, aRecord } from '../support/aLog.ts';

let db: Db;
let stationId: number;
const count = (table: string): unknown => db.prepare(`SELECT count(*) FROM ${table}`).pluck().get();

beforeEach(() => {
  db = openDatabase(':memory:');
  migrate(db);
  stationId = insertStation(db, { name: 'S', file: { name: 'S', deep: [1, 'ä'] }, nowMs: 1 });
});

describe('readings', () => {
  // 4096 intervals fill a block: less than one, exactly one, one more, and several with a part
  it.each([1, 4095, 4096, 4097, 10_000])('come back as they were stored: %i intervals', (intervals) => {
    const log = aLog(intervals);
    expect(readLog(db, insertRecord(db, aRecord(stationId, log)))).toEqual(log);
    expect(brokenPromises(db)).toEqual([]);
  });

  it('of one record do not mix with those of another', () => {
    const early = aLog(5000);
    const late = aLog(5000, Date.UTC(2025, 0, 2));
    const ids = [early, late].map((log) => insertRecord(db, aRecord(stationId, log)));
    expect(readLog(db, ids[0]!)).toEqual(early);
    expect(readLog(db, ids[1]!)).toEqual(late);
  });

  it('are read for a stretch of time: every interval that touches it, and no other', () => {
    const log = aLog(10_000);
    const id = insertRecord(db, aRecord(stationId, log));
    const start = log.startMs[0]!;
    for (const [fromMinute, toMinute] of [
      [0, 1],
      [4090, 4100],
      [4096, 8192],
      [9990.5, 9991.5],
      [-50, 20_000],
      [20_000, 30_000],
    ] as const) {
      const range = { fromMs: start + fromMinute * 60_000, toMs: start + toMinute * 60_000 };
      const touched = [...log.startMs.keys()].filter(
        (i) => log.startMs[i]! + 60_000 > range.fromMs && log.startMs[i]! < range.toMs,
      );
      const read = readLog(db, id, range)!;
      expect([...read.startMs]).toEqual(touched.map((i) => log.startMs[i]));
      expect([...(read.flow ?? [])]).toEqual(touched.map((i) => log.flow![i]));
      expect([...(read.pumps[0]?.power ?? [])]).toEqual(touched.map((i) => log.pumps[0]!.power![i]));
    }
  });

  it('leave nothing behind when storing fails half way', () => {
    const log = aLog(9000);
    // The second block would end before it starts, which the table refuses when record and first block are in.
    log.startMs[4096] = Number.MAX_SAFE_INTEGER;
    const before = aRecord(stationId, log);
    expect(() => insertRecord(db, before)).toThrow(/CHECK constraint/);
    expect([count('record'), count('reading_block')]).toEqual([0, 0]);
  });

  it('of an unknown record are null', () => {
    expect(readLog(db, 99)).toBeNull();
  });

  it('are refused for a station that is not there', () => {
    expect(() => insertRecord(db, aRecord(99, aLog(3)))).toThrow(/FOREIGN KEY/);
    expect(count('record')).toBe(0);
  });
});

describe('what belongs together goes together', () => {
  const result = { format: 'nth-pump/result/1', rules: [] } as unknown as ComparisonResult;
  const compare = (recordId: number, tariffId: number | null): number =>
    insertComparison(db, {
      stationId,
      recordId,
      tariffId,
      stationFile: { name: 'S' },
      tariffFile: tariffId === null ? null : { name: 'T' },
      choices: { rules: ['fixed-speed'], without: ['P-2'], edition: 1 },
      result,
      nowMs: 5,
    });

  it('a station takes its records, readings and comparisons with it', () => {
    compare(insertRecord(db, aRecord(stationId, aLog(5000))), null);
    const other = insertStation(db, { name: 'O', file: {}, nowMs: 1 });
    insertRecord(db, aRecord(other, aLog(5)));
    expect(deleteStation(db, stationId)).toBe(true);
    expect(deleteStation(db, stationId)).toBe(false);
    expect([count('station'), count('record'), count('comparison')]).toEqual([1, 1, 0]);
    expect(db.prepare('SELECT count(DISTINCT record_id) FROM reading_block').pluck().get()).toBe(1);
  });

  it('a record takes its comparisons, a tariff leaves them', () => {
    const tariffId = insertTariff(db, { name: 'T', file: { name: 'T' }, nowMs: 1 });
    const recordId = insertRecord(db, aRecord(stationId, aLog(50)));
    const id = compare(recordId, tariffId);
    rememberTariff(db, stationId, tariffId);
    expect(deleteTariff(db, tariffId)).toBe(true);
    expect(findComparison(db, id)).toMatchObject({
      tariffId: null,
      tariffFile: { name: 'T' },
      choices: { without: ['P-2'] },
      result,
    });
    expect(listStations(db)).toEqual([{ id: stationId, name: 'S', demo: false, records: 1, tariffId: null }]);
    expect(deleteRecord(db, recordId)).toBe(true);
    expect(findRecord(db, recordId)).toBeNull();
    expect(findComparison(db, id)).toBeNull();
  });

  it('lists comparisons of one station or of all, the newest first', () => {
    const recordId = insertRecord(db, aRecord(stationId, aLog(50)));
    const [first, second] = [compare(recordId, null), compare(recordId, null)];
    expect(listComparisons(db, stationId).map((entry) => entry.id)).toEqual([second, first]);
    expect(listComparisons(db, null)).toHaveLength(2);
    expect(listComparisons(db, stationId + 1)).toEqual([]);
  });

  it('an id never comes back to name something else', () => {
    const first = insertStation(db, { name: 'A', file: {}, nowMs: 1 });
    deleteStation(db, first);
    expect(insertStation(db, { name: 'B', file: {}, nowMs: 1 })).toBeGreaterThan(first);
  });
});

describe('stations and tariffs', () => {
  it('keep the file as its owner wrote it, and replace it whole', () => {
    expect(findStation(db, stationId)).toEqual({
      id: stationId,
      name: 'S',
      demo: false,
      file: { name: 'S', deep: [1, 'ä'] },
    });
    expect(replaceStation(db, stationId, { name: 'R', file: { name: 'R' }, nowMs: 2 })).toBe(true);
    expect(findStation(db, stationId)?.file).toEqual({ name: 'R' });
    expect(replaceStation(db, 99, { name: 'R', file: {}, nowMs: 2 })).toBe(false);
  });

  it('of the demo come last', () => {
    const demo = insertStation(db, { name: 'D', file: {}, demo: true, nowMs: 1 });
    const own = insertStation(db, { name: 'O', file: {}, nowMs: 1 });
    expect(listStations(db).map((station) => station.id)).toEqual([stationId, own, demo]);
    expect(listRecords(db, demo)).toEqual([]);
  });

  it('make a database no longer empty, each of them', () => {
    expect(isEmpty(db)).toBe(false);
    deleteStation(db, stationId);
    expect(isEmpty(db)).toBe(true);
    insertTariff(db, { name: 'T', file: {}, nowMs: 1 });
    expect(isEmpty(db)).toBe(false);
    expect(listTariffs(db)).toHaveLength(1);
  });
});
