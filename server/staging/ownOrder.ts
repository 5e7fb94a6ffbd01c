import { dutyPumpsAreEqual } from '../station/station.ts';
import { billOf } from '../tariff/bill.ts';
import type { Comparison } from './compare.ts';
import type { Rule } from './rule.ts';
import { eachCandidate, flatOut } from './rules/trimmedCounts.ts';
import { runRule } from './run.ts';
import type { Trim } from './stagedPumps.ts';
import { stagedPumpsOf } from './stagedPumpsOf.ts';
import { held } from './state.ts';

/** What the station's own order of bringing on costs over a record, against the best sets. */
export interface OwnOrderCost {
  readonly energyKwh: number;
  /** null without a tariff. */
  readonly cost: number | null;
  readonly hours: number;
}

/** The best count for each flow of pumps that are brought on in the station's order and share one speed. */
const bestCountInOrder: Rule = {
  id: 'best-count',
  drives: 'all',
  start: (pumps) => (flow) => {
    if (flow === 0) return held(pumps.off);
    let best: Trim | null = null;
    eachCandidate(pumps, flow, (trim) => {
      if (best === null || trim.power < best.power) best = trim;
      return false;
    });
    return best === null ? flatOut(pumps, flow) : pumps.action(best, flow);
  },
};

/**
 * The station's own order, each flow at its best count, against `best-count`, which may take any set. null where a count
 * says who runs (pumps that are equal, or without drives) or where the comparison did not run `best-count`.
 */
export function ownOrderCost({ station, duty, record, plan, runs, bills }: Comparison): OwnOrderCost | null {
  const place = runs.findIndex(({ rule }) => rule.id === 'best-count');
  if (place < 0 || dutyPumpsAreEqual(duty)) return null;
  const own = runRule(bestCountInOrder, stagedPumpsOf(station, duty), record);
  const best = bills[place];
  return {
    energyKwh: own.totals.energyKwh - runs[place]!.totals.energyKwh,
    cost: plan && best ? billOf(plan, own.series).totalCost - best.totalCost : null,
    hours: record.coveredSeconds / 3600,
  };
}
