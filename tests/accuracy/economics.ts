import { type InvestmentTerms, worthOf } from '../../server/economics/investment.ts';
import { internalRate } from '../../server/economics/irr.ts';
import { type LifeCycleCosts, lifeCycleCost } from '../../server/economics/lifeCycle.ts';
import { discountedPayback, simplePayback } from '../../server/economics/payback.ts';
import {
  escalatedPresentValue,
  presentValue,
  singlePresentValue,
  uniformPresentValue,
} from '../../server/economics/presentValue.ts';
import reference from '../reference/present-value.json' with { type: 'json' };
import { halfDigit, type OutsideCheck } from './check.ts';

const PRINTED = 'half of the last digit printed';
const NIST = 'National Institute of Standards and Technology';

/** Terms of nothing, to be filled in. */
const NO_TERMS: InvestmentTerms = {
  capital: 0,
  incentive: 0,
  maintenanceSavingPerYear: 0,
  residualValue: 0,
  years: 1,
  discountRate: 0,
  energyEscalation: 0,
};

/** Rows that share a source and a tolerance: what, printed, ours. */
function rows(
  common: Pick<OutsideCheck, 'kind' | 'source' | 'unit' | 'allowed' | 'why'>,
  figures: readonly (readonly [string, number, () => number])[],
): OutsideCheck[] {
  return figures.map(([what, printed, ours]) => ({ ...common, what, printed, ours }));
}

function factors(): OutsideCheck[] {
  const { table, discountRate, tolerance, toleranceWhy, printed } = reference.factors;
  const fromTable = table.flatMap(({ years, single, uniform }) =>
    rows(
      {
        kind: 'closed form',
        source: '(1 + d)^−n and its sum for n = 1…N, worked outside this project to four decimals',
        unit: '–',
        allowed: tolerance,
        why: toleranceWhy,
      },
      [
        [`Single present value, 3 %, ${years} years`, single, () => singlePresentValue(discountRate, years)],
        [`Uniform present value, 3 %, ${years} years`, uniform, () => uniformPresentValue(discountRate, years)],
      ],
    ),
  );
  const handbook = printed.map(
    ({ what, years, kind, escalation, value, tolerance }): OutsideCheck => ({
      what: `${what} at 3 %`,
      kind: 'published',
      source: `${NIST}, Handbook 135, Life-Cycle Costing Manual, as a test file quotes it`,
      printed: value,
      unit: '–',
      ours: () => {
        if (kind === 'single') return singlePresentValue(discountRate, years);
        if (kind === 'uniform') return uniformPresentValue(discountRate, years);
        return escalatedPresentValue({ discountRate, escalation: escalation! }, years);
      },
      allowed: tolerance,
      why: PRINTED,
    }),
  );
  return [...fromTable, ...handbook];
}

/** Payment that a loan asks for at the end of each of so many months. */
const payment = (loan: number, perYear: number, months: number) => loan / uniformPresentValue(perYear / 12, months);

function presentValues(): OutsideCheck[] {
  const flows = reference.netPresentValues.map(
    ({ source, flows, rate, value, tolerance }): OutsideCheck => ({
      what: `Net present value of ${flows.join(', ')} at ${rate * 100} %`,
      kind: 'published',
      source,
      printed: value,
      unit: 'USD',
      ours: () => presentValue(flows, rate),
      allowed: tolerance,
      why: PRINTED,
    }),
  );
  return [
    ...flows,
    ...rows(
      {
        kind: 'published',
        source: 'numpy-financial (commit f47e8af), docstring and tests of pmt',
        unit: 'USD',
        allowed: 6e-6,
        why: 'five or six decimals are printed',
      },
      [
        ['Payment on 15 000 over 60 months at 8 % a year', 304.145914, () => payment(15_000, 0.08, 60)],
        ['Payment on 200 000 over 180 months at 7.5 % a year', 1854.02472, () => payment(200_000, 0.075, 180)],
      ],
    ),
  ];
}

/** Rates of flows, however many; ascending. */
function ratesOf(flows: readonly number[]): readonly number[] {
  const found = internalRate(flows);
  if (found.rate !== null) return [found.rate];
  return found.reason === 'several' ? found.rates : [];
}

