/** What the benchmarks work on: a made-up station, a record of minutes and a tariff, the same on every machine. */
import { randomFrom, wandering } from '../../server/demo/random.ts';
import type { Log } from '../../server/ingest/log.ts';
import { MINUTE_MS } from '../../server/time.ts';

export const YEAR_OF_MINUTES = 525_600;
export const START_MS = Date.UTC(2025, 0, 1);

export type Curves = 'parabola' | 'table';

/** Numbers of one pump and the pipe, in m³/s and m: the bare loop works from these alone. */
export const PLAIN = {
  staticHead: 14,
  friction: 90,
  branchLoss: 400,
  shutoffHead: 32,
  shape: 1800,
  bestFlow: 0.06,
  bestEfficiency: 0.8,
  motor: 0.93,
  drive: 0.97,
  minSpeed: 0.6,
  density: 1000,
} as const;

const head = (flow: number) => PLAIN.shutoffHead - PLAIN.shape * flow * flow;
const efficiency = (flow: number) => {
  const x = flow / PLAIN.bestFlow;
  return PLAIN.bestEfficiency * x * (2 - x);
};

/** A wet-well station of equal pumps on drives, given by parabolas or by tables of the same pump. */
export function stationFile(pumps: number, curves: Curves): Record<string, unknown> {
  const p = PLAIN;
  const flows = Array.from({ length: 9 }, (_, i) => i * 0.0125);
  const table = curves === 'table';
  return {
    format: 'nth-pump/station/1',
    name: `Bench, ${pumps} pumps by ${curves}`,
    timeZone: 'Europe/Dublin',
    currency: 'EUR',
    units: { flow: 'm3/s', head: 'm', power: 'kW' },
    liquid: { density: p.density },
    surplus: 'storage',
    system: { staticHead: p.staticHead, friction: { coefficient: p.friction, exponent: 2 } },
    storage: { activeVolume: 30 },
    pumps: [
      {
        name: 'P',
        count: pumps,
        curve: table
          ? { points: flows.map((flow) => ({ flow, head: head(flow), efficiency: efficiency(flow) })) }
          : { shutoffHead: p.shutoffHead, shape: p.shape, bestFlow: p.bestFlow, bestEfficiency: p.bestEfficiency },
        branchLoss: p.branchLoss,
        motor: { ratedPower: 30, efficiency: table ? partLoad(p.motor) : p.motor },
        drive: { minSpeed: p.minSpeed, efficiency: table ? partLoad(p.drive) : p.drive },
      },
    ],
    rules: { 'flow-steps': { bringOn: steps(pumps, 0.055), dropOff: steps(pumps, 0.045) } },
  };
}

function partLoad(best: number): { load: number; efficiency: number }[] {
  return [
    { load: 0.25, efficiency: best - 0.06 },
    { load: 0.5, efficiency: best - 0.01 },
    { load: 1, efficiency: best },
  ];
}

function steps(pumps: number, each: number): number[] {
  return Array.from({ length: Math.max(1, pumps - 1) }, (_, i) => (i + 1) * each);
}

/** The same wet well with pumps that all differ; every fourth has no drive. */
export function mixedStationFile(pumps: number): Record<string, unknown> {
  const random = randomFrom(11);
  const file = stationFile(pumps, 'parabola');
  const { rules: _counts, pumps: alike, ...rest } = file as { rules: unknown; pumps: Record<string, unknown>[] };
  const { count: _count, drive, ...pump } = alike[0]!;
  return {
    ...rest,
    name: `Bench, ${pumps} different pumps`,
    pumps: Array.from({ length: pumps }, (_, i) => {
      const shutoffHead = PLAIN.shutoffHead * (0.95 + 0.15 * random.uniform());
      const bestFlow = PLAIN.bestFlow * (0.5 + 0.8 * random.uniform());
      return {
        ...pump,
        name: String.fromCharCode(65 + i),
        curve: {
          shutoffHead,
          shape: (0.25 * shutoffHead) / bestFlow ** 2,
          bestFlow,
          bestEfficiency: 0.72 + 0.1 * random.uniform(),
        },
        ...(i % 4 !== 3 && { drive }),
      };
    }),
  };
}

/** A record of flows alone, equal steps from the start of 2025. */
export function logOf(flow: Float64Array, seconds: number, staticHead: Float64Array | null = null): Log {
  return {
    startMs: Float64Array.from(flow, (_, i) => START_MS + i * seconds * 1000),
    seconds: new Float64Array(flow.length).fill(seconds),
    flow,
    level: null,
    staticHead,
    power: null,
    pumpsOn: null,
    pumps: [],
  };
}

/** Flow by minute [m³/s]: two peaks a day, slow weather, fresh noise each minute; never 0, seldom above capacity. */
export function flowsOf(intervals: number, pumps: number): Float64Array {
  const random = randomFrom(7);
  const weather = wandering(random, 0.2, 0.9999);
  return Float64Array.from({ length: intervals }, (_, i) => {
    const day = (2 * Math.PI * i) / 1440;
    const wave = 1 - 0.5 * Math.cos(day) - 0.3 * Math.cos(2 * day + 1);
    const flow = 0.02 * pumps * wave * (1 + weather() + 0.1 * (random.uniform() - 0.5));
    return Math.max(flow, 0.002);
  });
}

/** The record as a file of `time,flow`, one row a minute. */
export function recordCsv(flows: Float64Array): string {
  const rows = ['time,flow'];
  for (let i = 0; i < flows.length; i++) {
    rows.push(`${new Date(START_MS + i * MINUTE_MS).toISOString().slice(0, 19)}Z,${flows[i]!.toFixed(6)}`);
  }
  return `${rows.join('\n')}\n`;
}

/** Three energy rates, seasons, and two demand charges. */
export const TARIFF_FILE = {
  format: 'nth-pump/tariff/1',
  name: 'bench',
  currency: 'EUR',
  timeZone: 'Europe/Dublin',
  seasons: [
    { name: 'winter', from: '11-01', to: '02-28' },
    { name: 'summer', from: '03-01', to: '10-31' },
  ],
  energy: [
    {
      name: 'peak',
      season: 'winter',
      days: ['mon', 'tue', 'wed', 'thu', 'fri'],
      from: '17:00',
      to: '19:00',
      rate: 0.4,
    },
    { name: 'night', from: '23:00', to: '08:00', rate: 0.12 },
    { name: 'day', rate: 0.24 },
  ],
  demand: [
    { name: 'any time', rate: 4 },
    { name: 'winter peak', season: 'winter', from: '17:00', to: '19:00', rate: 6 },
  ],
  demandWindowMinutes: 15,
  fixedPerMonth: 90,
  taxPercent: 13.5,
};
