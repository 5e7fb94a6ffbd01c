import { Ascending } from './ascending.ts';

/**
 * Monotone piecewise cubic Hermite interpolation: where the data rise, fall or stand still, so does the curve.
 * Slopes: F. N. Fritsch and J. Butland, "A method for constructing local monotone piecewise cubic interpolants",
 * SIAM J. Sci. Stat. Comput. 5 (1984) 300–304; at the ends the shape-preserving three-point formula. Numerical
 * libraries call the two together PCHIP.
 */
export class Pchip {
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly slope: Float64Array;
  /** Of each segment y = y0 + t·(d0 + t·(c2 + t·c3)), t from its left end. */
  private readonly c2: Float64Array;
  private readonly c3: Float64Array;
  private readonly knots: Ascending;

  /** @param x  strictly rising, two values or more; @param y  of the same length */
  constructor(x: readonly number[], y: readonly number[]) {
    this.x = Float64Array.from(x);
    this.y = Float64Array.from(y);
    this.slope = Float64Array.from(slopes(x, y));
    this.knots = new Ascending(this.x);
    const segments = x.length - 1;
    this.c2 = new Float64Array(segments);
    this.c3 = new Float64Array(segments);
    for (let i = 0; i < segments; i++) {
      const h = this.x[i + 1]! - this.x[i]!;
      const d0 = this.slope[i]!;
      const d1 = this.slope[i + 1]!;
      const delta = (this.y[i + 1]! - this.y[i]!) / h;
      this.c2[i] = (3 * delta - 2 * d0 - d1) / h;
      this.c3[i] = (d0 + d1 - 2 * delta) / (h * h);
    }
  }

  /** Index of the segment that holds v; the first and last segments also hold what lies outside. */
  segment(v: number): number {
    return this.knots.segment(v);
  }

  at(v: number): number {
    return this.inSegment(this.segment(v), v);
  }

  inSegment(i: number, v: number): number {
    const t = v - this.x[i]!;
    return this.y[i]! + t * (this.slope[i]! + t * (this.c2[i]! + t * this.c3[i]!));
  }

  /** dy/dx at v. */
  slopeInSegment(i: number, v: number): number {
    const t = v - this.x[i]!;
    return this.slope[i]! + t * (2 * this.c2[i]! + 3 * t * this.c3[i]!);
  }
}

function slopes(x: readonly number[], y: readonly number[]): number[] {
  const n = x.length;
  const h: number[] = [];
  const delta: number[] = [];
  for (let i = 0; i + 1 < n; i++) {
    h.push(x[i + 1]! - x[i]!);
    delta.push((y[i + 1]! - y[i]!) / h[i]!);
  }
  if (n === 2) return [delta[0]!, delta[0]!];
  const slope = [endSlope(h[0]!, h[1]!, delta[0]!, delta[1]!)];
  for (let i = 1; i + 1 < n; i++) {
    const before = delta[i - 1]!;
    const after = delta[i]!;
    if (before * after <= 0) {
      slope.push(0);
      continue;
    }
    const w1 = 2 * h[i]! + h[i - 1]!;
    const w2 = h[i]! + 2 * h[i - 1]!;
    slope.push((w1 + w2) / (w1 / before + w2 / after));
  }
  slope.push(endSlope(h[n - 2]!, h[n - 3]!, delta[n - 2]!, delta[n - 3]!));
  return slope;
}

function endSlope(h0: number, h1: number, delta0: number, delta1: number): number {
  const slope = ((2 * h0 + h1) * delta0 - h0 * delta1) / (h0 + h1);
  if (Math.sign(slope) !== Math.sign(delta0)) return 0;
  if (Math.sign(delta0) !== Math.sign(delta1) && Math.abs(slope) > 3 * Math.abs(delta0)) return 3 * delta0;
  return slope;
}