function internalRates(): OutsideCheck[] {
  const single = reference.rates.map(
    ({ source, flows, rate, tolerance }): OutsideCheck => ({
      what: `Internal rate of ${flows.join(', ')}`,
      kind: 'published',
      source,
      printed: rate,
      unit: '–',
      ours: () => internalRate(flows).rate ?? Number.NaN,
      allowed: tolerance,
      why: PRINTED,
    }),
  );
  const several = reference.severalRates.flatMap(({ source, flows, rates, published, tolerance }) =>
    rates.map(
      (rate, k): OutsideCheck => ({
        what: `Internal rate ${k + 1} of ${rates.length} of ${flows.join(', ')}`,
        kind: rate === published ? 'published' : 'independent solver',
        source: rate === published ? source : 'numpy.roots, eigenvalues of the companion matrix',
        printed: rate,
        unit: '–',
        ours: () => ratesOf(flows)[k] ?? Number.NaN,
        allowed: tolerance,
        why: PRINTED,
      }),
    ),
  );
  const count = (
    [[[-100, -1, -2], 0] as const, [[100, 1, 2], 0] as const, [[-100, 100, 0, -7], 2] as const] as const
  ).map(
    ([flows, printed]): OutsideCheck => ({
      what: `How many internal rates ${flows.join(', ')} have`,
      kind: 'closed form',
      source: 'numpy-financial (commit f47e8af), tests of irr: none where all have one sign; a cubic has its roots',
      printed,
      unit: '–',
      ours: () => ratesOf(flows).length,
      allowed: 1e-9,
      why: 'a count',
    }),
  );
  return [...single, ...several, ...count];
}

function paybacks(): OutsideCheck[] {
  const training = 'University of Connecticut, energy assessment training, Payback.md (commit bcb7eef)';
  const savings = [5_000, 8_000, 10_000, 10_000];
  return [
    ...rows({ kind: 'published', source: training, unit: 'years', allowed: halfDigit(1), why: PRINTED }, [
      ['Simple payback of 12 000 less 2 000 for 4 000 a year', 2.5, () => simplePayback(12_000 - 2_000, 4_000)!],
      ['Payback of 20 000 for 5 000, 8 000, 10 000, 10 000', 2.7, () => discountedPayback(20_000, savings, 0)!],
    ]),
    {
      what: 'Discounted payback of the same at 10 %, printed as between 3 and 4',
      kind: 'closed form',
      source: `${training}, interpolated by hand: 18 670.17 are back after three years, 1 329.83/6 830.13 of the fourth`,
      printed: 3.195,
      unit: 'years',
      ours: () => discountedPayback(20_000, savings, 0.1)!,
      allowed: halfDigit(3),
      why: 'three decimals worked by hand',
    },
    {
      what: 'Simple payback of 170 000 for a first-year saving of 18 755 + 2 270 + 7 500/21',
      kind: 'published',
      source: `${NIST}, military energy-conservation investment example`,
      printed: 7.95,
      unit: 'years',
      ours: () => simplePayback(170_000, 18_755 + 2_270 + 7_500 / 21)!,
      allowed: halfDigit(2),
      why: PRINTED,
    },
    ...rows(
      {
        kind: 'closed form',
        source: `27 000 for 5 000 a year at 3 %, the yearly sums of a ${NIST} life-cycle test case, worked outside this project`,
        unit: 'years',
        allowed: halfDigit(3),
        why: 'three decimals were worked out',
      },
      [
        ['Simple payback of 27 000 for 5 000 a year', 5.4, () => simplePayback(27_000, 5_000)!],
        [
          'Discounted payback of 27 000 for 5 000 a year at 3 %',
          5.979,
          () => discountedPayback(27_000, new Array<number>(20).fill(5_000), 0.03)!,
        ],
      ],
    ),
  ];
}

/**
 * 15 years at a real 3 %. How its energy prices grow is not printed, so that the present values of energy that it prints
 * are taken as laid out at the start.
 */
