import { describe, expect, it } from 'vitest';
import type { RuleId } from '../../server/staging/result.ts';
import { stagedPumpsOf } from '../../server/staging/stagedPumpsOf.ts';
import { readStation } from '../../server/station/readStation.ts';
import { flowLog } from '../support/comparing.ts';
import { dice, madeStation, seeds } from '../support/madeStations.ts';
import { PlainStation } from '../support/plainModel.ts';
import { type PlainAnswer, PlainRules } from '../support/plainRules.ts';
import { run } from '../support/running.ts';

/**
 * Every rule of equal pumps against a second working from the station file (tests/support), by scans and the bisection of
 * a general library, simple-statistics: both surplus modes, no static head and much of it, exponents 1.852 and 2,
 * parabolas and tables, branch losses, US units. Both sides solve to the last digits; the tolerance leaves room for the
 * rounding of some hundred operations.
 */
const CLOSE = 1e-9;
const FLOWS = 12;

const rules: readonly (readonly [RuleId, (plain: PlainRules, flow: number) => PlainAnswer])[] = [
  ['fixed-speed', (plain, flow) => plain.fixedSpeed(flow)],
  ['one-trimmed', (plain, flow) => plain.oneTrimmed(flow)],
  ['late-staging', (plain, flow) => plain.lateStaging(flow)],
  ['best-count', (plain, flow) => plain.bestCount(flow)],
];

const made = seeds(40, 500).map((seed) => {
  const file = madeStation(seed);
  const station = readStation(file, 'station.json');
  const plain = new PlainRules(new PlainStation(file));
  const roll = dice(seed + 10_000);
  const most = stagedPumpsOf(station, station.duty).flatOut(station.duty.length).flow;
  const flows = Array.from({ length: FLOWS }, () => 1.08 * most * roll());
  return { seed, station, plain, flows };
});

describe(`${made.length} stations of equal pumps, at ${FLOWS} flows each`, () => {
  it('meet the system where the second working says, direct on line, flat out and at least speed, to 1e-9', () => {
    for (const { seed, station, plain } of made) {
      const pumps = stagedPumpsOf(station, station.duty);
      for (let n = 1; n <= pumps.most; n++) {
        for (const [state, speed, onDrive] of [
          [pumps.fixed(n), 1, false],
          [pumps.flatOut(n), station.duty[0]!.maxSpeed, true],
          [pumps.lowest(n), station.duty[0]!.minSpeed, true],
        ] as const) {
          const expected = plain.point(n, speed, onDrive);
          expect(state.flow, `station ${seed}, ${n} pumps at ${speed}`).toSatisfy(near(expected.flow));
          expect(state.power, `station ${seed}, ${n} pumps at ${speed}`).toSatisfy(near(expected.power));
        }
      }
    }
  });

  it.each(rules)('run %s as the second working does, to 1e-9', (id, answer) => {
    let decided = 0;
    for (const { seed, station, plain, flows } of made) {
      const { series, lowCount, highCount, share, speed } = run(station, id, flowLog(flows));
      flows.forEach((flow, i) => {
        const expected = answer(plain, flow);
        const where = `station ${seed}, ${id} at ${flow} m³/s`;
        expect(series.mean[i], where).toSatisfy(near(expected.power));
        expect(series.flow[i], where).toSatisfy(near(expected.flow));
        if (expected.margin < CLOSE) return;
        decided++;
        expect([lowCount[i], highCount[i]], where).toEqual([expected.low, expected.high]);
        // Shares and speeds are kept in single precision, of 24 bits.
        expect(share[i], where).toBeCloseTo(expected.share, 6);
        expect(speed[i], where).toBeCloseTo(expected.speed, 6);
      });
    }
    expect(decided).toBeGreaterThan(0.95 * made.length * FLOWS);
  });
});

function near(expected: number): (found: number | undefined) => boolean {
  return (found) => found !== undefined && Math.abs(found - expected) <= CLOSE * Math.abs(expected) + 1e-12;
}
