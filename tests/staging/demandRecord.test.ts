import { describe, expect, it } from 'vitest';
import type { Log } from '../../server/ingest/log.ts';
import { demandRecord } from '../../server/staging/demandRecord.ts';
import { readStation } from '../../server/station/readStation.ts';
import { aStationFile } from '../support/aStation.ts';
import { flowLog } from '../support/comparing.ts';

/** Lift to 14 m; 12 m where a record says nothing. */
const system = { staticHead: 12, dischargeLevel: 14, friction: { coefficient: 0.001 } };
const station = readStation(aStationFile({ system }), 'station.json');
const unknown = Number.NaN;
const recordOf = (channels: { staticHead?: number[]; level?: number[] }) => {
  const log: Log = {
    ...flowLog([0.01, 0.02, 0.03, 0.04]),
    staticHead: channels.staticHead ? Float64Array.from(channels.staticHead) : null,
    level: channels.level ? Float64Array.from(channels.level) : null,
  };
  return demandRecord(station, log);
};
const texts = (record: ReturnType<typeof recordOf>) => record.notes.map(({ code, text }) => `${code}: ${text}`);

describe('the static head of an interval', () => {
  it("is the record's own, else that of its level, else the station's, interval by interval", () => {
    const record = recordOf({ staticHead: [10, unknown, unknown, 11], level: [1, 1.5, unknown, 1] });
    expect(Array.from(record.staticHead as Float64Array)).toEqual([10, 12.5, 12, 11]);
    expect(texts(record)).toEqual([
      'static-head-from-record: The static head of 2 of 4 intervals is that of the record. In 1 it is that of the station file, since the record has none.',
      "static-head-from-level: The static head of 1 of 4 intervals follows the record's level on the suction side.",
    ]);
  });

  it('is told of plainly where one source has them all', () => {
    expect(texts(recordOf({ staticHead: [10, 11, 10, 11], level: [1, 1, 1, 1] }))).toEqual([
      'static-head-from-record: The static head of each interval is that of the record.',
    ]);
    expect(texts(recordOf({ level: [1, 1, 1, 2] }))).toEqual([
      "static-head-from-level: The static head of each interval follows the record's level on the suction side.",
    ]);
    const plain = recordOf({});
    expect(plain.staticHead).toBe(12);
    expect(plain.notes).toEqual([]);
  });

  it('of a level with a gap is that of the station there, and that is said', () => {
    const record = recordOf({ level: [1, unknown, 1, 2] });
    expect(Array.from(record.staticHead as Float64Array)).toEqual([13, 12, 13, 12]);
    expect(texts(record)[0]).toMatch(/3 of 4 intervals follows .* In 1 it is that of the station file/);
  });
});

it('intervals without a flow are left out and counted, not taken for no flow', () => {
  const record = demandRecord(station, flowLog([0.01, unknown, 0, 0.03]));
  expect(Array.from(record.flow)).toEqual([0.01, 0, 0.03]);
  expect(record.startMs[1]! - record.startMs[0]!).toBe(2 * 3_600_000);
  expect([record.coveredSeconds, record.gapSeconds]).toEqual([3 * 3600, 3600]);
});