function federalExample(): OutsideCheck[] {
  const horizon = { years: 15, discountRate: 0.03, energyEscalation: 0 };
  const nothing: LifeCycleCosts = { initial: 0, energyPerYear: 0, maintenancePerYear: 0, residualValue: 0 };
  const cost = (some: Partial<LifeCycleCosts>) => lifeCycleCost({ ...nothing, ...some }, horizon);
  const base = () =>
    cost({
      initial: 1_500 + 13_784,
      maintenancePerYear: 50,
      singleCosts: [
        { year: 10, cost: 200 },
        { year: 10, cost: 600 },
      ],
      residualValue: 0.1 * 1_500 + 0.5 * 600,
    });
  const changed = () =>
    cost({
      initial: 3_000 + 9_419,
      maintenancePerYear: 100,
      singleCosts: [{ year: 8, cost: 600 }],
      residualValue: 0.25 * 3_000,
    });
  const perYear = uniformPresentValue(0.03, 15);
  // Savings of each year less the energy's, which stand at the start; replacements and residual values are investment.
  const worth = () => worthOf({ ...NO_TERMS, capital: 861, years: 1 }, 13_784 + 597 + 149 - (9_419 + 1_194 + 474));
  return rows(
    {
      kind: 'published',
      source: `${NIST}, federal life-cycle cost example, comparative analysis and summary, 4 June 2020`,
      unit: 'USD',
      allowed: halfDigit(0),
      why: PRINTED,
    },
    [
      ['Recurring upkeep of 50 a year over 15 years at 3 %', 597, () => cost({ maintenancePerYear: 50 })],
      ['Recurring upkeep of 100 a year over 15 years at 3 %', 1_194, () => cost({ maintenancePerYear: 100 })],
      ['Upkeep of 200 in year 10', 149, () => cost({ singleCosts: [{ year: 10, cost: 200 }] })],
      ['Upkeep of 600 in year 8', 474, () => cost({ singleCosts: [{ year: 8, cost: 600 }] })],
      ['Replacement of 600 in year 10', 446, () => cost({ singleCosts: [{ year: 10, cost: 600 }] })],
      ['Residual value of 450 after 15 years', -289, () => cost({ residualValue: 450 })],
      ['Residual value of 750 after 15 years', -481, () => cost({ residualValue: 750 })],
      ['Life-cycle cost as it is', 16_187, base],
      ['Life-cycle cost changed', 13_605, changed],
      ['Life-cycle cost as it is, by year', 1_356, () => base() / perYear],
      ['Life-cycle cost changed, by year', 1_140, () => changed() / perYear],
      ['Net savings of the change, from the two life-cycle costs', 2_582, () => base() - changed()],
      ['Net savings of the change, from its savings of 3 443 and investment of 861', 2_582, () => worth().npv],
    ],
  ).concat({
    what: 'Ratio of savings to investment of the change',
    kind: 'published',
    source: `${NIST}, federal life-cycle cost example, comparative analysis and summary, 4 June 2020`,
    printed: 4.0,
    unit: '–',
    ours: () => worth().savingsToInvestment!,
    allowed: halfDigit(2),
    why: PRINTED,
  });
}

/**
 * A year of building, then 20 of service. Single costs are dated from the start of service and so fall a year later;
 * recurring ones fall in the middle of their year, half a year later than the factor of year ends has them.
 */
function militaryExample(): OutsideCheck[] {
  const common = {
    kind: 'published',
    source: `${NIST}, military energy-conservation investment example`,
    unit: 'USD',
    allowed: 1,
    why: 'whole dollars are printed, one of them cut off and not rounded',
  } as const;
  const single = (cost: number, serviceYear: number) =>
    lifeCycleCost(
      {
        initial: 0,
        energyPerYear: 0,
        maintenancePerYear: 0,
        singleCosts: [{ year: serviceYear + 1, cost }],
        residualValue: 0,
      },
      { years: 21, discountRate: 0.03, energyEscalation: 0 },
    );
  const singleCosts = [
    [9_000, 6, 7_318],
    [-9_000, 12, -6_128],
    [12_000, 18, 6_843],
    [-1_500, 5, -1_256],
    [-1_500, 10, -1_084],
    [-1_500, 15, -935],
  ] as const;
  const recurring = () =>
    escalatedPresentValue({ discountRate: 0.03, escalation: 0.02 }, 20) * singlePresentValue(0.03, 0.5) * 1.02 ** 0.5;
  const total = () =>
    262_564 + 2_270 * recurring() + singleCosts.reduce((sum, [cost, year]) => sum + single(cost, year), 0);
  return [
    ...singleCosts.map(
      ([cost, year, printed]): OutsideCheck => ({
        ...common,
        what: `Present value of ${cost} in year ${year} of service, 3 %`,
        printed,
        ours: () => single(cost, year),
      }),
    ),
    {
      ...common,
      what: 'Factor of 20 yearly costs that grow by 2 %, from the middle of the second year, 3 %',
      printed: 17.993,
      unit: '–',
      ours: recurring,
      allowed: halfDigit(3),
      why: PRINTED,
    },
    {
      ...common,
      what: 'Present value of 2 270 a year by that factor',
      printed: 40_844,
      ours: () => 2_270 * recurring(),
    },
    { ...common, what: 'Present value of all savings, that of energy as printed', printed: 308_166, ours: total },
    {
      ...common,
      what: 'Ratio of all savings to an investment of 170 000',
      printed: 1.81,
      unit: '–',
      ours: () => worthOf({ ...NO_TERMS, capital: 170_000 }, total()).savingsToInvestment!,
      allowed: halfDigit(2),
      why: PRINTED,
    },
  ];
}

