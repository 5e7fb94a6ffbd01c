import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { Ascending } from '../../server/hydraulics/ascending.ts';

// Knots from a millionth apart to millions: some buckets then hold many, and many none.
const rising = fc
  .uniqueArray(fc.oneof(fc.double({ min: -1, max: 1, noNaN: true }), fc.double({ min: -1e6, max: 1e6, noNaN: true })), {
    minLength: 2,
    maxLength: 30,
    selector: (value) => Math.round(value * 1e6) + 0, // −0 and 0 are one knot
  })
  .map((values) => Float64Array.from(values).sort());

describe('a value among rising ones', () => {
  it('lies in the segment that a walk along them finds', () => {
    fc.assert(
      fc.property(rising, fc.double({ min: -2e6, max: 2e6, noNaN: true }), fc.nat(), (knots, between, pick) => {
        const ascending = new Ascending(knots);
        for (const v of [between, knots[pick % knots.length]!]) {
          let walked = 0;
          while (walked < knots.length - 2 && knots[walked + 1]! <= v) walked++;
          expect(ascending.segment(v)).toBe(walked);
        }
      }),
      { seed: 5, numRuns: 2000 },
    );
  });
});
