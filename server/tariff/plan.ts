import { InputError } from '../errors.ts';
import { DAY_MS, HOUR_MS, MINUTE_MS, offsetSpans, SECOND_MS, startOfLocalDay } from '../time.ts';
import type { Period, Season, Tariff, Weekday } from './tariff.ts';

/**
 * How a record's intervals fall into a tariff: worked out once, then used for the bill of every rule.
 *
 * A segment is the part of an interval within a cell; a cell is a stretch of time of one rate, one month and one demand
 * window. Segments are in the order of time, so those of cell c are `cellStart[c]` to `cellStart[c + 1] − 1`.
 */
export interface BillPlan {
  readonly tariff: Tariff;
  /** Number of intervals planned. */
  readonly intervals: number;
  /** By segment: its interval, and its length [s]. */
  readonly segmentInterval: Uint32Array;
  readonly segmentSeconds: Float64Array;
  /** By cell: its first segment (one more entry at the end), its energy rate, its month and its demand window. */
  readonly cellStart: Uint32Array;
  readonly cellRate: Uint16Array;
  readonly cellMonth: Uint16Array;
  readonly cellWindow: Uint32Array;
  /** Local calendar months that an interval touches, in order. */
  readonly months: readonly PlannedMonth[];
  readonly windows: DemandWindows;
}

/** A month that the record touches. */
export interface PlannedMonth {
  /** `2025-03` */
  readonly month: string;
  /** Time within intervals, and the length of the whole month (743 h and 721 h where clocks change) [s]. */
  readonly coveredSeconds: number;
  readonly seconds: number;
}

/** Demand windows with an interval in them; none where the tariff has no demand charge. */
export interface DemandWindows {
  readonly count: number;
  readonly month: Uint16Array;
  /** Time within intervals [s]. */
  readonly coveredSeconds: Float64Array;
  /** By demand charge, 1 for a window that counts: it starts in the charge's periods and is half covered or more. */
  readonly counts: readonly Uint8Array[];
}

/** A kind of local day: the same weekday (as holidays make it) and the same seasons give the same day. */
interface DayTable {
  /** Edges of its cells, 0 to 24 h [ms of the local day]. */
  readonly cuts: readonly number[];
  /** By cell: energy rate (−1 where there is none) and demand window of the day. */
  readonly rate: readonly number[];
  readonly window: readonly number[];
  /** By demand charge and window of the day: whether the window starts in the charge's periods. */
  readonly charged: readonly (readonly boolean[])[];
}

const WEEKDAYS: readonly Weekday[] = ['sun', 'mon', 'tue', 'wed', 'thu', 'fri', 'sat'];
const MINUTES_PER_DAY = 24 * 60;
/** Starts are whole milliseconds and lengths are seconds: what spills over an edge by less is rounding [ms]. */
const SPILL_MS = 0.01;
/** Rounding of sums of seconds, relative; a window half covered counts. */
const HALF = 0.5 - 1e-9;
const RATE_WANTED = 'a rate for every hour; a last one without season, days or times covers the rest';

/**
 * Plan of a record under a tariff.
 *
 * Everything is local civil time of the tariff's zone. Days, season and holiday are those of the moment itself, also in
 * a period that wraps midnight. The zone is asked once a week and twice a clock change, not once a row.
 *
 * @param startMs   starts of the intervals, ascending [UTC ms]
 * @param seconds   their lengths; intervals do not overlap [s]
 * @param fileName  what the tariff is called in a fault, by default its name
 * @throws          InputError uncovered_hours where an interval falls into hours without an energy rate
 */
