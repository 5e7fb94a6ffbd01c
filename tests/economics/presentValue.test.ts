import { describe, expect, it } from 'vitest';
import {
  escalatedPresentValue,
  presentValue,
  singlePresentValue,
  uniformPresentValue,
} from '../../server/economics/presentValue.ts';
import reference from '../reference/present-value.json' with { type: 'json' };

const { discountRate, table, printed, tolerance } = reference.factors;

describe('discount factors at 3 %', () => {
  it.each(table)('of $years years', ({ years, single, uniform }) => {
    expect(Math.abs(singlePresentValue(discountRate, years) - single)).toBeLessThan(tolerance);
    expect(Math.abs(uniformPresentValue(discountRate, years) - uniform)).toBeLessThan(tolerance);
  });

  it.each(printed)('print $what as $value', ({ years, kind, escalation, value, tolerance }) => {
    const factor = {
      single: () => singlePresentValue(discountRate, years),
      uniform: () => uniformPresentValue(discountRate, years),
      escalated: () => escalatedPresentValue({ discountRate, escalation: escalation! }, years),
    }[kind as 'single' | 'uniform' | 'escalated']();
    expect(Math.abs(factor - value)).toBeLessThan(tolerance);
  });

  it('are the number of years where nothing is discounted, or prices grow as fast', () => {
    expect(uniformPresentValue(0, 12)).toBe(12);
    expect(escalatedPresentValue({ discountRate: 0.04, escalation: 0.04 }, 12)).toBe(12);
    // Close to no rate the factor is n − n(n + 1)/2·d: 12 − 78e-12.
    expect(uniformPresentValue(1e-12, 12)).toBeCloseTo(12 - 78e-12, 14);
  });
});

it.each(reference.netPresentValues)('net present value: $source', ({ flows, rate, value, tolerance }) => {
  expect(Math.abs(presentValue(flows, rate) - value)).toBeLessThan(tolerance);
});
