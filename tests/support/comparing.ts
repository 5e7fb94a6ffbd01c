import type { Log } from '../../server/ingest/log.ts';
import { type ComparisonRequest, compareRules, resultOf } from '../../server/staging/compare.ts';
import type { ComparisonResult, RuleId, RuleResult } from '../../server/staging/result.ts';

/** A log of equal steps from 6 January 2025 on, a Monday; flows in m³/s. */
export function flowLog(flows: ArrayLike<number>, seconds = 3600): Log {
  const startMs = Date.UTC(2025, 0, 6);
  return {
    startMs: Float64Array.from(flows, (_, i) => startMs + i * seconds * 1000),
    seconds: new Float64Array(flows.length).fill(seconds),
    flow: Float64Array.from(flows),
    level: null,
    staticHead: null,
    power: null,
    pumpsOn: null,
    pumps: [],
  };
}

export function resultFor(request: ComparisonRequest): ComparisonResult {
  return resultOf(compareRules(request), { station: '', record: '', tariff: null });
}

export function ruleIn(result: ComparisonResult, id: RuleId): RuleResult {
  const found = result.rules.find(({ rule }) => rule === id);
  if (!found) throw new Error(`no ${id} among ${result.rules.map(({ rule }) => rule).join(', ')}`);
  return found;
}

/** Relative difference; of a figure that should be 0, its size. */
export function differs(found: number, wanted: number): number {
  return wanted === 0 ? Math.abs(found) : Math.abs(found / wanted - 1);
}
