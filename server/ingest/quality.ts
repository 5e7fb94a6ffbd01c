import type { Note } from '../errors.ts';
import { HOUR_MS, isoUtc, SECOND_MS } from '../time.ts';
import type { Log, QualityReport } from './log.ts';

/** Gaps beyond this number are counted in `gapHours` but not listed one by one. */
const LISTED_GAPS = 1000;

/** What a person should read before trusting a figure: span, hours with values, gaps, range of flow and the notes. */
export function qualityReport(log: Log, notes: readonly Note[]): QualityReport {
  const { startMs, seconds, flow } = log;
  const values = flow ?? log.level;
  const gaps: { fromMs: number; toMs: number }[] = [];
  const addGap = (fromMs: number, toMs: number): void => {
    const last = gaps.at(-1);
    if (last !== undefined && last.toMs === fromMs) last.toMs = toMs;
    else gaps.push({ fromMs, toMs });
  };
  let valued = 0;
  let volume = 0;
  let least = Number.POSITIVE_INFINITY;
  let most = Number.NEGATIVE_INFINITY;
  let endMs = startMs[0] ?? 0;
  for (let row = 0; row < startMs.length; row++) {
    const start = startMs[row]!;
    if (start > endMs) addGap(endMs, start);
    endMs = start + seconds[row]! * SECOND_MS;
    const value = values?.[row] ?? Number.NaN;
    if (Number.isNaN(value)) {
      addGap(start, endMs);
      continue;
    }
    valued += seconds[row]!;
    volume += value * seconds[row]!;
    if (value < least) least = value;
    if (value > most) most = value;
  }
  const fromMs = startMs[0] ?? 0;
  const hours = valued / 3600;
  const hasFlow = flow !== null && valued > 0;
  const more = gaps.length - LISTED_GAPS;
  return {
    from: isoUtc(fromMs),
    to: isoUtc(endMs),
    intervals: startMs.length,
    stepSeconds: mostFrequentStep(startMs, seconds),
    hours,
    gapHours: (endMs - fromMs) / HOUR_MS - hours,
    gaps: gaps.slice(0, LISTED_GAPS).map((gap) => ({
      from: isoUtc(gap.fromMs),
      to: isoUtc(gap.toMs),
      hours: (gap.toMs - gap.fromMs) / HOUR_MS,
    })),
    minFlowM3s: hasFlow ? least : null,
    maxFlowM3s: hasFlow ? most : null,
    meanFlowM3s: hasFlow ? volume / valued : null,
    volumeM3: hasFlow ? volume : null,
    notes: more > 0 ? [...notes, { code: 'many-gaps', text: `${more} more gaps are counted but not listed` }] : notes,
  };
}

function mostFrequentStep(startMs: Float64Array, seconds: Float64Array): number {
  const counts = new Map<number, number>();
  let best = seconds[0] ?? 0;
  let bestCount = 0;
  for (let row = 0; row < startMs.length; ) {
    const step = row + 1 < startMs.length ? (startMs[row + 1]! - startMs[row]!) / SECOND_MS : seconds[row]!;
    let end = row + 1; // equal steps mostly come in long runs: count a run at once
    while (end + 1 < startMs.length && (startMs[end + 1]! - startMs[end]!) / SECOND_MS === step) end++;
    const count = (counts.get(step) ?? 0) + end - row;
    counts.set(step, count);
    if (count > bestCount) {
      best = step;
      bestCount = count;
    }
    row = end;
  }
  return best;
}
