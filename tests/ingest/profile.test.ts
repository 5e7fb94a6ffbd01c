import { describe, expect, it } from 'vitest';
import { aRecord, faultsOf } from '../support/aRecord.ts';

// Wellington Water, Wastewater Regional Modelling Specifications, v11 draft (June 2020), appendix F: residential
// multipliers of hours 1 to 24, printed to sum to 24.00.
const residential = [
  ...[0.25, 0.08, 0.07, 0.08, 0.11, 0.58, 1.63, 2.12, 1.83, 1.68, 1.51, 1.23],
  ...[1.14, 1.12, 0.92, 0.95, 1.16, 1.26, 1.44, 1.16, 1.05, 1.11, 0.96, 0.56],
];
const flat = (value: number): number[] => Array(24).fill(value);
const base = { format: 'nth-pump/profile/1', year: 2025, flow: { weekday: residential, weekend: flat(1) } };
const read = (changes: object = {}, timeZone = 'Europe/Dublin') =>
  aRecord(JSON.stringify({ ...base, ...changes }), { timeZone, fileName: 'profile.json' });

/** Flow in L/s at an instant. */
const flowAt = (record: ReturnType<typeof read>, instant: string): number => {
  const at = record.log.startMs.indexOf(Date.parse(instant));
  return Number((record.log.flow![at]! * 1000).toPrecision(12));
};

/** Hours between two instants that carry a value. */
const hoursBetween = ({ log }: ReturnType<typeof read>, from: string, to: string): number =>
  log.seconds
    .filter((_, i) => log.startMs[i]! >= Date.parse(from) && log.startMs[i]! < Date.parse(to))
    .reduce((a, b) => a + b, 0) / 3600;

describe('a profile laid over a year', () => {
  it('gives each day its 24 printed units, and the year 8760 hours without a gap', () => {
    const record = read({}, 'UTC');
    expect(record.report).toMatchObject({ from: '2025-01-01T00:00:00Z', to: '2026-01-01T00:00:00Z', intervals: 8760 });
    expect(record.report).toMatchObject({ hours: 8760, gapHours: 0, stepSeconds: 3600 });
    // 24.00 L/s·h a day, weekday and weekend alike: 365 · 24 · 3.6 m³
    expect(record.report.volumeM3).toBeCloseTo(365 * 24 * 3.6, 6);
    expect(record.report.notes.map((note) => note.code)).toEqual(['profile']);
  });

  it('follows the local clock, weekdays and weekends', () => {
    const record = read();
    expect(flowAt(record, '2025-01-03T07:00:00Z')).toBe(2.12); // Friday, hour 8
    expect(flowAt(record, '2025-01-04T07:00:00Z')).toBe(1); // Saturday
    expect(flowAt(record, '2025-07-04T06:00:00Z')).toBe(2.12); // Friday in summer time: 07:00 on the clock
  });

  // EU rule of the IANA tz database: last Sundays of March and October, 01:00 UTC; days of 23 and 25 hours.
  it('leaves out the hour that spring skips and repeats the one of autumn', () => {
    const record = read({ flow: { weekday: residential, weekend: residential } });
    expect(hoursBetween(record, '2025-03-30T00:00:00Z', '2025-03-30T23:00:00Z')).toBe(23);
    expect(flowAt(record, '2025-03-30T00:00:00Z')).toBe(0.25); // 00:00
    expect(flowAt(record, '2025-03-30T01:00:00Z')).toBe(0.07); // 02:00: 01:00 does not exist
    expect(hoursBetween(record, '2025-10-25T23:00:00Z', '2025-10-27T00:00:00Z')).toBe(25);
    expect(flowAt(record, '2025-10-26T00:00:00Z')).toBe(0.08); // 01:00, first
    expect(flowAt(record, '2025-10-26T01:00:00Z')).toBe(0.08); // 01:00, second
    expect(flowAt(record, '2025-10-26T02:00:00Z')).toBe(0.07);
  });

  it('cuts the clock hour where the clock changes by half an hour (Lord Howe, 23.5 and 24.5 h)', () => {
    const record = read({ flow: { weekday: residential, weekend: residential } }, 'Australia/Lord_Howe');
    // Local midnights: 4 Oct 13:30Z (+10:30) to 5 Oct 13:00Z (+11), and 5 Apr 13:00Z (+11) to 6 Apr 13:30Z (+10:30).
    expect(hoursBetween(record, '2025-10-04T13:30:00Z', '2025-10-05T13:00:00Z')).toBe(23.5);
    expect(hoursBetween(record, '2025-04-05T13:00:00Z', '2025-04-06T13:30:00Z')).toBe(24.5);
    expect(record.report.gapHours).toBe(0);
  });

  it("cuts the clock hour that a change at 00:01 leaves a minute of (St John's until 2011, IANA tz database)", () => {
    const { log } = read({ year: 2010 }, 'America/St_Johns');
    const at = log.startMs.indexOf(Date.parse('2010-03-14T03:30:00Z')); // local midnight at -03:30; 00:01 becomes 01:01
    expect(Array.from(log.seconds.slice(at, at + 3))).toEqual([60, 59 * 60, 3600]);
  });

  it('prefers the holiday, then the day by name, then the kind of day', () => {
    const flow = { weekday: flat(1), weekend: flat(2), fri: flat(3), holiday: flat(4) };
    const record = read({ flow, holidays: ['2025-12-25'] });
    const noon = (day: string): number => flowAt(record, `2025-${day}T12:00:00Z`);
    expect([noon('12-24'), noon('12-25'), noon('12-26'), noon('12-27')]).toEqual([1, 4, 3, 2]);
  });

  it('multiplies by the season or takes its values, both ends included, over the new year', () => {
    const seasons = [
      { name: 'wet', from: '11-15', to: '02-28', factor: 3 },
      { name: 'dry', from: '06-01', to: '08-31', flow: { weekend: flat(7) } },
    ];
    const noon = (record: ReturnType<typeof read>, day: string): number => flowAt(record, `${day}T12:00:00Z`);
    const record = read({ flow: { weekday: flat(1), weekend: flat(2) }, seasons }, 'UTC');
    expect(['2025-11-14', '2025-11-15', '2025-02-28', '2025-03-01'].map((day) => noon(record, day))).toEqual([
      1, 6, 3, 2,
    ]);
    expect(['2025-06-01', '2025-06-02', '2025-08-31', '2025-09-06'].map((day) => noon(record, day))).toEqual([
      7, 1, 7, 2,
    ]);
    const leap = read({ year: 2024, flow: { weekday: flat(1), weekend: flat(2) }, seasons }, 'UTC');
    expect(noon(leap, '2024-02-29')).toBe(3);
    expect(leap.report.hours).toBe(8784);
  });

  it('is in the flow unit of the station', () => {
    const record = aRecord(JSON.stringify(base), { units: { flow: 'm3/h', head: 'm', power: 'kW' } });
    expect(record.log.flow![5]).toBeCloseTo(0.58 / 3600, 15); // 1 January 2025 is a Wednesday, hour 6
  });
});

