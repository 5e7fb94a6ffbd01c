import { z } from 'zod';
import { type Fault, InputError, type Note } from '../errors.ts';
import { parseJson } from '../readFile.ts';
import { DAY_MS, HOUR_MS, instantsOfWallClock, isTimeZone, offsetSpans, SECOND_MS } from '../time.ts';
import { FLOW_UNITS, type FlowUnit } from '../units.ts';
import type { Log } from './log.ts';

/**
 * A profile: a year of flow drawn from 24 values per kind of day, for those who have no log.
 *
 * ```json
 * { "format": "nth-pump/profile/1", "year": 2025,
 *   "flow": { "weekday": [24 values], "weekend": [24 values], "sat": [24 values], "holiday": [24 values] },
 *   "holidays": ["2025-12-25"],
 *   "seasons": [ { "name": "wet", "from": "11-01", "to": "02-28", "factor": 1.4 },
 *                { "name": "summer", "from": "06-15", "to": "08-31", "flow": { "weekday": [...] } } ] }
 * ```
 *
 * Value k of 24 is the mean flow, in the station's flow unit, of the local clock hour from k:00. A day takes the values
 * of `holiday` if it is listed in `holidays`, else of its own name (`mon` … `sun`), else of `weekday` (Monday to Friday)
 * or `weekend`. The first season that holds the day may bring its own values for some of these, all else comes from the
 * top `flow`, and multiplies by its `factor` (1 if absent). Season ends are included, may wrap past the new year, and an
 * end of `02-28` includes 29 February, as in a tariff.
 */
const DAYS = ['sun', 'mon', 'tue', 'wed', 'thu', 'fri', 'sat'] as const;
type DayKind = (typeof DAYS)[number] | 'weekday' | 'weekend' | 'holiday';

const hours = z.array(z.number().nonnegative()).length(24);
const shapes = z.strictObject({
  weekday: hours.optional(),
  weekend: hours.optional(),
  mon: hours.optional(),
  tue: hours.optional(),
  wed: hours.optional(),
  thu: hours.optional(),
  fri: hours.optional(),
  sat: hours.optional(),
  sun: hours.optional(),
  holiday: hours.optional(),
});
type Shapes = z.infer<typeof shapes>;

const monthDay = z
  .string()
  .refine((text) => isMonthDay(text), { error: 'a day of the year as MM-DD', params: { code: 'out_of_range' } })
  .meta({ pattern: '^\\d{2}-\\d{2}$', description: 'a day of the year as MM-DD' });
const calendarDay = z.iso.date({ error: 'a day that exists, as YYYY-MM-DD' });

/** Schema of the profile; that every day has values is checked by `readProfile`. */
export const profileSchema = z.strictObject({
  format: z.literal('nth-pump/profile/1'),
  name: z.string().optional(),
  year: z.int().min(1970).max(2100),
  flow: shapes,
  holidays: z.array(calendarDay).optional(),
  seasons: z
    .array(
      z.strictObject({
        name: z.string(),
        from: monthDay,
        to: monthDay,
        factor: z.number().nonnegative().optional(),
        flow: shapes.optional(),
      }),
    )
    .optional(),
});
type Profile = z.infer<typeof profileSchema>;

/** A profile as text, and what its station says of units and zone. */
export interface ProfileInput {
  readonly fileName: string;
  readonly text: string;
  readonly flowUnit: FlowUnit;
  readonly timeZone: string;
}

/**
 * A profile laid over the local days of its year. Each real hour of a day takes the value of its local clock hour: the
 * day that springs forward has 23 of them, the one that falls back repeats one. An hour that a change of the clock
 * cuts (half-hour zones) becomes two shorter intervals.
 *
 * @throws InputError not_json, unknown_format, missing_field, unknown_field, wrong_type, out_of_range, negative_flow,
 *   unknown_zone
 */
export function readProfile(input: ProfileInput): { log: Log; notes: Note[] } {
  const profile = checked(input);
  const factor = FLOW_UNITS[input.flowUnit];
  const fromMs = firstInstantOfYear(input.timeZone, profile.year);
  const toMs = firstInstantOfYear(input.timeZone, profile.year + 1);
  const startMs: number[] = [];
  const seconds: number[] = [];
  const flow: number[] = [];
  let dayStart = Number.NaN;
  let ofDay: readonly number[] = [];
  for (const span of offsetSpans(input.timeZone, fromMs, toMs)) {
    for (let at = span.fromMs; at < span.toMs; ) {
      const wall = at + span.offsetMs;
      const day = Math.floor(wall / DAY_MS) * DAY_MS;
      if (day !== dayStart) {
        dayStart = day;
        ofDay = valuesOf(profile, day);
      }
      const hour = Math.floor((wall - day) / HOUR_MS);
      const end = Math.min(day + (hour + 1) * HOUR_MS - span.offsetMs, span.toMs);
      startMs.push(at);
      seconds.push((end - at) / SECOND_MS);
      flow.push(ofDay[hour]! * factor);
      at = end;
    }
  }
  const log: Log = {
    startMs: Float64Array.from(startMs),
    seconds: Float64Array.from(seconds),
    flow: Float64Array.from(flow),
    level: null,
    staticHead: null,
    power: null,
    pumpsOn: null,
    pumps: [],
  };
  const text = `flow is a profile laid over ${profile.year}, not a measurement`;
  return { log, notes: [{ code: 'profile', text }] };
}

