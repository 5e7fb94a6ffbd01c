import { SECOND_MS } from '../time.ts';

/** Steps either side of a row's own that are asked for the local step: 5 + 1 + 5 = 11. */
const REACH = 5;

/**
 * Local step of every row [ms]: the median of the 11 steps around it, fewer at the ends of the file. Of an even number
 * of steps the shorter middle one counts, so that a value is never stretched over time it was not measured in.
 *
 * @param startMs  ascending instants, at least two
 */
export function localSteps(startMs: Float64Array): Float64Array {
  const rows = startMs.length;
  const steps = new Float64Array(rows - 1);
  for (let i = 0; i + 1 < rows; i++) steps[i] = startMs[i + 1]! - startMs[i]!;
  const result = new Float64Array(rows);
  const window = new Float64Array(2 * REACH + 1);
  let last = 0; // the last step of the window, and the first of the equal steps that end there
  let equalFrom = 0;
  for (let row = 0; row < rows; row++) {
    const first = Math.max(0, row - REACH);
    const end = Math.min(steps.length - 1, row + REACH);
    while (last < end) {
      last++;
      if (steps[last] !== steps[last - 1]) equalFrom = last;
    }
    result[row] = equalFrom <= first ? steps[last]! : lowerMedian(steps, first, end, window);
  }
  return result;
}

/** Insertion sort of a handful of steps: faster than any call for eleven numbers. */
function lowerMedian(steps: Float64Array, first: number, end: number, window: Float64Array): number {
  const count = end - first + 1;
  for (let i = 0; i < count; i++) {
    const value = steps[first + i]!;
    let place = i;
    for (; place > 0 && window[place - 1]! > value; place--) window[place] = window[place - 1]!;
    window[place] = value;
  }
  return window[(count - 1) >> 1]!;
}

/**
 * Length of every interval [s]: to the next row if that is at most 1.5 × the local step, else the local step, and what
 * is left is a gap; the last row lasts the local step.
 */
export function intervalSeconds(startMs: Float64Array, steps: Float64Array): Float64Array {
  const seconds = new Float64Array(startMs.length);
  for (let row = 0; row < seconds.length; row++) {
    const step = steps[row]!;
    const toNext = row + 1 < seconds.length ? startMs[row + 1]! - startMs[row]! : Number.POSITIVE_INFINITY;
    seconds[row] = (toNext <= 1.5 * step ? toNext : step) / SECOND_MS;
  }
  return seconds;
}
