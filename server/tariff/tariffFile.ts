import { z } from 'zod';
import { type Fault, type FaultCode, InputError } from '../errors.ts';
import { readAs, shown } from '../readFile.ts';
import { isTimeZone, MINUTE_MS, SECOND_MS } from '../time.ts';
import type { Period, Season, Tariff, Weekday } from './tariff.ts';

const TARIFF_FORMAT = 'nth-pump/tariff/1';

const WEEKDAYS = ['mon', 'tue', 'wed', 'thu', 'fri', 'sat', 'sun'] as const satisfies readonly Weekday[];

/** Demand is metered over one of these [min]; 30 where the file does not say. */
const WINDOW_MINUTES = [15, 30, 60] as const;
const DEFAULT_WINDOW_MINUTES = 30;

/** Years for which the holidays of a country are worked out: those of the loggers whose records are read today. */
const HOLIDAY_YEARS: readonly number[] = Array.from({ length: 41 }, (_, i) => 2000 + i);

/**
 * Local dates `2025-12-25` of the public holidays of a country (ISO 3166 code) or of a region of it, or null where
 * either is unknown. The list itself is not part of the calculation: who reads a tariff hands it in.
 */
export type HolidayDates = (country: string, region: string | null, years: readonly number[]) => string[] | null;

/** Refuses with a code of ours; a missing value is left to the type check before it. */
function text(pattern: RegExp | ((value: string) => boolean), code: FaultCode, wanted: string) {
  const test = pattern instanceof RegExp ? (value: string) => pattern.test(value) : pattern;
  const schema = z.string().refine(test, { error: wanted, params: { code } });
  return schema.meta({ ...(pattern instanceof RegExp && { pattern: pattern.source }), description: wanted });
}

const name = z.string().trim().min(1);
const timeOfDay = text(/^([01]\d|2[0-3]):[0-5]\d$/, 'not_a_time', 'a time from 00:00 to 23:59');
const endOfPeriod = text(/^(([01]\d|2[0-3]):[0-5]\d|24:00)$/, 'not_a_time', 'a time from 00:00 to 24:00');
// A year with a 29 February stands for the day of a season, which has no year.
const dayOfYear = text(
  (value) => /^\d\d-\d\d$/.test(value) && isDate(`2024-${value}`),
  'not_a_time',
  'a day of the year such as 11-01',
);
const localDate = text(isDate, 'not_a_time', 'a date that exists, such as 2025-12-25');
const calendarMonth = text(/^\d{4}-(0[1-9]|1[0-2])$/, 'not_a_time', 'a month such as 2024-12');
const weekday = z.enum(WEEKDAYS);

const periodFields = {
  season: z.string().optional(),
  days: z.array(weekday).min(1).optional(),
  from: timeOfDay.optional(),
  to: endOfPeriod.optional(),
};

/** Schema of the tariff file. What one field cannot tell (a season that no list names) is checked by `readTariff`. */
export const tariffFileSchema = z.strictObject({
  format: z.literal(TARIFF_FORMAT),
  name,
  currency: text(/^[A-Z]{3}$/, 'wrong_type', 'three capital letters such as EUR'),
  timeZone: text(isTimeZone, 'unknown_zone', 'a zone of the IANA database such as Europe/Dublin'),
  seasons: z.array(z.strictObject({ name, from: dayOfYear, to: dayOfYear })).optional(),
  holidays: z
    .strictObject({
      dates: z.array(localDate).optional(),
      country: z.string().min(1).optional(),
      region: z.string().min(1).optional(),
      as: weekday.optional(),
    })
    .optional(),
  energy: z.array(z.strictObject({ name, ...periodFields, rate: z.number() })).min(1),
  demand: z
    .array(
      z.strictObject({
        name,
        ...periodFields,
        periods: z.array(z.strictObject(periodFields)).min(1).optional(),
        rate: z.number().min(0),
        ratchet: z.strictObject({ fraction: z.number().min(0).max(1), months: z.int().min(1) }).optional(),
        history: z.array(z.strictObject({ month: calendarMonth, kw: z.number().min(0) })).optional(),
      }),
    )
    .optional(),
  demandWindowMinutes: z.literal(WINDOW_MINUTES).optional(),
  fixedPerMonth: z.number().min(0).optional(),
  taxPercent: z.number().min(0).max(100).optional(),
  carbonKgPerKwh: z.number().min(0).optional(),
});

