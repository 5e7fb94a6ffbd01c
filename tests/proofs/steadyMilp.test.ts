import { describe, expect, it } from 'vitest';
import type { Log } from '../../server/ingest/log.ts';
import { demandRecord } from '../../server/staging/demandRecord.ts';
import { FixedSet } from '../../server/staging/fixedSet.ts';
import { MixedPumps } from '../../server/staging/mixedPumps.ts';
import { ruleOf } from '../../server/staging/rules/all.ts';
import { runRule } from '../../server/staging/run.ts';
import { stagedPumpsOf } from '../../server/staging/stagedPumpsOf.ts';
import type { Action } from '../../server/staging/state.ts';
import { readStation } from '../../server/station/readStation.ts';
import { dutyPumpsAreEqual, type Station } from '../../server/station/station.ts';
import type { StationFile } from '../../server/station/stationFile.ts';
import { flowLog } from '../support/comparing.ts';
import { dice, ENDURE, madeStation, seeds } from '../support/madeStations.ts';
import { PlainStation } from '../support/plainModel.ts';
import { PlainRules } from '../support/plainRules.ts';
import { type Interval, leastSequence, type Way } from '../support/steadyProgram.ts';

/**
 * `steady` against a mixed-integer program that HiGHS solves to 1e-9: what it spends over a day on energy and starts is
 * the least that any allowed sequence of sets spends. What a count of equal pumps costs comes from the second working of
 * the station; what a set of different pumps costs from the program itself, where tests/proofs/floorMilp.test.ts has it
 * proven.
 */
const CLOSE = 1e-7;

interface Day {
  readonly seed: number;
  readonly file: StationFile;
  readonly station: Station;
  readonly log: Log;
}

/** A day that rises and falls as demand does, with a pause, and two hours lost from some. */
function aDay(seed: number, mixed: boolean, steps: number): Day {
  const made = madeStation(seed, { mixed, most: 3 });
  const roll = dice(seed + 900);
  const fresh = readStation(made, 'station.json');
  const full = stagedPumpsOf(fresh, fresh.duty).flatOut(fresh.duty.length);
  const file: StationFile = {
    ...made,
    storage: { activeVolume: (1 + 3000 * roll()) * full.flow },
    rules: { steady: { minRunMinutes: 60 + 120 * roll(), startPenaltyKwh: 0.3 * roll() * (full.power / 1000) } },
  };
  const pause = Math.floor(steps * roll());
  const flows = Array.from({ length: steps }, (_, i) => {
    const tide = 0.5 - 0.35 * Math.cos((2 * Math.PI * i) / steps);
    return i === pause ? 0 : full.flow * Math.max(0, tide + 0.5 * (roll() - 0.5));
  });
  const log = flowLog(flows, 86_400 / steps);
  const lost = roll() < 0.5 ? Math.floor(steps * roll()) : steps;
  const startMs = log.startMs.map((ms, i) => (i < lost ? ms : ms + 2 * 3_600_000));
  return { seed, file, station: readStation(file, 'station.json'), log: { ...log, startMs } };
}

type Ways = (flow: number, seconds: number) => ReadonlyMap<number, Way>;

/** Starts of pumps that share an interval with rest: one a pump and cycle. */
function cycling(station: Station, count: number, resting: number, flow: number, seconds: number): number {
  const volume = station.storage.activeVolume!;
  return (count * seconds) / (volume / flow + volume / (resting - flow));
}

const OFF: ReadonlyMap<number, Way> = new Map([[0, { cost: 0, base: 0 }]]);

/** Counts of equal pumps, as the second working has them; of n pumps the first n run. */
function countWays({ file, station }: Day): Ways {
  const plain = new PlainRules(new PlainStation(file));
  return (flow, seconds) =>
    new Map(
      plain.ways(flow).map(({ count, power, resting }) => {
        const set = 2 ** count - 1;
        const starts = resting === null ? 0 : cycling(station, count, resting, flow, seconds);
        const cost = power * seconds + station.steady.startPenalty * starts;
        return [set, { cost, base: resting === null ? set : 0 }];
      }),
    );
}

