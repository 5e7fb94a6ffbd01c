import type { Log } from '../../server/ingest/log.ts';
import { demandRecord } from '../../server/staging/demandRecord.ts';
import type { RuleId } from '../../server/staging/result.ts';
import type { Rule } from '../../server/staging/rule.ts';
import { RULES } from '../../server/staging/rules/all.ts';
import { type Run, runRule } from '../../server/staging/run.ts';
import { stagedPumpsOf } from '../../server/staging/stagedPumpsOf.ts';
import type { Station } from '../../server/station/station.ts';

/** A log of flows [m³/s], an hour each unless said otherwise, from 2025 on. */
export function logOf(flows: readonly number[], seconds = 3600): Log {
  return {
    startMs: Float64Array.from(flows, (_, i) => Date.UTC(2025, 0, 1) + i * seconds * 1000),
    seconds: new Float64Array(flows.length).fill(seconds),
    flow: Float64Array.from(flows),
    level: null,
    staticHead: null,
    power: null,
    pumpsOn: null,
    pumps: [],
  };
}

export function ruleOf(id: RuleId): Rule {
  const found = RULES.find((rule) => rule.id === id);
  if (!found) throw new Error(`no rule ${id}`);
  return found;
}

/** One rule over a log. */
export function run(station: Station, rule: RuleId, log: Log): Run {
  return runRule(ruleOf(rule), stagedPumpsOf(station, station.duty), demandRecord(station, log));
}
