import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { IsoReader, parseTime } from '../../server/ingest/timestamps.ts';

const utc = (text: string): number => Date.parse(`${text}Z`);

describe('parseTime', () => {
  it.each([
    ['2025-03-09T04:15:00Z', '2025-03-09T04:15:00', false],
    ['2025-03-09T04:15:00.250Z', '2025-03-09T04:15:00.250', false],
    ['2025-03-09 04:15+01:00', '2025-03-09T03:15:00', false],
    ['2025-03-09T04:15:00-0530', '2025-03-09T09:45:00', false],
    ['2025-03-09 04:15:00 UTC', '2025-03-09T04:15:00', false],
    ['2025-03-09', '2025-03-09T00:00:00', true],
    ['2025/3/9 4:15', '2025-03-09T04:15:00', true],
    ['20250309T041500Z', '2025-03-09T04:15:00', false],
    ['202503090415', '2025-03-09T04:15:00', true],
    ['15.11.2024 0.00.00', '2024-11-15T00:00:00', true],
    ['27mar2022', '2022-03-27T00:00:00', true],
    ['27-Mar-22 13:05', '2022-03-27T13:05:00', true],
    ['Mar 27, 2022 1:05 PM', '2022-03-27T13:05:00', true],
    ['2025-01-05 24:00', '2025-01-06T00:00:00', true],
    ['2025-01-05 12:00 AM', '2025-01-05T00:00:00', true],
    ['2025-01-05 12:30:00\u202fPM', '2025-01-05T12:30:00', true],
    ['2025-01-05 11:00 p.m.', '2025-01-05T23:00:00', true],
    ['1741493700', '2025-03-09T04:15:00', false], // 20156 days since 1970 and 15300 s
    ['1741493700250', '2025-03-09T04:15:00.250', false],
    ['45658', '2025-01-01T00:00:00', true], // the day number spreadsheets show for 1 January 2025
    ['45658.0416666667', '2025-01-01T01:00:00', true],
  ])('reads %j', (cell, wall, local) => {
    expect(parseTime(cell, 'dmy')).toMatchObject({ ms: utc(wall), local });
  });

  it('takes the order of day and month from its column, and never decides it from the cell', () => {
    expect(parseTime('3/4/2025', 'dmy')).toMatchObject({ ms: utc('2025-04-03T00:00') });
    expect(parseTime('3/4/2025', 'mdy')).toMatchObject({ ms: utc('2025-03-04T00:00') });
    expect(parseTime('3/4/2025', null)).toBe('needs-order');
    expect(parseTime('13/4/2025', 'mdy')).toBe('no-such-day');
  });

  it.each([
    '2025-02-30 00:00',
    '2025-02-29',
    '2025-13-01',
    '2025-01-00',
    '2025-01-01 25:00',
    '2025-01-01 24:01',
    '2025-01-01 13:00 PM',
    '2025-01-01 10:60',
  ])('finds no such day or time as %j', (cell) => {
    expect(parseTime(cell, null)).toBe('no-such-day');
  });

  it.each([
    '',
    'yesterday',
    '12:00',
    '17',
    '2025-01',
    '2025-01-01T',
    '2025-01-01 10:00 CET',
    '27foo2022x',
    '99999999999',
  ])('does not take %j for a time', (cell) => {
    expect(typeof parseTime(cell, 'dmy')).toBe('string');
  });
});

describe('IsoReader', () => {
  it('agrees with the calendar of the language on any second', () => {
    const reader = new IsoReader();
    fc.assert(
      fc.property(
        fc.integer({ min: utc('1970-01-01T00:00') / 1000, max: utc('2099-12-31T00:00') / 1000 }),
        (second) => {
          const text = new Date(second * 1000).toISOString().replace('.000', '');
          expect(reader.read(`,${text},`, 1, 21)).toBe(true);
          expect(reader.ms).toBe(second * 1000);
          expect(reader.read(text.slice(0, 19), 0, 19) && reader.local === 1).toBe(true);
        },
      ),
      { numRuns: 2000, seed: 1 },
    );
  });

  it('subtracts the offset', () => {
    const reader = new IsoReader();
    expect(reader.read('2025-07-01T00:30+01:00', 0, 22)).toBe(true);
    expect(reader.ms).toBe(utc('2025-06-30T23:30'));
  });

  it.each([
    '2025-02-30T00:00:00Z',
    '2025-01-01T24:00:00Z',
    '2025-01-01T0a:00:00Z',
    '2025-1-01T00:00:00ZZ',
    '2025-01-01T00:00:60Z',
  ])('leaves %j to the slow reader', (text) => {
    expect(new IsoReader().read(text, 0, text.length)).toBe(false);
  });
});
