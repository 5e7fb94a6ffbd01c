import { dutyPumpsAreEqual } from '../station/station.ts';
import { DEFAULT_BAND } from './card.ts';
import type { Comparison } from './compare.ts';
import { allCrossings, capacityOf, powerOfCount } from './crossings.ts';
import { FixedSet } from './fixedSet.ts';
import { MixedPumps } from './mixedPumps.ts';
import type { RuleId } from './result.ts';
import type { RunSets } from './runSets.ts';
import { placesOf, setLadder } from './setLadder.ts';
import type { StagedPumps } from './stagedPumps.ts';
import { stagedPumpsOf } from './stagedPumpsOf.ts';

/** Mean power over flow for each count, where they cross, and the hours the record spends at each flow. */
export interface PowerOverFlow {
  readonly staticHeadM: number;
  /** Whether the counts are trimmed by drives, or run direct on line. */
  readonly onDrives: boolean;
  /** Whether the pumps are equal, so that a count says who runs. */
  readonly alike: boolean;
  readonly flowM3s: readonly number[];
  /** Power with standby [kW] at each of `flowM3s`; null where the count cannot meet it. */
  readonly counts: readonly {
    readonly count: number;
    /** Names of the first so many in the station's order. */
    readonly pumps: readonly string[];
    readonly capacityM3s: number;
    readonly powerKw: readonly (number | null)[];
  }[];
  /** For pumps that differ, on drives: the sets that are best somewhere, each over all flows it can meet. */
  readonly sets: readonly { readonly pumps: readonly string[]; readonly powerKw: readonly (number | null)[] }[];
  /** Which of `sets` is best as flow rises, and the power where its stretch begins. */
  readonly stretches: readonly {
    readonly set: number;
    readonly fromM3s: number;
    readonly toM3s: number;
    readonly fromKw: number | null;
  }[];
  readonly crossings: readonly {
    readonly from: number;
    readonly to: number;
    readonly flowM3s: number;
    readonly powerKw: number;
    readonly rising: boolean;
  }[];
  /** Hours of the record by flow; the last class holds the largest flow. */
  readonly hours: readonly { readonly fromM3s: number; readonly toM3s: number; readonly hours: number }[];
}

const CURVE_POINTS = 240;
const CLASSES = 60;

/** Drawn at the station's static head, whatever static head the intervals of the record have. */
export function powerOverFlow(comparison: Comparison): PowerOverFlow {
  const { station, duty, record } = comparison;
  const pumps = stagedPumpsOf(station, duty);
  const largestFlow = record.flow.reduce((most, flow) => Math.max(most, flow), 0);
  const top = Math.max(capacityOf(pumps, pumps.most), largestFlow) * 1.02;
  const flows = Array.from({ length: CURVE_POINTS }, (_, i) => (top * (i + 1)) / CURVE_POINTS);
  const kw = (watts: number) => (Number.isNaN(watts) ? null : (watts + station.standbyPower) / 1000);
  const counts = Array.from({ length: pumps.most }, (_, i) => ({
    count: i + 1,
    pumps: duty.slice(0, i + 1).map((pump) => pump.name),
    capacityM3s: capacityOf(pumps, i + 1),
    powerKw: flows.map((flow) => kw(powerOfCount(pumps, i + 1, flow))),
  }));
  return {
    staticHeadM: station.staticHead,
    onDrives: pumps.onDrives,
    alike: dutyPumpsAreEqual(duty),
    flowM3s: flows,
    counts,
    ...setCurves(pumps, flows),
    crossings: allCrossings(pumps).map(({ from, to, flow, power, rising }) => ({
      from,
      to,
      flowM3s: flow,
      powerKw: (power + station.standbyPower) / 1000,
      rising,
    })),
    hours: hoursByFlow(record.flow, record.seconds, top),
  };
}

function setCurves(pumps: StagedPumps, flows: readonly number[]): Pick<PowerOverFlow, 'sets' | 'stretches'> {
  const ladder = setLadder(pumps, DEFAULT_BAND).filter(({ set }) => set > 0);
  if (!(pumps instanceof MixedPumps)) return { sets: [], stretches: [] };
  const bits = [...new Set(ladder.map(({ set }) => set))];
  const fixed = bits.map((set) => new FixedSet(pumps, set));
  const kwOf = (set: FixedSet, flow: number) => {
    const figures = set.figuresAt(flow);
    return figures && (figures.power + pumps.station.standbyPower) / 1000;
  };
  return {
    sets: fixed.map((set) => ({
      pumps: placesOf(set.set).map((place) => pumps.duty[place]!.name),
      powerKw: flows.map((flow) => kwOf(set, flow)),
    })),
    stretches: ladder.map(({ set, from, to }) => {
      const at = bits.indexOf(set);
      return { set: at, fromM3s: from, toM3s: to, fromKw: from > 0 ? kwOf(fixed[at]!, from * (1 + 1e-9)) : null };
    }),
  };
}

