import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { type Fault, InputError } from '../../server/errors.ts';
import { publicHolidayDates } from '../../server/holidays.ts';
import { type HolidayDates, readTariff, tariffFileSchema } from '../../server/tariff/tariffFile.ts';
import { aTariffFile } from '../support/tariffs.ts';

function faultsOf(value: unknown, holidayDates?: HolidayDates): readonly Fault[] {
  try {
    readTariff(value, 'tariff.json', holidayDates);
  } catch (error) {
    if (error instanceof InputError) return error.faults;
    throw error;
  }
  return [];
}

describe('a tariff file that is right', () => {
  it('comes back in minutes and seconds, with what it leaves out', () => {
    const tariff = readTariff(
      aTariffFile({
        seasons: [{ name: 'winter', from: '11-01', to: '02-28' }],
        energy: [
          { name: 'peak', season: 'winter', days: ['mon'], from: '17:00', to: '24:00', rate: 0.34 },
          { name: 'early', to: '06:30', rate: -0.01 },
          { name: 'rest', rate: 0.2 },
        ],
        demand: [
          { name: 'one', from: '08:00', rate: 6.5, ratchet: { fraction: 0.8, months: 11 } },
          { name: 'two', periods: [{ from: '08:00', to: '12:00' }, { days: ['sun'] }], rate: 1 },
        ],
      }),
      'tariff.json',
    );
    expect(tariff.seasons).toEqual([{ name: 'winter', from: 1101, to: 229 }]);
    expect(tariff.energy).toEqual([
      { name: 'peak', season: 'winter', days: ['mon'], fromMinute: 1020, toMinute: 0, rate: 0.34 },
      { name: 'early', season: null, days: null, fromMinute: 0, toMinute: 390, rate: -0.01 },
      { name: 'rest', season: null, days: null, fromMinute: 0, toMinute: 0, rate: 0.2 },
    ]);
    expect(tariff.demand[0]!.periods).toEqual([{ season: null, days: null, fromMinute: 480, toMinute: 0 }]);
    expect(tariff.demand[0]!.ratchet).toEqual({ fraction: 0.8, months: 11 });
    expect(tariff.demand[1]!.periods).toEqual([
      { season: null, days: null, fromMinute: 480, toMinute: 720 },
      { season: null, days: ['sun'], fromMinute: 0, toMinute: 0 },
    ]);
    expect(tariff).toMatchObject({ demandWindow: 1800, fixedPerMonth: 0, taxPercent: 0, carbonKgPerKwh: 0 });
    expect(tariff.holidays).toEqual({ dates: new Set(), as: 'sun' });
  });

  it('has a JSON Schema', () => {
    const schema = z.toJSONSchema(tariffFileSchema);
    expect(schema.required).toEqual(['format', 'name', 'currency', 'timeZone', 'energy']);
    expect(schema.additionalProperties).toBe(false);
  });
});

