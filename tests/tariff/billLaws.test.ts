import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { billOf } from '../../server/tariff/bill.ts';
import { planBill } from '../../server/tariff/plan.ts';
import type { PowerSeries, Tariff, Weekday } from '../../server/tariff/tariff.ts';
import { readTariff, type TariffFile } from '../../server/tariff/tariffFile.ts';
import { aTariffFile, energyCosts, NOT_SHARED } from '../support/tariffs.ts';

/** Laws that hold for every tariff and record, and a slow bill that walks the clock minute by minute. */

const DAYS: Weekday[] = ['mon', 'tue', 'wed', 'thu', 'fri', 'sat', 'sun'];

/** A place, and an instant about which its clocks change. */
const places = [
  ['Europe/Dublin', '2025-03-30T01:00:00Z'],
  ['America/New_York', '2025-11-02T06:00:00Z'],
  ['Australia/Lord_Howe', '2025-04-05T15:00:00Z'],
  ['Australia/Lord_Howe', '2025-10-04T15:30:00Z'],
  ['Asia/Kolkata', '2025-12-31T18:30:00Z'],
  ['Pacific/Auckland', '2024-02-29T11:00:00Z'],
] as const;

const clock = fc.integer({ min: 0, max: 24 * 12 - 1 }).map((five) => {
  const minutes = five * 5;
  return `${String(Math.floor(minutes / 60)).padStart(2, '0')}:${String(minutes % 60).padStart(2, '0')}`;
});
const period = fc.record(
  {
    season: fc.constantFrom('spring', 'rest'),
    days: fc.uniqueArray(fc.constantFrom(...DAYS), { minLength: 1 }),
    from: clock,
    to: clock,
  },
  { requiredKeys: [] },
);
const rate = fc.integer({ min: -5, max: 50 }).map((cents) => cents / 100);
const kw = fc.integer({ min: 0, max: 500 }).map((tenths) => tenths / 10);

const bills = fc
  .record({
    place: fc.constantFrom(...places),
    periods: fc.array(fc.tuple(period, rate), { maxLength: 4 }),
    demand: fc.array(fc.tuple(fc.array(period, { minLength: 1, maxLength: 2 }), rate.map(Math.abs)), { maxLength: 2 }),
    window: fc.constantFrom(15 as const, 30 as const, 60 as const),
    holiday: fc.constantFrom('2025-03-31', '2025-11-03', '2025-04-07', '2026-01-01', '2024-03-01'),
    as: fc.constantFrom(...DAYS),
    step: fc.constantFrom(7, 15, 50, 60, 1440),
    lead: fc.integer({ min: 1, max: 3000 }),
    // A null is a gap of one step.
    power: fc.array(fc.option(kw, { freq: 8 }), { minLength: 4, maxLength: 60 }),
  })
  .filter(({ power }) => power.some((value) => value !== null))
  .map((made) => {
    const file: TariffFile = aTariffFile({
      timeZone: made.place[0],
      seasons: [
        { name: 'spring', from: '03-30', to: '04-06' },
        { name: 'rest', from: '04-07', to: '03-29' },
      ],
      holidays: { dates: [made.holiday], as: made.as },
      energy: [
        ...made.periods.map(([when, price], i) => ({ name: `period ${i}`, ...when, rate: price })),
        { name: 'rest', rate: 0.21 },
      ],
      demand: made.demand.map(([periods, price], i) => ({ name: `charge ${i}`, periods, rate: price })),
      demandWindowMinutes: made.window,
      fixedPerMonth: 45,
      taxPercent: 9,
    });
    const start = Date.parse(made.place[1]) - made.lead * 60_000;
    const rows = made.power.flatMap((value, i) =>
      value === null ? [] : [{ startMs: start + i * made.step * 60_000, kw: value }],
    );
    return { file, series: seriesOf(rows, made.step * 60) };
  });

function seriesOf(rows: readonly { startMs: number; kw: number }[], seconds: number): PowerSeries {
  const mean = Float64Array.from(rows, (row) => row.kw * 1000);
  return {
    startMs: Float64Array.from(rows, (row) => row.startMs),
    seconds: new Float64Array(rows.length).fill(seconds),
    mean,
    flow: new Float64Array(rows.length),
    shared: NOT_SHARED,
    activeVolume: null,
  };
}

function billFor(file: TariffFile, series: PowerSeries) {
  return billOf(planBill(readTariff(file, 'tariff.json'), series.startMs, series.seconds), series);
}

