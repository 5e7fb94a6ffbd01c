import { DAY_MS, MINUTE_MS, type OffsetSpan, offsetSpans } from '../time.ts';

/** A change of the clock, in wall-clock terms: the stretch [fromWall, toWall) is skipped by it, or written twice. */
interface ClockChange {
  readonly kind: 'skipped' | 'repeated';
  readonly fromWall: number;
  readonly toWall: number;
  readonly before: number;
  readonly after: number;
}

/** Wall-clock times as instants. */
export interface ResolvedTimes {
  /** Instant of each row [ms]; NaN where its wall clock never showed that time. */
  readonly instants: Float64Array;
  /** Rows whose local time was skipped by the clock. */
  readonly skipped: readonly number[];
  /** Wall-clock start [ms] of each repeated stretch that the file writes only once. */
  readonly writtenOnce: readonly number[];
}

/** `+01:00`, `-0330` as an offset [ms]; null for anything else. */
export function fixedOffsetMs(zone: string): number | null {
  const match = /^([+-])(\d{2}):?(\d{2})$/.exec(zone);
  if (match === null) return null;
  const minutes = Number(match[2]) * 60 + Number(match[3]);
  if (minutes > 18 * 60) return null;
  return (match[1] === '-' ? -minutes : minutes) * MINUTE_MS;
}

/**
 * Instants of local wall-clock times, row by row in chronological file order. The zone is asked once for the whole file.
 * In a repeated hour the order of the file decides: where the clock fails to advance once, the second pass begins; where
 * it does so several times the two passes are written pairwise, and a time already seen is of the second.
 *
 * @param zone   IANA zone, or a fixed offset `+01:00`
 * @param times  wall clock read as UTC [ms] where `local` is 1, instant elsewhere
 */
export function resolveLocal(zone: string, times: Float64Array, local: Uint8Array): ResolvedTimes {
  const instants = Float64Array.from(times);
  const skipped: number[] = [];
  let least = Number.POSITIVE_INFINITY;
  let most = Number.NEGATIVE_INFINITY;
  for (let row = 0; row < times.length; row++) {
    if (local[row] === 0) continue;
    least = Math.min(least, times[row]!);
    most = Math.max(most, times[row]!);
  }
  if (least > most) return { instants, skipped, writtenOnce: [] };

  const spans = spansOf(zone, least, most);
  const changes = clockChanges(spans);
  const repeats = new Map<ClockChange, number[]>();
  let at = 0; // span of the previous row: the next one is nearly always in the same
  for (let row = 0; row < times.length; row++) {
    if (local[row] === 0) continue;
    const wall = times[row]!;
    const change = changes.length === 0 ? undefined : changes.find((c) => wall >= c.fromWall && wall < c.toWall);
    if (change === undefined) {
      if (!holds(spans[at]!, wall)) at = spans.findIndex((span) => holds(span, wall));
      instants[row] = wall - spans[at]!.offsetMs;
    } else if (change.kind === 'skipped') {
      skipped.push(row);
      instants[row] = Number.NaN;
    } else {
      const rows = repeats.get(change);
      if (rows === undefined) repeats.set(change, [row]);
      else rows.push(row);
    }
  }

  const writtenOnce: number[] = [];
  for (const [change, rows] of repeats) {
    const second = secondPass(rows, times);
    for (const row of rows) instants[row] = times[row]! - (second.has(row) ? change.after : change.before);
    if (second.size === 0 && most >= change.toWall) writtenOnce.push(change.fromWall);
  }
  return { instants, skipped, writtenOnce };
}

function spansOf(zone: string, leastWall: number, mostWall: number): OffsetSpan[] {
  const fromMs = leastWall - 2 * DAY_MS;
  const toMs = mostWall + 2 * DAY_MS;
  const fixed = fixedOffsetMs(zone);
  return fixed === null ? offsetSpans(zone, fromMs, toMs) : [{ fromMs, toMs, offsetMs: fixed }];
}

function holds(span: OffsetSpan, wall: number): boolean {
  return wall - span.offsetMs >= span.fromMs && wall - span.offsetMs < span.toMs;
}

function clockChanges(spans: readonly OffsetSpan[]): ClockChange[] {
  const changes: ClockChange[] = [];
  for (let i = 1; i < spans.length; i++) {
    const before = spans[i - 1]!.offsetMs;
    const after = spans[i]!.offsetMs;
    const instant = spans[i]!.fromMs;
    changes.push({
      kind: after > before ? 'skipped' : 'repeated',
      fromWall: instant + Math.min(before, after),
      toWall: instant + Math.max(before, after),
      before,
      after,
    });
  }
  return changes;
}

/** Which rows of a repeated stretch, in file order, belong to its second pass. */
function secondPass(rows: readonly number[], times: Float64Array): Set<number> {
  const second = new Set<number>();
  const back: number[] = [];
  for (let i = 1; i < rows.length; i++) if (times[rows[i]!]! <= times[rows[i - 1]!]!) back.push(i);
  if (back.length === 1) {
    for (const row of rows.slice(back[0])) second.add(row);
    return second;
  }
  const seen = new Set<number>(); // pairwise, or out of order: the second time a wall clock is written
  for (const row of rows) {
    const wall = times[row]!;
    if (seen.has(wall)) second.add(row);
    seen.add(wall);
  }
  return second;
}
