import { describe, expect, it } from 'vitest';
import { readStation } from '../../server/station/readStation.ts';
import { aStationFile } from '../support/aStation.ts';
import { flowLog } from '../support/comparing.ts';
import { run } from '../support/running.ts';

/** Two equal pumps on fitted drives; one alone gives √((30 − 12)/(0.003 + 0.001)) = 67 L/s at most. */
const [pump] = aStationFile().pumps as [Record<string, object>];
const ran = (steps: object, litresPerSecond: readonly number[]) => {
  const pumps = [{ ...pump, drive: { ...pump.drive, fitted: true } }];
  const station = readStation(aStationFile({ pumps, rules: { 'flow-steps': steps } }), 'station.json');
  return run(station, 'flow-steps', flowLog(litresPerSecond.map((flow) => flow / 1000)));
};
const counts = (...asked: Parameters<typeof ran>) => Array.from(ran(...asked).highCount);

describe("the operator's own table", () => {
  it('brings a pump on above one flow and drops it below a lower one', () => {
    const steps = { bringOn: [55], dropOff: [35] };
    expect(counts(steps, [20, 50, 60, 50, 40, 30, 50])).toEqual([1, 1, 2, 2, 2, 1, 1]);
  });

  it('carries its count over a gap, and runs none where nothing is asked', () => {
    const steps = { bringOn: [55], dropOff: [35] };
    expect(counts(steps, [60, Number.NaN, 40, 0, 50])).toEqual([2, 2, 0, 1]);
  });

  it('is overruled for an interval that its count cannot meet, and for that one only', () => {
    const { highCount, totals } = ran({ bringOn: [90], dropOff: [50] }, [60, 70, 60]);
    expect(Array.from(highCount)).toEqual([1, 2, 1]);
    expect(totals.deliveredM3).toBeCloseTo(0.19 * 3600, 9);
  });
});
