import type { Note } from '../errors.ts';
import { JOULES_PER_KWH } from '../units.ts';
import type { BillPlan } from './plan.ts';
import type { Bill, DemandCharge, MonthBill, PowerSeries } from './tariff.ts';

/**
 * Bill of the power that a rule draws over a record (model.md §7).
 *
 * Energy by period and month; demand as the highest window mean of a month; fixed charges by the share of the month
 * that the intervals cover; tax on all three. Energy is summed once, by month and rate, and every other figure is a
 * sum of those, so that months and periods agree.
 *
 * @param plan    of the same intervals, see `planBill`
 * @param series  power by interval; none is a gap
 */
export function billOf(plan: BillPlan, series: PowerSeries): Bill {
  requireSameIntervals(plan, series);
  const { tariff } = plan;
  const rates = tariff.energy;
  const notes: Note[] = [];

  const kwh = energyByMonthAndRate(plan, series.mean);
  const measured = tariff.demand.length > 0 ? measuredDemand(plan, demandPower(plan, series, notes)) : [];
  const billed = tariff.demand.map((charge, d) => billedDemand(charge, plan, measured[d]!));

  const months = plan.months.map(({ month, coveredSeconds, seconds }, m): MonthBill => {
    const byRate = rates.map((_, r) => kwh[m * rates.length + r]!);
    const energyCost = sum(byRate.map((energy, r) => energy * rates[r]!.rate));
    const demand = tariff.demand.map((charge, d) => ({
      name: charge.name,
      measuredKw: measured[d]![m]!,
      billedKw: billed[d]![m]!,
      cost: billed[d]![m]! * charge.rate,
    }));
    const demandCost = sum(demand.map((entry) => entry.cost));
    const fixedCost = (tariff.fixedPerMonth * coveredSeconds) / seconds;
    const taxCost = (tariff.taxPercent / 100) * (energyCost + demandCost + fixedCost);
    const totalCost = energyCost + demandCost + fixedCost + taxCost;
    return { month, energyKwh: sum(byRate), energyCost, demand, demandCost, fixedCost, taxCost, totalCost };
  });

  const total = (field: 'energyCost' | 'demandCost' | 'fixedCost' | 'taxCost' | 'totalCost') =>
    sum(months.map((month) => month[field]));
  return {
    energyCost: total('energyCost'),
    demandCost: total('demandCost'),
    fixedCost: total('fixedCost'),
    taxCost: total('taxCost'),
    totalCost: total('totalCost'),
    carbonKg: tariff.carbonKgPerKwh * sum(months.map((month) => month.energyKwh)),
    months,
    periods: periodsOf(plan, kwh),
    notes,
  };
}

/**
 * Share of the fullest demand window that the higher of two shared states runs,
 * w = (⌊W/T⌋·t_b + min(W mod T, t_b))/W with t_b = V/(Q_b − Q) and T = t_b + V/(Q − Q_a).
 *
 * A wet well that fills and is pumped down cycles with period T, and its high state lasts t_b of it; the window that
 * begins with a high state holds the most of them. It is never less than the time share (Q − Q_a)/(Q_b − Q_a).
 *
 * @param flow    of the interval, and of the lower and the higher state, low < flow < high [m³/s]
 * @param volume  between start and stop [m³]
 * @param window  length of the demand window [s]
 */
export function peakShare(
  { flow, low, high }: { flow: number; low: number; high: number },
  volume: number,
  window: number,
): number {
  const highTime = volume / (high - flow);
  const cycle = highTime + volume / (flow - low);
  const whole = Math.floor(window / cycle);
  return (whole * highTime + Math.min(Math.max(window - whole * cycle, 0), highTime)) / window;
}

function energyByMonthAndRate(plan: BillPlan, mean: Float64Array): Float64Array {
  const rates = plan.tariff.energy.length;
  const joules = new Float64Array(plan.months.length * rates);
  const { cellStart, cellRate, cellMonth, segmentInterval, segmentSeconds } = plan;
  for (let c = 0; c < cellRate.length; c++) {
    let cell = 0;
    const end = cellStart[c + 1]!;
    for (let s = cellStart[c]!; s < end; s++) cell += mean[segmentInterval[s]!]! * segmentSeconds[s]!;
    joules[cellMonth[c]! * rates + cellRate[c]!]! += cell;
  }
  return joules.map((value) => value / JOULES_PER_KWH);
}

