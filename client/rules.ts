import type { RuleId } from '../server/staging/result.ts';

/** What the page calls a rule, and what it does in a sentence. */
export const RULE_TEXT: Readonly<Record<RuleId, { readonly name: string; readonly says: string }>> = {
  'fixed-speed': { name: 'Fixed speed', says: 'Pumps run at full speed, direct on line, without drives.' },
  'one-trimmed': { name: 'One trimmed', says: 'All but one at full speed; the last is trimmed by a drive.' },
  'late-staging': {
    name: 'Late staging',
    says: 'One more pump only when those running are flat out: the usual habit.',
  },
  'flow-steps': { name: 'Own steps', says: "The operator's own table of flows: how the station runs today." },
  'best-count': {
    name: 'Best count',
    says: 'For each interval the count, or the set of pumps that differ, that draws least.',
  },
  steady: { name: 'Steady', says: 'As best count, but each start and each short run counts against it.' },
  batch: { name: 'Batch', says: 'Run at the best point, then rest.' },
  'as-logged': { name: 'As logged', says: 'What the log says was done.' },
};

/** A rule in the middle of a sentence. */
export function ruleName(rule: RuleId): string {
  return RULE_TEXT[rule].name.toLowerCase();
}
