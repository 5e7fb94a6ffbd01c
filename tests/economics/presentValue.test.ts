import { expect, it } from 'vitest';
import { escalatedPresentValue, uniformPresentValue } from '../../server/economics/presentValue.ts';

// Tables and worked examples are in tests/accuracy/economics.ts.
it('a discount factor is the number of years where nothing is discounted, or prices grow as fast', () => {
  expect(uniformPresentValue(0, 12)).toBe(12);
  expect(escalatedPresentValue({ discountRate: 0.04, escalation: 0.04 }, 12)).toBe(12);
  // Close to no rate the factor is n − n(n + 1)/2·d: 12 − 78e-12.
  expect(uniformPresentValue(1e-12, 12)).toBeCloseTo(12 - 78e-12, 14);
});
