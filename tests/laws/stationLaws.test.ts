import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Log } from '../../server/ingest/log.ts';
import { compareRules, resultOf, rulesToRun } from '../../server/staging/compare.ts';
import { demandRecord } from '../../server/staging/demandRecord.ts';
import { floorPower } from '../../server/staging/floorOverRecord.ts';
import type { ComparisonResult, RuleId } from '../../server/staging/result.ts';
import { type Run, runRule } from '../../server/staging/run.ts';
import { stagedPumps } from '../../server/staging/stagedPumps.ts';
import { readStation } from '../../server/station/readStation.ts';
import type { Station } from '../../server/station/station.ts';
import type { StationFile } from '../../server/station/stationFile.ts';
import { dice, ENDURE, madeStation } from '../support/madeStations.ts';
import { inUnits } from '../support/otherUnits.ts';
import { logOf } from '../support/running.ts';

/** What holds of every station, whatever its pumps: laws that need no expected figure. */

const RUNS = ENDURE ? 250 : 16;
const bounded = { seed: 11, numRuns: RUNS };

interface Case {
  readonly file: StationFile;
  readonly station: Station;
  readonly log: Log;
}

/** A made-up station, equal pumps or not, with hours that reach a little above what it can do; some at rest. */
function aCase(seed: number, mixed: boolean): Case {
  const file = { ...madeStation(seed, { mixed, most: 4 }), storage: { activeVolume: 12 } };
  const station = readStation(file, 'station.json');
  const roll = dice(seed + 77);
  const most = stagedPumps(station, station.duty).flatOut(station.duty.length).flow;
  const flows = Array.from({ length: 16 }, () => (roll() < 0.1 ? 0 : 1.1 * most * roll()));
  const log = logOf(flows);
  const heads = Float64Array.from(flows, () => station.staticHead * (0.95 + 0.1 * roll()));
  return { file, station, log: !mixed && roll() < 0.5 ? { ...log, staticHead: heads } : log };
}

// A seed has no simpler seed: the failing station itself is what to look at.
const seed = fc.noShrink(fc.integer({ min: 0, max: 1e6 }));
const cases = fc.tuple(seed, fc.constantFrom(false, false, true)).map(([number, mixed]) => ({
  seed: number,
  mixed,
  toString: () => `${mixed ? 'mixed' : 'equal'} station ${number}`,
}));

