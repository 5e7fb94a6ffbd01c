import { describe, expect, it } from 'vitest';
import { billOf, peakShare } from '../../server/tariff/bill.ts';
import { planBill } from '../../server/tariff/plan.ts';
import type { PowerSeries } from '../../server/tariff/tariff.ts';
import localDays from '../reference/local-days.json' with { type: 'json' };
import { aTariff, billFor, energyCosts, powerOf, steady } from '../support/tariffs.ts';

const WORKDAYS = ['mon', 'tue', 'wed', 'thu', 'fri'] as const;

function energyOf(bill: ReturnType<typeof billFor>, name: string): number {
  return bill.periods.find((period) => period.name === name)!.energyKwh;
}

// Bills that others have worked out, ratchets and days of 23 and 25 hours among them, are in tests/accuracy/tariffs.ts.
it('a fixed charge is that of the share of its month that the record covers', () => {
  const tariff = aTariff({ timeZone: 'America/Los_Angeles', fixedPerMonth: 300 });
  const day = billFor(tariff, powerOf(steady('2024-07-10T00:00:00-07:00', 24)));
  expect(day.fixedCost).toBeCloseTo((300 * 24) / 744, 9);
  expect(billFor(tariff, powerOf(steady('2024-07-01T00:00:00-07:00', 744))).fixedCost).toBeCloseTo(300, 9);
});

describe('local time', () => {
  it.each(localDays.months)('a fixed charge is spread over the $hours hours of $month', ({ zone, month, hours }) => {
    const tariff = aTariff({ timeZone: zone, fixedPerMonth: 100 });
    const noon = `${month}-01T12:00:00-0${month === '2025-03' ? 5 : 4}:00`;
    const part = billFor(tariff, powerOf(steady(noon, 100)));
    expect(part.fixedCost).toBeCloseTo((100 * 100) / hours, 9);
    // The whole month, less the half day before that noon.
    const rest = billFor(tariff, powerOf(steady(noon, hours - 12)));
    expect(rest.months.map((entry) => entry.month)).toEqual([month]);
    expect(rest.fixedCost).toBeCloseTo((100 * (hours - 12)) / hours, 9);
  });

  it('demand windows repeat with the repeated hour', () => {
    // New York, 2 November 2025: the hour from 01:00 comes at 05Z and again at 06Z. One window of 60 min each; were they
    // one, its mean would be 20.
    const tariff = aTariff({
      timeZone: 'America/New_York',
      demand: [{ name: 'night', from: '01:00', to: '02:00', rate: 1 }],
      demandWindowMinutes: 60,
    });
    const bill = billFor(tariff, powerOf({ from: '2025-11-02T04:00:00Z', stepMinutes: 60, kw: [99, 10, 30, 99] }));
    expect(bill.months[0]!.demand[0]!.measuredKw).toBe(30);
  });

  it('a period that wraps midnight has the day of the moment', () => {
    // A weekday-only night, 23:00 to 08:00, over the week from Monday 2025-06-02: Monday to Friday give 8 early and 1
    // late hour each, 45 in all. Saturday's early hours are Saturday's, and so not of the night.
    const tariff = aTariff({
      energy: [
        { name: 'night', days: [...WORKDAYS], from: '23:00', to: '08:00', rate: 0.1 },
        { name: 'rest', rate: 0.2 },
      ],
    });
    const week = powerOf(steady('2025-06-02T00:00:00+01:00', 168));
    expect(energyOf(billFor(tariff, week), 'night')).toBeCloseTo(45, 9);
    const saturday = powerOf(steady('2025-06-07T00:00:00+01:00', 8));
    expect(energyOf(billFor(tariff, saturday), 'night')).toBe(0);
    const fridayEvening = powerOf(steady('2025-06-06T22:00:00+01:00', 4));
    expect(energyOf(billFor(tariff, fridayEvening), 'night')).toBeCloseTo(1, 9);
  });

  it('a season may wrap past the new year, and one that ends on 28 February includes the 29th', () => {
    const tariff = aTariff({
      seasons: [{ name: 'winter', from: '11-01', to: '02-28' }],
      energy: [
        { name: 'winter', season: 'winter', rate: 0.3 },
        { name: 'rest', rate: 0.2 },
      ],
    });
    // From 1 October 2023 to the end of September 2024: 30 + 31 + 31 + 29 winter days; no clock changes inside them.
    const bill = billFor(tariff, powerOf(steady('2023-10-01T00:00:00+01:00', 366 * 24)));
    expect(energyOf(bill, 'winter')).toBeCloseTo(121 * 24, 6);
  });

  it('an interval is split at a boundary inside it', () => {
    const tariff = aTariff({
      energy: [
        { name: 'peak', from: '17:20', to: '19:00', rate: 0.3 },
        { name: 'rest', rate: 0.1 },
      ],
    });
    // 12 kW from 17:00 to 18:00: 20 min at 0.10 and 40 min at 0.30.
    const series = powerOf({ from: '2025-06-02T17:00:00+01:00', stepMinutes: 60, kw: [12] });
    const plan = planBill(tariff, series.startMs, series.seconds);
    expect(billOf(plan, series).energyCost).toBeCloseTo(4 * 0.1 + 8 * 0.3, 12);
    expect(energyCosts(plan, series.mean)[0]).toBeCloseTo(4 * 0.1 + 8 * 0.3, 12);
  });

  it('the first period that matches wins, and equal ends mean all day', () => {
    const tariff = aTariff({
      energy: [
        { name: 'weekend', days: ['sat', 'sun'], from: '06:00', to: '06:00', rate: 0.1 },
        { name: 'evening', from: '18:00', to: '24:00', rate: 0.3 },
        { name: 'rest', rate: 0.2 },
      ],
    });
    const bill = billFor(tariff, powerOf(steady('2025-06-02T00:00:00+01:00', 168)));
    expect(bill.periods.map((period) => Math.round(period.energyKwh))).toEqual([48, 30, 90]);
  });
});