export function planBill(
  tariff: Tariff,
  startMs: Float64Array,
  seconds: Float64Array,
  fileName: string = tariff.name,
): BillPlan {
  const count = startMs.length;
  const windowMs = tariff.demandWindow * SECOND_MS;
  const dayTable = dayTables(tariff);
  const segments = new Segments(count);
  const cellStart: number[] = [];
  const cellRate: number[] = [];
  const cellMonth: number[] = [];
  const cellWindow: number[] = [];
  const windowMonth: number[] = [];
  const windowSeconds: number[] = [];
  const windowCharged: boolean[][] = tariff.demand.map(() => []);
  const months: { month: string; coveredSeconds: number; seconds: number }[] = [];
  const uncovered: { firstMs: number | null; seconds: number } = { firstMs: null, seconds: 0 };

  let i = 0;
  // What is left of interval i: an interval that straddles an edge is taken up again in the next cell.
  let fromMs = count > 0 ? startMs[0]! : 0;
  let left = count > 0 ? seconds[0]! : 0;
  const recordEnd = count > 0 ? startMs[count - 1]! + seconds[count - 1]! * SECOND_MS : 0;
  const spans = count > 0 ? offsetSpans(tariff.timeZone, fromMs, Math.ceil(recordEnd) + 1) : [];

  for (const span of spans) {
    while (i < count && fromMs < span.toMs) {
      // A piece is a local day, or the part of one on this side of a clock change.
      const day = Math.floor((fromMs + span.offsetMs) / DAY_MS);
      const midnight = day * DAY_MS - span.offsetMs;
      const pieceFrom = Math.max(midnight, span.fromMs);
      const pieceTo = Math.min(midnight + DAY_MS, span.toMs);
      const month = monthOf(day);
      if (months.at(-1)?.month !== month)
        months.push({ month, coveredSeconds: 0, seconds: monthSeconds(tariff.timeZone, month) });
      const table = dayTable(day);
      let openWindow = -1; // window of the day that is open; a clock change opens a new one

      for (let c = 0; c + 1 < table.cuts.length && i < count; c++) {
        const from = Math.max(midnight + table.cuts[c]!, pieceFrom);
        const to = Math.min(midnight + table.cuts[c + 1]!, pieceTo);
        if (from >= to || fromMs >= to) continue;
        if (from >= pieceTo) break;

        cellStart.push(segments.length);
        let covered = 0;
        while (i < count && fromMs < to) {
          const endMs = fromMs + left * SECOND_MS;
          if (endMs <= to + SPILL_MS) {
            segments.push(i, left);
            covered += left;
            const next = ++i;
            if (next < count) {
              if (startMs[next]! < endMs - SPILL_MS) throw new Error(`interval ${next} begins before the last ends`);
              fromMs = startMs[next]!;
              left = seconds[next]!;
            }
          } else {
            const part = (to - fromMs) / SECOND_MS;
            segments.push(i, part);
            covered += part;
            fromMs = to;
            left -= part;
          }
        }

        const rate = table.rate[c]!;
        if (rate < 0) {
          const first = segments.interval[cellStart.at(-1)!]!;
          uncovered.firstMs ??= Math.max(startMs[first]!, from) + span.offsetMs;
          uncovered.seconds += covered;
        }
        months.at(-1)!.coveredSeconds += covered;
        cellRate.push(Math.max(rate, 0));
        cellMonth.push(months.length - 1);
        const window = table.window[c]!;
        if (window !== openWindow && tariff.demand.length > 0) {
          openWindow = window;
          windowMonth.push(months.length - 1);
          windowSeconds.push(0);
          windowCharged.forEach((charged, d) => {
            charged.push(table.charged[d]![window]!);
          });
        }
        cellWindow.push(Math.max(windowMonth.length - 1, 0));
        if (windowSeconds.length > 0) windowSeconds[windowSeconds.length - 1]! += covered;
      }
    }
  }
  if (uncovered.firstMs !== null) refuseUncovered(uncovered.firstMs, uncovered.seconds, fileName);
  cellStart.push(segments.length);

  const counts = windowCharged.map((charged) =>
    Uint8Array.from(charged, (inside, w) => (inside && windowSeconds[w]! >= HALF * (windowMs / SECOND_MS) ? 1 : 0)),
  );
  return {
    tariff,
    intervals: count,
    segmentInterval: segments.interval.subarray(0, segments.length),
    segmentSeconds: segments.seconds.subarray(0, segments.length),
    cellStart: Uint32Array.from(cellStart),
    cellRate: Uint16Array.from(cellRate),
    cellMonth: Uint16Array.from(cellMonth),
    cellWindow: Uint32Array.from(cellWindow),
    months,
    windows: {
      count: windowMonth.length,
      month: Uint16Array.from(windowMonth),
      coveredSeconds: Float64Array.from(windowSeconds),
      counts,
    },
  };
}

/** Two columns that grow. */
class Segments {
  interval: Uint32Array;
  seconds: Float64Array;
  length = 0;

  constructor(expected: number) {
    this.interval = new Uint32Array(expected + 1024);
    this.seconds = new Float64Array(expected + 1024);
  }

