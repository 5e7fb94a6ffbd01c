import type { BestCountMap } from '../../../server/staging/bestCountMap.ts';
import { type Format, list, pumps } from '../../format.ts';

/** A stretch of one row of the map in which one count is best; flows in m³/s. */
export interface Run {
  readonly row: number;
  readonly count: number;
  readonly fromM3s: number;
  readonly toM3s: number;
}

/** Width of a column and height of a row. */
export function cellOf({ flowM3s, staticHeadM }: BestCountMap): { readonly flow: number; readonly head: number } {
  const step = (values: readonly number[]) => (values.length > 1 ? values[1]! - values[0]! : 2 * (values[0] ?? 0));
  return { flow: step(flowM3s), head: step(staticHeadM) };
}

/** Cells of one count side by side in a row, put together. */
export function runsOf(map: BestCountMap): Run[] {
  const { flow } = cellOf(map);
  return map.count.flatMap((counts, row) => {
    const runs: Run[] = [];
    for (const [column, count] of counts.entries()) {
      const toM3s = map.flowM3s[column]! + flow / 2;
      const last = runs.at(-1);
      if (last && last.count === count) runs[runs.length - 1] = { ...last, toM3s };
      else runs.push({ row, count, fromM3s: map.flowM3s[column]! - flow / 2, toM3s });
    }
    return runs;
  });
}

/** A run of more than this share of the longest of its count is long enough for its number. */
const LONG_ENOUGH = 0.6;

/**
 * Where the number of each count stands: in the middle of a long run, as near the lower quarter of the map as there is one:
 * the record's own static head is in the middle.
 */
export function namesOf(
  runs: readonly Run[],
): { readonly count: number; readonly row: number; readonly flowM3s: number }[] {
  const counts = [...new Set(runs.map((run) => run.count))].sort((a, b) => a - b);
  const quarter = Math.max(...runs.map((run) => run.row)) / 4;
  return counts.map((count) => {
    const own = runs.filter((run) => run.count === count);
    const length = (run: Run) => run.toM3s - run.fromM3s;
    const longest = Math.max(...own.map(length));
    const { row, fromM3s, toM3s } = own
      .filter((run) => length(run) > LONG_ENOUGH * longest)
      .reduce((best, run) => (Math.abs(run.row - quarter) < Math.abs(best.row - quarter) ? run : best));
    return { count, row, flowM3s: (fromM3s + toM3s) / 2 };
  });
}

/** `1 pump to 52 L/s, 2 pumps to 89 L/s, then none` */
export function rowText(map: BestCountMap, row: number, format: Format): string {
  const runs = runsOf(map).filter((run) => run.row === row);
  return runs
    .map(({ count, toM3s }, i) => {
      const who = count === 0 ? 'none can' : pumps(count);
      return i === runs.length - 1 ? `then ${who}` : `${who} to ${format.say(format.flow, toM3s)}`;
    })
    .join(', ');
}

/** How the first step moves over the map: `From 8 to 13 m static head the second pump pays from 47.9 to 53.2 L/s`. */
export function mapSentence(map: BestCountMap, format: Format): string {
  const rows = map.staticHeadM.length;
  const half = cellOf(map).flow / 2;
  const steps = map.count.flatMap((counts) => {
    const at = counts.findIndex((count, i) => count > 1 && counts[i - 1] === 1);
    return at < 0 ? [] : [map.flowM3s[at]! - half];
  });
  const head = (row: number) => format.say(format.head, map.staticHeadM[row]);
  const over = `From ${head(0)} to ${head(rows - 1)} static head`;
  if (steps.length === 0) {
    const counts = [...new Set(map.count.flat())].filter((count) => count > 0).sort((a, b) => a - b);
    if (counts.length === 0) return `${over} no pump can meet any flow`;
    return `${over} ${counts.length === 1 ? `${pumps(counts[0]!)} is all there is` : `${list(counts.map(pumps))} are each best somewhere`}`;
  }
  const [least, most] = [Math.min(...steps), Math.max(...steps)];
  if (most - least < half) return `${over} the second pump pays from about ${format.say(format.flow, least)}`;
  return `${over} the second pump begins to pay between ${format.say(format.flow, least)} and ${format.say(format.flow, most)}`;
}
