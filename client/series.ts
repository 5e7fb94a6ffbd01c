import type { PowerOverFlow, RuleSeries } from '../server/staging/pictures.ts';
import type { RuleResult } from '../server/staging/result.ts';
import { DAY_MS, HOUR_MS, instantsOfWallClock, offsetMs } from '../server/time.ts';
import type { Format } from './format.ts';
import { runnersOf } from './runners.ts';

/** A point of a picture in the reader's units; y is null in a gap. */
export interface Point {
  readonly x: number;
  readonly y: number | null;
}

export interface Axis {
  readonly title: string;
  readonly min: number;
  readonly max: number;
}

/** Mean power over flow, one line for each who may run. */
export interface Curves {
  readonly x: Axis;
  readonly y: Axis;
  readonly lines: readonly {
    readonly id: number;
    readonly name: string;
    readonly short: string;
    readonly points: readonly Point[];
    /** By point: whether this one draws least there. */
    readonly least: readonly boolean[];
  }[];
  readonly crossings: readonly {
    readonly x: number;
    readonly y: number;
    readonly label: string;
    /** Who draws less above. */
    readonly to: number;
  }[];
}

/** Power over flow as a picture; a flow that cannot be met is a gap in the line. */
export function curvesOf(power: PowerOverFlow, format: Format): Curves {
  const flow = power.flowM3s.map((value) => value * format.flow.factor);
  const least = leastRunners(power);
  const crossings = crossingsOf(power);
  // With many of them the axis alone names the unit.
  const crowded = crossings.length > 4;
  let top = 0;
  const lines = runnersOf(power).map(({ id, name, short, powerKw }) => {
    const points = powerKw.map((y, i) => ({ x: flow[i]!, y }));
    for (const y of powerKw) top = Math.max(top, y ?? 0);
    return { id, name, short, points, least: least.map((each) => each === id) };
  });
  return {
    x: flowAxis(power, format),
    y: { title: `Mean power, ${format.power.unit}`, min: 0, max: niceTop(top) },
    lines,
    crossings: crossings.map(({ flowM3s, powerKw, to }) => ({
      x: flowM3s * format.flow.factor,
      y: powerKw,
      label: crowded ? format.bare(format.flow, flowM3s).text : format.say(format.flow, flowM3s),
      to,
    })),
  };
}

/** Where one who runs gives way to another, and who that is. */
export interface Change {
  readonly flowM3s: number;
  readonly powerKw: number;
  readonly from: number;
  readonly to: number;
}

/** Of counts, where two draw the same; of sets, where another becomes the best. */
export function crossingsOf({ crossings, stretches }: Pick<PowerOverFlow, 'crossings' | 'stretches'>): Change[] {
  if (stretches.length > 0)
    return stretches.flatMap(({ set, fromM3s, fromKw }, i) =>
      i > 0 && fromKw !== null
        ? [{ flowM3s: fromM3s, powerKw: fromKw, from: stretches[i - 1]!.set + 1, to: set + 1 }]
        : [],
    );
  return crossings.map(({ flowM3s, powerKw, rising, from, to }) => ({
    flowM3s,
    powerKw,
    from: rising ? from : to,
    to: rising ? to : from,
  }));
}

/** Who draws least at each flow of the picture; null where none can meet it. */
export function leastRunners(power: PowerOverFlow): (number | null)[] {
  const { stretches } = power;
  if (stretches.length > 0)
    return power.flowM3s.map((flow) => {
      const here = stretches.find(({ fromM3s, toM3s }) => flow > fromM3s && flow <= toM3s);
      return here === undefined ? null : here.set + 1;
    });
  return power.flowM3s.map((_, i) => {
    let best: number | null = null;
    let bestKw = Number.POSITIVE_INFINITY;
    for (const { count, powerKw } of power.counts) {
      const kw = powerKw[i];
      if (kw != null && kw < bestKw) {
        best = count;
        bestKw = kw;
      }
    }
    return best;
  });
}

/** The hours the record spends at each flow. */
export interface HoursByFlow {
  readonly x: Axis;
  readonly y: Axis;
  /** `who` draws least in the middle of the class; null where none can meet it. */
  readonly bars: readonly {
    readonly from: number;
    readonly to: number;
    readonly hours: number;
    readonly who: number | null;
  }[];
}

