import type { DemandRecord } from './demandRecord.ts';
import type { RuleId } from './result.ts';
import type { StagedPumps } from './stagedPumps.ts';
import type { Action } from './state.ts';

/** Static head of an interval of a record [m]. */
export function staticHeadAt({ staticHead }: Pick<DemandRecord, 'staticHead'>, i: number): number {
  return typeof staticHead === 'number' ? staticHead : staticHead[i]!;
}

/**
 * A staging rule: given the flow of an interval it says which states the pumps are in. The static head of the interval
 * is set on the pumps beforehand. A rule may remember the interval before (the step table does), so each run starts one; it is
 * given the record beforehand, for rules that look ahead, and then asked interval by interval, from the first.
 */
export interface Rule {
  readonly id: RuleId;
  /** How many duty pumps must have a drive, fitted or proposed. */
  readonly drives: 'none' | 'one' | 'all';
  /** Only stations whose surplus goes into storage can run it. */
  readonly storageOnly?: boolean;
  start(pumps: StagedPumps, record: DemandRecord): Decide;
}

/** The action for a flow Q ≥ 0 [m³/s] of the next interval. */
export type Decide = (flow: number) => Action;
