import type { ComparisonResult } from '../../../server/staging/result.ts';
import { type Format, list, pumps } from '../../format.ts';
import { ruleName } from '../../rules.ts';

/** How long each count runs under the rule that picks the count freely: `Best count runs 1 pump for 71 % of the hours`. */
export function hoursSentence({ rules }: Pick<ComparisonResult, 'rules'>, format: Format): string {
  const rule = rules.find((each) => each.rule === 'best-count') ?? rules[0];
  if (rule === undefined) return 'Hours of the record by flow';
  const hours = Object.entries(rule.hoursByCount).map(([count, each]) => ({ count: Number(count), hours: each }));
  const all = hours.reduce((sum, each) => sum + each.hours, 0);
  const parts = hours
    .filter((each) => each.hours > 0)
    .map(({ count, hours: each }) => {
      const share = format.say(format.percent, (100 * each) / all);
      return count === 0 ? `none for ${share}` : `${pumps(count)} for ${share}`;
    });
  const name = ruleName(rule.rule);
  return `${name.charAt(0).toUpperCase()}${name.slice(1)} runs ${list(parts)} of the hours`;
}
