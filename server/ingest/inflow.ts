import type { Note } from '../errors.ts';
import { SECOND_MS } from '../time.ts';
import type { Channel, Log } from './log.ts';

/** What inflow is worked out from. */
export interface InflowInput {
  /** With `level` and run states (`on` of the pumps, or `pumpsOn`). */
  readonly log: Log;
  /** Stored volume [m³] at a level [m]; rising. */
  readonly volume: (level: number) => number;
  /** Pumps draw from a store on their suction side and fill one on their discharge side; then "inflow" is its demand. */
  readonly side: 'suction' | 'discharge';
}

/** A stretch of adjacent intervals with a level at both ends, in which the same pumps run; `end` is excluded. */
export interface Stretch {
  readonly from: number;
  readonly end: number;
  /** Number of pumps running; not whole where a pump ran for part of an interval. */
  readonly pumpsOn: number;
  readonly seconds: number;
  /** Volume that the store gained beyond what pumps moved [m³]: rise on the suction side, fall on the discharge side. */
  readonly gain: number;
}

/** The inflow, and what was pumped beside it. */
export interface Inflow {
  /** The log with `flow` = mean inflow per interval [m³/s], NaN where it cannot be known. The last reading only ends
   * the interval before it and is no row of its own. */
  readonly log: Log;
  /** Mean pumped flow per interval [m³/s]: inflow − gain / time, so that the balance closes by construction. */
  readonly pumped: Channel;
  readonly stretches: readonly Stretch[];
  readonly notes: readonly Note[];
}

/**
 * Inflow from levels and run states. A level is the reading at the start of its row. While all pumps rest, inflow is the
 * change of the store over time (a fill); during a run it is interpolated over time between the mean of the fill before,
 * at its middle, and that of the fill after, and the pumped flow follows from the balance. A fill whose level falls in
 * some interval (waves, a coarse gauge) is given its mean throughout, which keeps its volume; one that falls as a whole
 * has no inflow that could be known.
 */
export function inflowFromLevels({ log, volume, side }: InflowInput): Inflow {
  const rows = log.startMs.length - 1;
  const running = runningCount(log);
  const gains = intervalGains(log, volume, side);
  const stretches = stretchesOf(log, running, gains);
  const inflow = new Float64Array(rows).fill(Number.NaN);
  const notes: Note[] = [];
  const fills: { middle: number; mean: number; end: number; from: number }[] = [];
  let falling = 0;
  let smoothed = 0;
  for (const stretch of stretches) {
    if (stretch.pumpsOn > 0) continue;
    const mean = stretch.gain / stretch.seconds;
    if (mean < 0) {
      falling++;
      continue;
    }
    let steady = true;
    for (let i = stretch.from; i < stretch.end; i++) if (gains[i]! < 0) steady = false;
    if (!steady) smoothed++;
    for (let i = stretch.from; i < stretch.end; i++) inflow[i] = steady ? gains[i]! / log.seconds[i]! : mean;
    const begin = log.startMs[stretch.from]! / SECOND_MS;
    fills.push({ middle: begin + stretch.seconds / 2, mean, from: stretch.from, end: stretch.end });
  }

  let after = 0; // the first fill that begins at or after the stretch; both lists run forward in time
  for (const stretch of stretches) {
    if (!(stretch.pumpsOn > 0)) continue;
    while (after < fills.length && fills[after]!.from < stretch.end) after++;
    const [before, next] = [fills[after - 1], fills[after]];
    for (let i = stretch.from; i < stretch.end; i++) {
      inflow[i] = interpolated(log.startMs[i]! / SECOND_MS + log.seconds[i]! / 2, before, next);
    }
  }
  const pumped = Float64Array.from(inflow, (flow, i) => (running[i] === 0 ? 0 : flow - gains[i]! / log.seconds[i]!));

  if (fills.length === 0) {
    notes.push({
      code: 'no-fills',
      text: 'the pumps never all rest while the level rises: the inflow cannot be known',
    });
  } else {
    notes.push({
      code: 'inflow-from-levels',
      text: `inflow is worked out from ${fills.length} fills of the store; its balance closes by construction and proves nothing`,
    });
  }
  if (falling > 0) {
    const text = `the store loses volume with all pumps at rest, ${falling === 1 ? 'once' : `${falling} times`}: no inflow is given there`;
    notes.push({ code: 'loss-at-rest', text });
  }
  if (smoothed > 0) {
    notes.push({ code: 'fill-mean', text: `${smoothed} fills have an uneven level and are given their mean inflow` });
  }
  return { log: { ...withoutLast(log, rows), flow: inflow }, pumped, stretches, notes };
}

