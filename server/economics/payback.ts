import { singlePresentValue } from './presentValue.ts';

/**
 * Simple payback [years]: outlay over the first year's saving at today's prices. 0 where nothing is laid out, null
 * where nothing is saved.
 *
 * @param outlay      capital less incentive
 * @param yearSaving  cost saving and maintenance saving of a year
 */
export function simplePayback(outlay: number, yearSaving: number): number | null {
  if (outlay <= 0) return 0;
  return yearSaving > 0 ? outlay / yearSaving : null;
}

/**
 * Discounted payback [years]: when the present value of the savings has made good the outlay, as if each year's came
 * evenly over the year. 0 where nothing is laid out, null where the savings do not make it good in their life.
 *
 * @param outlay   capital less incentive
 * @param savings  `savings[0]` at the end of the first year, and so on; no residual value
 */
export function discountedPayback(outlay: number, savings: readonly number[], discountRate: number): number | null {
  if (outlay <= 0) return 0;
  let missing = outlay;
  for (let t = 1; t <= savings.length; t++) {
    const saved = savings[t - 1]! * singlePresentValue(discountRate, t);
    if (saved >= missing) return t - 1 + missing / saved;
    missing -= saved;
  }
  return null;
}