/** Power by interval as a demand meter would find it at its highest [W]; the mean where it is not shared. */
function demandPower(plan: BillPlan, series: PowerSeries, notes: Note[]): Float64Array {
  const { mean, flow, activeVolume } = series;
  const { interval, low, high, lowFlow, highFlow } = series.shared;
  let shared = 0;
  let power = mean;
  for (let k = 0; k < interval.length; k++) {
    const i = interval[k]!;
    const q = flow[i]!;
    if (!(q > lowFlow[k]! && q < highFlow[k]!) || low[k] === high[k]) continue;
    if (shared++ === 0 && activeVolume !== null) power = mean.slice();
    if (activeVolume === null) continue;
    const share = peakShare({ flow: q, low: lowFlow[k]!, high: highFlow[k]! }, activeVolume, plan.tariff.demandWindow);
    power[i] = low[k]! + (high[k]! - low[k]!) * share;
  }
  if (shared > 0 && activeVolume === null) {
    notes.push({
      code: 'demand-mean',
      text:
        `Pumps switch between two states in some intervals (${shared}); the demand charge takes their mean power. ` +
        'The peak is higher; the active volume of the storage would tell by how much.',
    });
  }
  return power;
}

/** By demand charge and month: highest window mean [kW], or null where no window counts. */
function measuredDemand(plan: BillPlan, power: Float64Array): (number | null)[][] {
  const { cellStart, cellWindow, segmentInterval, segmentSeconds, windows } = plan;
  const joules = new Float64Array(windows.count);
  for (let c = 0; c < cellWindow.length; c++) {
    let cell = 0;
    const end = cellStart[c + 1]!;
    for (let s = cellStart[c]!; s < end; s++) cell += power[segmentInterval[s]!]! * segmentSeconds[s]!;
    joules[cellWindow[c]!]! += cell;
  }
  return windows.counts.map((counts) => {
    const highest: (number | null)[] = plan.months.map(() => null);
    for (let w = 0; w < windows.count; w++) {
      if (counts[w] === 0) continue;
      const kw = joules[w]! / windows.coveredSeconds[w]! / 1000;
      const month = windows.month[w]!;
      const before = highest[month]!;
      if (before === null || kw > before) highest[month] = kw;
    }
    return highest;
  });
}

/**
 * By month: the measured demand, or the ratchet where that is more. The ratchet looks back on calendar months, at what
 * was measured and not at what was billed; the record's own measurement stands before the file's history.
 */
function billedDemand(charge: DemandCharge, plan: BillPlan, measured: readonly (number | null)[]): number[] {
  const known = new Map<number, number>();
  for (const { month, kw } of charge.history)
    known.set(monthNumber(month), Math.max(kw, known.get(monthNumber(month)) ?? 0));
  plan.months.forEach(({ month }, m) => {
    const kw = measured[m]!;
    if (kw !== null) known.set(monthNumber(month), kw);
  });
  return plan.months.map(({ month }, m) => {
    let least = 0;
    if (charge.ratchet !== null) {
      const here = monthNumber(month);
      for (const [other, kw] of known) {
        if (other < here && other >= here - charge.ratchet.months)
          least = Math.max(least, charge.ratchet.fraction * kw);
      }
    }
    return Math.max(measured[m] ?? 0, least);
  });
}

/** Months since the year 0, so that December and January are neighbours. */
function monthNumber(month: string): number {
  return Number(month.slice(0, 4)) * 12 + Number(month.slice(5)) - 1;
}

/** Energy by the name of its period, in the order of the file; entries of one name are one period. */
function periodsOf(plan: BillPlan, kwh: Float64Array): Bill['periods'] {
  const rates = plan.tariff.energy;
  const periods = new Map<string, { name: string; energyKwh: number; energyCost: number }>();
  rates.forEach(({ name, rate }, r) => {
    const energy = sum(plan.months.map((_, m) => kwh[m * rates.length + r]!));
    const period = periods.get(name) ?? { name, energyKwh: 0, energyCost: 0 };
    period.energyKwh += energy;
    period.energyCost += energy * rate;
    periods.set(name, period);
  });
  return [...periods.values()];
}

function requireSameIntervals(plan: BillPlan, series: PowerSeries): void {
  if (series.mean.length !== plan.intervals) {
    throw new Error(`a plan of ${plan.intervals} intervals cannot bill ${series.mean.length}`);
  }
}

function sum(values: readonly number[]): number {
  return values.reduce((total, value) => total + value, 0);
}
