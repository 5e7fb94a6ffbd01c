import fc from 'fast-check';
import { expect, it } from 'vitest';
import { intervalSeconds, localSteps } from '../../server/ingest/intervals.ts';

/** Starts from steps in seconds. */
const startsOf = (steps: readonly number[]): Float64Array => {
  let at = 0;
  return Float64Array.from([0, ...steps], (step) => (at += step * 1000));
};

it('holds a value to the next row if that is at most 1.5 local steps, else for one local step', () => {
  // Hourly, one row 90 min late (still held), one 91 min late (31 min of gap); by hand.
  const steps = [3600, 3600, 3600, 5400, 3600, 3600, 3600, 5460, 3600, 3600, 3600];
  const starts = startsOf(steps);
  const seconds = intervalSeconds(starts, localSteps(starts));
  expect(Array.from(seconds)).toEqual([3600, 3600, 3600, 5400, 3600, 3600, 3600, 3600, 3600, 3600, 3600, 3600]);
});

it('follows a step that changes inside the file', () => {
  const starts = startsOf([...Array(12).fill(3600), ...Array(12).fill(600)]);
  const steps = localSteps(starts);
  expect([steps[0], steps[11], steps[12], steps[24]]).toEqual([3_600_000, 3_600_000, 600_000, 600_000]);
  const seconds = intervalSeconds(starts, steps);
  expect(seconds.slice(9, 15)).toEqual(Float64Array.from([3600, 3600, 3600, 600, 600, 600]));
});

it('is the median of the eleven steps around a row, found the slow way', () => {
  const step = fc.constantFrom(60, 60, 60, 120, 300, 3600);
  fc.assert(
    fc.property(fc.array(step, { minLength: 1, maxLength: 60 }), (steps) => {
      const starts = startsOf(steps);
      const slow = Array.from(starts, (_, row) => {
        const near = steps.filter((_, i) => Math.abs(i - row) <= 5).sort((a, b) => a - b);
        return near[Math.ceil(near.length / 2) - 1]! * 1000;
      });
      expect(Array.from(localSteps(starts))).toEqual(slow);
    }),
    { numRuns: 500, seed: 1 },
  );
});