function hoursByFlow(flow: Float64Array, seconds: Float64Array, top: number): PowerOverFlow['hours'] {
  const width = top / CLASSES;
  const sums = new Float64Array(CLASSES);
  for (let i = 0; i < flow.length; i++) {
    const at = Math.min(CLASSES - 1, Math.floor(flow[i]! / width));
    sums[at]! += seconds[i]!;
  }
  return Array.from(sums, (s, i) => ({ fromM3s: i * width, toM3s: (i + 1) * width, hours: s / 3600 }));
}

/** The record over time with what a rule did, thinned to a number of buckets that a picture can show. */
export interface RuleSeries {
  readonly rule: RuleId;
  /** true where each bucket is one interval. */
  readonly exact: boolean;
  /** By bucket, in time order; a stretch without an interval is a gap and has no bucket. */
  readonly startMs: readonly number[];
  readonly endMs: readonly number[];
  readonly flowM3s: readonly number[];
  readonly leastFlowM3s: readonly number[];
  readonly mostFlowM3s: readonly number[];
  readonly powerKw: readonly number[];
  /** Mean number of pumps running, and the most that ran. */
  readonly count: readonly number[];
  readonly mostCount: readonly number[];
  /** For pumps that differ: by pump, the share of each bucket's time that it ran; empty where a count says who runs. */
  readonly pumps: readonly { readonly name: string; readonly share: readonly number[] }[];
  readonly shortfallM3: readonly number[];
}

/**
 * @param fromMs, toMs  the part wanted, by default the whole record
 * @param buckets       at most so many, by default 1500
 * @param runSets       which pumps ran, for stations whose count does not say who
 */
export function ruleSeries(
  comparison: Comparison,
  rule: RuleId,
  { fromMs = -Infinity, toMs = Infinity, buckets = 1500 }: { fromMs?: number; toMs?: number; buckets?: number } = {},
  runSets: RunSets | null = null,
): RuleSeries | null {
  const run = comparison.runs.find((one) => one.rule.id === rule);
  if (!run) return null;
  const { startMs, seconds, flow } = comparison.record;
  const inside: number[] = [];
  for (let i = 0; i < startMs.length; i++) {
    if (startMs[i]! + seconds[i]! * 1000 > fromMs && startMs[i]! < toMs) inside.push(i);
  }
  const first = inside[0];
  const columns = {
    startMs: [] as number[],
    endMs: [] as number[],
    flowM3s: [] as number[],
    leastFlowM3s: [] as number[],
    mostFlowM3s: [] as number[],
    powerKw: [] as number[],
    count: [] as number[],
    mostCount: [] as number[],
    shortfallM3: [] as number[],
  };
  const sets = runSets?.of(rule);
  const pumps = (sets ? comparison.duty : []).map(({ name }) => ({ name, share: [] as number[] }));
  /** Share of an interval's time that the pump in this place ran. */
  const ran = (place: number, i: number) => {
    const on = (set: number) => (set >> place) & 1;
    return on(sets!.low[i]!) + run.share[i]! * (on(sets!.high[i]!) - on(sets!.low[i]!));
  };
  const exact = inside.length <= buckets;
  if (first === undefined) return { rule, exact, ...columns, pumps };
  const last = inside[inside.length - 1]!;
  const width = exact ? 0 : (startMs[last]! + seconds[last]! * 1000 - startMs[first]!) / buckets;
  let bucketEnd = -Infinity;
  let end = Number.NaN;
  let time = 0;
  for (const i of inside) {
    const begins = startMs[i]!;
    const length = seconds[i]!;
    const count = run.lowCount[i]! + run.share[i]! * (run.highCount[i]! - run.lowCount[i]!);
    const most = run.share[i]! > 0 ? Math.max(run.lowCount[i]!, run.highCount[i]!) : run.lowCount[i]!;
    const short = Math.max(0, flow[i]! - run.series.flow[i]!) * length;
    const k = columns.startMs.length - 1;
    if (begins >= bucketEnd || Math.abs(begins - end) > 500) {
      columns.startMs.push(begins);
      columns.endMs.push(begins + length * 1000);
      columns.flowM3s.push(flow[i]!);
      columns.leastFlowM3s.push(flow[i]!);
      columns.mostFlowM3s.push(flow[i]!);
      columns.powerKw.push(run.series.mean[i]! / 1000);
      columns.count.push(count);
      columns.mostCount.push(most);
      columns.shortfallM3.push(short);
      for (const [place, { share }] of pumps.entries()) share.push(ran(place, i));
      bucketEnd = begins + width;
      time = length;
    } else {
      const mean = (list: number[], value: number) => {
        list[k] = (list[k]! * time + value * length) / (time + length);
      };
      columns.endMs[k] = begins + length * 1000;
      mean(columns.flowM3s, flow[i]!);
      mean(columns.powerKw, run.series.mean[i]! / 1000);
      mean(columns.count, count);
      for (const [place, { share }] of pumps.entries()) mean(share, ran(place, i));
      columns.leastFlowM3s[k] = Math.min(columns.leastFlowM3s[k]!, flow[i]!);
      columns.mostFlowM3s[k] = Math.max(columns.mostFlowM3s[k]!, flow[i]!);
      columns.mostCount[k] = Math.max(columns.mostCount[k]!, most);
      columns.shortfallM3[k]! += short;
      time += length;
    }
    end = begins + length * 1000;
  }
  return { rule, exact, ...columns, pumps };
}
