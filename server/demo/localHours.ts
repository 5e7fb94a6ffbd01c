import { HOUR_MS, isoUtc, offsetSpans, startOfLocalDay } from '../time.ts';

/** One hour of the demo's year, with what the clock on the wall says. */
export interface LocalHour {
  readonly startMs: number;
  /** Hour of the day, 0 to 23, and day of the year, counted from 0. */
  readonly hour: number;
  readonly day: number;
  /** 0 is Monday. */
  readonly weekday: number;
}

const DEMO_YEAR = 2025;

/** Every hour of the demo's year in a zone: 8760, clock changes included. */
export function localHours(zone: string): LocalHour[] {
  const from = startOfLocalDay(zone, DEMO_YEAR, 1, 1);
  const to = startOfLocalDay(zone, DEMO_YEAR + 1, 1, 1);
  const newYear = Date.UTC(DEMO_YEAR, 0, 1);
  const hours: LocalHour[] = [];
  for (const span of offsetSpans(zone, from, to)) {
    for (let startMs = span.fromMs; startMs < span.toMs; startMs += HOUR_MS) {
      const clock = new Date(startMs + span.offsetMs);
      const day = Math.floor((clock.getTime() - newYear) / (24 * HOUR_MS));
      hours.push({ startMs, hour: clock.getUTCHours(), day, weekday: (clock.getUTCDay() + 6) % 7 });
    }
  }
  return hours;
}

/** A yearly swing, 1 on its highest day and −1 half a year away. */
export function season(day: number, highestDay: number): number {
  return Math.cos((2 * Math.PI * (day - highestDay)) / 365);
}

/**
 * Hours and their flows as a record: `time` in UTC and `flow` in the station's unit. NaN is an hour whose cell is
 * empty, undefined one whose row is missing: loggers leave out both ways.
 */
export function recordCsv(
  hours: readonly LocalHour[],
  flow: (i: number) => number | undefined,
  decimals: number,
): string {
  const lines = ['time,flow'];
  hours.forEach(({ startMs }, i) => {
    const value = flow(i);
    if (value === undefined) return;
    lines.push(`${isoUtc(startMs)},${Number.isNaN(value) ? '' : value.toFixed(decimals)}`);
  });
  return `${lines.join('\n')}\n`;
}