/** Yearly costs of energy and demand as printed, each year escalated by a rate of its own. */
function nominalExample(): OutsideCheck[] {
  const energy = [
    47_844, 46_200, 46_768, 47_633, 47_905, 49_077, 50_032, 50_321, 50_302, 50_477, 50_863, 51_249, 51_680, 51_788,
    51_798,
  ];
  const demand = [
    28_922, 27_928, 28_271, 28_794, 28_959, 29_667, 30_244, 30_419, 30_408, 30_514, 30_747, 30_980, 31_241, 31_306,
    31_312,
  ];
  const rate = 0.031;
  const upkeep = () =>
    lifeCycleCost(
      { initial: 0, energyPerYear: 5_600, maintenancePerYear: 0, residualValue: 0 },
      { years: 15, discountRate: rate, energyEscalation: 0.001 },
    );
  const total = () => presentValue([0, ...energy], rate) + presentValue([0, ...demand], rate) + upkeep();
  const figures: readonly (readonly [string, number, () => number])[] = [
    ['Present value of 15 years of energy, nominal 3.1 %', 585_002, () => presentValue([0, ...energy], rate)],
    ['Present value of 15 years of demand charges', 353_636, () => presentValue([0, ...demand], rate)],
    ['Present value of upkeep of 5 600 a year that grows by 0.1 %', 66_856, upkeep],
    ['Life-cycle cost of all three', 1_005_494, total],
    ['The same by year', 84_865, () => total() / uniformPresentValue(rate, 15)],
    ['Contract of 67 000 a year for 10 years', 568_558, () => 67_000 * uniformPresentValue(rate, 10)],
  ];
  return figures.map(([what, printed, ours]) => ({
    what,
    kind: 'published',
    source: `${NIST}, nominal-rate example, cash flows and detailed analysis`,
    printed,
    unit: 'USD',
    ours,
    allowed: 0.0002 * printed,
    why: 'its rate prints as 3.1 % and is 3.103 % before rounding: 0.02 %',
  }));
}

/** A plant of 250 000 kWh a year against one of 200 000: 20 years at 3 %. */
function handbookCase(): OutsideCheck[] {
  const horizon = { years: 20, discountRate: 0.03, energyEscalation: 0 };
  const plant = (initial: number, kwh: number, maintenancePerYear: number, year12: number, residualValue: number) =>
    lifeCycleCost(
      {
        initial,
        energyPerYear: kwh * 0.12,
        maintenancePerYear,
        singleCosts: [{ year: 12, cost: year12 }],
        residualValue,
      },
      horizon,
    );
  const a = () => plant(103_000, 250_000, 7_000, 12_000, 3_500);
  const b = () => plant(130_000, 200_000, 8_000, 12_500, 3_700);
  // Replacement and residual value count as investment: 27 000 + 500 in year 12 − 200 at the end.
  const worth = () =>
    worthOf(
      {
        ...NO_TERMS,
        ...horizon,
        capital: 27_000 + 500 * singlePresentValue(0.03, 12) - 200 * singlePresentValue(0.03, 20),
        maintenanceSavingPerYear: -1_000,
      },
      6_000,
    );
  const common = {
    kind: 'closed form',
    source: `inputs of a ${NIST} life-cycle test case named for Handbook 135, worked outside this project`,
    why: 'half of the last digit worked out',
  } as const;
  return [
    ...rows({ ...common, unit: 'USD', allowed: halfDigit(2) }, [
      ['Life-cycle cost of a plant of 250 000 kWh a year', 659_945.26, a],
      ['Life-cycle cost of one of 200 000 kWh', 612_797.84, b],
      ['Net savings of the second, from the two life-cycle costs', 47_147.42, () => a() - b()],
      ['Net savings of the second, from its savings and investment', 47_147.42, () => worth().npv],
    ]),
    {
      ...common,
      what: 'Ratio of savings to investment of the second',
      printed: 2.73082,
      unit: '–',
      ours: () => worth().savingsToInvestment!,
      allowed: halfDigit(5),
    },
  ];
}

/** What a change is worth over its life, against worked examples. */
export const ECONOMICS: readonly OutsideCheck[] = [
  ...factors(),
  ...presentValues(),
  ...internalRates(),
  ...paybacks(),
  ...federalExample(),
  ...militaryExample(),
  ...nominalExample(),
  ...handbookCase(),
];
