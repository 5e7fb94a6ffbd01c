import { describe, expect, it } from 'vitest';
import type { Log } from '../../server/ingest/log.ts';
import { compareRules } from '../../server/staging/compare.ts';
import { EqualPumps } from '../../server/staging/equalPumps.ts';
import { readStation } from '../../server/station/readStation.ts';
import type { Station } from '../../server/station/station.ts';

/**
 * `steady` against exhaustive search: every sequence of counts of a short record is tried, its rules checked one by one
 * and its energy and starts added up from the definition in the model, with no dynamic programming anywhere.
 */

const HOUR = 3600;

function station(minRunMinutes: number, startPenaltyKwh: number, surplus: 'storage' | 'throttle'): Station {
  return readStation(
    {
      format: 'nth-pump/station/1',
      name: 'short',
      timeZone: 'UTC',
      currency: 'EUR',
      units: { flow: 'L/s', head: 'm', power: 'kW' },
      surplus,
      system: { staticHead: 9, friction: { coefficient: 0.0011, exponent: 2 } },
      pumps: [
        {
          name: 'P',
          role: 'duty',
          count: 3,
          curve: { shutoffHead: 28, shape: 0.0042, bestFlow: 40, bestEfficiency: 0.77 },
          motor: { ratedPower: 22, efficiency: 0.92 },
          drive: { fitted: true, minSpeed: 0.65, efficiency: 0.96 },
        },
      ],
      rules: { steady: { minRunMinutes, startPenaltyKwh } },
    },
    'station.json',
  );
}

function log(flows: readonly number[], gapBefore: number): Log {
  return {
    startMs: Float64Array.from(flows, (_, i) => (i + (i >= gapBefore ? 2 : 0)) * HOUR * 1000),
    seconds: new Float64Array(flows.length).fill(HOUR),
    flow: Float64Array.from(flows, (q) => q / 1000),
    level: null,
    staticHead: null,
    power: null,
    pumpsOn: null,
    pumps: [],
  };
}

/** Seeded numbers in [0, 1): mulberry32, public domain. */
function random(seed: number): () => number {
  let a = seed;
  return () => {
    a = (a + 0x6d2b79f5) | 0;
    let t = Math.imul(a ^ (a >>> 15), 1 | a);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

/** Least energy [J] + penalty × starts over every sequence that the rule allows. */
function exhaustive(where: Station, record: Log): number {
  const pumps = new EqualPumps(where, where.duty);
  const { minRun, startPenalty } = where.steady;
  const n = record.startMs.length;
  // What each count draws, whether it rests meanwhile, and whether it can meet the flow.
  const ways = Array.from({ length: n }, (_, i) => {
    const flow = record.flow![i]!;
    const list = [{ count: 0, may: flow === 0, joules: 0, base: 0 }];
    for (let count = 1; count <= pumps.most; count++) {
      const trim = flow > 0 ? { ...pumps.trim(count, flow) } : null;
      const may = trim?.feasible === true && !trim.overloaded;
      list.push({ count, may, joules: may ? trim.power * HOUR : Infinity, base: trim?.rest ? 0 : count });
    }
    return list;
  });
  let least = Infinity;
  const follow = (i: number, count: number, sinceChange: number, base: number, spent: number) => {
    if (spent >= least) return;
    if (i === n) {
      least = spent;
      return;
    }
    const gap = i === 0 || record.startMs[i]! - record.startMs[i - 1]! > HOUR * 1000;
    for (const way of ways[i]!) {
      if (!way.may) continue;
      const change = gap || way.count !== count;
      if (!gap && change && sinceChange < minRun && ways[i]![count]!.may) continue;
      const starts = gap ? 0 : Math.max(0, way.base - base);
      follow(i + 1, way.count, (change ? 0 : sinceChange) + HOUR, way.base, spent + way.joules + startPenalty * starts);
    }
  };
  follow(0, 0, 0, 0, 0);
  return least;
}

describe('steady', () => {
  const cases = Array.from({ length: 24 }, (_, i) => i);
  it.each(cases)('is as good as the best of all sequences, record %i', (seed) => {
    const next = random(seed + 1);
    const surplus = seed % 2 === 0 ? 'storage' : 'throttle';
    const where = station(60 * (1 + (seed % 3)), 0.1 + 2 * next(), surplus);
    const flows = Array.from({ length: 9 }, () => (next() < 0.1 ? 0 : 4 + 92 * next()));
    const record = log(flows, seed % 4 === 3 ? 4 : 99);
    const [run] = compareRules({ station: where, log: record, tariff: null, rules: ['steady'] }).runs;
    const { energyKwh, starts } = run!.totals;
    // The station has no active volume, so where pumps cycle their starts are unknown: the rises are counted here.
    let rises = 0;
    for (let i = 1; i < flows.length; i++) {
      const adjacent = record.startMs[i]! - record.startMs[i - 1]! <= HOUR * 1000;
      if (adjacent) rises += Math.max(0, run!.lowCount[i]! - run!.lowCount[i - 1]!);
    }
    if (starts !== null) expect(starts).toBe(rises);
    const spent = energyKwh * 3.6e6 + where.steady.startPenalty * rises;
    expect(spent / exhaustive(where, record)).toBeCloseTo(1, 9);
  });

  it('draws what best-count draws where starts cost nothing and no run is too short', () => {
    const where = station(0, 0, 'throttle');
    const record = log([10, 40, 55, 20, 90, 61, 12], 99);
    const [free, best] = compareRules({
      station: where,
      log: record,
      tariff: null,
      rules: ['steady', 'best-count'],
    }).runs;
    expect(free!.totals.energyKwh).toBeCloseTo(best!.totals.energyKwh, 9);
  });
});
