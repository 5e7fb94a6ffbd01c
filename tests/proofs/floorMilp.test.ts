import { describe, expect, it } from 'vitest';
import { Floor } from '../../server/staging/floor.ts';
import { stagedPumpsOf } from '../../server/staging/stagedPumpsOf.ts';
import { readStation } from '../../server/station/readStation.ts';
import type { StationFile } from '../../server/station/stationFile.ts';
import { bestCountCarriers, floorCarriers, leastResting } from '../support/carriers.ts';
import { flowLog } from '../support/comparing.ts';
import { type Bounds, leastAllocation } from '../support/leastAllocation.ts';
import { dice, ENDURE, madeStation, seeds } from '../support/madeStations.ts';
import { PlainStation } from '../support/plainModel.ts';
import { run } from '../support/running.ts';

/**
 * Who runs and who carries what, against a mixed-integer program: the power of each pump worked out from the station file
 * a second time (tests/support/plainModel.ts), made piecewise linear, and minimised by HiGHS. The program's bounds are
 * closed until no arrangement of pumps can be cheaper than the one it found by more than GAP.
 */
const GAP = 2e-4;

/** Room for the rounding of both sides, and for the solver's flows, which add up to 1e-9. */
const ROUNDING = 1e-7;

/** Newton's steps on the split of different pumps may end this far from a kink in one's power. */
const BESIDE_KINKS = 1e-5;

/** Between the nodes of its table best-count takes a split between two solved ones; beside a kink neither is exact. */
const BETWEEN_NODES = 5e-5;

interface Case {
  readonly seed: number;
  readonly file: StationFile;
  readonly flows: readonly number[];
}

/** Stations with flows of 5 to 98 % of what they can do. */
function cases(numbers: readonly number[], mixed: boolean, flows: number): Case[] {
  return numbers.map((seed) => {
    const made = madeStation(seed, { mixed, most: 4 });
    const station = readStation(made, 'station.json');
    const most = stagedPumpsOf(station, station.duty).flatOut(station.duty.length).flow;
    const roll = dice(seed + 500);
    return { seed, file: made, flows: Array.from({ length: flows }, () => most * (0.05 + 0.93 * roll())) };
  });
}

const percent = (share: number) => `${100 * share} %`;

/** Every station that fails is told, not the first alone. */
function expectWithin(power: number, { least, most }: Bounds, where: string, tolerance = ROUNDING): void {
  expect.soft(most / least - 1, `gap of the program, ${where}`).toBeLessThanOrEqual(GAP);
  expect.soft(power / least, `not below what is possible, ${where}`).toBeGreaterThan(1 - ROUNDING);
  expect.soft(power / most, `not above what the program found, ${where}`).toBeLessThan(1 + tolerance);
}

const equal = cases(seeds(6, 500), false, 1);
const mixed = cases(seeds(5, 80), true, ENDURE ? 2 : 1);

describe.each([
  ['equal', equal],
  ['different', mixed],
] as const)('floor of %s pumps', (kind, all) => {
  const count = all.reduce((sum, { flows }) => sum + flows.length, 0);
  it(`is what HiGHS finds, to ${percent(GAP)}, at ${count} flows of ${all.length} stations, and can be had`, () => {
    for (const { seed, file, flows } of all) {
      const station = readStation(file, 'station.json');
      const plain = new PlainStation(file);
      const floor = new Floor(station, station.duty);
      for (const flow of flows) {
        const where = `station ${seed} at ${flow} m³/s`;
        const { power, shares } = floor.allocation(flow, station.staticHead);
        const alike = kind === 'equal';
        const bounds = leastAllocation(floorCarriers(plain, flow, { alike }), flow, { gap: GAP, alike });
        expectWithin(power, bounds!, where, alike ? ROUNDING : BESIDE_KINKS);
        // The arrangement itself, added up from the second working.
        const header = plain.system(flow);
        let carried = 0;
        let drawn = 0;
        for (const { least, mode, count: n, flow: q } of shares) {
          const pump = plain.pumps.find(({ name }) => name === least.pump.name)!;
          carried += n * q;
          drawn += n * (mode === 'line' ? pump.linePower(q, header) : pump.drivePower(q, header, true));
        }
        expect.soft(carried / flow, where).toBeCloseTo(1, 9);
        expect.soft(drawn / power, where).toBeCloseTo(1, 8);
      }
    }
  });
});

describe('best-count of different pumps', () => {
  const count = mixed.reduce((sum, { flows }) => sum + flows.length, 0);
  it(`draws what HiGHS finds, to ${percent(GAP)}, at ${count} flows of ${mixed.length} stations`, () => {
    for (const { seed, file: made, flows } of mixed) {
      // What may overload or leave its range is a matter of other tests: here every state may be used.
      const { allowable: _range, ...file } = JSON.parse(JSON.stringify(made), (key, value) =>
        key === 'motor' ? { ...value, serviceFactor: 9 } : value,
      ) as StationFile;
      const station = readStation(file, 'station.json');
      const plain = new PlainStation(file);
      const { series } = run(station, 'best-count', flowLog(flows));
      flows.forEach((flow, i) => {
        const where = `station ${seed} at ${flow} m³/s`;
        const found = leastAllocation(bestCountCarriers(plain, flow), flow, { gap: GAP, alike: false });
        const resting = plain.storage ? leastResting(plain, flow) : Infinity;
        const bounds = {
          least: Math.min(found?.least ?? Infinity, resting),
          most: Math.min(found?.most ?? Infinity, resting),
        };
        expect.soft(series.flow[i]! / flow, where).toBeCloseTo(1, 9);
        expectWithin(series.mean[i]! - station.standbyPower, bounds, where, BETWEEN_NODES);
      });
    }
  });
});