/** Energy by rate [kWh] and demand by charge [kW], by asking Intl for the wall clock of every minute. */
function slowBill(tariff: Tariff, series: PowerSeries) {
  const wall = new Intl.DateTimeFormat('en-CA', {
    timeZone: tariff.timeZone,
    year: 'numeric',
    month: '2-digit',
    day: '2-digit',
    weekday: 'short',
    hour: '2-digit',
    minute: '2-digit',
    hourCycle: 'h23',
    timeZoneName: 'longOffset',
  });
  const holds = (
    when: { season: string | null; days: readonly Weekday[] | null; fromMinute: number; toMinute: number },
    local: { monthDay: number; weekday: Weekday },
    minute: number,
  ) => {
    if (when.days !== null && !when.days.includes(local.weekday)) return false;
    if (when.season !== null) {
      const spring = local.monthDay >= 330 && local.monthDay <= 406;
      if ((when.season === 'spring') !== spring) return false;
    }
    const length = (when.toMinute - when.fromMinute + 1440) % 1440 || 1440;
    return (minute - when.fromMinute + 1440) % 1440 < length;
  };
  const energy = tariff.energy.map(() => 0);
  const windows = new Map<string, { month: string; kwMinutes: number; minutes: number; charged: boolean[] }>();
  for (let i = 0; i < series.mean.length; i++) {
    for (let m = 0; m < series.seconds[i]! / 60; m++) {
      const part = Object.fromEntries(
        wall.formatToParts(series.startMs[i]! + m * 60_000).map(({ type, value }) => [type, value]),
      );
      const date = `${part.year}-${part.month}-${part.day}`;
      const weekday = tariff.holidays.dates.has(date)
        ? tariff.holidays.as
        : (part.weekday!.slice(0, 3).toLowerCase() as Weekday);
      const local = { weekday, monthDay: Number(part.month) * 100 + Number(part.day) };
      const minute = Number(part.hour) * 60 + Number(part.minute);
      energy[tariff.energy.findIndex((entry) => holds(entry, local, minute))]! += series.mean[i]! / 60_000;
      const windowStart = minute - (minute % (tariff.demandWindow / 60));
      const key = `${date} ${windowStart} ${part.timeZoneName}`;
      const window = windows.get(key) ?? {
        month: date.slice(0, 7),
        kwMinutes: 0,
        minutes: 0,
        charged: tariff.demand.map((charge) => charge.periods.some((when) => holds(when, local, windowStart))),
      };
      window.kwMinutes += series.mean[i]! / 1000;
      window.minutes++;
      windows.set(key, window);
    }
  }
  const demand = tariff.demand.map((_, d) => {
    const highest = new Map<string, number>();
    for (const { month, kwMinutes, minutes, charged } of windows.values()) {
      if (!charged[d] || minutes * 2 < tariff.demandWindow / 60) continue;
      highest.set(month, Math.max(highest.get(month) ?? 0, kwMinutes / minutes));
    }
    return highest;
  });
  return { energy, demand };
}

describe('for every tariff and record', () => {
  it('the bill is that of a slow walk over the minutes', () => {
    fc.assert(
      fc.property(bills, ({ file, series }) => {
        const tariff = readTariff(file, 'tariff.json');
        const bill = billFor(file, series);
        const slow = slowBill(tariff, series);
        const byName = new Map<string, number>();
        tariff.energy.forEach(({ name }, r) => {
          byName.set(name, (byName.get(name) ?? 0) + slow.energy[r]!);
        });
        for (const { name, energyKwh } of bill.periods) expect(energyKwh).toBeCloseTo(byName.get(name)!, 6);
        for (const { month, demand } of bill.months) {
          demand.forEach(({ measuredKw }, d) => {
            const expected = slow.demand[d]!.get(month);
            if (expected === undefined) expect(measuredKw).toBeNull();
            else expect(measuredKw).toBeCloseTo(expected, 9);
          });
        }
      }),
      { numRuns: 60, seed: 7 },
    );
  });

  it('energy agrees over months, periods and intervals, and the other charges over months', () => {
    fc.assert(
      fc.property(bills, ({ file, series }) => {
        const bill = billFor(file, series);
        const plan = planBill(readTariff(file, 'tariff.json'), series.startMs, series.seconds);
        const total = (values: readonly number[]) => values.reduce((sum, value) => sum + value, 0);
        // To the cent is promised; only the order of the additions differs.
        expect(total(bill.periods.map((entry) => entry.energyCost))).toBeCloseTo(bill.energyCost, 8);
        expect(total(bill.months.map((entry) => entry.energyCost))).toBeCloseTo(bill.energyCost, 8);
        expect(total([...energyCosts(plan, series.mean)])).toBeCloseTo(bill.energyCost, 8);
        const kwh = total([...series.mean].map((watts, i) => (watts * series.seconds[i]!) / 3.6e6));
        expect(total(bill.periods.map((entry) => entry.energyKwh))).toBeCloseTo(kwh, 8);
        expect(total(bill.months.map((entry) => entry.energyKwh))).toBeCloseTo(kwh, 8);
        expect(total(bill.months.map((entry) => entry.demandCost))).toBeCloseTo(bill.demandCost, 8);
        expect(total(bill.months.map((entry) => entry.fixedCost))).toBeCloseTo(bill.fixedCost, 8);
        expect(bill.energyCost + bill.demandCost + bill.fixedCost + bill.taxCost).toBeCloseTo(bill.totalCost, 8);
      }),
      { numRuns: 150, seed: 7 },
    );
  });

  it('doubling every rate doubles the bill', () => {
    fc.assert(
      fc.property(bills, ({ file, series }) => {
        const twice = {
          ...file,
          energy: file.energy.map((entry) => ({ ...entry, rate: 2 * entry.rate })),
          demand: file.demand!.map((entry) => ({ ...entry, rate: 2 * entry.rate })),
          fixedPerMonth: 2 * file.fixedPerMonth!,
        };
        expect(billFor(twice, series).totalCost).toBeCloseTo(2 * billFor(file, series).totalCost, 8);
      }),
      { numRuns: 100, seed: 7 },
    );
  });

  it('the energy and the fixed charges of two halves add up to those of the whole', () => {
    fc.assert(
      fc.property(bills, fc.double({ min: 0, max: 1, noNaN: true }), ({ file, series }, share) => {
        const cut = Math.floor(share * series.mean.length);
        const part = (from: number, to: number): PowerSeries => ({
          ...series,
          startMs: series.startMs.subarray(from, to),
          seconds: series.seconds.subarray(from, to),
          mean: series.mean.subarray(from, to),
        });
        const whole = billFor(file, series);
        const halves = [billFor(file, part(0, cut)), billFor(file, part(cut, series.mean.length))];
        expect(halves[0]!.energyCost + halves[1]!.energyCost).toBeCloseTo(whole.energyCost, 8);
        expect(halves[0]!.fixedCost + halves[1]!.fixedCost).toBeCloseTo(whole.fixedCost, 8);
      }),
      { numRuns: 100, seed: 7 },
    );
  });
});
