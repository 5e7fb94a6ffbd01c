import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Log } from '../../server/ingest/log.ts';
import { type Comparison, compareRules, resultOf, rulesToRun } from '../../server/staging/compare.ts';
import { demandRecord } from '../../server/staging/demandRecord.ts';
import { firmCapacity } from '../../server/staging/firmCapacity.ts';
import { floorPower } from '../../server/staging/floorOverRecord.ts';
import type { RuleId } from '../../server/staging/result.ts';
import { type Run, runRule } from '../../server/staging/run.ts';
import { stagedPumpsOf } from '../../server/staging/stagedPumpsOf.ts';
import { readStation } from '../../server/station/readStation.ts';
import type { Station } from '../../server/station/station.ts';
import type { StationFile } from '../../server/station/stationFile.ts';
import { flowLog } from '../support/comparing.ts';
import { dice, ENDURE, madeStation } from '../support/madeStations.ts';
import { inUnits } from '../support/otherUnits.ts';

/** What holds of every station, whatever its pumps: laws that need no expected figure. */

const RUNS = ENDURE ? 100 : 12;
const bounded = { seed: 11, numRuns: RUNS };

interface Case {
  readonly file: StationFile;
  readonly station: Station;
  /** The flows alone, at the static head of the station; and with a static head of each interval's own, for some. */
  readonly log: Log;
  readonly heads: Log | null;
  /** Every rule and the floor over the flows alone. */
  readonly comparison: Comparison;
  /** The runs to hold laws against: those of the comparison, or those with the heads. */
  readonly runs: readonly Run[];
}

/** A made-up station, equal pumps or not, with hours that reach a little above what it can do; some at rest. */
function made(seed: number, mixed: boolean): Omit<Case, 'comparison' | 'runs'> {
  const file = { ...madeStation(seed, { mixed, most: mixed && !ENDURE ? 3 : 4 }), storage: { activeVolume: 12 } };
  const station = readStation(file, 'station.json');
  const roll = dice(seed + 77);
  const most = stagedPumpsOf(station, station.duty).flatOut(station.duty.length).flow;
  const flows = Array.from({ length: 16 }, () => (roll() < 0.1 ? 0 : 1.1 * most * roll()));
  const log = flowLog(flows);
  const staticHead = Float64Array.from(flows, () => station.staticHead * (0.95 + 0.1 * roll()));
  return { file, station, log, heads: !mixed && roll() < 0.5 ? { ...log, staticHead } : null };
}

/** Every law draws the same stations, so what all of them start from is worked out once. */
const known = new Map<string, Case>();

function aCase({ seed, mixed }: { seed: number; mixed: boolean }): Case {
  const name = `${seed} ${mixed}`;
  let found = known.get(name);
  if (!found) {
    const { station, log, heads, ...rest } = made(seed, mixed);
    const comparison = compareRules({ station, log, tariff: null });
    found = { ...rest, station, log, heads, comparison, runs: heads ? runs(station, heads) : comparison.runs };
    known.set(name, found);
  }
  return found;
}

// A seed has no simpler seed: the failing station itself is what to look at.
const seed = fc.noShrink(fc.integer({ min: 0, max: 1e6 }));
const cases = fc.tuple(seed, fc.constantFrom(false, false, false, true)).map(([number, mixed]) => ({
  seed: number,
  mixed,
  toString: () => `${mixed ? 'mixed' : 'equal'} station ${number}`,
}));

/** A law of every station, on the stations that all laws draw. */
function holds(law: (one: Case, seed: number) => void): void {
  fc.assert(
    fc.property(cases, (one) => law(aCase(one), one.seed)),
    bounded,
  );
}

/** Each rule that a station can run, over a log. */
function runs(station: Station, log: Log, without: readonly RuleId[] = []): Run[] {
  const { rules } = rulesToRun(station, station.duty, undefined);
  const pumps = stagedPumpsOf(station, station.duty);
  const record = demandRecord(station, log);
  return rules.filter(({ id }) => !without.includes(id)).map((rule) => runRule(rule, pumps, record));
}

const sum = (values: Iterable<number>): number => {
  let total = 0;
  for (const value of values) total += value;
  return total;
};

/** Equal to a share of the larger; sums of numbers in another order differ in their last digits only. */
function expectClose(found: number, expected: number, where: string, tolerance = 1e-9): void {
  const off = Math.abs(found - expected) / Math.max(Math.abs(expected), 1e-9);
  expect(off, `${where}: ${found} for ${expected}`).toBeLessThan(tolerance);
}