/** Sets of different pumps; those that overload a motor or leave their range only where no other can meet the flow. */
function setWays({ station }: Day): Ways {
  const pumps = new MixedPumps(station, station.duty);
  const sets = Array.from({ length: 2 ** pumps.most - 1 }, (_, i) => new FixedSet(pumps, i + 1));
  return (flow, seconds) => {
    let found = sets.flatMap((set) => {
      const figures = set.figuresAt(flow);
      return figures ? [{ set: set.set, ...figures }] : [];
    });
    if (found.some((each) => !each.overloaded)) found = found.filter((each) => !each.overloaded);
    if (found.some((each) => each.inside)) found = found.filter((each) => each.inside);
    if (found.length === 0) {
      const { power, set } = pumps.flatOut(pumps.most);
      return new Map([[2 ** pumps.most - 1, { cost: power * seconds, base: set }]]);
    }
    return new Map(
      found.map(({ set, power, rest }) => {
        const starts = rest ? cycling(station, rest.count, rest.flow, flow, seconds) : 0;
        return [set, { cost: power * seconds + station.steady.startPenalty * starts, base: rest ? 0 : set }];
      }),
    );
  };
}

function expectLeast(day: Day, ways: Ways): void {
  const { seed, station, log } = day;
  const where = `station ${seed}`;
  const intervals: Interval[] = Array.from(log.flow!, (flow, i) => ({
    start: log.startMs[i]! / 1000,
    seconds: log.seconds[i]!,
    ways: flow === 0 ? OFF : ways(flow, log.seconds[i]!),
  }));
  const actions: Action[] = [];
  const { totals } = runRule(
    ruleOf('steady')!,
    stagedPumpsOf(station, station.duty),
    demandRecord(station, log),
    (i, action) => {
      actions[i] = action;
    },
  );
  // Where nothing else may run, what runs is told by the interval, not by the pumps that deliver.
  const chosen = intervals.map(({ ways: all }, i) => (all.size === 1 ? [...all.keys()][0]! : actions[i]!.high.set));
  const least = leastSequence(intervals, station.steady);
  const priced = leastSequence(intervals, station.steady, chosen);
  expect(priced, `${where}: the sequence is allowed`).not.toBeNull();
  expect(priced! / least!, `${where}: no sequence is cheaper`).toBeLessThan(1 + CLOSE);
  const standby = station.standbyPower * log.seconds.reduce((sum, each) => sum + each, 0);
  const starts = startsOf(day, intervals, actions);
  const spent = totals.energyKwh * 3.6e6 - standby + station.steady.startPenalty * starts;
  expect(Math.abs(spent / priced! - 1), `${where}: ${spent} J for ${priced} J`).toBeLessThan(CLOSE);
  if (dutyPumpsAreEqual(station.duty)) expect(totals.starts! - starts, where).toBeCloseTo(0, 6);
}

/** Starts pump by pump: those that did not run to the end of the interval before, and those that cycle within one. */
function startsOf({ station, log }: Day, intervals: readonly Interval[], actions: readonly Action[]): number {
  let starts = 0;
  actions.forEach(({ low, high, share }, i) => {
    const before = intervals[i - 1];
    const adjacent = before && before.start + before.seconds > intervals[i]!.start - 0.5;
    if (adjacent) starts += risen(actions[i - 1]!.low.set, low.set);
    if (share > 0) starts += cycling(station, risen(low.set, high.set), high.flow, log.flow![i]!, log.seconds[i]!);
  });
  return starts;
}

function risen(from: number, to: number): number {
  return Array.from({ length: 8 }, (_, pump) => 2 ** pump).filter((bit) => (to & bit) > (from & bit)).length;
}

/** A day of hours, and in the long run one of quarters of an hour as well. */
const days = [
  { steps: 24, equal: seeds(8, 60), mixed: seeds(3, 30) },
  ...(ENDURE ? [{ steps: 96, equal: seeds(0, 20), mixed: seeds(0, 8) }] : []),
];

describe.each(days)('over a day of $steps intervals', ({ steps, equal, mixed }) => {
  it(`steady spends the least that HiGHS finds, to 1e-7, on ${equal.length} stations of equal pumps`, () => {
    for (const seed of equal) {
      const day = aDay(seed, false, steps);
      expectLeast(day, countWays(day));
    }
  });

  it(`steady spends the least that HiGHS finds, to 1e-7, on ${mixed.length} stations of different pumps`, () => {
    for (const seed of mixed) {
      const day = aDay(seed, true, steps);
      expectLeast(day, setWays(day));
    }
  });
});
