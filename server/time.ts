import { TZDate, tzOffset } from '@date-fns/tz';

/** Time: instants are UTC milliseconds; local civil time is worked out only where a tariff or a label needs it. */

export const SECOND_MS = 1000;
export const MINUTE_MS = 60_000;
export const HOUR_MS = 3_600_000;
export const DAY_MS = 86_400_000;

/** Whether `zone` is a time zone of the IANA database known to this machine. */
export function isTimeZone(zone: string): boolean {
  // Offsets such as "+02:00" are accepted by Intl but have no civil rules: a station names its place.
  if (!/^[A-Za-z]/.test(zone)) return false;
  try {
    new Intl.DateTimeFormat('en', { timeZone: zone });
    return true;
  } catch {
    return false;
  }
}

/** Offset of local time from UTC [ms] at an instant, so that local = UTC + offset. */
export function offsetMs(zone: string, instantMs: number): number {
  return Math.round(tzOffset(zone, new Date(instantMs)) * MINUTE_MS);
}

/** A stretch of time in which a zone keeps one offset: fromMs ≤ t < toMs. */
export interface OffsetSpan {
  readonly fromMs: number;
  readonly toMs: number;
  readonly offsetMs: number;
}

/**
 * The spans of constant offset that cover [fromMs, toMs). Changes are found by bisection to the millisecond, so a
 * record of a million rows asks the zone database a few dozen times, not once a row.
 */
export function offsetSpans(zone: string, fromMs: number, toMs: number): OffsetSpan[] {
  const spans: OffsetSpan[] = [];
  const stride = 7 * DAY_MS; // no zone has changed twice within a week in the era of loggers
  let start = fromMs;
  let offset = offsetMs(zone, fromMs);
  for (let probe = fromMs; probe < toMs; ) {
    const next = Math.min(probe + stride, toMs);
    const nextOffset = offsetMs(zone, next);
    if (nextOffset !== offset) {
      let low = probe;
      let high = next;
      while (high - low > 1) {
        const middle = Math.floor((low + high) / 2);
        if (offsetMs(zone, middle) === offset) low = middle;
        else high = middle;
      }
      spans.push({ fromMs: start, toMs: high, offsetMs: offset });
      start = high;
      offset = nextOffset;
    }
    probe = next;
  }
  if (start < toMs) spans.push({ fromMs: start, toMs, offsetMs: offset });
  return spans;
}

/**
 * The instants that carry a local wall-clock time: one as a rule, none in the hour that spring skips, two (earlier
 * first) in the hour that autumn repeats.
 *
 * @param wallMs  the wall clock read as if it were UTC [ms]
 */
export function instantsOfWallClock(zone: string, wallMs: number): number[] {
  const candidates = new Set([offsetMs(zone, wallMs - DAY_MS), offsetMs(zone, wallMs + DAY_MS)]);
  const found: number[] = [];
  for (const offset of candidates) {
    const instant = wallMs - offset;
    if (offsetMs(zone, instant) === offset) found.push(instant);
  }
  return found.sort((a, b) => a - b);
}

/** Instant at which a local calendar day begins; `month` counts from 1 and may overflow, as `day` may. */
export function startOfLocalDay(zone: string, year: number, month: number, day: number): number {
  return new TZDate(year, month - 1, day, zone).getTime();
}

/** `2025-03-30T00:00:00Z`: whole seconds, UTC. */
export function isoUtc(instantMs: number): string {
  return new Date(instantMs).toISOString().replace('.000Z', 'Z');
}
