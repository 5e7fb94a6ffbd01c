import type { RuleId } from './result.ts';
import type { StagedPumps } from './stagedPumps.ts';
import type { Action } from './state.ts';

/**
 * A staging rule: given the flow of an interval it says which states the pumps are in. The static head of the interval
 * is set on the pumps beforehand. A rule may remember the interval before (the step table does), so each run starts one.
 */
export interface Rule {
  readonly id: RuleId;
  /** How many duty pumps must have a drive, fitted or proposed. */
  readonly drives: 'none' | 'one' | 'all';
  /** Only stations whose surplus goes into storage can run it. */
  readonly storageOnly?: boolean;
  start(pumps: StagedPumps): Decide;
}

/** The action for a flow Q ≥ 0 [m³/s] of the next interval. */
export type Decide = (flow: number) => Action;