const part = (log: Log, from: number, to: number): Log => ({
  ...log,
  startMs: log.startMs.subarray(from, to),
  seconds: log.seconds.subarray(from, to),
  flow: log.flow!.subarray(from, to),
  staticHead: log.staticHead?.subarray(from, to) ?? null,
});

/** Rules whose choice in an interval depends on that interval alone. */
const WITH_MEMORY: readonly RuleId[] = ['steady', 'flow-steps'];
const forgetful = (all: readonly Run[]) => all.filter(({ rule }) => !WITH_MEMORY.includes(rule.id));

describe(`for ${RUNS} stations, equal pumps or not, over sixteen hours each`, () => {
  it('the parts of the ledger add up to the energy, and each is none below nothing', () => {
    holds((one) => {
      for (const { rule, totals } of one.runs) {
        expectClose(sum(Object.values(totals.ledgerKwh)), totals.energyKwh, rule.id);
        // A valve that takes nothing may be a rounding of the head below it.
        for (const [name, kwh] of Object.entries(totals.ledgerKwh)) {
          expect(kwh, `${rule.id} ${name}`).toBeGreaterThanOrEqual(-1e-9 * totals.energyKwh);
        }
      }
    });
  });

  it('what is delivered and what is short make the volume of the record, and the hours of counts and sets its hours', () => {
    holds(({ log, runs: all }) => {
      const volume = sum(log.flow!.map((flow, i) => flow * log.seconds[i]!));
      for (const { rule, totals } of all) {
        expectClose(totals.deliveredM3 + totals.shortfallM3, volume, rule.id);
        expectClose(sum(totals.secondsByCount), sum(log.seconds), rule.id);
        expectClose(sum(totals.secondsBySet.values()), sum(log.seconds), rule.id);
      }
    });
  });

  it('two halves of a record take what the whole takes', () => {
    holds(({ station, log, heads, runs: all }, number) => {
      const cut = 1 + (number % 15);
      const halves = [part(heads ?? log, 0, cut), part(heads ?? log, cut, 16)].map((half) =>
        runs(station, half, WITH_MEMORY),
      );
      forgetful(all).forEach(({ rule, totals }, r) => {
        const energy = halves.map((half) => half[r]!.totals.energyKwh);
        expectClose(sum(energy), totals.energyKwh, rule.id);
      });
    });
  });

  it('an hour takes what sixty equal minutes take', () => {
    holds(({ station, log, comparison }) => {
      const hours = log.flow!.subarray(0, 4);
      const minutes = flowLog(
        [...hours].flatMap((flow) => new Array<number>(60).fill(flow)),
        60,
      );
      const short = runs(station, minutes, WITH_MEMORY);
      forgetful(comparison.runs).forEach(({ rule, series }, r) => {
        expectClose(short[r]!.totals.energyKwh, sum(series.mean.subarray(0, 4)) / 1000, rule.id);
        expectClose(short[r]!.totals.deliveredM3, 3600 * sum(series.flow.subarray(0, 4)), rule.id);
      });
    });
  });

  it('two runs give the same bits', () => {
    fc.assert(
      fc.property(cases, (one) => {
        const again = made(one.seed, one.mixed);
        const second = compareRules({ station: again.station, log: again.log, tariff: null });
        expect(text(second)).toBe(text(aCase(one).comparison));
      }),
      bounded,
    );
  });

  it('the same station in US and in metric units gives the same results', () => {
    holds(({ file, log, comparison }) => {
      const other: StationFile['units'] =
        file.units.head === 'm' ? { flow: 'gpm', head: 'ft', power: 'hp' } : { flow: 'L/s', head: 'm', power: 'kW' };
      const station = readStation(inUnits(file, other), 'station.json');
      runs(station, log).forEach(({ rule, totals }, r) => {
        const { energyKwh, ledgerKwh, starts } = comparison.runs[r]!.totals;
        expectClose(totals.energyKwh, energyKwh, rule.id);
        // Starts follow from the flow of a state at a flat minimum of power per flow, which is found to about 1e-8.
        expectClose(totals.starts ?? -1, starts ?? -1, `starts of ${rule.id}`, 1e-6);
        for (const [name, kwh] of Object.entries(ledgerKwh)) {
          const apart = Math.abs(totals.ledgerKwh[name as keyof typeof ledgerKwh] - kwh);
          expect(apart, `${rule.id} ${name}`).toBeLessThan(1e-9 * energyKwh);
        }
      });
      expectClose(firmCapacity(station, station.duty), comparison.firmCapacity, 'firm capacity');
    });
  });

  it('no rule is below the floor', () => {
    holds(({ station, comparison }) => {
      const floor = floorPower(station, station.duty, comparison.record);
      for (const { rule, series } of comparison.runs) {
        series.mean.forEach((power, i) => {
          const flow = series.flow[i]!;
          if (flow === 0) return;
          // At a flow where the floor jumps, the last digit decides on which side of the jump a rule stands.
          const least = Math.min(...[flow, flow * (1 - 1e-12)].map((q) => floor(q, station.staticHead)));
          // The floor is read between nodes; a comparison then lowers it to what a rule itself has shown possible.
          expect(power / (least + station.standbyPower), `${rule.id} at ${flow} m³/s`).toBeGreaterThan(1 - 2e-5);
        });
      }
    });
  });

  it('equal pumps may be written in any order', () => {
    holds(({ file, station, log }) => {
      // Every pump of the file twice, under names of their own, and then with the names of like pumps exchanged.
      const doubled = file.pumps.slice(0, 2).flatMap((pump) => [
        { ...pump, name: `${pump.name}x`, count: 1 },
        { ...pump, name: `${pump.name}y`, count: 1 },
      ]);
      const exchanged = doubled.map((_, i) => doubled[i % 2 === 0 ? i + 1 : i - 1]!);
      const [one, two] = [doubled, exchanged].map((pumps) =>
        runs(readStation({ ...file, pumps }, 'station.json'), log),
      );
      one!.forEach(({ rule, totals }, r) => {
        expect(two![r]!.totals, `${rule.id} of ${station.name}`).toEqual(totals);
      });
    });
  });
});