describe('a fault', () => {
  const energy = (fields: object) => [{ name: 'all', rate: 0.2, ...fields }];
  const demand = (fields: object) => [{ name: 'all', rate: 6.5, ...fields }];
  it.each<[string, object, string, string]>([
    ['another format', { format: 'nth-pump/station/1' }, 'unknown_format', 'format'],
    ['no format', { format: undefined }, 'missing_field', 'format'],
    ['an unknown zone', { timeZone: 'Europe/Dublim' }, 'unknown_zone', 'timeZone'],
    ['an offset for a zone', { timeZone: '+01:00' }, 'unknown_zone', 'timeZone'],
    ['an unknown field', { fixedPerMoth: 4 }, 'unknown_field', 'fixedPerMoth'],
    ['an unknown field of a rate', { energy: energy({ form: '08:00' }) }, 'unknown_field', 'energy[0].form'],
    ['a missing rate', { energy: [{ name: 'all' }] }, 'missing_field', 'energy[0].rate'],
    ['a rate in text', { energy: energy({ rate: '0,2' }) }, 'wrong_type', 'energy[0].rate'],
    ['no rate at all', { energy: [] }, 'out_of_range', 'energy'],
    ['a time that no clock shows', { energy: energy({ from: '24:30' }) }, 'not_a_time', 'energy[0].from'],
    ['24:00 as a beginning', { energy: energy({ from: '24:00' }) }, 'not_a_time', 'energy[0].from'],
    ['a time in words', { energy: energy({ to: '8am' }) }, 'not_a_time', 'energy[0].to'],
    ['an unknown day', { energy: energy({ days: ['monday'] }) }, 'out_of_range', 'energy[0].days[0]'],
    ['a season of no list', { energy: energy({ season: 'winter' }) }, 'unknown_season', 'energy[0].season'],
    ['a season of no list in a charge', { demand: demand({ season: 'x' }) }, 'unknown_season', 'demand[0].season'],
    ['a date of no year', { seasons: [{ name: 's', from: '02-30', to: '03-01' }] }, 'not_a_time', 'seasons[0].from'],
    ['a holiday that is no date', { holidays: { dates: ['2025-02-29'] } }, 'not_a_time', 'holidays.dates[0]'],
    ['a negative demand rate', { demand: demand({ rate: -1 }) }, 'out_of_range', 'demand[0].rate'],
    ['a window of 20 min', { demandWindowMinutes: 20 }, 'out_of_range', 'demandWindowMinutes'],
    [
      'a ratchet above the whole',
      { demand: demand({ ratchet: { fraction: 80, months: 11 } }) },
      'out_of_range',
      'demand[0].ratchet.fraction',
    ],
    [
      'a ratchet of no month',
      { demand: demand({ ratchet: { fraction: 0.8, months: 0 } }) },
      'out_of_range',
      'demand[0].ratchet.months',
    ],
    [
      'a thirteenth month',
      { demand: demand({ history: [{ month: '2024-13', kw: 1 }] }) },
      'not_a_time',
      'demand[0].history[0].month',
    ],
    ['periods beside a time', { demand: demand({ periods: [{}], from: '08:00' }) }, 'unknown_field', 'demand[0].from'],
    ['a negative tax', { taxPercent: -9 }, 'out_of_range', 'taxPercent'],
    ['a region of no country', { holidays: { region: 'BY' } }, 'unknown_holidays', 'holidays.region'],
    ['a currency in words', { currency: 'euro' }, 'wrong_type', 'currency'],
  ])('%s', (_, fields, code, at) => {
    expect(faultsOf({ ...aTariffFile(), ...fields }).map((fault) => [fault.code, fault.at])).toEqual([[code, at]]);
  });

  it('is told with every other one', () => {
    const faults = faultsOf({
      ...aTariffFile(),
      timeZone: 'Mars/Olympus',
      seasons: [
        { name: 'winter', from: '11-01', to: '02-28' },
        { name: 'winter', from: '03-01', to: '10-31' },
      ],
      energy: [{ name: 'a', rate: null, season: 'wintr' }],
    });
    expect(faults.map((fault) => fault.code)).toEqual([
      'unknown_zone',
      'wrong_type',
      'duplicate_name',
      'unknown_season',
    ]);
    expect(faults[3]).toMatchObject({ found: '"wintr"', wanted: 'one of "winter"' });
  });

  it.each([[null], [[]], ['text'], [{}]])('of a value that is no tariff: %j', (value) => {
    expect(faultsOf(value).length).toBeGreaterThan(0);
  });
});

describe('holidays of a country', () => {
  // NERC, additional off-peak days 2010: all six, the Sunday of 4 July kept on Monday, Christmas on its Saturday.
  it('include the published days of the United States', () => {
    const dates = publicHolidayDates('us', null, [2010])!;
    expect(dates).toEqual(
      expect.arrayContaining(['2010-01-01', '2010-05-31', '2010-07-05', '2010-09-06', '2010-11-25', '2010-12-25']),
    );
  });

  it('differ by region: Corpus Christi 2025, 19 June, rests in Bavaria and not in Berlin', () => {
    expect(publicHolidayDates('DE', 'BY', [2025])).toContain('2025-06-19');
    expect(publicHolidayDates('DE', 'BE', [2025])).not.toContain('2025-06-19');
  });

  it('are public ones only: Good Friday is none in Ireland', () => {
    expect(publicHolidayDates('IE', null, [2025])).toContain('2025-03-17');
    expect(publicHolidayDates('IE', null, [2025])).not.toContain('2025-04-18');
  });

  it('may last several days: the Feast of Sacrifice in Türkiye, 6 to 9 June 2025', () => {
    expect(publicHolidayDates('TR', null, [2025])).toEqual(
      expect.arrayContaining(['2025-06-06', '2025-06-07', '2025-06-08', '2025-06-09']),
    );
    expect(publicHolidayDates('TR', null, [2025])).not.toContain('2025-06-10');
  });

  it('join the listed dates', () => {
    const file = aTariffFile({ holidays: { country: 'IE', dates: ['2025-12-24'], as: 'sat' } });
    const { dates, as } = readTariff(file, 'tariff.json', publicHolidayDates).holidays;
    expect(as).toBe('sat');
    expect(dates.has('2025-12-24') && dates.has('2025-12-26') && dates.has('2031-12-25')).toBe(true);
  });

  it('are refused where the place is unknown, or no calendar is at hand', () => {
    const of = (holidays: object, resolver?: HolidayDates) =>
      faultsOf({ ...aTariffFile(), holidays }, resolver).map((fault) => [fault.code, fault.at]);
    expect(of({ country: 'ZZ' }, publicHolidayDates)).toEqual([['unknown_holidays', 'holidays.country']]);
    expect(of({ country: 'DE', region: 'XX' }, publicHolidayDates)).toEqual([['unknown_holidays', 'holidays.region']]);
    expect(of({ country: 'IE' })).toEqual([['unknown_holidays', 'holidays.country']]);
  });
});
