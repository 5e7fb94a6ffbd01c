import { describe, expect, it } from 'vitest';
import type { Log } from '../../server/ingest/log.ts';
import { compareRules } from '../../server/staging/compare.ts';
import { readStation } from '../../server/station/readStation.ts';
import { aStationFile } from '../support/aStation.ts';
import { flowLog, resultFor } from '../support/comparing.ts';

/** A well of 40 m² that fills at 10 L/s for ten minutes and is then drawn down for five, at so much [L/s], five times. */
function levels(pumped: number, names: readonly string[] | null, speed: number | null = null): Log {
  const minutes = 76;
  const level = new Float64Array(minutes);
  const on = new Float64Array(minutes);
  level[0] = 1;
  for (let i = 0; i < minutes; i++) {
    on[i] = i % 15 >= 10 ? 1 : 0;
    if (i + 1 < minutes) level[i + 1] = level[i]! + ((0.01 - on[i]! * (pumped / 1000)) * 60) / 40;
  }
  const pumps = (names ?? []).map((name) => ({
    name,
    on,
    speed: speed === null ? null : new Float64Array(minutes).fill(speed),
    power: null,
  }));
  const log = flowLog(new Float64Array(minutes), 60);
  return { ...log, flow: null, level, pumpsOn: names ? null : on, pumps };
}

const station = (fields: object = {}) =>
  readStation(aStationFile({ storage: { activeVolume: 10, area: 40 }, ...fields }), 'station.json');

const told = (log: Log, of = station()) => {
  const result = resultFor({ station: of, log, tariff: null, rules: ['fixed-speed'] });
  return { tests: result.pumpTests, text: result.notes.find(({ code }) => code === 'pump-test')?.text };
};

// 30 − 0.003·q² = 12 + 0.001·q² where one pump meets the system; two carry q = Q/2 each: 30 − 0.003·q² = 12 + 0.004·q².
const ONE = Math.sqrt(18 / 0.004) / 1000;
const TWO = (2 * Math.sqrt(18 / 0.007)) / 1000;

describe('a log of levels as pump tests', () => {
  it('sets what a pump gave beside its curve', () => {
    const { tests, text } = told(levels(60, ['P-2']));
    expect(tests).toEqual([expect.objectContaining({ pumps: ['P-2'], pumpsOn: 1, runs: 5 })]);
    expect(tests![0]!.pumpedM3s).toBeCloseTo(0.06, 9);
    expect(tests![0]!.curveM3s).toBeCloseTo(ONE, 9);
    expect(tests![0]!.hours).toBeCloseTo(25 / 60, 9);
    expect(text).toMatch(
      /P-2 gave 60 L\/s in 5 runs, 11 % less than the curves say. Where it is far off, a pump is worn/,
    );
  });

  it('says so where it is on its curve', () => {
    expect(told(levels(1000 * ONE, ['P-1'])).text).toMatch(/P-1 gave 67.1 L\/s in 5 runs, as the curves say\.$/);
  });

  it('takes two that run together for a set of two', () => {
    const { tests } = told(levels(90, ['P-1', 'P-2']));
    expect(tests).toEqual([expect.objectContaining({ pumps: ['P-1', 'P-2'], pumpsOn: 2 })]);
    expect(tests![0]!.curveM3s).toBeCloseTo(TWO, 9);
  });

  it('takes the first in the order where pumps are only counted, and the static head that the levels give', () => {
    const { tests } = told(
      levels(60, null),
      station({ system: { staticHead: 12, dischargeLevel: 13, friction: { coefficient: 0.001 } } }),
    );
    expect(tests).toEqual([expect.objectContaining({ pumps: null, pumpsOn: 1 })]);
    // The level falls in each run, so the lift lies between 11.5 and 12.5 m and the flow between these.
    expect(tests![0]!.curveM3s).toBeGreaterThan(Math.sqrt(17.5 / 0.004) / 1000);
    expect(tests![0]!.curveM3s).toBeLessThan(Math.sqrt(18.5 / 0.004) / 1000);
  });

  it('sets no curve beside pumps that ran at other speeds, or that the station file no longer has', () => {
    expect(told(levels(50, ['P-1'], 0.9)).tests![0]!.curveM3s).toBeNull();
    const { tests, text } = told(levels(60, ['Old']));
    expect(tests).toEqual([expect.objectContaining({ pumps: ['Old'], curveM3s: null })]);
    expect(text).toMatch(/Old gave 60 L\/s in 5 runs\.$/);
  });

  it('is absent where the record has a flow', () => {
    const comparison = compareRules({ station: station(), log: flowLog([0.03]), tariff: null, rules: ['fixed-speed'] });
    expect(comparison.pumpTests).toBeNull();
    expect(resultFor({ station: station(), log: flowLog([0.03]), tariff: null })).not.toHaveProperty('pumpTests');
  });
});
