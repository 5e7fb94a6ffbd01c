import type { RuleId } from './result.ts';
import type { Action } from './state.ts';

/** The sets of one rule by interval: bit i stands for duty pump i. Different pumps are eight at most. */
export interface SetsOfRun {
  readonly low: Uint8Array;
  readonly high: Uint8Array;
}

/** Which pumps ran in each interval of each rule, for stations whose count does not say who. */
export class RunSets {
  private readonly byRule = new Map<RuleId, SetsOfRun>();
  private readonly intervals: number;

  /** @param intervals  as many as the record has, or more */
  constructor(intervals: number) {
    this.intervals = intervals;
  }

  add(rule: RuleId, i: number, { low, high }: Action): void {
    let sets = this.byRule.get(rule);
    if (!sets) {
      sets = { low: new Uint8Array(this.intervals), high: new Uint8Array(this.intervals) };
      this.byRule.set(rule, sets);
    }
    sets.low[i] = low.set;
    sets.high[i] = high.set;
  }

  of(rule: RuleId): SetsOfRun | undefined {
    return this.byRule.get(rule);
  }
}
