/** Buckets a knot: enough that a search seldom has to step on. */
const BUCKETS_PER_KNOT = 16;

/**
 * Where a value lies among rising knots, found in a few nanoseconds: the range is cut into equal buckets, each of which
 * knows the first segment that reaches into it.
 */
export class Ascending {
  private readonly knots: Float64Array;
  private readonly first: Uint16Array;
  private readonly perUnit: number;

  /** @param knots  strictly rising, finite, two or more */
  constructor(knots: Float64Array) {
    this.knots = knots;
    const last = knots.length - 1;
    const buckets = BUCKETS_PER_KNOT * last;
    this.perUnit = buckets / (knots[last]! - knots[0]!);
    this.first = new Uint16Array(buckets + 1);
    let segment = 0;
    for (let k = 0; k <= buckets; k++) {
      while (segment < last - 1 && this.bucketOf(knots[segment + 1]!) < k) segment++;
      this.first[k] = segment;
    }
  }

  private bucketOf(v: number): number {
    return Math.floor((v - this.knots[0]!) * this.perUnit);
  }

  /** i with knots[i] ≤ v < knots[i + 1]; the first and last segments also hold what lies outside. */
  segment(v: number): number {
    const { knots, first } = this;
    const last = knots.length - 2;
    let i = first[Math.min(Math.max(this.bucketOf(v), 0), first.length - 1)]!;
    while (i < last && knots[i + 1]! <= v) i++;
    return i;
  }
}