describe('a faulty profile', () => {
  it.each([
    ['no JSON', '{ "format": ', 'not_json profile.json'],
    [
      'another format',
      '{ "format": "nth-pump/station/1" }',
      'unknown_format profile.json format: found "nth-pump/station/1"',
    ],
  ])('%s', (_, text, fault) => {
    expect(faultsOf(() => aRecord(text, { fileName: 'profile.json' }))).toEqual([expect.stringContaining(fault)]);
  });

  it.each([
    [{ year: undefined }, 'missing_field profile.json year: found nothing'],
    [{ year: 'now' }, 'wrong_type profile.json year: found "now"'],
    [{ year: 20_255 }, 'out_of_range profile.json year: found 20255'],
    [{ flow: { weekday: residential } }, 'missing_field profile.json flow.weekend: found nothing'],
    [{ flow: { weekend: residential, mon: flat(1) } }, 'missing_field profile.json flow.weekday: found nothing'],
    [
      { flow: { weekday: flat(1).slice(1), weekend: flat(1) } },
      'out_of_range profile.json flow.weekday: found 23 values',
    ],
    [{ flow: { weekday: flat(-1), weekend: flat(1) } }, 'negative_flow profile.json flow.weekday[0]: found -1'],
    [{ flow: { weekday: flat(1), weekend: ['1'] } }, 'wrong_type profile.json flow.weekend[0]: found "1"'],
    [{ flow: { ...base.flow, holiday: flat(1) } }, 'missing_field profile.json holidays: found nothing'],
    [{ holidays: ['2025-02-30'] }, 'out_of_range profile.json holidays[0]: found "2025-02-30"'],
    [{ extra: 1 }, 'unknown_field profile.json extra'],
    [
      { seasons: [{ name: 'x', from: '02-30', to: '03-01' }] },
      'out_of_range profile.json seasons[0].from: found "02-30"',
    ],
    [{ seasons: [{ name: 'x', from: '01-01' }] }, 'missing_field profile.json seasons[0].to: found nothing'],
  ])('%j', (changes, fault) => {
    const faults = faultsOf(() => read(changes));
    expect(faults[0]).toContain(fault);
  });

  it('hears of all its faults at once', () => {
    expect(faultsOf(() => read({ year: 1, extra: 1, holidays: ['x'] }))).toHaveLength(3);
  });
});
