import { root } from '../hydraulics/roots.ts';

/** A rate of return, or why there is none to name. */
export type InternalRate =
  | { readonly rate: number }
  | { readonly rate: null; readonly reason: 'none' }
  | { readonly rate: null; readonly reason: 'several'; readonly rates: readonly number[] };

/**
 * Internal rate of return: the rate above −1 at which the present value of the flows is 0. Flows that change sign more
 * than once may have several such rates, of which none is the answer.
 *
 * @param flows  `flows[t]` at the end of year t, `flows[0]` today
 */
export function internalRate(flows: readonly number[]): InternalRate {
  // Present value is the polynomial Σ flows[t]·x^t in the discount factor x = 1/(1 + rate).
  const rates = positiveRoots(flows)
    .map((factor) => 1 / factor - 1)
    .sort((a, b) => a - b);
  if (rates.length === 0) return { rate: null, reason: 'none' };
  return rates.length === 1 ? { rate: rates[0]! } : { rate: null, reason: 'several', rates };
}

/**
 * All positive roots of Σ c[t]·x^t, ascending, a repeated one once. Between two neighbouring roots of its derivative a
 * polynomial only rises or only falls (Rolle), so that each such stretch holds one root or none.
 */
function positiveRoots(coefficients: readonly number[]): number[] {
  const c = withoutOuterZeros(coefficients);
  if (!c.some((value) => value > 0) || !c.some((value) => value < 0)) return [];
  const degree = c.length - 1;
  const turns = positiveRoots(c.slice(1).map((value, i) => value * (i + 1)));

  // Fujiwara's bound: no root is larger, nor, for the reversed polynomial, smaller.
  const largest = fujiwara(c);
  const smallest = 1 / fujiwara([...c].reverse());
  const edges = [smallest / 2, ...turns.filter((x) => x > smallest / 2 && x < 2 * largest), 2 * largest];
  // Divided by x^degree where x > 1: the same sign, and no overflow.
  const value = (x: number) => (x <= 1 ? horner(c, x) : horner([...c].reverse(), 1 / x));
  const size = (x: number) => {
    const magnitudes = c.map(Math.abs);
    return x <= 1 ? horner(magnitudes, x) : horner(magnitudes.reverse(), 1 / x);
  };
  // A curve that only touches the axis does so at a turn, and rounding would show it just above or below.
  const signs = edges.map((x) =>
    Math.abs(value(x)) <= 4 * degree * Number.EPSILON * size(x) ? 0 : Math.sign(value(x)),
  );

  const roots: number[] = [];
  for (let k = 0; k < edges.length; k++) {
    if (signs[k] === 0) roots.push(edges[k]!);
    else if (k > 0 && signs[k - 1]! * signs[k]! < 0) roots.push(root(value, edges[k - 1]!, edges[k]!));
  }
  return roots;
}

/** Coefficients from the first to the last that is not 0: a factor x has no positive root. */
function withoutOuterZeros(c: readonly number[]): number[] {
  const first = c.findIndex((value) => value !== 0);
  return first < 0 ? [] : c.slice(first, c.findLastIndex((value) => value !== 0) + 1);
}

/** 2·max |c[n − k]/c[n]|^(1/k), k = 1…n, halved inside for c[0] (M. Fujiwara, Tôhoku Math. J. 10, 1916). */
function fujiwara(c: readonly number[]): number {
  const degree = c.length - 1;
  let bound = 0;
  for (let k = 1; k <= degree; k++) {
    const ratio = Math.abs(c[degree - k]! / c[degree]!) / (k === degree ? 2 : 1);
    bound = Math.max(bound, ratio ** (1 / k));
  }
  return 2 * bound;
}

function horner(c: readonly number[], x: number): number {
  return c.reduceRight((sum, value) => sum * x + value, 0);
}
