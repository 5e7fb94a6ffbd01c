/** A tariff, read and checked: rates in the tariff's currency, time of day in minutes of the local clock. */
export type Weekday = 'mon' | 'tue' | 'wed' | 'thu' | 'fri' | 'sat' | 'sun';

/** Season bounds as month × 100 + day, both included; `from` > `to` wraps past the new year. */
export interface Season {
  readonly name: string;
  readonly from: number;
  readonly to: number;
}

/** When something holds. null means always; `fromMinute` = `toMinute` means all day; a wrap past midnight is allowed. */
export interface Period {
  readonly season: string | null;
  readonly days: readonly Weekday[] | null;
  readonly fromMinute: number;
  readonly toMinute: number;
}

/** A price of energy, and when it holds. */
export interface EnergyRate extends Period {
  readonly name: string;
  /** Money per kWh. */
  readonly rate: number;
}

/** A charge for the highest window of a month. */
export interface DemandCharge {
  readonly name: string;
  /** A demand window counts where its start is inside any of these. */
  readonly periods: readonly Period[];
  /** Money per kW and month. */
  readonly rate: number;
  /** Never bill less than this share of the highest measured demand of so many preceding months. */
  readonly ratchet: { readonly fraction: number; readonly months: number } | null;
  /** Measured demand of months before the record. */
  readonly history: readonly { readonly month: string; readonly kw: number }[];
}

/** A tariff as bills are made from it; times are local, money is in its currency. */
export interface Tariff {
  readonly name: string;
  readonly currency: string;
  readonly timeZone: string;
  readonly seasons: readonly Season[];
  /** Local dates `2025-12-25` that count as another day of the week. */
  readonly holidays: { readonly dates: ReadonlySet<string>; readonly as: Weekday };
  readonly energy: readonly EnergyRate[];
  readonly demand: readonly DemandCharge[];
  /** Length of a demand window [s]. */
  readonly demandWindow: number;
  readonly fixedPerMonth: number;
  readonly taxPercent: number;
  readonly carbonKgPerKwh: number;
}

/** The power a rule draws over a record, by interval; only intervals with a value. All arrays have one length. */
export interface PowerSeries {
  readonly startMs: Float64Array;
  readonly seconds: Float64Array;
  /** Mean electric power [W], standby included. */
  readonly mean: Float64Array;
  /** Mean flow delivered [m³/s]. */
  readonly flow: Float64Array;
  readonly shared: SharedIntervals;
  /** Volume between start and stop [m³], or null where unknown. */
  readonly activeVolume: number | null;
}

/** The intervals that two states share by time, rising, and the two: a cycle of them is V/(Q − Qa) + V/(Qb − Q). */
export interface SharedIntervals {
  readonly interval: Uint32Array;
  /** Power of the lower and of the higher state [W], standby included. */
  readonly low: Float64Array;
  readonly high: Float64Array;
  /** Their flows [m³/s]. */
  readonly lowFlow: Float64Array;
  readonly highFlow: Float64Array;
}

/** The bill of one local calendar month, in the tariff's currency. */
export interface MonthBill {
  /** Local calendar month, `2025-03`. */
  readonly month: string;
  readonly energyKwh: number;
  readonly energyCost: number;
  readonly demand: readonly {
    readonly name: string;
    /** Highest window mean in the charge's periods; null where no window counts. */
    readonly measuredKw: number | null;
    readonly billedKw: number;
    readonly cost: number;
  }[];
  readonly demandCost: number;
  readonly fixedCost: number;
  readonly taxCost: number;
  readonly totalCost: number;
}

/** Energy of one rate of the tariff over the whole record. */
export interface PeriodBill {
  readonly name: string;
  readonly energyKwh: number;
  readonly energyCost: number;
}

/** The bill of a record, in the tariff's currency; every total is the sum of its months. */
export interface Bill {
  readonly energyCost: number;
  readonly demandCost: number;
  readonly fixedCost: number;
  readonly taxCost: number;
  readonly totalCost: number;
  readonly carbonKg: number;
  readonly months: readonly MonthBill[];
  readonly periods: readonly PeriodBill[];
  readonly notes: readonly { readonly code: string; readonly text: string }[];
}
