import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { Pchip } from '../../server/hydraulics/pchip.ts';

const SEEDED = { seed: 3, numRuns: 200 };

const off = (found: number, wanted: number): number => Math.abs(found - wanted) / Math.max(1, Math.abs(wanted));

/** Points of strictly rising x, unevenly spaced, with any heights. */
const points = fc
  .array(
    fc.record({
      step: fc.double({ min: 0.05, max: 3, noNaN: true }),
      y: fc.double({ min: -10, max: 10, noNaN: true }),
    }),
    {
      minLength: 2,
      maxLength: 9,
    },
  )
  .map((rows) => {
    let x = 0;
    return { x: rows.map(({ step }) => (x += step)), y: rows.map(({ y }) => y) };
  });
const share = fc.double({ min: 0, max: 1, noNaN: true });

describe('monotone cubic interpolation', () => {
  // Values and slopes of scipy 1.17, PchipInterpolator.
  it.each([
    {
      // Fritsch and Carlson's data set RPN 14 (from memory): a steep rise between two flats
      name: 'a steep rise',
      x: [7.99, 8.09, 8.19, 8.7, 9.2, 10, 12, 15, 20],
      y: [0, 2.76429e-5, 4.37498e-2, 0.169183, 0.469428, 0.94374, 0.998636, 0.999919, 0.999994],
      wanted: [
        [8.0, 2.767433863187248e-7, 5.534518408242687e-5],
        [8.04, 6.915091476648847e-6, 0.000276516329532978],
        [8.12, 0.007363726653190624, 0.44009849964697184],
        [8.5, 0.1166325769392755, 0.20580225251505585],
        [9.0, 0.33753432684619816, 0.6812468776692762],
        [9.5, 0.6852179451108994, 0.7673210945216192],
        [11, 0.9860433625350502, 0.025866439773565023],
        [13, 0.9993618220922759, 0.0005597473276787557],
        [19, 0.9999912279493809, 5.601088583484486e-6],
      ],
    },
    {
      name: 'a fall with a rise in it, both ends flattened',
      x: [0, 1, 2.5, 3, 5, 5.5],
      y: [10, 9.5, 8, 8.2, 1, 0.9],
      wanted: [
        [0, 10, -0.3],
        [0.3, 9.88898695652174, -0.43578260869565216],
        [1.7, 8.69503381642512, -1.3542028985507248],
        [2.75, 8.1, 0.6],
        [3.5, 7.105133928571428, -3.949553571428571],
        [4.9, 1.0812089285714261, -1.2855535714285686],
        [5.2, 0.9416571428571429, -0.24942857142857128],
        [5.5, 0.9, 0],
      ],
    },
  ])('agrees with a general library: $name', ({ x, y, wanted }) => {
    const curve = new Pchip(x, y);
    for (const [at, value, slope] of wanted as [number, number, number][]) {
      expect(off(curve.at(at), value), `at ${at}`).toBeLessThan(1e-14);
      expect(off(curve.slopeInSegment(curve.segment(at), at), slope), `slope at ${at}`).toBeLessThan(1e-13);
    }
  });

  it('goes through its points, and nowhere beyond the two beside it', () => {
    fc.assert(
      fc.property(points, share, ({ x, y }, t) => {
        const curve = new Pchip(x, y);
        for (let i = 0; i < x.length; i++) expect(curve.at(x[i]!)).toBeCloseTo(y[i]!, 10);
        for (let i = 0; i + 1 < x.length; i++) {
          const v = curve.at(x[i]! + t * (x[i + 1]! - x[i]!));
          expect(v).toBeGreaterThanOrEqual(Math.min(y[i]!, y[i + 1]!) - 1e-11);
          expect(v).toBeLessThanOrEqual(Math.max(y[i]!, y[i + 1]!) + 1e-11);
        }
      }),
      SEEDED,
    );
  });

  it('rises where its points rise and falls where they fall', () => {
    fc.assert(
      fc.property(points, share, share, ({ x, y }, a, b) => {
        const curve = new Pchip(x, y);
        const [low, high] = [Math.min(a, b), Math.max(a, b)];
        for (let i = 0; i + 1 < x.length; i++) {
          const at = (t: number) => curve.at(x[i]! + t * (x[i + 1]! - x[i]!));
          expect((at(high) - at(low)) * Math.sign(y[i + 1]! - y[i]!)).toBeGreaterThanOrEqual(-1e-11);
        }
      }),
      SEEDED,
    );
  });

  it('has the slope that it says', () => {
    fc.assert(
      fc.property(points, fc.double({ min: 0.01, max: 0.99, noNaN: true }), ({ x, y }, t) => {
        const curve = new Pchip(x, y);
        for (let i = 0; i + 1 < x.length; i++) {
          const width = x[i + 1]! - x[i]!;
          const v = x[i]! + t * width;
          const d = 1e-4 * width;
          // Of a cubic the central difference is off by the third derivative times d²/6.
          const difference = (curve.at(v + d) - curve.at(v - d)) / (2 * d);
          expect(Math.abs(curve.slopeInSegment(i, v) - difference)).toBeLessThan(
            1e-5 * (1 + Math.abs(y[i + 1]! - y[i]!) / width),
          );
        }
      }),
      SEEDED,
    );
  });

  it('is mirrored where its points are, left to right and top to bottom', () => {
    fc.assert(
      fc.property(points, share, ({ x, y }, t) => {
        const curve = new Pchip(x, y);
        const v = x[0]! + t * (x[x.length - 1]! - x[0]!);
        const leftToRight = new Pchip(x.map((each) => -each).reverse(), [...y].reverse());
        expect(leftToRight.at(-v)).toBeCloseTo(curve.at(v), 9);
        const upsideDown = new Pchip(
          x,
          y.map((each) => 3 - each),
        );
        expect(upsideDown.at(v)).toBeCloseTo(3 - curve.at(v), 9);
      }),
      SEEDED,
    );
  });

  it('is a straight line where its points lie on one', () => {
    expect(new Pchip([1, 4], [2, 8]).at(3)).toBe(6);
    const line = new Pchip([0, 1, 2.5, 7], [1, 3, 6, 15]);
    for (const v of [0.2, 1.7, 5]) expect(line.at(v)).toBeCloseTo(1 + 2 * v, 12);
  });
});
