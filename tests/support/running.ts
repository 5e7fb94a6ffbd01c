import type { Log } from '../../server/ingest/log.ts';
import { demandRecord } from '../../server/staging/demandRecord.ts';
import type { RuleId } from '../../server/staging/result.ts';
import { ruleOf } from '../../server/staging/rules/all.ts';
import { type Run, runRule } from '../../server/staging/run.ts';
import { stagedPumpsOf } from '../../server/staging/stagedPumpsOf.ts';
import type { Station } from '../../server/station/station.ts';

/** One rule over a log. */
export function run(station: Station, rule: RuleId, log: Log): Run {
  return runRule(ruleOf(rule)!, stagedPumpsOf(station, station.duty), demandRecord(station, log));
}
