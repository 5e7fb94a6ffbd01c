import { HOUR_MS, MINUTE_MS, SECOND_MS } from '../time.ts';

/**
 * Times as files write them, read by hand: the host's own date parser guesses, rolls 30 February over into March, and
 * takes the machine's zone.
 */

export type DateOrder = 'dmy' | 'mdy';

/** A time read: an instant, or a wall clock read as if it were UTC (then `local`). */
export interface Timestamp {
  readonly ms: number;
  readonly local: boolean;
  /** How it was written, for the notes. */
  readonly form: 'calendar' | 'epoch' | 'serial';
}

/** `no-such-day`: well written, but the calendar has no such day or the clock no such time. */
export type TimeFault = 'not-a-time' | 'no-such-day' | 'needs-order';

/** Milliseconds from 1970 to a calendar day in UTC, or NaN if there is no such day (30 February is refused). */
function dayMs(year: number, month: number, day: number): number {
  if (month < 1 || month > 12 || day < 1 || day > 31) return Number.NaN;
  const ms = Date.UTC(year, month - 1, day);
  return new Date(ms).getUTCMonth() === month - 1 ? ms : Number.NaN;
}

/**
 * Reader of the ISO forms `YYYY-MM-DD`, `T` or a blank, `HH:MM[:SS]`, and `Z` or `±HH:MM`, straight from the characters.
 * It remembers the last day, since hundreds of rows share it. Everything else is left to {@link parseTime}.
 */
export class IsoReader {
  /** Instant, or the wall clock as UTC, of the last time read [ms]. */
  ms = 0;
  /** 1 if the last time read had no offset. */
  local = 0;
  #day = -1;
  #dayMs = 0;

  /** Reads the characters [from, to) and says whether they are in one of its forms. */
  read(text: string, from: number, to: number): boolean {
    const length = to - from;
    if (length < 16 || length > 25) return false;
    const middle = text.charCodeAt(from + 10);
    if (middle !== 84 && middle !== 32) return false;
    if (text.charCodeAt(from + 4) !== 45 || text.charCodeAt(from + 7) !== 45) return false;
    if (text.charCodeAt(from + 13) !== 58) return false;
    const day = digits(text, from, 4) * 10_000 + digits(text, from + 5, 2) * 100 + digits(text, from + 8, 2);
    const hour = digits(text, from + 11, 2);
    const minute = digits(text, from + 14, 2);
    if (!(hour < 24 && minute < 60)) return false;
    let end = from + 16;
    let second = 0;
    if (end + 3 <= to && text.charCodeAt(end) === 58) {
      second = digits(text, end + 1, 2);
      if (!(second < 60)) return false;
      end += 3;
    }
    let offset = 0;
    if (end === to) this.local = 1;
    else if (end + 1 === to && text.charCodeAt(end) === 90) this.local = 0;
    else if (end + 6 === to && text.charCodeAt(end + 3) === 58) {
      const sign = text.charCodeAt(end);
      const hours = digits(text, end + 1, 2);
      const minutes = digits(text, end + 4, 2);
      if ((sign !== 43 && sign !== 45) || !(hours <= 18 && minutes < 60)) return false;
      offset = (hours * HOUR_MS + minutes * MINUTE_MS) * (sign === 43 ? 1 : -1);
      this.local = 0;
    } else return false;
    if (day !== this.#day) {
      const start = dayMs(Math.floor(day / 10_000), Math.floor(day / 100) % 100, day % 100);
      if (Number.isNaN(start)) return false;
      this.#day = day;
      this.#dayMs = start;
    }
    this.ms = this.#dayMs + hour * HOUR_MS + minute * MINUTE_MS + second * SECOND_MS - offset;
    return true;
  }
}

/** The number written by `count` digits; NaN if one of them is none. */
function digits(text: string, from: number, count: number): number {
  let value = 0;
  for (let i = from; i < from + count; i++) {
    const digit = text.charCodeAt(i) - 48;
    if (!(digit >= 0 && digit <= 9)) return Number.NaN;
    value = value * 10 + digit;
  }
  return value;
}

