import { MixedInteger, type Sum } from './mixedInteger.ts';

/** An interval of a record, and what may run in it. */
export interface Interval {
  /** Seconds from some start, and how long it lasts. */
  readonly start: number;
  readonly seconds: number;
  /** By number of the set; those that may not run are absent. */
  readonly ways: ReadonlyMap<number, Way>;
}

export interface Way {
  /** Energy of the interval, with the starts of pumps that cycle within it [J]. */
  readonly cost: number;
  /** Pumps that run throughout, as bits. */
  readonly base: number;
}

export interface Terms {
  /** Least time between changes [s], and what a start counts for [J]. */
  readonly minRun: number;
  readonly startPenalty: number;
}

/**
 * `steady` as it is defined (model.md §5), as a mixed-integer program: one set an interval; a set entered is kept for
 * the minimum run, or until the first interval in which it may not run; each pump that was not running and then is counts
 * as a start; after a gap everything begins afresh.
 *
 * @param fixed  the set of each interval, to price a sequence; then null means that the sequence is not allowed
 */
export function leastSequence(
  intervals: readonly Interval[],
  { minRun, startPenalty }: Terms,
  fixed?: readonly number[],
): number | null {
  const program = new MixedInteger();
  const unit = Math.max(...intervals.flatMap(({ ways }) => [...ways.values()].map(({ cost }) => cost)));
  const runs = (i: number, set: number) => `on_${i}_${set}`;
  const follows = (i: number) =>
    i > 0 && Math.abs(intervals[i - 1]!.start + intervals[i - 1]!.seconds - intervals[i]!.start) < 0.5;
  intervals.forEach(({ ways, start }, i) => {
    for (const [set, { cost }] of ways) program.binary(runs(i, set), cost / unit);
    program.require(
      [...ways.keys()].map((set) => [1, runs(i, set)]),
      '=',
      1,
    );
    if (fixed) program.require([[1, runs(i, fixed[i]!)]], '=', 1);
    const before = follows(i) ? intervals[i - 1]! : null;
    for (const set of ways.keys()) {
      // The set is entered here where it runs now and did not before: while that is fresh it is kept.
      const stayed: Sum = before?.ways.has(set) ? [[1, runs(i - 1, set)]] : [];
      for (let j = i + 1; j < intervals.length && follows(j); j++) {
        if (intervals[j]!.start - start >= minRun - 1e-6 || !intervals[j]!.ways.has(set)) break;
        program.require([[1, runs(j, set)], [-1, runs(i, set)], ...stayed], '>=', 0);
      }
    }
    if (!before) return;
    for (let pump = 0; pump < 8; pump++) {
      const holding = (each: Interval, at: number, sign: number): Sum =>
        [...each.ways].flatMap(([set, { base }]) =>
          Math.floor(base / 2 ** pump) % 2 === 1 ? [[sign, runs(at, set)]] : [],
        );
      const now = holding(intervals[i]!, i, -1);
      if (now.length === 0) continue;
      const started = program.amount(`start_${i}_${pump}`, startPenalty / unit);
      program.require([[1, started], ...now, ...holding(before, i - 1, 1)], '>=', 0);
    }
  });
  const found = program.solve();
  return found && found.cost * unit;
}