  push(interval: number, seconds: number): void {
    if (this.length === this.interval.length) {
      const moreIntervals = new Uint32Array(2 * this.length);
      moreIntervals.set(this.interval);
      this.interval = moreIntervals;
      const moreSeconds = new Float64Array(2 * this.length);
      moreSeconds.set(this.seconds);
      this.seconds = moreSeconds;
    }
    this.interval[this.length] = interval;
    this.seconds[this.length++] = seconds;
  }
}

/** The table of a local day, counted from 1 January 1970; days of one kind share a table. */
function dayTables(tariff: Tariff): (day: number) => DayTable {
  const tables = new Map<string, DayTable>();
  return (day) => {
    const date = new Date(day * DAY_MS);
    const isHoliday = tariff.holidays.dates.has(date.toISOString().slice(0, 10));
    const weekday = isHoliday ? tariff.holidays.as : WEEKDAYS[date.getUTCDay()]!;
    const seasons = seasonsOn(tariff, (date.getUTCMonth() + 1) * 100 + date.getUTCDate());
    const key = `${weekday} ${[...seasons].join('\n')}`;
    let table = tables.get(key);
    if (table === undefined) {
      table = dayTableOf(tariff, weekday, seasons);
      tables.set(key, table);
    }
    return table;
  };
}

/** Names of the seasons that a day of the year, month × 100 + day, is in. */
function seasonsOn(tariff: Tariff, monthDay: number): ReadonlySet<string> {
  const within = ({ from, to }: Season) =>
    from <= to ? monthDay >= from && monthDay <= to : monthDay >= from || monthDay <= to;
  return new Set(tariff.seasons.filter(within).map((season) => season.name));
}

/** Table of a day of the week in so many seasons. */
function dayTableOf(tariff: Tariff, weekday: Weekday, seasons: ReadonlySet<string>): DayTable {
  const today = (period: Period) =>
    (period.season === null || seasons.has(period.season)) && (period.days === null || period.days.includes(weekday));
  const ratesToday = tariff.energy.map((rate, index) => ({ rate, index })).filter(({ rate }) => today(rate));

  const edges = new Set([0, MINUTES_PER_DAY]);
  for (const { rate } of ratesToday) edges.add(rate.fromMinute).add(rate.toMinute);
  const windowMinutes = (tariff.demandWindow * SECOND_MS) / MINUTE_MS;
  if (tariff.demand.length > 0) for (let m = 0; m < MINUTES_PER_DAY; m += windowMinutes) edges.add(m);
  const cutMinutes = [...edges].sort((a, b) => a - b);
  const cellMinutes = cutMinutes.slice(0, -1);

  return {
    cuts: cutMinutes.map((minute) => minute * MINUTE_MS),
    rate: cellMinutes.map((minute) => ratesToday.find(({ rate }) => holdsAt(rate, minute))?.index ?? -1),
    window: cellMinutes.map((minute) => Math.floor(minute / windowMinutes)),
    charged: tariff.demand.map((charge) =>
      Array.from({ length: MINUTES_PER_DAY / windowMinutes }, (_, w) =>
        charge.periods.some((period) => today(period) && holdsAt(period, w * windowMinutes)),
      ),
    ),
  };
}

/** Whether a time of day is inside a period; both ends alike mean all day, and the end itself is outside. */
function holdsAt({ fromMinute, toMinute }: Period, minute: number): boolean {
  if (fromMinute === toMinute) return true;
  return fromMinute < toMinute ? minute >= fromMinute && minute < toMinute : minute >= fromMinute || minute < toMinute;
}

function monthOf(day: number): string {
  return new Date(day * DAY_MS).toISOString().slice(0, 7);
}

/** Length of a local calendar month [s]. */
function monthSeconds(zone: string, month: string): number {
  const year = Number(month.slice(0, 4));
  const number = Number(month.slice(5));
  return (startOfLocalDay(zone, year, number + 1, 1) - startOfLocalDay(zone, year, number, 1)) / SECOND_MS;
}

function refuseUncovered(firstLocalMs: number, seconds: number, file: string): never {
  const first = new Date(firstLocalMs);
  const weekday = WEEKDAYS[first.getUTCDay()]!;
  const hours = Math.round((seconds * SECOND_MS * 100) / HOUR_MS) / 100;
  throw new InputError([
    {
      code: 'uncovered_hours',
      file,
      at: 'energy',
      found: `no rate from ${first.toISOString().slice(0, 16).replace('T', ' ')} (${weekday}); ${hours} h of the record in all`,
      wanted: RATE_WANTED,
    },
  ]);
}
