import type { ComparisonResult, RuleResult } from '../server/staging/result.ts';

/** What the rules of a comparison are weighed in: money where there is a tariff, else energy. */
export type Weighing = 'money' | 'energy';

const HOURS_OF_A_YEAR = 8760;
const MONTHS_OF_A_YEAR = 12;

/** A record that covers less of a year than this is said to have been scaled. */
const NEARLY_A_YEAR = 0.98;

/** Money if every rule has a bill. */
export function weighingOf(comparison: Pick<ComparisonResult, 'rules'>): Weighing {
  return comparison.rules.every((rule) => rule.totalCost !== undefined) ? 'money' : 'energy';
}

/** Whether figures per year stand for markedly more hours than the record has. */
export function isScaled(hours: number): boolean {
  return hours < NEARLY_A_YEAR * HOURS_OF_A_YEAR;
}

/** Energy of a year [kWh]: by 8760 over the hours of the record. */
export function yearEnergy(rule: Pick<RuleResult, 'energyKwh'>, hours: number): number {
  return (rule.energyKwh * HOURS_OF_A_YEAR) / hours;
}

/**
 * Cost of a year: energy by 8760 over the hours of the record, demand by 12 over the calendar months billed, fixed
 * charges twelve times the monthly one, tax last. Null without a bill.
 */
export function yearCost(rule: RuleResult, hours: number, fixedPerMonth: number): number | null {
  const { energyCost, demandCost, fixedCost, taxCost, months } = rule;
  if (energyCost === undefined || demandCost === undefined || fixedCost === undefined || taxCost === undefined) {
    return null;
  }
  const taxed = energyCost + demandCost + fixedCost;
  const taxRate = taxed === 0 ? 0 : taxCost / taxed;
  const energy = (energyCost * HOURS_OF_A_YEAR) / hours;
  const demand = months && months.length > 0 ? (demandCost * MONTHS_OF_A_YEAR) / months.length : 0;
  return (energy + demand + MONTHS_OF_A_YEAR * fixedPerMonth) * (1 + taxRate);
}
