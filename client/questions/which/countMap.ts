import type { BestCountMap } from '../../../server/staging/bestCountMap.ts';
import { type Format, list, pumps } from '../../format.ts';

/** A stretch of one row of the map in which one count, or set of pumps that differ, is best; flows in m³/s. */
export interface Run {
  readonly row: number;
  /** The count, or the place of the set among those of the map, from 1; 0 where none can. */
  readonly who: number;
  readonly fromM3s: number;
  readonly toM3s: number;
}

/** Width of a column and height of a row. */
export function cellOf({ flowM3s, staticHeadM }: BestCountMap): { readonly flow: number; readonly head: number } {
  const step = (values: readonly number[]) => (values.length > 1 ? values[1]! - values[0]! : 2 * (values[0] ?? 0));
  return { flow: step(flowM3s), head: step(staticHeadM) };
}

/** Who is best in each cell, by row: as `who` of a run. */
function whoOf({ count, set }: BestCountMap): readonly (readonly number[])[] {
  return set.length > 0 ? set.map((row) => row.map((each) => (each === null ? 0 : each + 1))) : count;
}

/** Whoever is best: `2 pumps`, `Beck and Pair`, `none can`. */
function whoText({ sets }: Pick<BestCountMap, 'sets'>, who: number): string {
  if (who === 0) return 'none can';
  return sets.length > 0 ? list(sets[who - 1]!) : pumps(who);
}

/** Cells alike side by side in a row, put together. */
export function runsOf(map: BestCountMap): Run[] {
  const { flow } = cellOf(map);
  return whoOf(map).flatMap((all, row) => {
    const runs: Run[] = [];
    for (const [column, who] of all.entries()) {
      const toM3s = map.flowM3s[column]! + flow / 2;
      const last = runs.at(-1);
      if (last && last.who === who) runs[runs.length - 1] = { ...last, toM3s };
      else runs.push({ row, who, fromM3s: map.flowM3s[column]! - flow / 2, toM3s });
    }
    return runs;
  });
}

/** A run of more than this share of the longest of its kind is long enough for its name. */
const LONG_ENOUGH = 0.6;

/**
 * Where the name of each stands: in the middle of a long run, as near the lower quarter of the map as there is one:
 * the record's own static head is in the middle.
 */
export function namesOf(
  runs: readonly Run[],
): { readonly who: number; readonly row: number; readonly flowM3s: number }[] {
  const all = [...new Set(runs.map((run) => run.who))].sort((a, b) => a - b);
  const quarter = Math.max(...runs.map((run) => run.row)) / 4;
  return all.map((who) => {
    const own = runs.filter((run) => run.who === who);
    const length = (run: Run) => run.toM3s - run.fromM3s;
    const longest = Math.max(...own.map(length));
    const { row, fromM3s, toM3s } = own
      .filter((run) => length(run) > LONG_ENOUGH * longest)
      .reduce((best, run) => (Math.abs(run.row - quarter) < Math.abs(best.row - quarter) ? run : best));
    return { who, row, flowM3s: (fromM3s + toM3s) / 2 };
  });
}

/** `1 pump to 52 L/s, 2 pumps to 89 L/s, then none` */
export function rowText(map: BestCountMap, row: number, format: Format): string {
  const runs = runsOf(map).filter((run) => run.row === row);
  return runs
    .map(({ who, toM3s }, i) => {
      const name = whoText(map, who);
      return i === runs.length - 1 ? `then ${name}` : `${name} to ${format.say(format.flow, toM3s)}`;
    })
    .join(', ');
}

/** How the first step moves over the map: `From 8 to 13 m static head the second pump pays from 47.9 to 53.2 L/s`. */
export function mapSentence(map: BestCountMap, format: Format): string {
  const rows = map.staticHeadM.length;
  const half = cellOf(map).flow / 2;
  if (map.sets.length > 0) return setsSentence(map, format);
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

/** How far the first set goes over the map: `From 29 to 48 m static head Jockey is best up to 71.4 to 134 m³/h; 9 other sets follow`. */
function setsSentence(map: BestCountMap, format: Format): string {
  const head = (row: number) => format.say(format.head, map.staticHeadM[row]);
  const first = runsOf(map).filter((run, i, all) => run.who > 0 && all[i - 1]?.row !== run.row);
  const over = `From ${head(0)} to ${head(map.staticHeadM.length - 1)} static head`;
  if (first.length === 0) return `${over} no pump can meet any flow`;
  const { who } = first[0]!;
  const ends = first.filter((run) => run.who === who).map((run) => run.toM3s);
  const [least, most] = [Math.min(...ends), Math.max(...ends)].map((flow) => format.say(format.flow, flow));
  const upTo = least === most ? `about ${least}` : `between ${least} and ${most}`;
  const others = map.sets.length - 1;
  const follow = others === 0 ? '' : `; ${others === 1 ? 'one other set follows' : `${others} other sets follow`}`;
  return `${over} ${whoText(map, who)} is best up to ${upTo}${follow}`;
}
