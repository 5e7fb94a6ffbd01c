/**
 * The farthest flow from `start` towards `end` up to which a condition holds without a break: found on a grid, then by
 * bisection. `start` where it does not hold there.
 */
export function lastWithin(start: number, end: number, holds: (flow: number) => boolean): number {
  const steps = 200;
  let good = start;
  for (let i = 1; i <= steps; i++) {
    const flow = start + ((end - start) * i) / steps;
    if (holds(flow)) {
      good = flow;
      continue;
    }
    let bad = flow;
    for (let k = 0; k < 50; k++) {
      const middle = (good + bad) / 2;
      if (holds(middle)) good = middle;
      else bad = middle;
    }
    return good;
  }
  return good;
}
