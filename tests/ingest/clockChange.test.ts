import { describe, expect, it } from 'vitest';
import { aRecord, faultsOf, litres, noteCodes, starts } from '../support/aRecord.ts';

/**
 * The local day written row by row as a logger on local time writes it: instants stepped in UTC, labelled by the
 * platform's own formatter, which the import does not use.
 */
function localDay(zone: string, date: string, stepMinutes: number): { instants: number[]; lines: string[] } {
  const format = new Intl.DateTimeFormat('sv-SE', { timeZone: zone, dateStyle: 'short', timeStyle: 'short' });
  const instants: number[] = [];
  const lines: string[] = [];
  const noon = Date.parse(`${date}T12:00:00Z`);
  for (let at = noon - 36 * 3_600_000; at < noon + 36 * 3_600_000; at += stepMinutes * 60_000) {
    const label = format.format(at);
    if (!label.startsWith(date)) continue;
    instants.push(at);
    lines.push(`${label},${instants.length}`);
  }
  return { instants, lines };
}

// Hours of the local day by the rules of the IANA tz database (2026.4): US from 2007 second Sunday of March and first of
// November, before that last Sunday of October; EU last Sundays of March and October at 01:00 UTC; Lord Howe half an hour.
const days: [string, string, number][] = [
  ['Europe/Dublin', '2025-03-30', 23],
  ['Europe/Dublin', '2025-10-26', 25],
  ['Europe/Dublin', '2025-06-15', 24],
  ['America/New_York', '2025-03-09', 23],
  ['America/New_York', '2025-11-02', 25],
  ['America/New_York', '2006-10-29', 25],
  ['Australia/Lord_Howe', '2025-10-05', 23.5],
  ['Australia/Lord_Howe', '2025-04-06', 24.5],
  ['America/Phoenix', '2025-03-09', 24],
];

describe('a local day without offsets', () => {
  it.each(days)('%s %s has %d hours', (timeZone, date, hours) => {
    const { instants, lines } = localDay(timeZone, date, 15);
    const record = aRecord(`time,flow\n${lines.join('\n')}\n`, { timeZone });
    expect(record.report).toMatchObject({ hours, gapHours: 0, intervals: hours * 4, notes: [] });
    expect(Array.from(record.log.startMs)).toEqual(instants);
  });

  it.each(days)('%s %s reads the same newest first', (timeZone, date, hours) => {
    const { instants, lines } = localDay(timeZone, date, 15);
    const record = aRecord(`time,flow\n${lines.toReversed().join('\n')}\n`, { timeZone });
    expect(Array.from(record.log.startMs)).toEqual(instants);
    expect(record.report.hours).toBe(hours);
    expect(noteCodes(record)).toEqual(['reversed']);
  });
});

const around = (repeated: string): string =>
  `time,flow\n2025-10-26 00:00,1\n2025-10-26 00:30,2\n${repeated}2025-10-26 02:00,7\n2025-10-26 02:30,8\n`;
const allStarts = [
  ...['2025-10-25T23:00', '2025-10-25T23:30', '2025-10-26T00:00', '2025-10-26T00:30'],
  ...['2025-10-26T01:00', '2025-10-26T01:30', '2025-10-26T02:00', '2025-10-26T02:30'],
];

