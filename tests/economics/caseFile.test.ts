import { describe, expect, it } from 'vitest';
import { readCase } from '../../server/economics/caseFile.ts';
import { InputError } from '../../server/errors.ts';

const file = {
  format: 'nth-pump/case/1',
  baseline: 'fixed-speed',
  proposed: 'best-count',
  capital: 82_000,
  years: 15,
  discountRate: 0.05,
};

function faultsOf(value: unknown): string[][] {
  try {
    readCase(value, 'case.json');
  } catch (error) {
    if (error instanceof InputError) return error.faults.map((fault) => [fault.code, fault.at]);
    throw error;
  }
  return [];
}

it('a case comes back with what it leaves out', () => {
  expect(readCase(file, 'case.json')).toEqual({
    name: null,
    baseline: 'fixed-speed',
    proposed: 'best-count',
    rates: null,
    capital: 82_000,
    incentive: 0,
    maintenanceSavingPerYear: 0,
    residualValue: 0,
    years: 15,
    discountRate: 0.05,
    energyEscalation: 0,
    options: [],
    targetPaybackYears: null,
    uncertainty: null,
  });
});

describe('a fault of a case', () => {
  it.each<[string, object, string, string]>([
    ['zero years', { years: 0 }, 'out_of_range', 'years'],
    ['half a year', { years: 1.5 }, 'wrong_type', 'years'],
    ['negative capital', { capital: -1 }, 'out_of_range', 'capital'],
    ['an unknown rule', { proposed: 'best-cuont' }, 'unknown_rule', 'proposed'],
    ['no rule', { baseline: undefined }, 'missing_field', 'baseline'],
    ['a rate in percent', { discountRate: 5 }, 'out_of_range', 'discountRate'],
    ['an escalation in percent', { energyEscalation: 2 }, 'out_of_range', 'energyEscalation'],
    ['an unknown field', { escalation: 0.02 }, 'unknown_field', 'escalation'],
    ['another format', { format: 'nth-pump/tariff/1' }, 'unknown_format', 'format'],
    ['a target of no time', { targetPaybackYears: 0 }, 'out_of_range', 'targetPaybackYears'],
    ['half an uncertainty', { uncertainty: { seed: 1, samples: 10 } }, 'missing_field', 'uncertainty.pumpGrade'],
  ])('%s', (_, fields, code, at) => {
    expect(faultsOf({ ...file, ...fields })[0]).toEqual([code, at]);
  });

  it('is told with every other one', () => {
    expect(faultsOf({ ...file, years: 0, capital: -5, proposed: 'x' }).length).toBe(3);
  });
});
