import { GRAVITY } from '../units.ts';

/**
 * Net positive suction head available at a pump [m]: the head of the air less that of the vapour, plus the height of the
 * water above the pump, less what the suction pipe loses.
 *
 * @param p.pressure        absolute, on the water at the suction [Pa]
 * @param p.vapourPressure  of the liquid [Pa]
 * @param p.density         [kg/m³]
 * @param p.height          of the water above the pump's impeller [m]; negative where it must be lifted
 * @param p.loss            in the suction pipe at the pump's flow [m]
 */
export function npshAvailable(p: {
  pressure: number;
  vapourPressure: number;
  density: number;
  height: number;
  loss: number;
}): number {
  return (p.pressure - p.vapourPressure) / (p.density * GRAVITY) + p.height - p.loss;
}

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
