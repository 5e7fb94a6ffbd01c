import { linearRegression, linearRegressionLine, rSquared } from 'simple-statistics';
import { describe, expect, it } from 'vitest';
import { fitParabola } from '../../server/hydraulics/curveFit.ts';

describe('the parabola nearest to a curve', () => {
  it('agrees with a statistics library on R² and names the point furthest off', () => {
    // pumpworld.com, parallel pumping of identical pumps: gpm, ft
    const points = [
      { flow: 100, head: 130 },
      { flow: 190, head: 120 },
      { flow: 280, head: 110 },
      { flow: 360, head: 100 },
      { flow: 470, head: 85 },
    ];
    const fit = fitParabola(points);
    const pairs = points.map(({ flow, head }) => [flow * flow, head]);
    const line = linearRegression(pairs);
    expect(fit.shutoffHead).toBeCloseTo(line.b, 9);
    expect(fit.shape).toBeCloseTo(-line.m, 12);
    expect(fit.rSquared).toBeCloseTo(rSquared(pairs, linearRegressionLine(line)), 12);
    const misses = points.map(({ flow, head }) => head - (line.b + line.m * flow * flow));
    const worst = misses.reduce((at, miss, i) => (Math.abs(miss) > Math.abs(misses[at]!) ? i : at), 0);
    expect(fit.worst).toBe(worst);
    expect(fit.largestMiss).toBeCloseTo(misses[worst]!, 9);
  });

  it('finds a parabola that the points lie on, and has no R² where all heads are one', () => {
    const on = fitParabola([0, 20, 40, 60].map((flow) => ({ flow, head: 30 - 0.003 * flow ** 2 })));
    expect(on.shutoffHead).toBeCloseTo(30, 12);
    expect(on.shape).toBeCloseTo(0.003, 14);
    expect(on.rSquared).toBeCloseTo(1, 12);
    expect(fitParabola([0, 20, 40].map((flow) => ({ flow, head: 30 }))).rSquared).toBeNull();
  });
});