/** Hours of the record at each flow, told by who draws least there. */
export function hoursByFlow(power: PowerOverFlow, format: Format): HoursByFlow {
  const least = leastRunners(power);
  const nearest = (flow: number) => {
    const step = power.flowM3s[0] ?? 1;
    return least[Math.min(least.length - 1, Math.max(0, Math.round(flow / step) - 1))] ?? null;
  };
  const bars = power.hours.map(({ fromM3s, toM3s, hours }) => ({
    from: fromM3s * format.flow.factor,
    to: toM3s * format.flow.factor,
    hours,
    who: nearest((fromM3s + toM3s) / 2),
  }));
  return {
    x: flowAxis(power, format),
    y: { title: 'Hours', min: 0, max: niceTop(Math.max(...bars.map((bar) => bar.hours), 0)) },
    bars,
  };
}

function flowAxis(power: PowerOverFlow, format: Format): Axis {
  const largest = Math.max(power.flowM3s.at(-1) ?? 0, power.hours.at(-1)?.toM3s ?? 0);
  return { title: `Flow, ${format.flow.unit}`, min: 0, max: largest * format.flow.factor };
}

/** The next 1, 2, 2.5 or 5 times a power of ten at or above a value, in fifths of it: where an axis may end. */
export function niceTop(value: number): number {
  if (!(value > 0)) return 1;
  const step = 10 ** Math.floor(Math.log10(value / 4));
  for (const times of [1, 2, 2.5, 5, 10]) {
    const tick = step * times;
    if (tick * 6 >= value) return Math.ceil(value / tick - 1e-9) * tick;
  }
  return value;
}

/** Round numbers from one value to another for the ticks of an axis, about `wanted` of them. */
export function niceTicks(from: number, to: number, wanted: number): number[] {
  if (!(to > from)) return [];
  const rough = (to - from) / wanted;
  const decade = 10 ** Math.floor(Math.log10(rough));
  const step = decade * ([1, 2, 5, 10].find((times) => decade * times >= rough) ?? 10);
  const ticks: number[] = [];
  for (let i = Math.ceil(from / step - 1e-9); i * step <= to + 1e-9 * step; i++)
    ticks.push(Number((i * step).toPrecision(6)));
  return ticks;
}

/** Rules side by side as bars: what the least takes, and what lies above it. */
export interface Bars {
  readonly title: string;
  readonly bars: readonly {
    readonly label: string;
    readonly base: number;
    readonly above: number;
    readonly text: string;
  }[];
}

/** The record over time with the count that a rule chose, both as steps; a gap is a point without a value. */
export interface RecordSteps {
  readonly fromMs: number;
  readonly toMs: number;
  readonly flow: readonly Point[];
  /** Band of least and most flow, where buckets hold several intervals. */
  readonly band: { readonly least: readonly Point[]; readonly most: readonly Point[] } | null;
  readonly flowAxis: Axis;
  /** Entry k holds min(count, k + 1): drawn one over the other they make a stair of as many shades. */
  readonly counts: readonly (readonly Point[])[];
  readonly mostCount: number;
  /** For pumps that differ, a lane for each in place of the stair: between 0 and 1 as share of the time that it ran. */
  readonly lanes: readonly { readonly name: string; readonly share: readonly Point[] }[];
}

/** Times closer than this belong together. */
const SAME_MS = 500;

/** One point where each bucket starts, one where a stretch ends, and a null behind that. */
export function steps(series: Pick<RuleSeries, 'startMs' | 'endMs'>, values: readonly number[]): Point[] {
  const points: Point[] = [];
  for (const [i, startMs] of series.startMs.entries()) {
    points.push({ x: startMs, y: values[i]! });
    const endMs = series.endMs[i]!;
    const next = series.startMs[i + 1];
    if (next !== undefined && next - endMs < SAME_MS) continue;
    points.push({ x: endMs, y: values[i]! }, { x: endMs, y: null });
  }
  return points;
}

/** The record over time as steps: flow, and the pumps that a rule ran. */
export function recordSteps(series: RuleSeries, format: Format, duty: number): RecordSteps {
  const inUnit = (values: readonly number[]) => values.map((value) => value * format.flow.factor);
  const most = Math.max(duty, ...series.mostCount);
  const top = Math.max(0, ...inUnit(series.mostFlowM3s));
  return {
    fromMs: series.startMs[0] ?? 0,
    toMs: series.endMs.at(-1) ?? 0,
    flow: steps(series, inUnit(series.flowM3s)),
    band: series.exact
      ? null
      : {
          least: steps(series, inUnit(series.leastFlowM3s)),
          most: steps(series, inUnit(series.mostFlowM3s)),
        },
    flowAxis: { title: `Flow, ${format.flow.unit}`, min: 0, max: niceTop(top) },
    counts: Array.from({ length: most }, (_, k) =>
      steps(
        series,
        series.count.map((count) => Math.min(count, k + 1)),
      ),
    ),
    mostCount: most,
    lanes: series.pumps.map(({ name, share }) => ({ name, share: steps(series, share) })),
  };
}

