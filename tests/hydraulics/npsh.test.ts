import { describe, expect, it } from 'vitest';
import { NpshCurve } from '../../server/hydraulics/npsh.ts';

describe('NPSH required', () => {
  it('runs in straight lines, is held to the left and goes on to the right', () => {
    const curve = new NpshCurve([20, 40, 60], [2, 3, 6]);
    expect([10, 20, 30, 40, 50, 60, 70].map((flow) => curve.at(flow))).toEqual([2, 2, 2.5, 3, 4.5, 6, 7.5]);
    expect(new NpshCurve([20, 40], [3, 2]).at(50)).toBe(2);
  });
});