/** A comparison with all that is told of it, to the last digit. */
function text(comparison: Comparison): string {
  return JSON.stringify(resultOf(comparison, { station: '', record: '', tariff: null }));
}

describe(`for ${10 * RUNS} stations of equal pumps`, () => {
  it('without static head and with square friction, flow, head and power follow the affinity laws', () => {
    fc.assert(
      fc.property(seed, fc.double({ min: 0.5, max: 0.99, noNaN: true }), (number, speed) => {
        const made = inUnits(madeStation(number), { flow: 'm3/s', head: 'm', power: 'kW' });
        const [pump] = made.pumps;
        if (!pump || !('curve' in pump)) throw new Error('a made-up station of equal pumps has single pumps');
        const { speedCorrection: _correction, ...curve } = pump.curve;
        // The system asks for about half the shut-off head where all pumps run at their best.
        const { curve: first } = readStation(made, 'station.json').duty[0]!.machines[0]!;
        const coefficient = (0.5 * first.shutoffHead) / ((pump.count ?? 1) * first.bestFlow) ** 2;
        const at = (minSpeed: number) =>
          readStation(
            {
              ...made,
              allowable: undefined,
              system: { staticHead: 0, friction: { coefficient, exponent: 2 } },
              pumps: [
                { ...pump, curve, motor: { efficiency: 0.9 }, drive: { minSpeed, maxSpeed: 1, efficiency: 0.95 } },
              ],
            },
            'station.json',
          );
        const station = at(speed);
        const pumps = stagedPumpsOf(station, station.duty);
        for (let n = 1; n <= pumps.most; n++) {
          const [slow, full] = [pumps.lowest(n), pumps.flatOut(n)];
          const head = ({ running }: typeof full) => running[0]!.pump.head(running[0]!.flow, running[0]!.speed);
          expectClose(slow.flow, speed * full.flow, 'flow ∝ s');
          expectClose(head(slow), speed ** 2 * head(full), 'head ∝ s²');
          expectClose(slow.power, speed ** 3 * full.power, 'power ∝ s³');
          // Trimmed to a flow between them, the power is that of the cube too.
          const q = slow.flow + 0.4 * (full.flow - slow.flow);
          expectClose(pumps.trim(n, q).power, (q / full.flow) ** 3 * full.power, 'power ∝ Q³');
        }
      }),
      { seed: 11, numRuns: 10 * RUNS },
    );
  });
});
