import type { LedgerKwh } from '../staging/result.ts';
import type { Bill, Tariff } from '../tariff/tariff.ts';

/** Hours of a year in which a record is scaled to a year (model.md §8). */
const HOURS_PER_YEAR = 8760;

/** A year of a rule, scaled from a record. */
export interface AnnualFigures {
  readonly energyKwh: number;
  readonly energyCost: number;
  readonly demandCost: number;
  readonly fixedCost: number;
  readonly taxCost: number;
  readonly totalCost: number;
  readonly carbonKg: number;
  readonly ledgerKwh: LedgerKwh;
}

/**
 * A record's energy and bill scaled to a year: energy (with its cost and carbon) by 8760 / hours of the record, demand
 * by 12 / calendar months billed, fixed charges as twelve monthly ones, tax last (model.md §8).
 */
export function annualFigures(
  run: { readonly energyKwh: number; readonly ledgerKwh: LedgerKwh },
  bill: Bill,
  tariff: Tariff,
  hours: number,
): AnnualFigures {
  const years = HOURS_PER_YEAR / hours;
  const energyCost = bill.energyCost * years;
  const demandCost = (bill.demandCost * 12) / Math.max(1, bill.months.length);
  const fixedCost = 12 * tariff.fixedPerMonth;
  const taxCost = ((energyCost + demandCost + fixedCost) * tariff.taxPercent) / 100;
  const scaled = Object.entries(run.ledgerKwh).map(([part, kwh]) => [part, kwh * years]);
  return {
    energyKwh: run.energyKwh * years,
    energyCost,
    demandCost,
    fixedCost,
    taxCost,
    totalCost: energyCost + demandCost + fixedCost + taxCost,
    carbonKg: bill.carbonKg * years,
    ledgerKwh: Object.fromEntries(scaled) as unknown as LedgerKwh,
  };
}