/** Pumps running in each interval, from the pumps' own states where all rows have them, else from the count. */
export function runningCount(log: Log): Float64Array {
  const states = log.pumps.flatMap((pump) => (pump.on === null ? [] : [pump.on]));
  const count = new Float64Array(log.startMs.length);
  for (let i = 0; i < count.length; i++) {
    count[i] = states.length > 0 ? states.reduce((sum, on) => sum + on[i]!, 0) : (log.pumpsOn?.[i] ?? Number.NaN);
  }
  return count;
}

/** Volume gained by the store in each interval [m³], NaN where a level is missing or the next row is not adjacent. */
function intervalGains(log: Log, volume: (level: number) => number, side: InflowInput['side']): Float64Array {
  const level = log.level;
  const gains = new Float64Array(Math.max(0, log.startMs.length - 1)).fill(Number.NaN);
  if (level === null) return gains;
  const sign = side === 'suction' ? 1 : -1;
  for (let i = 0; i < gains.length; i++) {
    const adjacent = log.startMs[i]! + log.seconds[i]! * SECOND_MS === log.startMs[i + 1];
    if (adjacent) gains[i] = sign * (volume(level[i + 1]!) - volume(level[i]!));
  }
  return gains;
}

function stretchesOf(log: Log, running: Float64Array, gains: Float64Array): Stretch[] {
  const stretches: Stretch[] = [];
  let from = 0;
  for (let i = 1; i <= gains.length; i++) {
    if (i < gains.length && sameState(log, running, gains, i)) continue;
    let seconds = 0;
    let gain = 0;
    for (let k = from; k < i; k++) {
      seconds += log.seconds[k]!;
      gain += gains[k]!;
    }
    if (!Number.isNaN(gain) && !Number.isNaN(running[from]!)) {
      stretches.push({ from, end: i, pumpsOn: running[from]!, seconds, gain });
    }
    from = i;
  }
  return stretches;
}

/** Whether interval i continues the one before: both or neither known, adjacent, and the same pumps in the same state. */
function sameState(log: Log, running: Float64Array, gains: Float64Array, i: number): boolean {
  if (Number.isNaN(gains[i]!) !== Number.isNaN(gains[i - 1]!) || !Object.is(running[i], running[i - 1])) return false;
  return log.pumps.every((pump) => pump.on === null || Object.is(pump.on[i], pump.on[i - 1]));
}

interface FillMean {
  readonly middle: number;
  readonly mean: number;
}

function interpolated(second: number, before: FillMean | undefined, after: FillMean | undefined): number {
  if (before === undefined || after === undefined) return before?.mean ?? after?.mean ?? Number.NaN;
  const share = (second - before.middle) / (after.middle - before.middle);
  return before.mean + share * (after.mean - before.mean);
}

function withoutLast(log: Log, rows: number): Log {
  const cut = (channel: Channel | null): Channel | null => channel?.slice(0, rows) ?? null;
  return {
    startMs: log.startMs.slice(0, rows),
    seconds: log.seconds.slice(0, rows),
    flow: cut(log.flow),
    level: cut(log.level),
    staticHead: cut(log.staticHead),
    power: cut(log.power),
    pumpsOn: cut(log.pumpsOn),
    pumps: log.pumps.map((pump) => ({
      name: pump.name,
      on: cut(pump.on),
      speed: cut(pump.speed),
      power: cut(pump.power),
    })),
  };
}
