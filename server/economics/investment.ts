import type { Note } from '../errors.ts';
import { internalRate } from './irr.ts';
import type { Horizon } from './lifeCycle.ts';
import { discountedPayback, simplePayback } from './payback.ts';
import { presentValue } from './presentValue.ts';

/** What a change asks for and brings, beside the cost it saves; money of today, rates in `Horizon`. */
export interface InvestmentTerms extends Horizon {
  readonly capital: number;
  readonly incentive: number;
  /** Negative where the change needs more maintenance. */
  readonly maintenanceSavingPerYear: number;
  /** At the end of the last year. */
  readonly residualValue: number;
}

/** Whether the change is worth its money. */
export interface InvestmentWorth {
  readonly simplePaybackYears: number | null;
  /** null where the savings do not make good the outlay within the life. */
  readonly discountedPaybackYears: number | null;
  readonly npv: number;
  readonly irr: number | null;
  /** null where capital ≤ incentive: there is no investment to compare with. */
  readonly savingsToInvestment: number | null;
  readonly notes: readonly Note[];
}

/** Saving of each year: t = 1…n saves annualCostSaving·(1 + energyEscalation)^t + maintenanceSavingPerYear. */
function yearlySavings(terms: InvestmentTerms, annualCostSaving: number): number[] {
  return Array.from(
    { length: terms.years },
    (_, i) => annualCostSaving * (1 + terms.energyEscalation) ** (i + 1) + terms.maintenanceSavingPerYear,
  );
}

/**
 * Paybacks, net present value, internal rate and savings-to-investment ratio of a change.
 *
 * @param annualCostSaving  of a year at today's prices; negative where the change costs more to run
 */
export function worthOf(terms: InvestmentTerms, annualCostSaving: number): InvestmentWorth {
  const outlay = terms.capital - terms.incentive;
  const savings = yearlySavings(terms, annualCostSaving);
  const gains = savings.map((saving, i) => (i === savings.length - 1 ? saving + terms.residualValue : saving));
  const saved = presentValue([0, ...gains], terms.discountRate);
  const irr = internalRate([-outlay, ...gains]);
  const notes: Note[] = [];
  if (irr.rate === null) {
    notes.push(
      irr.reason === 'none'
        ? { code: 'no-irr', text: 'No rate of return makes the savings worth the outlay, so none is given.' }
        : {
            code: 'several-irr',
            text: `The rate of return is not unique (${irr.rates.map(percent).join(', ')}), so none is given.`,
          },
    );
  }
  return {
    simplePaybackYears: simplePayback(outlay, annualCostSaving + terms.maintenanceSavingPerYear),
    discountedPaybackYears: discountedPayback(outlay, savings, terms.discountRate),
    npv: saved - outlay,
    irr: irr.rate,
    savingsToInvestment: outlay > 0 ? saved / outlay : null,
    notes,
  };
}

function percent(rate: number): string {
  return `${(rate * 100).toFixed(1)} %`;
}