export type TariffFile = z.infer<typeof tariffFileSchema>;
type PeriodFields = Pick<TariffFile['energy'][number], 'season' | 'days' | 'from' | 'to'>;

/**
 * A tariff file as a tariff: rates in its currency, times in minutes of the local clock.
 *
 * Left out, `days`, `season` and both times mean always; `from` alone lasts to midnight and `to` alone begins there.
 *
 * @param value         the file's JSON
 * @param fileName      the name a person knows it by, for the faults
 * @param holidayDates  holidays of a country; without it a file that asks for them is refused
 * @throws              InputError with every fault found
 */
export function readTariff(value: unknown, fileName: string, holidayDates?: HolidayDates): Tariff {
  refuseOtherFormat(value, fileName);
  const crossFaults = faultsAcrossFields(value, fileName);
  let file: TariffFile;
  try {
    file = readAs(tariffFileSchema, value, fileName);
  } catch (error) {
    if (error instanceof InputError) throw new InputError([...error.faults, ...crossFaults]);
    throw error;
  }
  const country = countryHolidays(file.holidays, fileName, holidayDates);
  const faults = [...crossFaults, ...country.faults];
  if (faults.length > 0) throw new InputError(faults);

  return {
    name: file.name,
    currency: file.currency,
    timeZone: file.timeZone,
    seasons: (file.seasons ?? []).map(season),
    holidays: {
      dates: new Set([...(file.holidays?.dates ?? []), ...country.dates]),
      as: file.holidays?.as ?? 'sun',
    },
    energy: file.energy.map((entry) => ({ name: entry.name, ...period(entry), rate: entry.rate })),
    demand: (file.demand ?? []).map((entry) => ({
      name: entry.name,
      periods: (entry.periods ?? [entry]).map(period),
      rate: entry.rate,
      ratchet: entry.ratchet ?? null,
      history: entry.history ?? [],
    })),
    demandWindow: ((file.demandWindowMinutes ?? DEFAULT_WINDOW_MINUTES) * MINUTE_MS) / SECOND_MS,
    fixedPerMonth: file.fixedPerMonth ?? 0,
    taxPercent: file.taxPercent ?? 0,
    carbonKgPerKwh: file.carbonKgPerKwh ?? 0,
  };
}

/** A file of another kind has one fault, not one for each of its fields. */
function refuseOtherFormat(value: unknown, file: string): void {
  const format = isRecord(value) ? value.format : undefined;
  if (format === undefined || format === TARIFF_FORMAT) return;
  throw new InputError([
    { code: 'unknown_format', file, at: 'format', found: shown(format), wanted: shown(TARIFF_FORMAT) },
  ]);
}

/**
 * What no single field can tell. It reads the raw value, so that these faults are told beside those of the fields, and
 * passes over what has not the shape it expects, which the schema tells.
 */