const MONTHS = ['jan', 'feb', 'mar', 'apr', 'may', 'jun', 'jul', 'aug', 'sep', 'oct', 'nov', 'dec'];

const YEAR_FIRST = /^(\d{4})([-/.])(\d{1,2})\2(\d{1,2})(?=$|[T ,_])/i;
const COMPACT = /^(\d{4})(\d{2})(\d{2})(?:[T _]?(\d{2})(\d{2})(\d{2})?)?(?=$|Z|[+-])/i;
const YEAR_LAST = /^(\d{1,2})([-/.])(\d{1,2})\2(\d{4}|\d{2})(?=$|[T ,_:])/i;
const DAY_MONTH_NAME = /^(\d{1,2})[-/. ]?([a-z]{3,9})\.?[-/., ]{0,2}(\d{4}|\d{2})(?=$|[T ,_:])/i;
const MONTH_NAME_DAY = /^([a-z]{3,9})\.? (\d{1,2}),? (\d{4})(?=$|[T ,_:])/i;
const TIME_OF_DAY = /^[T ,_:]*(\d{1,2})[:.](\d{2})(?:[:.](\d{2})(?:[.,](\d{1,9}))?)?\s*([ap])?\.?(m)?\.?/i;
const ZONE = /^\s*(?:Z|(?:UTC|GMT)?\s*([+-])(\d{1,2})(?::?(\d{2}))?|UTC|GMT)$/i;

/** Whether a cell is a time of day alone, as in files with date and time apart. */
export function isTimeOfDay(cell: string): boolean {
  const match = TIME_OF_DAY.exec(cell);
  return match !== null && match[0] === cell;
}

/** The first two numbers of a date such as 27/03/2022, whose order the column must tell; null for other forms. */
export function orderEvidence(cell: string): { first: number; second: number; dotted: boolean } | null {
  const match = YEAR_LAST.exec(plainBlanks(cell));
  return match === null ? null : { first: Number(match[1]), second: Number(match[3]), dotted: match[2] === '.' };
}

function plainBlanks(cell: string): string {
  return cell
    .replace(/[\u00A0\u2009\u202F]/g, ' ')
    .replace(/\u2212/g, '-')
    .trim();
}

/**
 * One time: ISO 8601 and its relatives (2025/3/9 4:15, 20250309T041500Z), day or month first with two or four digits of
 * year, month by its English name, AM and PM (12:00 AM is midnight), 24:00, epoch seconds or milliseconds, and
 * day numbers of spreadsheets (1900 epoch, rounded to the second).
 *
 * @param order  what the column decided for dates such as 3/4/2025; null where nothing did
 */
export function parseTime(cell: string, order: DateOrder | null): Timestamp | TimeFault {
  const text = plainBlanks(cell);
  if (/^\d+(?:\.\d+)?$/.test(text)) {
    const number = bareNumber(text);
    if (number !== null) return number;
  }
  const date = dateAtStart(text, order);
  if (typeof date === 'string') return date;
  const clock = clockAndZone(date.rest);
  if (typeof clock === 'string') return clock;
  if (Number.isNaN(date.ms)) return 'no-such-day';
  return { ms: date.ms + clock.ms - (clock.offset ?? 0), local: clock.offset === null, form: 'calendar' };
}

