import { publicHolidayDates } from '../../server/holidays.ts';
import { planBill } from '../../server/tariff/plan.ts';
import type { Bill, PowerSeries } from '../../server/tariff/tariff.ts';
import { readTariff } from '../../server/tariff/tariffFile.ts';
import localDays from '../reference/local-days.json' with { type: 'json' };
import published from '../reference/published-bills.json' with { type: 'json' };
import { aTariff, aTariffFile, billFor, energyCosts, powerOf, steady } from '../support/tariffs.ts';
import { halfDigit, type OutsideCheck } from './check.ts';

const CENT = 'half of the last digit printed';

/** Energy and demand of whole days whose quarter-hour i draws i kW, under rates of two seasons and three periods. */
function daysOfRisingPower(): OutsideCheck[] {
  const bill = (from: string, quarterHours: number): Bill =>
    billFor(
      readTariff(published.tariff, 'published-bills.json'),
      powerOf({ from, stepMinutes: 15, kw: Array.from({ length: quarterHours }, (_, i) => i) }),
    );
  const common = { kind: 'published', source: published.source, unit: 'USD' } as const;
  const energy = published.cases.flatMap(({ what, from, quarterHours, energyCost }): OutsideCheck[] =>
    energyCost === null
      ? []
      : [
          {
            ...common,
            what: `Energy of ${what}, power rising by 1 kW a quarter-hour`,
            printed: energyCost,
            ours: () => bill(from, quarterHours).energyCost,
            allowed: published.tolerance,
            why: published.toleranceWhy,
          },
        ],
  );
  const demand = published.cases.map(
    ({ what, from, quarterHours, demandCost }): OutsideCheck => ({
      ...common,
      what: `Demand charges of ${what}, power rising by 1 kW a quarter-hour`,
      printed: demandCost,
      ours: () => bill(from, quarterHours).demandCost,
      allowed: halfDigit(2),
      why: CENT,
    }),
  );
  return [...energy, ...demand];
}

/** 1 kW for a day; the source lays a month's customer charge of 300 on that day, which is here a share of the month. */
function flatDay(): OutsideCheck[] {
  const bill = () =>
    billFor(
      aTariff({
        timeZone: 'America/Los_Angeles',
        energy: [
          { name: 'afternoon', from: '14:00', to: '19:00', rate: 0.078526 },
          { name: 'rest', rate: 0.021062 },
        ],
        demand: [{ name: 'any time', rate: 7.128 }],
      }),
      powerOf(steady('2024-07-10T00:00:00-07:00', 24)),
    );
  const source =
    'electric-emission-cost (MIT, commit 28ddcc0): rates of eeco/tests/data/input/billing.csv, expected values of eeco/tests/test_costs.py';
  const common = { kind: 'published', source, unit: 'USD' } as const;
  return [
    {
      ...common,
      what: 'Demand charge of 1 kW for a day',
      printed: 7.128,
      ours: () => bill().demandCost,
      allowed: halfDigit(3),
      why: CENT,
    },
    {
      ...common,
      what: 'Energy and demand of 1 kW for a day',
      printed: 7.92081,
      ours: () => bill().energyCost + bill().demandCost,
      allowed: halfDigit(5),
      why: CENT,
    },
  ];
}

/** Intervals of a flat day that cost as much as the first. */
function equalPrices(stepMinutes: number): number {
  const series = powerOf(steady('2024-07-10T00:00:00-07:00', 24, 1, stepMinutes));
  const plan = planBill(aTariff({ timeZone: 'America/Los_Angeles' }), series.startMs, series.seconds);
  const costs = energyCosts(plan, series.mean);
  return costs.filter((cost) => cost > 0 && Math.abs(cost / costs[0]! - 1) < 1e-12).length;
}

function steps(): OutsideCheck[] {
  return (
    [
      [15, 96],
      [5, 288],
      [60, 24],
    ] as const
  ).map(([minutes, printed]) => ({
    what: `Equal prices of a day at one rate, in steps of ${minutes} min`,
    kind: 'published',
    source: 'electric-emission-cost (MIT, commit 28ddcc0): expected values of eeco/tests/test_costs.py',
    printed,
    unit: '–',
    ours: () => equalPrices(minutes),
    allowed: 1e-9,
    why: 'a count',
  }));
}

/** A month of 720 h with so many kWh and one hour at the peak. */
function month(kwh: number, peakKw: number): PowerSeries {
  const kw = new Array<number>(720).fill((kwh - peakKw) / 719);
  kw[333] = peakKw;
  return powerOf({ from: '2025-04-01T00:00:00-07:00', stepMinutes: 60, kw });
}

