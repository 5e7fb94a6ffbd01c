import { describe, expect, it } from 'vitest';
import { type InvestmentTerms, worthOf } from '../../server/economics/investment.ts';
import { lifeCycleCost } from '../../server/economics/lifeCycle.ts';

const terms: InvestmentTerms = {
  capital: 10_000,
  incentive: 1_000,
  maintenanceSavingPerYear: -200,
  residualValue: 500,
  years: 3,
  discountRate: 0.1,
  energyEscalation: 0.05,
};

describe('the worth of a change', () => {
  it('is that of a hand calculation', () => {
    // Outlay 9 000. Savings 4 000·1.05^t − 200: 4 000, 4 210, 4 430.5; present values 3 636.364, 3 479.339, 3 328.700;
    // residual 500/1.331 = 375.657. Sum 10 820.060, net 1 820.060, ratio 1.202229. Simple: 9 000/3 800.
    // Discounted: after two years 7 115.702 is back; 1 884.298/3 328.700 of the third.
    const worth = worthOf(terms, 4_000);
    expect(worth.simplePaybackYears).toBeCloseTo(9_000 / 3_800, 12);
    expect(worth.discountedPaybackYears).toBeCloseTo(2 + 1_884.298 / 3_328.7, 5);
    expect(worth.npv).toBeCloseTo(1_820.06, 2);
    expect(worth.savingsToInvestment).toBeCloseTo(1.202229, 6);
    expect(worth.notes).toEqual([]);
    // At the internal rate the same sum is nothing.
    const r = 1 + worth.irr!;
    expect(-9_000 + 4_000 / r + 4_210 / r ** 2 + (4_430.5 + 500) / r ** 3).toBeCloseTo(0, 6);
  });

  it('is the difference of two life-cycle costs', () => {
    const cost = (initial: number, energyPerYear: number, maintenancePerYear: number, residualValue: number) =>
      lifeCycleCost({ initial, energyPerYear, maintenancePerYear, residualValue }, terms);
    const difference = cost(0, 9_000, 300, 0) - cost(9_000, 5_000, 500, 500);
    expect(worthOf(terms, 4_000).npv).toBeCloseTo(difference, 8);
  });

  it('of a change that saves nothing is a loss, told plainly', () => {
    const worth = worthOf({ ...terms, residualValue: 0 }, -50);
    expect(worth).toMatchObject({ simplePaybackYears: null, discountedPaybackYears: null, irr: null });
    expect(worth.npv).toBeLessThan(-9_000);
    expect(worth.savingsToInvestment).toBeLessThan(0);
    expect(worth.notes.map((note) => note.code)).toEqual(['no-irr']);
  });

  it('has no ratio where an incentive pays for all of it', () => {
    const worth = worthOf({ ...terms, incentive: 10_000 }, 4_000);
    expect(worth).toMatchObject({ simplePaybackYears: 0, discountedPaybackYears: 0, savingsToInvestment: null });
  });

  it('does not pay within its life by its residual value', () => {
    const worth = worthOf({ ...terms, residualValue: 1e6 }, 1_000);
    expect(worth.npv).toBeGreaterThan(0);
    expect(worth.discountedPaybackYears).toBeNull();
  });

  it('names several rates of return as a note', () => {
    // 1 000 laid out, 2 500 back, 1 540 to take it down: (1.1 and 1.4 times): rates of 10 % and 40 %.
    const several = { ...terms, capital: 1_000, incentive: 0, maintenanceSavingPerYear: 2_500, residualValue: -4_040 };
    const worth = worthOf({ ...several, years: 2, energyEscalation: 0 }, 0);
    expect(worth.irr).toBeNull();
    expect(worth.notes[0]).toMatchObject({ code: 'several-irr' });
    expect(worth.notes[0]!.text).toContain('10.0 %, 40.0 %');
  });
});