describe('the hour that autumn repeats (Dublin 2025-10-26, 01:00 to 02:00, +01:00 then +00:00)', () => {
  it('as two blocks', () => {
    const rows = '2025-10-26 01:00,3\n2025-10-26 01:30,4\n2025-10-26 01:00,5\n2025-10-26 01:30,6\n';
    const record = aRecord(around(rows));
    expect(starts(record)).toEqual(allStarts);
    expect(litres(record)).toEqual([1, 2, 3, 4, 5, 6, 7, 8]);
  });

  it('interleaved pairwise', () => {
    const rows = '2025-10-26 01:00,3\n2025-10-26 01:00,5\n2025-10-26 01:30,4\n2025-10-26 01:30,6\n';
    const record = aRecord(around(rows));
    expect(starts(record)).toEqual(allStarts);
    expect(litres(record)).toEqual([1, 2, 3, 4, 5, 6, 7, 8]);
  });

  it('as two blocks of which the first lost a row', () => {
    const record = aRecord(around('2025-10-26 01:00,3\n2025-10-26 01:00,5\n2025-10-26 01:30,6\n'));
    expect(litres(record)).toEqual([1, 2, 3, 5, 6, 7, 8]);
    expect(record.report.gapHours).toBe(0.5);
  });

  it('once: taken as the first pass, said, and the second is a gap', () => {
    const record = aRecord(around('2025-10-26 01:00,3\n2025-10-26 01:30,4\n'));
    expect(starts(record)).toEqual([...allStarts.slice(0, 4), ...allStarts.slice(6)]);
    expect(record.report).toMatchObject({ hours: 3, gapHours: 1 });
    expect(record.report.gaps).toEqual([{ from: '2025-10-26T01:00:00Z', to: '2025-10-26T02:00:00Z', hours: 1 }]);
    expect(noteCodes(record)).toEqual(['repeated-hour-once']);
  });

  it('with offsets: each row says itself where it belongs', () => {
    const rows = ['00:30+01:00,1', '01:00+01:00,2', '01:30+01:00,3', '01:00+00:00,4', '01:30Z,5'];
    const record = aRecord(`time,flow\n${rows.map((row) => `2025-10-26T${row}`).join('\n')}\n`);
    expect(starts(record)).toEqual(allStarts.slice(1, 6));
  });
});

describe('the hour that spring skips (Dublin 2025-03-30, 01:00 to 02:00)', () => {
  it('absent is no gap', () => {
    const record = aRecord(
      'time,flow\n2025-03-29 23:00,1\n2025-03-30 00:00,2\n2025-03-30 02:00,3\n2025-03-30 03:00,4\n',
    );
    expect(record.report).toMatchObject({ hours: 4, gapHours: 0, gaps: [] });
  });

  it('present as an empty row is left out, and that is said', () => {
    const record = aRecord(
      'time,flow\n2025-03-30 00:00,2\n2025-03-30 01:00,\n2025-03-30 02:00,3\n2025-03-30 03:00,4\n',
    );
    expect(record.report).toMatchObject({ intervals: 3, hours: 3, gapHours: 0 });
    expect(noteCodes(record)).toEqual(['skipped-hour']);
  });

  it('present with a value is refused with its line', () => {
    const text = 'time,flow\n2025-03-30 00:00,2\n2025-03-30 01:00,9\n2025-03-30 02:00,3\n';
    expect(faultsOf(() => aRecord(text))).toEqual([
      expect.stringMatching(
        /^not_a_time flow.csv line 3: found time '2025-03-30 01:00:00', which the clock skips; .*Dublin/,
      ),
    ]);
  });

  it('is an hour like others for a logger that keeps winter time all year', () => {
    const text = 'time,flow\n2025-03-30 00:00,2\n2025-03-30 01:00,9\n2025-03-30 02:00,3\n';
    const expected = ['2025-03-29T23:00', '2025-03-30T00:00', '2025-03-30T01:00'];
    for (const timeZone of ['+01:00', 'Etc/GMT-1']) {
      expect(starts(aRecord(text, { options: { timeZone } }))).toEqual(expected);
    }
    expect(starts(aRecord(text.replace('time', 'Time (UTC+1)')))).toEqual(expected);
    const contradicted = aRecord(text.replace('time', 'time_utc'), { options: { timeZone: '+01:00' } });
    expect(starts(contradicted)).toEqual(expected); // what a person says overrides what a header says
    expect(starts(aRecord(text.replace('time', 'time_utc')))).toEqual([
      ...['2025-03-30T00:00', '2025-03-30T01:00', '2025-03-30T02:00'],
    ]);
  });
});

it('gives a daily log of local midnights days of 23 and 25 hours', () => {
  const rows = ['03-29,24', '03-30,23', '03-31,24', '04-01,24', '04-02,24'].map((row) => `2025-${row}`);
  const { log } = aRecord(`time,flow\n${rows.join('\n')}\n`);
  expect(Array.from(log.seconds, (s) => s / 3600)).toEqual([24, 23, 24, 24, 24]);
  const autumn = ['10-25,1', '10-26,1', '10-27,1', '10-28,1'].map((row) => `2025-${row}`);
  expect(Array.from(aRecord(`time,flow\n${autumn.join('\n')}\n`).log.seconds, (s) => s / 3600)).toEqual([
    24, 25, 24, 24,
  ]);
});
