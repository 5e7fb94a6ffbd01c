/**
 * Present value of money at year ends: today is t = 0, year t ends at t. Rates are fractions per year, all real or all
 * nominal. Factor names are those of the usual discount tables (NIST Handbook 135, Life-Cycle Costing Manual).
 */

/** SPV, present value of 1 at the end of year t: (1 + d)^−t. */
export function singlePresentValue(discountRate: number, year: number): number {
  return (1 + discountRate) ** -year;
}

/** UPV, present value of 1 at the end of each of n years: (1 − (1 + d)^−n)/d, and n where d = 0. */
export function uniformPresentValue(discountRate: number, years: number): number {
  // expm1 and log1p keep their figures where d is small; 1 − (1 + d)^−n loses them.
  return discountRate === 0 ? years : -Math.expm1(-years * Math.log1p(discountRate)) / discountRate;
}

/**
 * UPV*, present value of a yearly amount that grows: Σ ((1 + e)/(1 + d))^t for t = 1…n. The amount is that of today's
 * prices, so that the first year is already escalated.
 */
export function escalatedPresentValue(
  rates: { readonly discountRate: number; readonly escalation: number },
  years: number,
): number {
  return uniformPresentValue((rates.discountRate - rates.escalation) / (1 + rates.escalation), years);
}

/** Present value of flows, `flows[t]` at the end of year t and `flows[0]` today. */
export function presentValue(flows: readonly number[], discountRate: number): number {
  return flows.reduce((sum, flow, year) => sum + flow * singlePresentValue(discountRate, year), 0);
}