function monthlyBills(): OutsideCheck[] {
  const training = 'University of Connecticut, energy assessment training, Utilities.md (commit bcb7eef)';
  const plain = () =>
    billFor(
      aTariff({
        timeZone: 'America/Phoenix',
        energy: [{ name: 'all', rate: 0.07 }],
        demand: [{ name: 'peak', rate: 12 }],
      }),
      month(100_000, 450),
    );
  // The blocks of its demand charge are not shown, so that its 262.34 for 30 kW is taken as one rate.
  const handbook = (rate: number, fixedPerMonth = 0, demandRate = 0) =>
    billFor(
      aTariff({
        timeZone: 'America/Phoenix',
        energy: [{ name: 'all', rate }],
        demand: [{ name: 'peak', rate: demandRate }],
        fixedPerMonth,
      }),
      month(17_588, 30),
    );
  const bill185 = 'Energy management handbook, section 18.5.1, example of a monthly bill';
  return [
    {
      what: 'Energy of a month of 100 000 kWh at 0.07',
      kind: 'published',
      source: training,
      printed: 7000,
      unit: 'USD',
      ours: () => plain().energyCost,
      allowed: halfDigit(0),
      why: CENT,
    },
    {
      what: 'Demand of a month that peaks at 450 kW, at 12 per kW',
      kind: 'published',
      source: training,
      printed: 5400,
      unit: 'USD',
      ours: () => plain().demandCost,
      allowed: halfDigit(0),
      why: CENT,
    },
    {
      what: 'Energy of a month of 17 588 kWh at 0.09444',
      kind: 'published',
      source: bill185,
      printed: 1661.01,
      unit: 'USD',
      ours: () => handbook(0.09444).energyCost,
      allowed: halfDigit(2),
      why: CENT,
    },
    {
      what: 'Fuel adjustment of that month at −0.017192, a negative rate',
      kind: 'published',
      source: bill185,
      printed: -302.37,
      unit: 'USD',
      ours: () => handbook(-0.017192).energyCost,
      allowed: halfDigit(2),
      why: CENT,
    },
    {
      what: 'Whole bill of that month: energy, adjustment, customer charge 3.74, demand 262.34 for 30 kW',
      kind: 'published',
      source: bill185,
      printed: 1624.72,
      unit: 'USD',
      ours: () => handbook(0.09444 - 0.017192, 3.74, 262.34 / 30).totalCost,
      allowed: 0.01,
      why: 'the parts that it adds up are each rounded to a cent',
    },
  ];
}

/** Months of UTC from January 2025 at 1 kW, but for one hour at each month's peak. */
function peaks(kw: readonly number[]): PowerSeries {
  const start = Date.UTC(2025, 0, 1);
  const hours = (Date.UTC(2025, kw.length, 1) - start) / 3_600_000;
  const power = new Array<number>(hours).fill(1);
  kw.forEach((peak, m) => {
    power[(Date.UTC(2025, m, 15, 12) - start) / 3_600_000] = peak;
  });
  return powerOf({ from: '2025-01-01T00:00:00Z', stepMinutes: 60, kw: power });
}

function ratchets(): OutsideCheck[] {
  const ratchet = { fraction: 0.8, months: 11 };
  const tariff = aTariff({ timeZone: 'UTC', demand: [{ name: 'all', rate: 1, ratchet }] });
  const billed = (kw: readonly number[]) => billFor(tariff, peaks(kw)).months.map((each) => each.demand[0]!.billedKw);
  const onePeak = () => billed([1000, ...new Array<number>(12).fill(100)]);
  const pnnl = 'Pacific Northwest National Laboratory, FEDS frequently asked questions, "What is a demand ratchet?"';
  return [
    {
      what: 'Billed demand of an April of 350 kW after a January of 500 kW, ratchet of 80 %',
      kind: 'published',
      source: 'University of Connecticut, energy assessment training, Utilities.md (commit bcb7eef)',
      printed: 400,
      unit: 'kW',
      ours: () => billed([500, 300, 300, 350])[3]!,
      allowed: halfDigit(0),
      why: CENT,
    },
    {
      what: 'Least billed demand in the 11 months after one of 1000 kW, ratchet of 80 %',
      kind: 'published',
      source: pnnl,
      printed: 800,
      unit: 'kW',
      ours: () => Math.min(...onePeak().slice(1, 12)),
      allowed: halfDigit(0),
      why: CENT,
    },
    {
      what: 'Billed demand in the twelfth month after it, measured 100 kW',
      kind: 'closed form',
      source: `${pnnl}: it looks back on 11 months, so that the twelfth is free`,
      printed: 100,
      unit: 'kW',
      ours: () => onePeak()[12]!,
      allowed: halfDigit(0),
      why: 'nothing is rounded',
    },
  ];
}

/** Four days about a date, in quarter-hours at 1 kW, so that kWh are hours; only that date has a price. */
function pricedDay(zone: string, date: string): { bill: Bill; priced: number } {
  const monthDay = date.slice(5);
  const tariff = aTariff({
    timeZone: zone,
    seasons: [{ name: 'that day', from: monthDay, to: monthDay }],
    energy: [
      { name: 'that day', season: 'that day', rate: 1 },
      { name: 'other days', rate: 0 },
    ],
  });
  const from = new Date(Date.parse(`${date}T00:00:00Z`) - 36 * 3_600_000).toISOString();
  const series = powerOf(steady(from, 96, 1, 15));
  const plan = planBill(tariff, series.startMs, series.seconds);
  return { bill: billFor(tariff, series), priced: energyCosts(plan, series.mean).filter((cost) => cost > 0).length };
}

