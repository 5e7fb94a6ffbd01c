import Holidays from 'date-holidays';
import { DAY_MS } from './time.ts';

/**
 * Local dates `2025-12-25` of the public holidays of a country or of a region of it, substitute days included, in
 * order; null where the country or the region is unknown. A holiday that begins within a day (an afternoon off) is not
 * a day of rest and is left out.
 *
 * @param country  ISO 3166-1 code, any case
 * @param region   code of a state or region as in ISO 3166-2, without the country
 * @see            the data of the package date-holidays (CC BY-SA 3.0, from Wikipedia and official lists)
 */
export function publicHolidayDates(country: string, region: string | null, years: readonly number[]): string[] | null {
  const code = country.toUpperCase();
  const place = region?.toUpperCase() ?? null;
  const known = new Holidays();
  if (known.getCountries()[code] === undefined) return null;
  if (place !== null && known.getStates(code)?.[place] === undefined) return null;

  const calendar = place === null ? new Holidays(code) : new Holidays(code, place);
  const dates = new Set<string>();
  for (const year of years) {
    for (const holiday of calendar.getHolidays(year)) {
      if (holiday.type !== 'public' || holiday.date.slice(11, 16) !== '00:00') continue;
      const first = Date.parse(`${holiday.date.slice(0, 10)}T00:00:00Z`);
      // Whole days only; a day on which clocks change has 23 hours and is whole.
      const days = Math.floor((holiday.end.getTime() - holiday.start.getTime()) / DAY_MS + 0.1);
      for (let day = 0; day < days; day++) dates.add(new Date(first + day * DAY_MS).toISOString().slice(0, 10));
    }
  }
  return [...dates].sort();
}