function firstInstantOfYear(zone: string, year: number): number {
  const wall = Date.UTC(year, 0, 1);
  return instantsOfWallClock(zone, wall)[0] ?? wall;
}

/** The 24 values of the local day that begins at a wall clock [ms as UTC]. */
function valuesOf(profile: Profile, wallMs: number): readonly number[] {
  const date = new Date(wallMs);
  const name = DAYS[date.getUTCDay()]!;
  const isHoliday = profile.holidays?.includes(date.toISOString().slice(0, 10)) ?? false;
  const group = name === 'sat' || name === 'sun' ? 'weekend' : 'weekday';
  const kinds: DayKind[] = isHoliday ? ['holiday', name, group] : [name, group];
  const today = (date.getUTCMonth() + 1) * 100 + date.getUTCDate();
  const season = profile.seasons?.find((s) => isWithin(today, monthDayNumber(s.from), seasonEnd(s.to)));
  for (const source of season?.flow === undefined ? [profile.flow] : [season.flow, profile.flow]) {
    for (const kind of kinds) {
      const values = source[kind];
      if (values !== undefined) return values.map((value) => value * (season?.factor ?? 1));
    }
  }
  throw new Error(`no values for ${name}: the check of a profile lets no day without values pass`);
}

function isWithin(day: number, from: number, to: number): boolean {
  return from <= to ? day >= from && day <= to : day >= from || day <= to;
}

function monthDayNumber(text: string): number {
  return Number(text.slice(0, 2)) * 100 + Number(text.slice(3));
}

function seasonEnd(text: string): number {
  return text === '02-28' ? 229 : monthDayNumber(text);
}

function isMonthDay(text: string): boolean {
  if (!/^\d{2}-\d{2}$/.test(text)) return false;
  const date = new Date(Date.UTC(2024, Number(text.slice(0, 2)) - 1, Number(text.slice(3))));
  return date.toISOString().slice(5, 10) === text;
}

function checked({ fileName, text, timeZone }: ProfileInput): Profile {
  const faults: Fault[] = [];
  const add = (code: Fault['code'], at: string, found: string, wanted: string): void => {
    faults.push({ code, file: fileName, at, found, wanted });
  };
  const json = parseJson(text, fileName);
  const format = (json as { format?: unknown }).format;
  if (format !== 'nth-pump/profile/1') {
    add('unknown_format', 'format', shown(format), "'nth-pump/profile/1', or a CSV file");
    throw new InputError(faults);
  }
  if (!isTimeZone(timeZone))
    add('unknown_zone', 'time zone', `'${timeZone}'`, 'the place a profile is for: an IANA zone');
  const result = profileSchema.safeParse(json);
  if (!result.success) {
    for (const issue of result.error.issues) addIssue(issue, json, add);
    throw new InputError(faults);
  }
  const profile = result.data;
  const missing = missingDays(profile.flow);
  if (missing !== null) add('missing_field', `flow.${missing}`, 'nothing', '24 values: every day needs some');
  const holidayShape = profile.flow.holiday ?? profile.seasons?.find((s) => s.flow?.holiday !== undefined);
  if (holidayShape !== undefined && profile.holidays === undefined) {
    add('missing_field', 'holidays', 'nothing', 'the dates that take the values of flow.holiday');
  }
  if (faults.length > 0) throw new InputError(faults);
  return profile;
}

/** The first kind of day that the top shapes leave without values. */
function missingDays(flow: Shapes): 'weekday' | 'weekend' | null {
  const weekdays = flow.mon && flow.tue && flow.wed && flow.thu && flow.fri;
  if (flow.weekday === undefined && weekdays === undefined) return 'weekday';
  return flow.weekend === undefined && !(flow.sat && flow.sun) ? 'weekend' : null;
}

type Add = (code: Fault['code'], at: string, found: string, wanted: string) => void;

function addIssue(issue: z.core.$ZodIssue, json: unknown, add: Add): void {
  const at = pathText(issue.path);
  const value = issue.path.reduce<unknown>((node, key) => (node as Record<PropertyKey, unknown>)?.[key], json);
  if (issue.code === 'unrecognized_keys') {
    for (const key of issue.keys)
      add('unknown_field', at === '' ? key : `${at}.${key}`, 'a field of that name', 'none');
  } else if (value === undefined) {
    add('missing_field', at, 'nothing', wantedText(issue));
  } else if (issue.code === 'invalid_type') {
    add('wrong_type', at, shown(value), wantedText(issue));
  } else if (typeof value === 'number' && value < 0 && /flow/.test(at)) {
    add('negative_flow', at, shown(value), 'a flow of 0 or more');
  } else if (Array.isArray(value)) {
    add('out_of_range', at, `${value.length} values`, '24 values, one per hour');
  } else add('out_of_range', at, shown(value), wantedText(issue));
}

function wantedText(issue: z.core.$ZodIssue): string {
  switch (issue.code) {
    case 'invalid_type':
      return issue.expected === 'array' ? '24 values, one per hour' : `a value of type ${issue.expected}`;
    case 'too_small':
      return `${issue.minimum} or more`;
    case 'too_big':
      return `${issue.maximum} or less`;
    default:
      return issue.message;
  }
}

function pathText(path: readonly PropertyKey[]): string {
  return path.reduce<string>(
    (text, key) => (typeof key === 'number' ? `${text}[${key}]` : text === '' ? String(key) : `${text}.${String(key)}`),
    '',
  );
}

function shown(value: unknown): string {
  return value === undefined ? 'nothing' : JSON.stringify(value).slice(0, 60);
}
