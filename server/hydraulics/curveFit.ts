/** Head over flow of one pump, as its maker's curve was read. */
export interface CurvePoint {
  readonly flow: number;
  readonly head: number;
}

/** h = H0 − a·q² laid through points, and how well it fits them; in the units of the points. */
export interface CurveFit {
  readonly shutoffHead: number;
  readonly shape: number;
  /** R² = 1 − Σ(h − fit)²/Σ(h − mean)²; null where all heads are one. */
  readonly rSquared: number | null;
  /** The point that lies furthest off: its place in the list, and head less fit. */
  readonly worst: number;
  readonly largestMiss: number;
}

/**
 * The parabola h = H0 − a·q² nearest to points, by least squares in head: a straight line over q². Pump curves lie near
 * one, so a point far off is often a slip of reading.
 *
 * @param points  two or more, of different flows
 */
export function fitParabola(points: readonly CurvePoint[]): CurveFit {
  const n = points.length;
  let meanX = 0;
  let meanH = 0;
  for (const { flow, head } of points) {
    meanX += (flow * flow) / n;
    meanH += head / n;
  }
  let xx = 0;
  let xh = 0;
  let hh = 0;
  for (const { flow, head } of points) {
    const x = flow * flow - meanX;
    xx += x * x;
    xh += x * (head - meanH);
    hh += (head - meanH) ** 2;
  }
  const shape = -xh / xx;
  const shutoffHead = meanH + shape * meanX;
  let squares = 0;
  let worst = 0;
  let largestMiss = 0;
  points.forEach(({ flow, head }, i) => {
    const miss = head - (shutoffHead - shape * flow * flow);
    squares += miss * miss;
    if (Math.abs(miss) > Math.abs(largestMiss)) {
      largestMiss = miss;
      worst = i;
    }
  });
  return { shutoffHead, shape, rSquared: hh > 0 ? 1 - squares / hh : null, worst, largestMiss };
}
