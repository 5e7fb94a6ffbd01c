import type { RuleId } from '../result.ts';
import type { Rule } from '../rule.ts';
import { batch } from './batch.ts';
import { fixedSpeed } from './fixedSpeed.ts';
import { flowSteps } from './flowSteps.ts';
import { oneTrimmed } from './oneTrimmed.ts';
import { steady } from './steady.ts';
import { bestCount, lateStaging } from './trimmedCounts.ts';

/** The rules in the order in which they are shown. */
export const RULES: readonly Rule[] = [fixedSpeed, oneTrimmed, lateStaging, flowSteps, bestCount, steady, batch];

/** null for a rule that this version does not run. */
export function ruleOf(id: RuleId): Rule | null {
  return RULES.find((rule) => rule.id === id) ?? null;
}
