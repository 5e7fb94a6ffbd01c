import type { Note } from '../errors.ts';
import type { MonthBill, PeriodBill } from '../tariff/tariff.ts';
import type { MainVelocity, NpshMargin } from './watch.ts';

/** Every rule the program knows; model.md calls them by these ids and so do files, HTTP and commands. */
export const RULE_IDS = [
  'fixed-speed',
  'one-trimmed',
  'late-staging',
  'flow-steps',
  'best-count',
  'steady',
  'batch',
  'as-logged',
] as const;

export type RuleId = (typeof RULE_IDS)[number];

/** Where the kWh go; the parts add up to the total, and each is computed by its own formula. */
export interface LedgerKwh {
  readonly lift: number;
  readonly pipeFriction: number;
  readonly branch: number;
  readonly valve: number;
  readonly pump: number;
  readonly motor: number;
  readonly drive: number;
  readonly standby: number;
}

/** What one rule does with the whole record. Money is absent without a tariff. */
export interface RuleResult {
  readonly rule: RuleId;
  /** How many drives the rule needs: none, one, or one per duty pump. */
  readonly needsDrives: number;
  readonly energyKwh: number;
  /** Per m³ delivered; null where nothing was delivered. */
  readonly kwhPerM3: number | null;
  readonly aboveFloorPercent?: number;
  readonly energyCost?: number;
  readonly demandCost?: number;
  readonly fixedCost?: number;
  readonly taxCost?: number;
  readonly totalCost?: number;
  readonly carbonKg?: number;
  /** Highest interval mean, standby included, and highest power of any state entered. */
  readonly peakKw: number;
  readonly peakStateKw: number;
  readonly wireToWaterPercent: number | null;
  readonly deliveredM3: number;
  readonly shortfallM3: number;
  readonly shortfallHours: number;
  readonly hoursByCount: Readonly<Record<string, number>>;
  readonly hoursBySet: Readonly<Record<string, number>>;
  readonly outsidePreferredHours: number | null;
  /** By name of the pump: who it was that ran outside the preferred range. */
  readonly outsidePreferredHoursByPump?: Readonly<Record<string, number>>;
  readonly outsideAllowableHours: number | null;
  readonly nearDeadHeadHours: number;
  readonly overloadHours: number;
  readonly endOfCurveHours: number;
  /** Only where the station file has pipes. */
  readonly main?: MainVelocity;
  /** Only where the suction is known. */
  readonly npsh?: NpshMargin;
  /** null where unknown (no active volume and the pumps cycle inside intervals). */
  readonly starts: number | null;
  readonly ledgerKwh: LedgerKwh;
  readonly months?: readonly MonthBill[];
  readonly periods?: readonly PeriodBill[];
}

/** What one set of pumps delivered in the runs of a log of levels: a drawdown test of each run, together. */
export interface PumpTestResult {
  /** null where the log only counts pumps. */
  readonly pumps: readonly string[] | null;
  readonly pumpsOn: number;
  readonly runs: number;
  readonly hours: number;
  readonly pumpedM3s: number;
  /** Where their curves and the system meet at rated speed; null where the log has speeds. */
  readonly curveM3s: number | null;
}

/** `nth-pump/result/1`: rules side by side on one record. */
export interface ComparisonResult {
  readonly format: 'nth-pump/result/1';
  readonly record: {
    readonly from: string;
    readonly to: string;
    readonly intervals: number;
    readonly hours: number;
    readonly gapHours: number;
    readonly volumeM3: number;
  };
  readonly inputs: {
    readonly station: string;
    readonly tariff: string | null;
    readonly currency: string;
    readonly sha256: { readonly station: string; readonly record: string; readonly tariff: string | null };
  };
  readonly firmCapacityM3s: number;
  readonly floor?: { readonly energyKwh: number };
  readonly rules: readonly RuleResult[];
  /** Only for a record of levels without flow. */
  readonly pumpTests?: readonly PumpTestResult[];
  readonly notes: readonly Note[];
}
