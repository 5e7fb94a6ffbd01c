import { describe, expect, it } from 'vitest';
import { discountedPayback, simplePayback } from '../../server/economics/payback.ts';

describe('simple payback', () => {
  it('is outlay over saving', () => {
    // University of Connecticut, energy assessment training, Payback.md: (12 000 − 2 000)/4 000 = 2.5 years.
    expect(simplePayback(12_000 - 2_000, 4_000)).toBeCloseTo(2.5, 12);
    // NIST, military energy-conservation example: 170 000 over 21 382 prints 7.95.
    expect(simplePayback(170_000, 18_755 + 2_270 + 7_500 / 21)).toBeCloseTo(7.95, 2);
  });

  it('is none where nothing is saved and nothing where nothing is laid out', () => {
    expect(simplePayback(1000, 0)).toBeNull();
    expect(simplePayback(1000, -5)).toBeNull();
    expect(simplePayback(0, 100)).toBe(0);
    expect(simplePayback(-500, -5)).toBe(0);
  });
});

describe('discounted payback', () => {
  // University of Connecticut, Payback.md: 20 000 for 5 000, 8 000, 10 000, 10 000. Undiscounted it prints 2.7 years;
  // at 10 % "between 3 and 4": by hand 18 670.17 is back after three years, and 1 329.83/6 830.13 of the fourth.
  it('is interpolated within the year', () => {
    const savings = [5_000, 8_000, 10_000, 10_000];
    expect(discountedPayback(20_000, savings, 0)).toBeCloseTo(2.7, 12);
    expect(discountedPayback(20_000, savings, 0.1)).toBeCloseTo(3 + 1329.83 / 6830.13, 5);
  });

  // A case in the manner of NIST Handbook 135, worked outside this project: 27 000 for 5 000 a year at 3 %.
  it('of 27 000 at 5 000 a year and 3 % is 5.979 years', () => {
    expect(discountedPayback(27_000, new Array<number>(20).fill(5_000), 0.03)).toBeCloseTo(5.979, 3);
  });

  it('is none beyond the life, nothing where nothing is laid out', () => {
    expect(discountedPayback(27_000, new Array<number>(5).fill(5_000), 0.03)).toBeNull();
    expect(discountedPayback(10_000, [5_000, 5_000], 0)).toBeCloseTo(2, 12);
    expect(discountedPayback(10_000.01, [5_000, 5_000], 0)).toBeNull();
    expect(discountedPayback(0, [], 0.05)).toBe(0);
    expect(discountedPayback(1, [-1, -1], 0.05)).toBeNull();
  });
});
