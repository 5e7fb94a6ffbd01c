import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { frictionCoefficient, PowerFriction, systemHead } from '../../server/hydraulics/systemCurve.ts';

const SEEDED = { seed: 3, numRuns: 200 };

const positive = (min: number, max: number) => fc.double({ min, max, noNaN: true });

describe('friction k·Q^m', () => {
  it('is a square law only where m is 2', () => {
    expect(new PowerFriction(800, 2).squareLaw).toBe(800);
    expect(new PowerFriction(800, 1.852).squareLaw).toBeNull();
  });

  it('is as worked by hand', () => {
    expect(new PowerFriction(800, 2).at(0.05)).toBeCloseTo(2, 12);
    // 2^1.852 = 3.6100 (logarithms: 1.852 · 0.30103 = 0.557508)
    expect(new PowerFriction(1, 1.852).at(2)).toBeCloseTo(3.61, 3);
    expect(new PowerFriction(1, 1.852).at(0)).toBe(0);
    expect(systemHead(new PowerFriction(800, 2), 12, 0.05)).toBeCloseTo(14, 12);
    expect(systemHead(new PowerFriction(800, 2), 12, 0)).toBe(12);
  });

  it('grows by 2^m where the flow doubles', () => {
    fc.assert(
      fc.property(positive(0.1, 1e5), positive(1, 2.5), positive(1e-4, 3), (k, m, flow) => {
        const friction = new PowerFriction(k, m);
        expect(friction.at(2 * flow) / friction.at(flow) / 2 ** m).toBeCloseTo(1, 12);
      }),
      SEEDED,
    );
  });
});

describe('k from known points', () => {
  it('of one point is (H* − H_st)/Q*^m', () => {
    expect(frictionCoefficient([{ flow: 0.1, head: 20 }], 12, 2)).toBeCloseTo(800, 9);
    expect(frictionCoefficient([{ flow: 2, head: 12 + 3.61 }], 12, 1.852)).toBeCloseTo(1, 4);
  });

  it('of points that lie on a curve is that of the curve', () => {
    fc.assert(
      fc.property(positive(0.1, 1e4), positive(1, 2.5), positive(0, 50), (k, m, staticHead) => {
        const points = [0.03, 0.07, 0.2].map((flow) => ({ flow, head: staticHead + k * flow ** m }));
        expect(frictionCoefficient(points, staticHead, m) / k).toBeCloseTo(1, 9);
      }),
      SEEDED,
    );
  });

  it('of points beside every curve leaves the least squares', () => {
    const points = [
      { flow: 0.04, head: 13.9 },
      { flow: 0.08, head: 17.1 },
      { flow: 0.12, head: 24.2 },
    ];
    const squares = (k: number) => points.reduce((sum, { flow, head }) => sum + (head - 12 - k * flow ** 2) ** 2, 0);
    const k = frictionCoefficient(points, 12, 2);
    expect(squares(k)).toBeGreaterThan(0.1);
    expect(squares(k * 1.001)).toBeGreaterThan(squares(k));
    expect(squares(k * 0.999)).toBeGreaterThan(squares(k));
    // Σ(H − H_st)·Q² / ΣQ⁴ by hand: (0.00304 + 0.03264 + 0.17568)/(2.56e-6 + 4.096e-5 + 2.0736e-4)
    expect(k).toBeCloseTo(0.21136 / 2.5088e-4, 6);
  });
});