/** Hours of a local month, from the share of its fixed charge that 100 of its hours carry. */
function monthHours(zone: string, month: string): number {
  const noon = `${month}-01T17:00:00Z`;
  return (100 * 100) / billFor(aTariff({ timeZone: zone, fixedPerMonth: 100 }), powerOf(steady(noon, 100))).fixedCost;
}

function localTime(): OutsideCheck[] {
  const common = { kind: 'independent solver', source: localDays.source, unit: 'h' } as const;
  const days = localDays.days.map(
    ({ zone, date, hours }): OutsideCheck => ({
      ...common,
      what: `Hours billed on ${date} in ${zone}`,
      printed: hours,
      ours: () => pricedDay(zone, date).bill.periods.find(({ name }) => name === 'that day')!.energyKwh,
      allowed: localDays.tolerance,
      why: localDays.toleranceWhy,
    }),
  );
  const months = localDays.months.map(
    ({ zone, month, hours }): OutsideCheck => ({
      ...common,
      what: `Hours that a fixed charge of ${month} is spread over in ${zone}`,
      printed: hours,
      ours: () => monthHours(zone, month),
      allowed: 1e-6,
      why: 'hours are exact; the share is a quotient',
    }),
  );
  const quarters = ([['2025-03-09', 92] as const, ['2025-11-02', 100] as const] as const).map(
    ([date, count]): OutsideCheck => ({
      ...common,
      what: `Quarter-hours with a price on ${date} in America/New_York`,
      unit: '–',
      printed: count,
      ours: () => pricedDay('America/New_York', date).priced,
      allowed: 1e-9,
      why: 'a count',
    }),
  );
  return [...days, ...months, ...quarters];
}

/** Day of a month that counts as a holiday, found by what it is billed at; of several the last. */
function holidayIn(year: number, month: number): number {
  const resolver = (country: string, region: string | null) => publicHolidayDates(country, region, [year]);
  const tariff = readTariff(
    aTariffFile({
      timeZone: 'America/New_York',
      holidays: { country: 'US' },
      energy: [
        { name: 'holiday', days: ['sun'], rate: 1 },
        { name: 'other', rate: 0 },
      ],
    }),
    'tariff.json',
    resolver,
  );
  let found = 0;
  for (let day = 1; day <= 31; day++) {
    const noon = Date.UTC(year, month - 1, day, 17);
    if (new Date(noon).getUTCMonth() !== month - 1 || new Date(noon).getUTCDay() === 0) continue;
    const bill = billFor(tariff, powerOf(steady(new Date(noon).toISOString(), 1)));
    if (bill.energyCost > 0) found = day;
  }
  return found;
}

function holidays(): OutsideCheck[] {
  return (
    [
      ['Memorial Day', 2010, 5, 31],
      ['Independence Day, a Sunday and so kept on the Monday', 2010, 7, 5],
      ['Labor Day', 2010, 9, 6],
      ['Thanksgiving', 2010, 11, 25],
      ['Memorial Day', 2011, 5, 30],
    ] as const
  ).map(([name, year, month, day]) => ({
    what: `Day of ${year}-${String(month).padStart(2, '0')} billed as a holiday of the United States: ${name}`,
    kind: 'published',
    source: 'North American Electric Reliability Corporation, Additional Off-peak Days, 2010 to 2015',
    printed: day,
    unit: '–',
    ours: () => holidayIn(year, month),
    allowed: 1e-9,
    why: 'a date',
  }));
}

/** The factor that one case of a report implies, put on the energy of its other case. */
function carbon(): OutsideCheck[] {
  const kg = (kwh: number, perKwh: number) =>
    billFor(aTariff({ timeZone: 'America/Phoenix', carbonKgPerKwh: perKwh }), month(kwh, kwh / 720)).carbonKg;
  return (
    [
      ['federal life-cycle cost example, 2020', 10_250, 12_135.38, 17_759.09 / 15_000],
      ['nominal-rate example', 206_911, 116_783.31, 611_052.43 / 1_082_633],
    ] as const
  ).map(([name, kwh, printed, factor]) => ({
    what: `CO₂ of ${kwh.toLocaleString('en-US').replaceAll(',', ' ')} kWh at ${factor.toFixed(5)} kg/kWh, the factor of its other case`,
    kind: 'published',
    source: `National Institute of Standards and Technology, ${name}`,
    printed,
    unit: 'kg',
    ours: () => kg(kwh, factor),
    allowed: 0.1,
    why: 'the factor comes from another figure of the report, rounded to 0.01 kg',
  }));
}

/** What a bill comes to, against bills that others have worked out. */
export const TARIFFS: readonly OutsideCheck[] = [
  ...daysOfRisingPower(),
  ...flatDay(),
  ...steps(),
  ...monthlyBills(),
  ...ratchets(),
  ...localTime(),
  ...holidays(),
  ...carbon(),
];
