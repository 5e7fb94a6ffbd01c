import { describe, expect, it } from 'vitest';
import {
  countsOf,
  curvesOf,
  hoursByFlow,
  leastRunners,
  neighbour,
  niceTop,
  recordSteps,
  steps,
  timeTicks,
  windowAt,
} from '../../client/series.ts';
import type { RuleSeries } from '../../server/staging/pictures.ts';
import { aFormat, aPower } from './builders.ts';

const HOUR = 3_600_000;
const format = aFormat();

describe('power over flow', () => {
  it('is a gap where a count cannot meet the flow, not a zero', () => {
    const [one] = curvesOf(aPower(), format).lines;
    expect(one?.points).toEqual([
      { x: 20, y: 4 },
      { x: 40, y: 8 },
      { x: 60, y: null },
      { x: 80, y: null },
    ]);
  });

  it('knows the count that draws least; a tie goes to fewer pumps', () => {
    expect(leastRunners(aPower())).toEqual([1, 1, 2, 2]);
    const tie = aPower({
      counts: [1, 2].map((count) => ({ count, pumps: [], capacityM3s: 1, powerKw: [5, 5, null, null] })),
    });
    expect(leastRunners(tie)).toEqual([1, 1, null, null]);
  });

  it('marks a crossing with the count that is cheaper above it', () => {
    const crossings = [
      { from: 1, to: 2, flowM3s: 0.03, powerKw: 7, rising: true },
      { from: 1, to: 2, flowM3s: 0.05, powerKw: 9, rising: false },
    ];
    expect(curvesOf(aPower({ crossings }), format).crossings.map(({ x, to }) => [x, to])).toEqual([
      [30, 2],
      [50, 1],
    ]);
  });

  it('shares its flow axis with the hours under it', () => {
    const power = aPower({
      hours: [
        { fromM3s: 0, toM3s: 0.05, hours: 10 },
        { fromM3s: 0.05, toM3s: 0.1, hours: 0 },
      ],
    });
    const hours = hoursByFlow(power, format);
    expect(hours.x).toEqual(curvesOf(power, format).x);
    expect(hours.x.max).toBe(100);
    expect(hours.bars).toEqual([
      { from: 0, to: 50, hours: 10, who: 1 },
      { from: 50, to: 100, hours: 0, who: 2 },
    ]);
  });
});

describe('steps', () => {
  it('hold each value to the end of its bucket and leave a gap open', () => {
    const series = { startMs: [0, HOUR, 5 * HOUR], endMs: [HOUR, 2 * HOUR, 6 * HOUR] };
    expect(steps(series, [1, 2, 3])).toEqual([
      { x: 0, y: 1 },
      { x: HOUR, y: 2 },
      { x: 2 * HOUR, y: 2 },
      { x: 2 * HOUR, y: null },
      { x: 5 * HOUR, y: 3 },
      { x: 6 * HOUR, y: 3 },
      { x: 6 * HOUR, y: null },
    ]);
  });

  const series: RuleSeries = {
    rule: 'best-count',
    exact: false,
    startMs: [0, HOUR],
    endMs: [HOUR, 2 * HOUR],
    flowM3s: [0.01, 0.02],
    leastFlowM3s: [0, 0.015],
    mostFlowM3s: [0.012, 0.03],
    powerKw: [1, 2],
    count: [0.5, 1.5],
    mostCount: [1, 2],
    pumps: [],
    shortfallM3: [0, 0],
  };

  it('stack counts so that each shade is one pump', () => {
    const record = recordSteps(series, format, 3);
    const levels = record.counts.map((points) => points.filter(({ y }) => y !== null).map(({ y }) => y));
    expect(levels).toEqual([
      [0.5, 1, 1],
      [0.5, 1.5, 1.5],
      [0.5, 1.5, 1.5],
    ]);
    expect(record.band?.most.map(({ y }) => y)).toEqual([12, 30, 30, null]);
  });

  it('have no band where each bucket is one interval', () => {
    expect(recordSteps({ ...series, exact: true }, format, 2).band).toBeNull();
  });
});

describe('axes', () => {
  it.each([
    [31.7, 40],
    [0.9, 1],
    [100, 100],
    [241, 250],
    [0, 1],
  ])('end at a round number at or above %d', (value, top) => {
    expect(niceTop(value)).toBeCloseTo(top, 12);
  });
});

describe('parts of a record', () => {
  const zone = 'Europe/Dublin';
  const whole = { fromMs: Date.UTC(2025, 0, 1), toMs: Date.UTC(2026, 0, 1) };
  const hours = ({ fromMs, toMs }: { fromMs: number; toMs: number }) => (toMs - fromMs) / HOUR;

  it('are local days of 23, 24 and 25 hours', () => {
    const day = (ms: number) => hours(windowAt('day', ms, whole, zone));
    expect(day(Date.UTC(2025, 2, 30, 12))).toBe(23);
    expect(day(Date.UTC(2025, 5, 1, 12))).toBe(24);
    expect(day(Date.UTC(2025, 9, 26, 12))).toBe(25);
  });

  it('are weeks from Monday and calendar months', () => {
    const at = Date.UTC(2025, 6, 16, 12); // a Wednesday; Dublin is at UTC+1
    expect(windowAt('week', at, whole, zone)).toEqual({
      fromMs: Date.UTC(2025, 6, 13, 23),
      toMs: Date.UTC(2025, 6, 20, 23),
    });
    expect(windowAt('month', at, whole, zone)).toEqual({
      fromMs: Date.UTC(2025, 5, 30, 23),
      toMs: Date.UTC(2025, 6, 31, 23),
    });
  });

  it('have a neighbour until the record ends', () => {
    const december = windowAt('month', Date.UTC(2025, 11, 9), whole, zone);
    expect(neighbour('month', december, 1, whole, zone)).toBeNull();
    expect(neighbour('month', december, -1, whole, zone)?.toMs).toBe(december.fromMs);
    expect(neighbour('all', whole, 1, whole, zone)).toBeNull();
  });

  it('stand where a zone has no midnight', () => {
    // Beirut skipped from 0:00 to 1:00 on 30 March 2025 (UTC+2 to UTC+3).
    const day = windowAt('day', Date.UTC(2025, 2, 30, 12), whole, 'Asia/Beirut');
    expect(day.fromMs).toBe(Date.UTC(2025, 2, 29, 22));
    expect(hours(day)).toBe(23);
  });

  it('have ticks at round local times, also across a clock change', () => {
    const day = timeTicks({ fromMs: Date.UTC(2025, 2, 30), toMs: Date.UTC(2025, 2, 30, 23) }, zone, 8);
    expect(day.step).toBe('hour');
    const local = day.atMs.map((ms) => format.tick(ms, 'hour'));
    expect(local).toEqual(['00:00', '03:00', '06:00', '09:00', '12:00', '15:00', '18:00', '21:00', '00:00']);
    const year = timeTicks(whole, zone, 8);
    expect(year.step).toBe('month');
    expect(
      year.atMs.every((ms) => format.instant(ms).endsWith('1 Jan 2025, 00:00') || /^1 /.test(format.instant(ms))),
    ).toBe(true);
  });
});

it('counts of a comparison are in order, none included', () => {
  expect(countsOf([{ hoursByCount: { 0: 1, 2: 3 } }, { hoursByCount: { 10: 1, 1: 1 } }])).toEqual([0, 1, 2, 10]);
});
