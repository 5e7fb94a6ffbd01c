import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { internalRate } from '../../server/economics/irr.ts';
import { presentValue } from '../../server/economics/presentValue.ts';

// Worked examples of others, with one rate and with several, are in tests/accuracy/economics.ts.
describe('the internal rate of return', () => {
  it.each([[[-100, -1, -2]], [[100, 1, 2]], [[0, 0]], [[]], [[5]], [[-100, 0, 0]]])(
    'does not exist for %j',
    (flows) => {
      expect(internalRate(flows)).toEqual({ rate: null, reason: 'none' });
    },
  );

  // (x − 1/(1 + r))²·(x + 1) has one positive root, where it touches zero and does not cross; raised by 0.01 it has none.
  // Sixty rates, for rounding puts some of them just above zero and some just below.
  it('is found where the present value only touches zero, and not where it stays above', () => {
    for (let percent = 1; percent <= 60; percent++) {
      const x = 1 / (1 + percent / 100);
      expect(internalRate([x * x, x * x - 2 * x, 1 - 2 * x, 1]).rate).toBeCloseTo(percent / 100, 7);
      expect(internalRate([x * x + 0.01, x * x - 2 * x, 1 - 2 * x, 1])).toEqual({ rate: null, reason: 'none' });
    }
  });

  it('is every rate that the flows were built from', () => {
    const rate = fc.integer({ min: -60, max: 300 }).map((percent) => percent / 100);
    fc.assert(
      fc.property(
        fc.uniqueArray(rate, { minLength: 1, maxLength: 4 }),
        fc.integer({ min: 1, max: 1e6 }),
        (rates, scale) => {
          // Π (x − 1/(1 + r)) times x² + 1, which has no real root.
          let flows = [scale, 0, scale];
          for (const r of rates) {
            const factor = 1 / (1 + r);
            flows = [...flows, 0].map((flow, t) => (t > 0 ? flows[t - 1]! : 0) - factor * flow);
          }
          const found = internalRate(flows);
          const list = found.rate !== null ? [found.rate] : found.reason === 'several' ? found.rates : [];
          expect(list.length).toBe(rates.length);
          [...rates]
            .sort((a, b) => a - b)
            .forEach((r, k) => {
              expect(list[k]).toBeCloseTo(r, 5);
            });
        },
      ),
      { numRuns: 300, seed: 7 },
    );
  });

  it('makes the present value of a long plain investment zero', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 1e7 }),
        fc.array(fc.integer({ min: 1, max: 1e6 }), { minLength: 1, maxLength: 100 }),
        (capital, savings) => {
          const flows = [-capital, ...savings];
          const { rate } = internalRate(flows);
          const size = savings.reduce((sum, saving, t) => sum + saving * (1 + rate!) ** -(t + 1), capital);
          expect(Math.abs(presentValue(flows, rate!) / size)).toBeLessThan(1e-10);
        },
      ),
      { numRuns: 200, seed: 7 },
    );
  });
});
