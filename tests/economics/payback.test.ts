import { describe, expect, it } from 'vitest';
import { discountedPayback, simplePayback } from '../../server/economics/payback.ts';

// Worked examples of others are in tests/accuracy/economics.ts.
describe('simple payback', () => {
  it('is none where nothing is saved and nothing where nothing is laid out', () => {
    expect(simplePayback(1000, 0)).toBeNull();
    expect(simplePayback(1000, -5)).toBeNull();
    expect(simplePayback(0, 100)).toBe(0);
    expect(simplePayback(-500, -5)).toBe(0);
  });
});

describe('discounted payback', () => {
  it('is none beyond the life, nothing where nothing is laid out', () => {
    expect(discountedPayback(27_000, new Array<number>(5).fill(5_000), 0.03)).toBeNull();
    expect(discountedPayback(10_000, [5_000, 5_000], 0)).toBeCloseTo(2, 12);
    expect(discountedPayback(10_000.01, [5_000, 5_000], 0)).toBeNull();
    expect(discountedPayback(0, [], 0.05)).toBe(0);
    expect(discountedPayback(1, [-1, -1], 0.05)).toBeNull();
  });
});
