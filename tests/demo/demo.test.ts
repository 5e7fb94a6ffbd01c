import { describe, expect, it } from 'vitest';
import { demoStations } from '../../server/demo/all.ts';
import { localHours } from '../../server/demo/localHours.ts';
import { randomFrom, wandering } from '../../server/demo/random.ts';
import { readCase } from '../../server/economics/caseFile.ts';
import { readRecord } from '../../server/ingest/record.ts';
import { compareRules, resultOf } from '../../server/staging/compare.ts';
import type { RuleId, RuleResult } from '../../server/staging/result.ts';
import { readStation } from '../../server/station/readStation.ts';
import type { StationFile } from '../../server/station/stationFile.ts';
import { readTariff } from '../../server/tariff/tariffFile.ts';

const demos = demoStations();
const [wastewater, booster, hilltop, unequal] = demos as [Demo, Demo, Demo, Demo];
type Demo = (typeof demos)[number];

function compared(demo: Demo, stationFile: StationFile = demo.station) {
  const station = readStation(stationFile, 'station.json');
  const { log } = readRecord({
    fileName: 'record.csv',
    data: demo.recordCsv,
    units: station.units,
    timeZone: station.timeZone,
    pumpNames: station.duty.map((pump) => pump.name),
  });
  const comparison = compareRules({ station, log, tariff: readTariff(demo.tariff, 'tariff.json') });
  return { log, result: resultOf(comparison, { station: '', record: '', tariff: '' }) };
}

const cost = (rules: readonly RuleResult[], id: RuleId) => rules.find(({ rule }) => rule === id)!.totalCost!;

/** Today's worth of a yearly sum over the case's years, by the usual annuity, no escalation. */
function worth(perYear: number, { years, discountRate }: Demo['caseFile']): number {
  return (perYear * (1 - (1 + discountRate) ** -years)) / discountRate;
}

describe('the demo', () => {
  it('is the same for the same seed, byte for byte, and another for another', () => {
    expect(JSON.stringify(demoStations())).toBe(JSON.stringify(demos));
    expect(demoStations(7)[0]!.recordCsv).not.toBe(demos[0]!.recordCsv);
  });

  it.each(demos.map((demo) => [demo.station.name, demo] as const))('%s: a year of hours without a fault', (_, demo) => {
    expect(() => readCase(demo.caseFile, 'case.json')).not.toThrow();
    const { result, log } = compared(demo);
    const { record, rules, notes } = result;
    expect(record.hours + record.gapHours).toBe(8760);
    expect(rules.map(({ rule }) => rule)).toEqual(
      expect.arrayContaining(['fixed-speed', 'one-trimmed', 'late-staging', 'flow-steps', 'best-count']),
    );
    expect(notes.map(({ code }) => code)).not.toContain('short-record');
    for (const rule of rules) {
      expect(rule.shortfallHours).toBe(0);
      expect(rule.overloadHours).toBe(0);
    }
    // The firm capacity is not passed in 99 of 100 hours: a plausible station, with a pump to spare nearly always.
    const flows = log.flow!.filter((flow) => !Number.isNaN(flow)).sort();
    expect(flows[Math.floor(flows.length * 0.99)]!).toBeLessThanOrEqual(result.firmCapacityM3s * 1.01);
  });

  it('has thirteen hours without a flow in the lift station, as missing rows and as empty cells', () => {
    const { record } = compared(wastewater).result;
    expect(record.gapHours).toBe(13);
    expect(wastewater.recordCsv.match(/Z,\n/g)).toHaveLength(4);
    expect(wastewater.recordCsv.trim().split('\n')).toHaveLength(1 + 8760 - 9);
  });

  it('lift station: better steps pay at once, drives add little beyond them', () => {
    const { rules } = compared(wastewater).result;
    const asItRuns = cost(rules, 'flow-steps');
    const restaged = cost(rules, 'fixed-speed');
    const driven = cost(rules, 'best-count');
    expect(restaged).toBeLessThan(0.9 * asItRuns);
    expect(driven).toBeLessThan(restaged);
    expect(restaged - driven).toBeLessThan(asItRuns - restaged);
    const { capital, maintenanceSavingPerYear = 0 } = wastewater.caseFile;
    expect(worth(restaged - driven + maintenanceSavingPerYear, wastewater.caseFile)).toBeLessThan(capital);
  });

  it('booster station: drives pay, against the operators’ steps and against the best without drives', () => {
    const { rules } = compared(booster).result;
    const { capital, incentive = 0, maintenanceSavingPerYear = 0 } = booster.caseFile;
    for (const today of ['flow-steps', 'fixed-speed'] as const) {
      const saving = cost(rules, today) - cost(rules, 'best-count') + maintenanceSavingPerYear;
      expect(worth(saving, booster.caseFile)).toBeGreaterThan(capital - incentive);
    }
  });

  it('hilltop lift: drives lose, and win where the lift is a third of it', () => {
    const high = compared(hilltop).result.rules;
    expect(cost(high, 'best-count')).toBeGreaterThan(1.01 * cost(high, 'fixed-speed'));
    const lowered = structuredClone(hilltop.station);
    lowered.system.staticHead = 32;
    const low = compared(hilltop, lowered).result.rules;
    expect(cost(low, 'best-count')).toBeLessThan(0.9 * cost(low, 'fixed-speed'));
  });

  it('high-lift station: a jockey, two bigger pumps of which one has a drive, and two in series', () => {
    const { duty } = readStation(unequal.station, 'station.json');
    expect(duty.map(({ machines, driveFitted }) => [machines.length, driveFitted])).toEqual([
      [1, false],
      [1, true],
      [1, false],
      [2, false],
    ]);
    const [jockey, ...others] = duty.map((pump) => pump.endFlow(1));
    expect(jockey!).toBeLessThan(Math.min(...others) / 1.5);
    // Neither of the pair lifts the water alone.
    for (const { curve } of duty.at(-1)!.machines)
      expect(curve.shutoffHead).toBeLessThan(unequal.station.system.staticHead);
  });

  it('high-lift station: choosing the set saves what a controller costs within two years, and names its pumps', () => {
    const { rules } = compared(unequal).result;
    const saving = cost(rules, 'flow-steps') - cost(rules, 'best-count');
    expect(2 * saving).toBeGreaterThan(unequal.caseFile.capital);
    const { hoursBySet } = rules.find(({ rule }) => rule === 'best-count')!;
    // The jockey has the nights and leaves the days to the pump with the drive; the pair is for the highest hours.
    expect(hoursBySet.Jockey).toBeGreaterThan(1000);
    expect(hoursBySet.Beck).toBeGreaterThan(4000);
    expect(Object.keys(hoursBySet).filter((set) => set.includes('Pair')).length).toBeGreaterThan(0);
  });
});

