import type { Tariff, Weekday } from '../../server/tariff/tariff.ts';

export const WEEK: readonly Weekday[] = ['mon', 'tue', 'wed', 'thu', 'fri', 'sat', 'sun'];

/** Prices of energy in one season, by day from Monday and by hour; null where no price holds. */
export interface SeasonWeek {
  /** null where the tariff has no seasons. */
  readonly season: string | null;
  readonly days: readonly (readonly (number | null)[])[];
}

/** The price in the middle of each hour of a week, in each season: of the prices that fit, the first holds. */
export function weekOfPrices({ seasons, energy }: Pick<Tariff, 'seasons' | 'energy'>): SeasonWeek[] {
  const names = seasons.length === 0 ? [null] : [...new Set(seasons.map((season) => season.name))];
  return names.map((season) => ({
    season,
    days: WEEK.map((day) =>
      Array.from({ length: 24 }, (_, hour) => {
        const minute = hour * 60 + 30;
        const found = energy.find(
          (rate) =>
            (rate.season === null || rate.season === season) &&
            (rate.days === null || rate.days.includes(day)) &&
            holdsAt(rate, minute),
        );
        return found?.rate ?? null;
      }),
    ),
  }));
}

function holdsAt({ fromMinute, toMinute }: { fromMinute: number; toMinute: number }, minute: number): boolean {
  if (fromMinute === toMinute) return true;
  return fromMinute < toMinute ? minute >= fromMinute && minute < toMinute : minute >= fromMinute || minute < toMinute;
}
