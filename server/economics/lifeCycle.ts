import { escalatedPresentValue, singlePresentValue, uniformPresentValue } from './presentValue.ts';

/** What a plant costs over its life, at today's prices unless a rate says how they grow. */
export interface LifeCycleCosts {
  /** Laid out today, less any incentive. */
  readonly initial: number;
  readonly energyPerYear: number;
  readonly maintenancePerYear: number;
  /** Costs of single years, such as a replacement; a negative one is an income. */
  readonly singleCosts?: readonly { readonly year: number; readonly cost: number }[];
  /** Worth at the end of the last year. */
  readonly residualValue: number;
}

/** Over how long, and at what rates per year (fractions, all real or all nominal). */
export interface Horizon {
  readonly years: number;
  readonly discountRate: number;
  readonly energyEscalation: number;
}

/**
 * Life-cycle cost: present value of everything paid from today to the end of the last year, less the residual value.
 *
 * @see NIST Handbook 135, Life-Cycle Costing Manual: energy by UPV*, yearly costs by UPV, single ones by SPV
 */
export function lifeCycleCost(costs: LifeCycleCosts, horizon: Horizon): number {
  const { years, discountRate, energyEscalation } = horizon;
  const energy = costs.energyPerYear * escalatedPresentValue({ discountRate, escalation: energyEscalation }, years);
  const maintenance = costs.maintenancePerYear * uniformPresentValue(discountRate, years);
  const single = (costs.singleCosts ?? []).reduce(
    (sum, { year, cost }) => sum + cost * singlePresentValue(discountRate, year),
    0,
  );
  return costs.initial + energy + maintenance + single - costs.residualValue * singlePresentValue(discountRate, years);
}