describe('local hours of the demo', () => {
  it('a year has 8760, one day of 23 and one of 25 hours, each labelled by the wall clock', () => {
    const hours = localHours('Europe/Dublin');
    expect(hours).toHaveLength(8760);
    const perDay = new Map<number, number>();
    for (const { day } of hours) perDay.set(day, (perDay.get(day) ?? 0) + 1);
    // Clocks in Dublin change on 30 March and 26 October 2025: days 88 and 298, counted from 0.
    expect([...perDay].filter(([, count]) => count !== 24)).toEqual([
      [88, 23],
      [298, 25],
    ]);
    // 1 January 2025 was a Wednesday.
    expect(hours[0]).toMatchObject({ day: 0, hour: 0, weekday: 2 });
    expect(hours.filter(({ day }) => day === 88).map(({ hour }) => hour)).not.toContain(1);
  });
});

describe('seeded numbers', () => {
  it('are uniform, normal and exponential by their means and deviations', () => {
    const random = randomFrom(1);
    const draw = (next: () => number) => {
      const values = Array.from({ length: 20_000 }, next);
      const mean = values.reduce((a, b) => a + b, 0) / values.length;
      const deviation = Math.sqrt(values.reduce((a, b) => a + (b - mean) ** 2, 0) / values.length);
      return { mean, deviation };
    };
    // Means of 20 000 draws scatter by a deviation of 1/141 of one draw's: 0.03 is four of them for deviation 1.
    const uniform = draw(random.uniform);
    expect(uniform.mean).toBeCloseTo(0.5, 1);
    expect(Math.abs(uniform.deviation - Math.sqrt(1 / 12))).toBeLessThan(0.01);
    for (const [next, mean] of [
      [random.normal, 0],
      [random.exponential, 1],
      [() => 1 + wandering(random, 1, 0)(), 1],
    ] as const) {
      const found = draw(next);
      expect(Math.abs(found.mean - mean)).toBeLessThan(0.03);
      expect(Math.abs(found.deviation - 1)).toBeLessThan(0.04);
    }
  });
});