// Windows of time and the ticks under them

export const WINDOWS = ['day', 'week', 'month', 'all'] as const;
export type WindowKind = (typeof WINDOWS)[number];

export interface Span {
  readonly fromMs: number;
  readonly toMs: number;
}

/** The local day, week (from Monday) or calendar month that holds an instant; `all` is the whole record. */
export function windowAt(kind: WindowKind, instantMs: number, whole: Span, zone: string): Span {
  if (kind === 'all') return whole;
  const local = new Date(instantMs + offsetMs(zone, instantMs));
  const [year, month, day] = [local.getUTCFullYear(), local.getUTCMonth(), local.getUTCDate()];
  if (kind === 'month')
    return { fromMs: localMidnight(zone, year, month, 1), toMs: localMidnight(zone, year, month + 1, 1) };
  const first = kind === 'week' ? day - ((local.getUTCDay() + 6) % 7) : day;
  return {
    fromMs: localMidnight(zone, year, month, first),
    toMs: localMidnight(zone, year, month, first + (kind === 'week' ? 7 : 1)),
  };
}

/** The window before or after; none beyond the record. */
export function neighbour(kind: WindowKind, span: Span, direction: -1 | 1, whole: Span, zone: string): Span | null {
  if (kind === 'all') return null;
  const next = windowAt(kind, direction < 0 ? span.fromMs - HOUR_MS : span.toMs + HOUR_MS, whole, zone);
  return next.toMs > whole.fromMs && next.fromMs < whole.toMs ? next : null;
}

/** Start of a local day; where a zone changes at midnight, the first instant after the change. */
function localMidnight(zone: string, year: number, month: number, day: number): number {
  const wall = Date.UTC(year, month, day);
  return instantsOfWallClock(zone, wall)[0] ?? instantsOfWallClock(zone, wall + HOUR_MS)[0] ?? wall;
}

export interface Ticks {
  readonly step: 'hour' | 'day' | 'month';
  readonly atMs: readonly number[];
}

/** Instants for the labels of a time axis, at round local times, about `wanted` of them. */
export function timeTicks({ fromMs, toMs }: Span, zone: string, wanted: number): Ticks {
  const perTick = (toMs - fromMs) / Math.max(1, wanted);
  const start = new Date(fromMs + offsetMs(zone, fromMs));
  const [year, month, day] = [start.getUTCFullYear(), start.getUTCMonth(), start.getUTCDate()];
  const within = (all: readonly number[]) => all.filter((ms) => ms >= fromMs && ms <= toMs);
  const many = (next: (i: number) => number) => {
    const all: number[] = [];
    for (let i = 0; i < 2000; i++) {
      const ms = next(i);
      if (ms > toMs) break;
      all.push(ms);
    }
    return within(all);
  };
  if (perTick >= 20 * DAY_MS) {
    const every = [1, 2, 3, 6, 12, 24, 60].find((months) => months * 30 * DAY_MS >= perTick * 0.9) ?? 120;
    return {
      step: 'month',
      atMs: many((i) => localMidnight(zone, year, month - (month % Math.min(every, 12)) + i * every, 1)),
    };
  }
  if (perTick >= 0.75 * DAY_MS) {
    const every = [1, 2, 7, 14].find((days) => days * DAY_MS >= perTick * 0.9) ?? 14;
    return { step: 'day', atMs: many((i) => localMidnight(zone, year, month, day + i * every)) };
  }
  const every = [1, 2, 3, 6, 12].find((hours) => hours * HOUR_MS >= perTick * 0.9) ?? 12;
  const atHour = (i: number) => {
    const wall = Date.UTC(year, month, day) + i * every * HOUR_MS;
    return instantsOfWallClock(zone, wall)[0] ?? instantsOfWallClock(zone, wall + HOUR_MS)[0]!;
  };
  return { step: 'hour', atMs: many(atHour) };
}

/** The counts of pumps in a comparison, 0 included, in order. */
export function countsOf(rules: readonly Pick<RuleResult, 'hoursByCount'>[]): number[] {
  const counts = new Set(rules.flatMap((rule) => Object.keys(rule.hoursByCount).map(Number)));
  return [...counts].sort((a, b) => a - b);
}