describe('holidays', () => {
  it('count as the day they are told to', () => {
    // NERC, additional off-peak days: Independence Day 2010 falls on a Sunday and is kept on Monday 5 July.
    const tariff = aTariff({
      timeZone: 'America/New_York',
      holidays: { dates: ['2010-07-05'], as: 'sun' },
      energy: [
        { name: 'off-peak', days: ['sat', 'sun'], rate: 0.1 },
        { name: 'on-peak', rate: 0.2 },
      ],
      demand: [{ name: 'on-peak', days: [...WORKDAYS], rate: 10 }],
    });
    const kw = Array.from({ length: 48 }, (_, hour) => (hour < 24 ? 9 : 5));
    const bill = billFor(tariff, powerOf({ from: '2010-07-05T00:00:00-04:00', stepMinutes: 60, kw }));
    expect(energyOf(bill, 'off-peak')).toBeCloseTo(9 * 24, 9);
    expect(energyOf(bill, 'on-peak')).toBeCloseTo(5 * 24, 9);
    expect(bill.demandCost).toBeCloseTo(50, 9);
  });
});

describe('hours without a rate', () => {
  it('are refused with the first of them, in local time, and their number', () => {
    const tariff = aTariff({ energy: [{ name: 'workdays', days: [...WORKDAYS], rate: 0.2 }] });
    const series = powerOf(steady('2025-06-06T00:30:00+01:00', 168));
    expect(() => planBill(tariff, series.startMs, series.seconds, 'rates.json')).toThrow(
      'rates.json energy: found no rate from 2025-06-07 00:00 (sat); 48 h of the record in all',
    );
  });

  it('outside the record do not matter', () => {
    const tariff = aTariff({ energy: [{ name: 'workdays', days: [...WORKDAYS], rate: 0.2 }] });
    expect(billFor(tariff, powerOf(steady('2025-06-02T00:00:00+01:00', 120))).energyCost).toBeCloseTo(24, 9);
  });
});

describe('demand windows', () => {
  it('take the mean over a window that holds several intervals, and over the parts of a split one', () => {
    const tariff = aTariff({ demand: [{ name: 'all', rate: 2 }], demandWindowMinutes: 30 });
    // Intervals of 20 min from 00:00: windows hold 10, 10 | 10: (20·6 + 10·30)/30 = 14; then (10·30 + 20·3)/30 = 12.
    const bill = billFor(tariff, powerOf({ from: '2025-01-07T00:00:00Z', stepMinutes: 20, kw: [6, 30, 3] }));
    expect(bill.months[0]!.demand[0]!.measuredKw).toBeCloseTo(14, 12);
    expect(bill.demandCost).toBeCloseTo(28, 12);
  });

  it('count when half covered and are left out under that', () => {
    const tariff = aTariff({ demand: [{ name: 'all', rate: 1 }], demandWindowMinutes: 30 });
    const measured = (from: string) =>
      billFor(tariff, powerOf({ from, stepMinutes: 1, kw: new Array<number>(15).fill(8) })).months[0]!.demand[0]!;
    expect(measured('2025-01-07T00:15:00Z').measuredKw).toBeCloseTo(8, 12);
    // 00:16 to 00:31: 14 min in one window and 1 min in the next.
    expect(measured('2025-01-07T00:16:00Z')).toMatchObject({ measuredKw: null, billedKw: 0, cost: 0 });
  });

  it('belong to a charge by their start', () => {
    const tariff = aTariff({
      demand: [{ name: 'evening', from: '16:15', to: '17:15', rate: 1 }],
      demandWindowMinutes: 30,
    });
    // Half-hours from 16:00: the one of 16:00 starts before the period; those of 16:30 and 17:00 start inside it.
    const bill = billFor(tariff, powerOf({ from: '2025-01-07T16:00:00Z', stepMinutes: 30, kw: [9, 4, 5, 9] }));
    expect(bill.months[0]!.demand[0]!.measuredKw).toBe(5);
  });
});

