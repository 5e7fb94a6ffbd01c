import { type DemandRecord, demandRecord } from '../../server/staging/demandRecord.ts';
import { Floor } from '../../server/staging/floor.ts';
import { floorPower } from '../../server/staging/floorOverRecord.ts';
import { RULES } from '../../server/staging/rules/all.ts';
import { runRule } from '../../server/staging/run.ts';
import { stagedPumpsOf } from '../../server/staging/stagedPumpsOf.ts';
import { readStation } from '../../server/station/readStation.ts';
import { billOf } from '../../server/tariff/bill.ts';
import { planBill } from '../../server/tariff/plan.ts';
import { readTariff } from '../../server/tariff/tariffFile.ts';
import { JOULES_PER_KWH } from '../../server/units.ts';
import { bareBestCount } from './bareLoop.ts';
import { type Curves, flowsOf, logOf, PLAIN, stationFile, TARIFF_FILE, YEAR_OF_MINUTES } from './made.ts';
import { type Measured, measured, shortest } from './measure.ts';

const AIMS: Record<Curves, number> = { parabola: 3, table: 8 };
const BARE = 'bare loop, closed form';

/** Every rule over a year of minutes with six pumps, then best-count with more intervals and with other pump counts. */
export function benchRules(rounds: number): Measured[] {
  return [
    ...(['parabola', 'table'] as const).flatMap((curves) => everyRule(curves, rounds)),
    movingHead(rounds),
    ...moreIntervals(rounds),
    ...morePumps(rounds),
    ...money(rounds),
  ];
}

function everyRule(curves: Curves, rounds: number): Measured[] {
  const record = recordOf(flowsOf(YEAR_OF_MINUTES, 6));
  const station = readStation(stationFile(6, curves), 'bench.json');
  const bare = bareTime(record, 6, rounds);
  const rows = RULES.map((rule) => {
    const time = shortest(rounds, () => runRule(rule, stagedPumpsOf(station, station.duty), record));
    return measured(`${rule.id}, ${curves}`, time, { what: BARE, milliseconds: bare, aim: AIMS[curves] });
  });
  if (curves === 'parabola') proveSameWork(record);
  const floor = shortest(1, () => new Floor(station, station.duty).table(station.staticHead));
  const power = floorPower(station, station.duty, record);
  const readOff = shortest(rounds, () => {
    for (let i = 0; i < record.flow.length; i++) power(record.flow[i]!, PLAIN.staticHead);
  });
  return [...rows, measured(`floor solved, ${curves}`, floor), measured(`floor read off, ${curves}`, readOff)];
}

/** The bare loop is held to the same answer, so that the race is one. */
function proveSameWork(record: DemandRecord): void {
  const station = readStation(stationFile(6, 'parabola'), 'bench.json');
  const rule = RULES.find(({ id }) => id === 'best-count')!;
  const { totals } = runRule(rule, stagedPumpsOf(station, station.duty), record);
  const short = totals.shortfallHours;
  const bare = bareBestCount(record.flow, record.seconds, 6, new Uint8Array(record.flow.length)) / JOULES_PER_KWH;
  if (short > 0 || Math.abs(totals.energyKwh / bare - 1) > 1e-9) {
    throw new Error(`best-count has ${totals.energyKwh} kWh and ${short} h short, the bare loop ${bare} kWh`);
  }
}

function movingHead(rounds: number): Measured {
  const flows = flowsOf(YEAR_OF_MINUTES, 6);
  const heads = Float64Array.from(flows, (_, i) => PLAIN.staticHead + 0.8 * Math.sin(i / 7));
  const record = recordOf(flows, heads);
  const station = readStation(stationFile(6, 'parabola'), 'bench.json');
  const rule = RULES.find(({ id }) => id === 'best-count')!;
  const bare = bareTime(record, 6, rounds);
  const time = shortest(rounds, () => runRule(rule, stagedPumpsOf(station, station.duty), record));
  const aim = { what: BARE, milliseconds: bare, aim: null };
  return measured('best-count, parabola, static head new every minute', time, aim);
}

function moreIntervals(rounds: number): Measured[] {
  const all = flowsOf(YEAR_OF_MINUTES, 6);
  return [1, 4, 16].map((times) => {
    const intervals = Math.round((YEAR_OF_MINUTES / 16) * times);
    const time = bestCountTime(all.subarray(0, intervals), 6, rounds);
    return measured(`best-count, ${intervals} intervals (${times}×), per million`, (time / intervals) * 1e6);
  });
}

function morePumps(rounds: number): Measured[] {
  return [2, 4, 8].map((pumps) => {
    const time = bestCountTime(flowsOf(YEAR_OF_MINUTES, pumps), pumps, rounds);
    return measured(`best-count, ${pumps} pumps, per pump`, time / pumps);
  });
}

function bestCountTime(flows: Float64Array, pumps: number, rounds: number): number {
  const station = readStation(stationFile(pumps, 'parabola'), 'bench.json');
  const rule = RULES.find(({ id }) => id === 'best-count')!;
  const record = recordOf(flows);
  return shortest(rounds, () => runRule(rule, stagedPumpsOf(station, station.duty), record));
}

function money(rounds: number): Measured[] {
  const record = recordOf(flowsOf(YEAR_OF_MINUTES, 6));
  const tariff = readTariff(TARIFF_FILE, 'bench.json');
  const station = readStation(stationFile(6, 'parabola'), 'bench.json');
  const rule = RULES.find(({ id }) => id === 'best-count')!;
  const { series } = runRule(rule, stagedPumpsOf(station, station.duty), record);
  const plan = planBill(tariff, record.startMs, record.seconds);
  return [
    measured(
      'bill plan',
      shortest(rounds, () => planBill(tariff, record.startMs, record.seconds)),
    ),
    measured(
      'bill of one rule',
      shortest(rounds, () => billOf(plan, series)),
    ),
  ];
}

function bareTime(record: DemandRecord, pumps: number, rounds: number): number {
  const counts = new Uint8Array(record.flow.length);
  return shortest(rounds + 2, () => bareBestCount(record.flow, record.seconds, pumps, counts));
}

function recordOf(flow: Float64Array, staticHead: Float64Array | null = null): DemandRecord {
  const station = readStation(stationFile(6, 'parabola'), 'bench.json');
  return demandRecord(station, logOf(flow, 60, staticHead));
}
