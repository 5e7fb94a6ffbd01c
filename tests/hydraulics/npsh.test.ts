import { describe, expect, it } from 'vitest';
import { NpshCurve, npshAvailable } from '../../server/hydraulics/npsh.ts';
import { FOOT, GRAVITY, INCH } from '../../server/units.ts';

const POUND = 0.45359237;
const PSI = (POUND * GRAVITY) / INCH ** 2;

describe('NPSH', () => {
  it('available agrees with Crane TP-410 example 7.32', () => {
    // A tank at 5 psig, vapour pressure 0.256 psi, 62.364 lb/ft³, 25 ft of lift, 6 ft of loss. C. Bell, fluids, works it
    // with 1 atm as 101 325 Pa: 13.887316780096477 ft
    const feet =
      npshAvailable({
        pressure: 101_325 + 5 * PSI,
        vapourPressure: 0.256 * PSI,
        density: (62.364 * POUND) / FOOT ** 3,
        height: -25 * FOOT,
        loss: 6 * FOOT,
      }) / FOOT;
    expect(Math.abs(feet - 13.887316780096477)).toBeLessThan(1e-9);
  });

  it('required runs in straight lines, is held to the left and goes on to the right', () => {
    const curve = new NpshCurve([20, 40, 60], [2, 3, 6]);
    expect([10, 20, 30, 40, 50, 60, 70].map((flow) => curve.at(flow))).toEqual([2, 2, 2.5, 3, 4.5, 6, 7.5]);
    expect(new NpshCurve([20, 40], [3, 2]).at(50)).toBe(2);
  });
});
