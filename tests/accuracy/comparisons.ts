import type { ComparisonResult, RuleId } from '../../server/staging/result.ts';
import { resultFor, ruleIn } from '../support/comparing.ts';
import { exampleJson, exampleOf } from '../support/examples.ts';
import type { OutsideCheck } from './check.ts';

/**
 * Invented stations, each with a record and a tariff, that an independent implementation of the model has run (numpy and
 * scipy). tests/staging/examples.test.ts holds the same figures against ours field by field and interval by interval.
 */

interface Expected {
  readonly floorKwh: number;
  readonly rules: Readonly<Record<string, { readonly energyKwh: number; readonly totalCost?: number }>>;
}

const results = new Map<string, ComparisonResult>();

/** The comparison of an example; each is run once. */
function resultOf(name: string): ComparisonResult {
  const known = results.get(name);
  if (known) return known;
  const result = resultFor(exampleOf(name));
  results.set(name, result);
  return result;
}

const SAME = { share: 1e-6, why: '1e-6: both solve the same equations to rounding' };
const GRIDDED = { share: 1e-4, why: '1e-4: there found on a grid of flows, which lies that near the least' };

function checksOf(name: string, source: string): OutsideCheck[] {
  const expected = exampleJson(name, 'expected.json') as Expected;
  const check = (
    what: string,
    unit: string,
    worked: number,
    { share, why }: typeof SAME,
    ours: () => number,
  ): OutsideCheck => {
    const printed = Number(worked.toPrecision(9));
    return { what, kind: 'independent solver', source, printed, unit, ours, allowed: share * printed, why };
  };
  const rules = Object.entries(expected.rules).flatMap(([id, { energyKwh, totalCost }]) => {
    const rule = () => ruleIn(resultOf(name), id as RuleId);
    return [
      check(`Energy under ${id}`, 'kWh', energyKwh, SAME, () => rule().energyKwh),
      ...(totalCost === undefined ? [] : [check(`Bill under ${id}`, 'EUR', totalCost, SAME, () => rule().totalCost!)]),
    ];
  });
  return [
    ...rules,
    check('Least possible energy', 'kWh', expected.floorKwh, GRIDDED, () => resultOf(name).floor!.energyKwh),
  ];
}

/** Whole comparisons: station, record and tariff to energy and money. */
export const COMPARISONS: readonly OutsideCheck[] = [
  ...checksOf('storage', 'made-up wet well of tests/reference/examples/storage; numpy and scipy'),
  ...checksOf('throttle', 'made-up booster station of tests/reference/examples/throttle; numpy and scipy'),
];