describe('ratchets', () => {
  const monthly = (kw: readonly number[], from: string) => {
    // One hour of each peak in the middle of each month, 1 kW else; months of UTC.
    const start = Date.parse(from);
    const year = new Date(start).getUTCFullYear();
    const end = Date.UTC(year, new Date(start).getUTCMonth() + kw.length, 1);
    const power = Array.from({ length: (end - start) / 3_600_000 }, () => 1);
    kw.forEach((peak, m) => {
      power[(Date.UTC(year, new Date(start).getUTCMonth() + m, 15, 12) - start) / 3_600_000] = peak;
    });
    return powerOf({ from, stepMinutes: 60, kw: power });
  };

  // PNNL, "What is a demand ratchet?": 80 % of the highest of the previous 11 months; a single 1 000 kW bills at least
  // 800 kW for the next 11 months, and so no longer in the twelfth.
  it('eleven months of a single peak, measured in the record or before it', () => {
    const ratchet = { fraction: 0.8, months: 11 };
    const inRecord = aTariff({ timeZone: 'UTC', demand: [{ name: 'all', rate: 1, ratchet }] });
    const peaks = [1000, ...new Array<number>(12).fill(100)];
    const expected = [1000, ...new Array<number>(11).fill(800), 100];
    const billed = (bill: ReturnType<typeof billFor>) => bill.months.map((month) => month.demand[0]!.billedKw);
    billed(billFor(inRecord, monthly(peaks, '2025-01-01T00:00:00Z'))).forEach((kw, m) => {
      expect(kw).toBeCloseTo(expected[m]!, 9);
    });

    const history = [{ month: '2025-01', kw: 1000 }];
    const before = aTariff({ timeZone: 'UTC', demand: [{ name: 'all', rate: 1, ratchet, history }] });
    billed(billFor(before, monthly(peaks.slice(1), '2025-02-01T00:00:00Z'))).forEach((kw, m) => {
      expect(kw).toBeCloseTo(expected[m + 1]!, 9);
    });
  });

  it('looks back on months before, and on the record rather than on the history where both know a month', () => {
    const ratchet = { fraction: 0.8, months: 11 };
    const history = [{ month: '2025-01', kw: 1000 }];
    const always = aTariff({ timeZone: 'UTC', demand: [{ name: 'all', rate: 1, ratchet, history }] });
    const bill = billFor(always, monthly([100, 10], '2025-01-01T00:00:00Z'));
    expect(bill.months.map((month) => month.demand[0]!.billedKw)).toEqual([expect.closeTo(100), expect.closeTo(80)]);
    // A Tuesday has no window of a Sunday charge; January's own history is not a month before.
    const sundays = aTariff({ timeZone: 'UTC', demand: [{ name: 'all', days: ['sun'], rate: 1, ratchet, history }] });
    const tuesday = billFor(sundays, powerOf(steady('2025-01-07T00:00:00Z', 24)));
    expect(tuesday.months[0]!.demand[0]).toMatchObject({ measuredKw: null, billedKw: 0 });
  });

  it('looks back at what was measured, not at what was billed', () => {
    // Two months back: 100 kW, then 80 billed, then 80; a ratchet on billed demand would carry 0.8·80 into April.
    const tariff = aTariff({
      timeZone: 'UTC',
      demand: [{ name: 'all', rate: 1, ratchet: { fraction: 0.8, months: 2 } }],
    });
    const bill = billFor(tariff, monthly([100, 10, 10, 10], '2025-01-01T00:00:00Z'));
    bill.months.forEach((month, m) => {
      expect(month.demand[0]!.billedKw).toBeCloseTo([100, 80, 80, 10][m]!, 9);
    });
  });
});

