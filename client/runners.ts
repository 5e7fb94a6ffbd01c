import type { PowerOverFlow } from '../server/staging/pictures.ts';
import { list, pumps } from './format.ts';

/** One of those who may run: a count of equal pumps, or a set of different ones. */
export interface Runner {
  /** From 1, in the order in which they come as flow rises. */
  readonly id: number;
  readonly name: string;
  /** For where there is little room. */
  readonly short: string;
  readonly powerKw: readonly (number | null)[];
}

/** Who is set side by side: counts where pumps are equal, else sets of them by name. */
export function runnersOf({ alike, counts, sets }: Pick<PowerOverFlow, 'alike' | 'counts' | 'sets'>): Runner[] {
  if (sets.length > 0) return sets.map((set, i) => ({ id: i + 1, ...namesOfSet(set.pumps), powerKw: set.powerKw }));
  return counts.map(({ count, pumps: names, powerKw }) => ({
    id: count,
    ...(alike ? { name: pumps(count), short: String(count) } : namesOfSet(names)),
    powerKw,
  }));
}

function namesOfSet(names: readonly string[]): Pick<Runner, 'name' | 'short'> {
  return { name: list(names), short: names.join(' + ') };
}

/** A key of `hoursBySet` in words: `Beck and Pair`, `none`. */
export function setText(key: string): string {
  return key === 'off' || key === '' ? 'none' : list(key.split('+'));
}
