import { expect, it } from 'vitest';
import { lifeCycleCost } from '../../server/economics/lifeCycle.ts';
import { singlePresentValue } from '../../server/economics/presentValue.ts';

// Worked examples of others are in tests/accuracy/economics.ts.
it('energy grows from the first year on, and a residual value comes back at the end', () => {
  // By hand: 100·1.1/1.2 + 100·1.21/1.44 = 91.667 + 84.028; 1000 + 175.694 − 144/1.44.
  const cost = lifeCycleCost(
    { initial: 1_000, energyPerYear: 100, maintenancePerYear: 0, residualValue: 144 },
    { years: 2, discountRate: 0.2, energyEscalation: 0.1 },
  );
  expect(cost).toBeCloseTo(1_000 + (100 * 1.1) / 1.2 + (100 * 1.21) / 1.44 - 100, 10);
  expect(singlePresentValue(0.2, 2)).toBeCloseTo(1 / 1.44, 14);
});
