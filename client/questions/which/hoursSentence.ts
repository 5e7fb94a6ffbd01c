import type { ComparisonResult } from '../../../server/staging/result.ts';
import { type Format, list, pumps, sentence } from '../../format.ts';
import { ruleName } from '../../rules.ts';
import { setText } from '../../runners.ts';

/** Sets that run less than the first so many are put together. */
const NAMED_SETS = 3;

/**
 * How long each count, or set of pumps that differ, runs under the rule that picks freely:
 * `Best count runs 1 pump for 71 % and 2 pumps for 29 % of the hours`.
 */
export function hoursSentence(
  { rules }: Pick<ComparisonResult, 'rules'>,
  format: Format,
  { alike }: { readonly alike: boolean },
): string {
  const rule = rules.find((each) => each.rule === 'best-count') ?? rules[0];
  if (rule === undefined) return 'Hours of the record by flow';
  const all = Object.values(rule.hoursByCount).reduce((sum, each) => sum + each, 0);
  const share = (hours: number) => format.say(format.percent, (100 * hours) / all);
  const counts = () =>
    Object.entries(rule.hoursByCount).map(([count, hours]) => ({
      who: count === '0' ? 'none' : pumps(Number(count)),
      hours,
    }));
  const parts = (alike ? counts() : setsOf(rule.hoursBySet)).filter(({ hours }) => hours > 0);
  const name = sentence(ruleName(rule.rule));
  return `${name} runs ${list(parts.map(({ who, hours }) => `${who} for ${share(hours)}`))} of the hours`;
}

function setsOf(hoursBySet: Readonly<Record<string, number>>): { who: string; hours: number }[] {
  const sets = Object.entries(hoursBySet)
    .map(([key, hours]) => ({ who: setText(key), hours }))
    .sort((a, b) => b.hours - a.hours);
  if (sets.length <= NAMED_SETS + 1) return sets;
  const others = sets.slice(NAMED_SETS).reduce((sum, { hours }) => sum + hours, 0);
  return [...sets.slice(0, NAMED_SETS), { who: 'other sets', hours: others }];
}
