import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { leastOn, root } from '../../server/hydraulics/roots.ts';

const SEEDED = { seed: 3, numRuns: 200 };

const within = (share: number, wanted: number) => share * Math.max(1, Math.abs(wanted));

describe('a root between two ends', () => {
  it.each([
    ['cos x = x, the number of Dottie', (x: number) => Math.cos(x) - x, 0, 1, 0.7390851332151607],
    ['x³ − 2x − 5 = 0, Wallis (1685)', (x: number) => x ** 3 - 2 * x - 5, 2, 3, 2.0945514815423265],
    ['x² = 2', (x: number) => x * x - 2, 0, 2, Math.SQRT2],
    ['ln x = 1', (x: number) => Math.log(x) - 1, 1, 10, Math.E],
    ['the ends the other way round', (x: number) => x * x - 2, 2, 0, Math.SQRT2],
    ['flat at the root, x⁹', (x: number) => (x - 1) ** 9, 0, 3, 1],
    ['all steep at one end, 1/x = 1e6', (x: number) => 1 / x - 1e6, 1e-9, 1, 1e-6],
    ['a jump', (x: number) => (x < 0.3 ? -1 : 1), 0, 1, 0.3],
  ] as const)('%s', (_, f, a, b, wanted) => {
    // Of x⁹ all is rounding within 1e-2 of the root: no number there tells the sign any better.
    const tolerance = f(wanted + 1e-3) ** 2 < 1e-50 ? 1e-2 : 1e-13;
    expect(Math.abs(root(f, a, b) - wanted)).toBeLessThanOrEqual(within(tolerance, wanted));
  });

  it('is found of every rising cubic, in few steps', () => {
    const inside = fc.double({ min: -4.9, max: 4.9, noNaN: true });
    const shape = fc.double({ min: 0.01, max: 5, noNaN: true });
    fc.assert(
      fc.property(inside, inside, shape, (wanted, bend, lift) => {
        let calls = 0;
        // (x − r)·((x − p)² + l): one real root, r
        const f = (x: number) => {
          calls++;
          return (x - wanted) * ((x - bend) ** 2 + lift);
        };
        expect(Math.abs(root(f, -5, 5) - wanted)).toBeLessThanOrEqual(within(1e-12, wanted));
        expect(calls).toBeLessThan(60);
      }),
      SEEDED,
    );
  });

  it('may be an end', () => {
    expect(root((x) => x, 0, 1)).toBe(0);
    expect(root((x) => x - 1, 0, 1)).toBe(1);
  });

  it('stops where its bracket is as narrow as asked', () => {
    let calls = 0;
    const f = (x: number) => {
      calls++;
      return Math.exp(x) - 5;
    };
    const exact = root(f, 0, 10);
    const exactCalls = calls;
    calls = 0;
    expect(Math.abs(root(f, 0, 10, 1e-3) - exact)).toBeLessThan(4e-3);
    expect(calls).toBeLessThan(exactCalls);
  });

  it('is refused where both ends have one sign', () => {
    expect(() => root((x) => x * x + 1, -1, 1)).toThrow('root not bracketed: f(-1) = 2, f(1) = 2');
  });
});

describe('the least value between two ends', () => {
  it.each([
    ['(x − 0.3)²', (x: number) => (x - 0.3) ** 2, 0, 1, 0.3],
    ['xˣ, at 1/e', (x: number) => x ** x, 0.01, 1, 1 / Math.E],
    ['x − ln x, at 1', (x: number) => x - Math.log(x), 0.1, 9, 1],
    ['|x − 2|, with a corner', (x: number) => Math.abs(x - 2), 0, 10, 2],
  ] as const)('%s', (_, f, a, b, wanted) => {
    // A smooth least is flat, so its place is good to the root of the rounding.
    expect(Math.abs(leastOn(f, a, b) - wanted)).toBeLessThan(3e-8 * (b - a));
    expect(f(leastOn(f, a, b)) - f(wanted)).toBeLessThan(1e-7);
  });

  it('is an end, exactly, where f only falls or only rises', () => {
    expect(leastOn((x) => Math.exp(x), -1, 2)).toBe(-1);
    expect(leastOn((x) => -x, -1, 2)).toBe(2);
  });
});