/** The day a text begins with [ms, NaN if the calendar has none such], and what follows it. */
function dateAtStart(text: string, order: DateOrder | null): { ms: number; rest: string } | TimeFault {
  const yearFirst = YEAR_FIRST.exec(text);
  if (yearFirst !== null) {
    const [all, year, , month, day] = yearFirst;
    return { ms: dayMs(Number(year), Number(month), Number(day)), rest: text.slice(all.length) };
  }
  const compact = COMPACT.exec(text);
  if (compact !== null) {
    const [all, year, month, day, hour, minute, second = '00'] = compact;
    const clock = hour === undefined ? '' : `T${hour}:${minute}:${second}`;
    return { ms: dayMs(Number(year), Number(month), Number(day)), rest: clock + text.slice(all.length) };
  }
  const yearLast = YEAR_LAST.exec(text);
  if (yearLast !== null) {
    if (order === null) return 'needs-order';
    const [all, first, , second, year] = yearLast;
    const [day, month] = order === 'dmy' ? [first, second] : [second, first];
    return { ms: dayMs(fullYear(year!), Number(month), Number(day)), rest: text.slice(all.length) };
  }
  const dayAndName = DAY_MONTH_NAME.exec(text);
  if (dayAndName !== null) {
    const [all, day, month, year] = dayAndName;
    return { ms: dayMs(fullYear(year!), monthNumber(month!), Number(day)), rest: text.slice(all.length) };
  }
  const nameAndDay = MONTH_NAME_DAY.exec(text);
  if (nameAndDay === null) return 'not-a-time';
  const [all, month, day, year] = nameAndDay;
  return { ms: dayMs(Number(year), monthNumber(month!), Number(day)), rest: text.slice(all.length) };
}

/** Epoch by magnitude: 10 digits are seconds (2001 to 2286), 13 milliseconds; 5 digits are days of a spreadsheet. */
function bareNumber(text: string): Timestamp | null {
  const whole = text.split('.')[0]!.length;
  const value = Number(text);
  if (whole === 13) return { ms: Math.round(value), local: false, form: 'epoch' };
  if (whole === 10) return { ms: Math.round(value * SECOND_MS), local: false, form: 'epoch' };
  if (whole !== 5 || value < 20_000) return null;
  const seconds = Math.round(value * 86_400); // float dust of the day fraction goes with the rounding
  return { ms: Date.UTC(1899, 11, 30) + seconds * SECOND_MS, local: true, form: 'serial' };
}

function fullYear(text: string): number {
  const year = Number(text);
  if (text.length > 2) return year;
  return year < 70 ? 2000 + year : 1900 + year;
}

function monthNumber(name: string): number {
  return MONTHS.indexOf(name.slice(0, 3).toLowerCase()) + 1;
}

/** Time of day [ms from midnight] and offset [ms], null without one, of what follows the date. */
function clockAndZone(rest: string): { ms: number; offset: number | null } | TimeFault {
  if (rest.trim() === '') return { ms: 0, offset: null };
  const match = TIME_OF_DAY.exec(rest);
  if (match === null) return 'not-a-time';
  let hour = Number(match[1]);
  const minute = Number(match[2]);
  const second = Number(match[3] ?? 0);
  const fraction = match[4] === undefined ? 0 : Number(`0.${match[4]}`);
  if (match[5] !== undefined) {
    if (match[6] === undefined) return 'not-a-time';
    if (hour < 1 || hour > 12) return 'no-such-day';
    hour = (hour % 12) + (match[5].toLowerCase() === 'p' ? 12 : 0);
  }
  if (hour > 24 || minute > 59 || second > 59) return 'no-such-day';
  if (hour === 24 && (minute > 0 || second > 0 || fraction > 0)) return 'no-such-day';
  const ms = hour * HOUR_MS + minute * MINUTE_MS + second * SECOND_MS + Math.round(fraction * SECOND_MS);
  const zone = rest.slice(match[0].length);
  if (zone.trim() === '') return { ms, offset: null };
  const offset = ZONE.exec(zone);
  if (offset === null) return 'not-a-time';
  if (offset[1] === undefined) return { ms, offset: 0 };
  const size = Number(offset[2]) * HOUR_MS + Number(offset[3] ?? 0) * MINUTE_MS;
  return size > 18 * HOUR_MS ? 'not-a-time' : { ms, offset: offset[1] === '-' ? -size : size };
}
