import type { Opened } from '../../client/answers.ts';
import { Format, type FormatOptions } from '../../client/format.ts';
import type { PowerOverFlow } from '../../server/staging/pictures.ts';
import type { ComparisonResult, RuleId, RuleResult } from '../../server/staging/result.ts';
import type { StationFile } from '../../server/station/stationFile.ts';
import { aStationFile } from '../support/aStation.ts';

/** Numbers in English, units of the file, euros. */
export function aFormat(options: Partial<FormatOptions> = {}): Format {
  return new Format({
    file: { flow: 'L/s', head: 'm', power: 'kW' },
    choice: 'file',
    currency: 'EUR',
    timeZone: 'Europe/Dublin',
    locale: 'en-IE',
    ...options,
  });
}

export function aRule(rule: RuleId, fields: Partial<RuleResult> = {}): RuleResult {
  const needsDrives =
    { 'one-trimmed': 1, 'late-staging': 2, 'best-count': 2, steady: 2, batch: 2 }[rule as string] ?? 0;
  return {
    rule,
    needsDrives,
    energyKwh: 1000,
    kwhPerM3: 0.1,
    peakKw: 20,
    peakStateKw: 25,
    wireToWaterPercent: 60,
    deliveredM3: 10_000,
    shortfallM3: 0,
    shortfallHours: 0,
    hoursByCount: { 0: 0, 1: 6570, 2: 2190 },
    hoursBySet: {},
    outsidePreferredHours: null,
    outsideAllowableHours: null,
    nearDeadHeadHours: 0,
    overloadHours: 0,
    endOfCurveHours: 0,
    starts: null,
    ledgerKwh: { lift: 500, pipeFriction: 100, branch: 20, valve: 80, pump: 200, motor: 100, drive: 0, standby: 0 },
    ...fields,
  };
}

/** A rule with a bill of energy alone. */
export function aBilledRule(rule: RuleId, energyCost: number, fields: Partial<RuleResult> = {}): RuleResult {
  const bill = { energyCost, demandCost: 0, fixedCost: 0, taxCost: 0, totalCost: energyCost, carbonKg: 0 };
  return aRule(rule, { ...bill, months: [], ...fields });
}

export function aPower(fields: Partial<PowerOverFlow> = {}): PowerOverFlow {
  return {
    staticHeadM: 14,
    onDrives: true,
    alike: true,
    flowM3s: [0.02, 0.04, 0.06, 0.08],
    counts: [
      { count: 1, pumps: ['A'], capacityM3s: 0.055, powerKw: [4, 8, null, null] },
      { count: 2, pumps: ['A', 'B'], capacityM3s: 0.09, powerKw: [6, 9, 13, 18] },
    ],
    sets: [],
    stretches: [],
    crossings: [],
    hours: [],
    ...fields,
  };
}

interface Fields {
  readonly rules: readonly RuleResult[];
  readonly station?: Readonly<Record<string, unknown>>;
  readonly hours?: number;
  readonly gapHours?: number;
  readonly tariff?: string | null;
  readonly notes?: ComparisonResult['notes'];
  readonly power?: PowerOverFlow;
}

export function anOpened({
  rules,
  station = {},
  hours = 8760,
  gapHours = 0,
  tariff = 'T',
  notes = [],
  power,
}: Fields): Opened {
  return {
    station: aStationFile(station) as StationFile,
    power: power ?? aPower(),
    fixedPerMonth: 0,
    comparison: {
      format: 'nth-pump/result/1',
      record: {
        from: '2025-01-01T00:00:00Z',
        to: '2026-01-01T00:00:00Z',
        intervals: hours,
        hours,
        gapHours,
        volumeM3: 10_000,
      },
      inputs: { station: 'Mill Lane', tariff, currency: 'EUR', sha256: { station: '', record: '', tariff: null } },
      firmCapacityM3s: 0.05,
      rules,
      notes,
    },
  };
}