function faultsAcrossFields(value: unknown, file: string): Fault[] {
  const faults: Fault[] = [];
  if (!isRecord(value)) return faults;
  const seasons = new Set<unknown>();
  records(value.seasons).forEach((entry, i) => {
    if (seasons.has(entry.name)) {
      faults.push({
        code: 'duplicate_name',
        file,
        at: `seasons[${i}].name`,
        found: `a second ${shown(entry.name)}`,
        wanted: 'one season of a name; one that wraps past the new year may end before it begins',
      });
    }
    seasons.add(entry.name);
  });
  const checkSeason = (entry: Record<string, unknown>, at: string) => {
    if (typeof entry.season !== 'string' || seasons.has(entry.season)) return;
    faults.push({
      code: 'unknown_season',
      file,
      at: `${at}.season`,
      found: shown(entry.season),
      wanted: seasons.size === 0 ? 'a season of the list seasons, which is empty' : oneOf(seasons),
    });
  };
  records(value.energy).forEach((entry, i) => {
    checkSeason(entry, `energy[${i}]`);
  });
  records(value.demand).forEach((entry, i) => {
    checkSeason(entry, `demand[${i}]`);
    records(entry.periods).forEach((inner, j) => {
      checkSeason(inner, `demand[${i}].periods[${j}]`);
    });
    for (const field of entry.periods === undefined ? [] : ['season', 'days', 'from', 'to']) {
      if (entry[field] === undefined) continue;
      faults.push({
        code: 'unknown_field',
        file,
        at: `demand[${i}].${field}`,
        found: `'${field}' beside 'periods'`,
        wanted: 'one or the other',
      });
    }
  });
  return faults;
}

/** The holidays of the country that a file names, if it names one. */
function countryHolidays(
  holidays: TariffFile['holidays'],
  file: string,
  holidayDates: HolidayDates | undefined,
): { dates: readonly string[]; faults: readonly Fault[] } {
  const { country, region } = holidays ?? {};
  const fault = (field: string, found: string, wanted: string) => ({
    dates: [],
    faults: [{ code: 'unknown_holidays' as const, file, at: `holidays.${field}`, found, wanted }],
  });
  if (country === undefined) {
    if (region === undefined) return { dates: [], faults: [] };
    return fault('region', `${shown(region)} without a country`, "a 'country' beside it");
  }
  if (holidayDates === undefined) return fault('country', shown(country), "a list of 'dates'; no calendar is at hand");
  const dates = holidayDates(country, region ?? null, HOLIDAY_YEARS);
  if (dates !== null) return { dates, faults: [] };
  if (region !== undefined && holidayDates(country, null, HOLIDAY_YEARS) !== null) {
    return fault('region', shown(region), `the ISO 3166 code of a region of ${country}, or a list of 'dates'`);
  }
  return fault('country', shown(country), "the ISO 3166 code of a country such as IE, or a list of 'dates'");
}

function season(entry: { name: string; from: string; to: string }): Season {
  const to = monthDay(entry.to);
  // A season that ends on 28 February includes the 29th of a leap year.
  return { name: entry.name, from: monthDay(entry.from), to: to === 228 ? 229 : to };
}

function period(entry: PeriodFields): Period {
  return {
    season: entry.season ?? null,
    days: entry.days ?? null,
    fromMinute: minuteOfDay(entry.from ?? '00:00'),
    toMinute: minuteOfDay(entry.to ?? '24:00') % (24 * 60),
  };
}

function monthDay(text: string): number {
  return Number(text.slice(0, 2)) * 100 + Number(text.slice(3, 5));
}

function minuteOfDay(text: string): number {
  return Number(text.slice(0, 2)) * 60 + Number(text.slice(3, 5));
}

function isDate(text: string): boolean {
  if (!/^\d{4}-\d\d-\d\d$/.test(text)) return false;
  const date = new Date(`${text}T00:00:00Z`);
  // 30 February rolls over into March in some engines and is NaN in others.
  return !Number.isNaN(date.getTime()) && date.toISOString().startsWith(text);
}

function isRecord(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
}

/** The objects of a list, each in its place; anything else stands as an empty object. */
function records(value: unknown): Record<string, unknown>[] {
  return Array.isArray(value) ? value.map((entry) => (isRecord(entry) ? entry : {})) : [];
}

function oneOf(names: Iterable<unknown>): string {
  return `one of ${[...names].map(shown).join(', ')}`;
}
