/**
 * NPSH required over flow at rated speed, read from a maker's curve: straight lines between the points, held left of the
 * first (it falls no further), and going on along the last line beyond the last, never below it. At speed ratio s it is
 * taken as s²·npshr(q/s), like every head.
 */
export class NpshCurve {
  /** @param flows  strictly rising [m³/s]; @param heads  of the same length [m] */
  constructor(
    private readonly flows: readonly number[],
    private readonly heads: readonly number[],
  ) {}

  at(flow: number): number {
    const { flows, heads } = this;
    const last = flows.length - 1;
    if (flow <= flows[0]!) return heads[0]!;
    let i = 1;
    while (i < last && flows[i]! < flow) i++;
    const slope = (heads[i]! - heads[i - 1]!) / (flows[i]! - flows[i - 1]!);
    if (flow > flows[last]!) return heads[last]! + Math.max(0, slope) * (flow - flows[last]!);
    return heads[i - 1]! + slope * (flow - flows[i - 1]!);
  }
}