describe('pumps that switch inside an interval', () => {
  /** One hour at 20 L/s, shared between off (1 kW) and one pump (50 L/s, 21 kW): 40 % of the time, 9 kW in the mean. */
  const shared = (activeVolume: number | null): PowerSeries => ({
    startMs: Float64Array.of(Date.parse('2025-01-07T00:00:00Z')),
    seconds: Float64Array.of(3600),
    mean: Float64Array.of(9000),
    flow: Float64Array.of(0.02),
    shared: {
      interval: Uint32Array.of(0),
      low: Float64Array.of(1000),
      high: Float64Array.of(21_000),
      lowFlow: Float64Array.of(0),
      highFlow: Float64Array.of(0.05),
    },
    activeVolume,
  });
  const measured = (demandWindowMinutes: 15 | 30 | 60, activeVolume: number | null) =>
    billFor(aTariff({ demand: [{ name: 'all', rate: 1 }], demandWindowMinutes }), shared(activeVolume));

  // By hand: V = 18 m³; the pump draws down for 18/(0.05 − 0.02) = 600 s, the well fills for 18/0.02 = 900 s, T = 1500 s.
  // 15 min: ⌊900/1500⌋ = 0 whole cycles; min(900, 600) = 600 s of 900: 1 + 20·2/3 = 14.333 kW.
  // 30 min: 1 whole cycle; 600 + min(300, 600) = 900 s of 1800: 1 + 20/2 = 11 kW.
  // 60 min: 2 whole cycles; 1200 + min(600, 600) = 1800 s of 3600: 11 kW.
  it.each([
    [15, 1 + (20 * 2) / 3],
    [30, 11],
    [60, 11],
  ] as const)('peak above their mean: window of %i min', (minutes, kw) => {
    const bill = measured(minutes, 18);
    expect(bill.months[0]!.demand[0]!.measuredKw).toBeCloseTo(kw, 12);
    expect(bill.notes).toEqual([]);
    expect(bill.months[0]!.energyKwh).toBeCloseTo(9, 12);
  });

  it('keep their mean power: a bill changes nothing of what it is given', () => {
    const series = shared(18);
    billFor(aTariff({ demand: [{ name: 'all', rate: 1 }] }), series);
    expect(series.mean[0]).toBe(9000);
  });

  it('take their mean, with one note, where the active volume is unknown', () => {
    const bill = measured(15, null);
    expect(bill.months[0]!.demand[0]!.measuredKw).toBeCloseTo(9, 12);
    expect(bill.notes.map((note) => note.code)).toEqual(['demand-mean']);
  });

  it('share a window with their neighbours by time', () => {
    const one = shared(18);
    const twice = (values: Float64Array, next: number) => Float64Array.of(values[0]!, next);
    // 00:00 to 00:30 shared at w = 1/2 (11 kW as above, W = 60 min), then 00:30 to 01:00 steady at 5 kW: 8 kW.
    const series: PowerSeries = {
      startMs: twice(one.startMs, one.startMs[0]! + 1_800_000),
      seconds: Float64Array.of(1800, 1800),
      mean: twice(one.mean, 5000),
      flow: twice(one.flow, 0.02),
      shared: one.shared,
      activeVolume: 18,
    };
    const tariff = aTariff({ demand: [{ name: 'all', rate: 1 }], demandWindowMinutes: 60 });
    expect(billFor(tariff, series).months[0]!.demand[0]!.measuredKw).toBeCloseTo(8, 12);
  });

  it('run for most of a window when a simulated cycle is slid over it', () => {
    // A slow search: the on/off cycle laid under the window at 2 000 phases; the fullest window is the share.
    for (const [flow, volume, window] of [
      [0.02, 18, 900],
      [0.035, 7, 1800],
      [0.011, 3, 3600],
      [0.049, 40, 1800],
    ] as const) {
      const on = volume / (0.05 - flow);
      const cycle = on + volume / flow;
      let fullest = 0;
      for (let k = 0; k < 2000; k++) {
        const phase = (k / 2000) * cycle;
        let running = 0;
        for (let begin = -cycle; begin < phase + window; begin += cycle)
          running += Math.max(0, Math.min(begin + on, phase + window) - Math.max(begin, phase));
        fullest = Math.max(fullest, running / window);
      }
      // Phase 0 is among those tried, so the search finds the maximum itself.
      expect(peakShare({ flow, low: 0, high: 0.05 }, volume, window)).toBeCloseTo(fullest, 9);
    }
  });
});

it('tax is on energy, demand and fixed charges, carbon on energy', () => {
  // 10 kW for the 744 h of January: 7440 kWh at 0.20 = 1488; 10 kW at 5 = 50; 45 fixed; 9 % of 1583 = 142.47.
  const tariff = aTariff({
    demand: [{ name: 'all', rate: 5 }],
    fixedPerMonth: 45,
    taxPercent: 9,
    carbonKgPerKwh: 0.25,
  });
  const bill = billFor(tariff, powerOf(steady('2025-01-01T00:00:00Z', 744, 10)));
  expect(bill.taxCost).toBeCloseTo(142.47, 9);
  expect(bill.totalCost).toBeCloseTo(1725.47, 9);
  expect(bill.carbonKg).toBeCloseTo(1860, 9);
});