/** Each rule that a station can run, over a log. */
function runs(station: Station, log: Log, without: readonly RuleId[] = []): Run[] {
  const { rules } = rulesToRun(station, station.duty, undefined);
  const pumps = stagedPumps(station, station.duty);
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

describe('for every station and record', () => {
  it('the parts of the ledger add up to the energy, and each is none below nothing', () => {
    fc.assert(
      fc.property(cases, ({ seed, mixed }) => {
        const { station, log } = aCase(seed, mixed);
        for (const { rule, totals } of runs(station, log)) {
          expectClose(sum(Object.values(totals.ledgerKwh)), totals.energyKwh, rule.id);
          // A valve that takes nothing may be a rounding of the head below it.
          for (const [name, kwh] of Object.entries(totals.ledgerKwh)) {
            expect(kwh, `${rule.id} ${name}`).toBeGreaterThanOrEqual(-1e-9 * totals.energyKwh);
          }
        }
      }),
      bounded,
    );
  });

  it('what is delivered and what is short make the volume of the record, and the hours of counts and sets its hours', () => {
    fc.assert(
      fc.property(cases, ({ seed, mixed }) => {
        const { station, log } = aCase(seed, mixed);
        const volume = sum(log.flow!.map((flow, i) => flow * log.seconds[i]!));
        for (const { rule, totals } of runs(station, log)) {
          expectClose(totals.deliveredM3 + totals.shortfallM3, volume, rule.id);
          expectClose(sum(totals.secondsByCount), sum(log.seconds), rule.id);
          expectClose(sum(totals.secondsBySet.values()), sum(log.seconds), rule.id);
        }
      }),
      bounded,
    );
  });

  it('two halves of a record take what the whole takes', () => {
    fc.assert(
      fc.property(cases, fc.integer({ min: 1, max: 15 }), ({ seed, mixed }, cut) => {
        const { station, log } = aCase(seed, mixed);
        const whole = runs(station, log, WITH_MEMORY);
        const halves = [part(log, 0, cut), part(log, cut, 16)].map((half) => runs(station, half, WITH_MEMORY));
        whole.forEach(({ rule, totals }, r) => {
          const energy = halves.map((half) => half[r]!.totals.energyKwh);
          expectClose(sum(energy), totals.energyKwh, rule.id);
        });
      }),
      bounded,
    );
  });

  it('an hour takes what sixty equal minutes take', () => {
    fc.assert(
      fc.property(cases, ({ seed, mixed }) => {
        const { station, log } = aCase(seed, mixed);
        const hours = part({ ...log, staticHead: null }, 0, 4);
        const minutes = logOf(
          [...hours.flow!].flatMap((flow) => new Array<number>(60).fill(flow)),
          60,
        );
        const [long, short] = [
          runs(station, hours, ['flow-steps', 'steady']),
          runs(station, minutes, ['flow-steps', 'steady']),
        ];
        long!.forEach(({ rule, totals }, r) => {
          expectClose(short![r]!.totals.energyKwh, totals.energyKwh, rule.id);
          expectClose(short![r]!.totals.deliveredM3, totals.deliveredM3, rule.id);
        });
      }),
      bounded,
    );
  });

  it('two runs give the same bits', () => {
    fc.assert(
      fc.property(cases, ({ seed, mixed }) => {
        const [one, two] = [1, 2].map(() => {
          const { station, log } = aCase(seed, mixed);
          return result(station, { ...log, staticHead: null });
        });
        expect(JSON.stringify(one)).toBe(JSON.stringify(two));
      }),
      bounded,
    );
  });

  it('the same station in US and in metric units gives the same results', () => {
    fc.assert(
      fc.property(cases, ({ seed, mixed }) => {
        const { file, log } = aCase(seed, mixed);
        const { storage: _storage, ...own } = file;
        const level = { ...log, staticHead: null };
        const [metric, us] = [
          inUnits(own, { flow: 'L/s', head: 'm', power: 'kW' }),
          inUnits(own, { flow: 'gpm', head: 'ft', power: 'hp' }),
        ].map((each) => result(readStation(each, 'station.json'), level));
        metric!.rules.forEach(({ rule, energyKwh, ledgerKwh }, r) => {
          const other = us!.rules[r]!;
          expectClose(other.energyKwh, energyKwh, rule);
          for (const [name, kwh] of Object.entries(ledgerKwh)) {
            const apart = Math.abs(other.ledgerKwh[name as keyof typeof ledgerKwh] - kwh);
            expect(apart, `${rule} ${name}`).toBeLessThan(1e-9 * energyKwh);
          }
        });
        expectClose(us!.firmCapacityM3s, metric!.firmCapacityM3s, 'firm capacity');
      }),
      bounded,
    );
  });
});

function result(station: Station, log: Log): ComparisonResult {
  return resultOf(compareRules({ station, log, tariff: null }), { station: '', record: '', tariff: null });
}

describe('for every station', () => {
  it('no rule is below the floor', () => {
    fc.assert(
      fc.property(cases, ({ seed, mixed }) => {
        const { station, log } = aCase(seed, mixed);
        const record = demandRecord(station, { ...log, staticHead: null });
        const floor = floorPower(station, station.duty, record);
        for (const { rule, series } of runs(station, { ...log, staticHead: null })) {
          series.mean.forEach((power, i) => {
            if (series.flow[i] === 0) return;
            const least = floor(series.flow[i]!, station.staticHead) + station.standbyPower;
            // The floor is read between nodes; a comparison then lowers it to what a rule itself has shown possible.
            expect(power / least, `${rule.id} at ${series.flow[i]} m³/s`).toBeGreaterThan(1 - 2e-5);
          });
        }
      }),
      bounded,
    );
  });

  it('equal pumps may be written in any order', () => {
    fc.assert(
      fc.property(cases, ({ seed, mixed }) => {
        const { file, station, log } = aCase(seed, mixed);
        // Every pump of the file twice, under names of their own, and then with the names of like pumps exchanged.
        const doubled = file.pumps.slice(0, 2).flatMap((pump) => [
          { ...pump, name: `${pump.name}x`, count: 1 },
          { ...pump, name: `${pump.name}y`, count: 1 },
        ]);
        const exchanged = doubled.map((_, i) => doubled[i % 2 === 0 ? i + 1 : i - 1]!);
        const [one, two] = [doubled, exchanged].map((pumps) =>
          runs(readStation({ ...file, pumps }, 'station.json'), { ...log, staticHead: null }),
        );
        one!.forEach(({ rule, totals }, r) => {
          expect(two![r]!.totals, `${rule.id} of ${station.name}`).toEqual(totals);
        });
      }),
      bounded,
    );
  });

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
        const pumps = stagedPumps(station, station.duty);
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
