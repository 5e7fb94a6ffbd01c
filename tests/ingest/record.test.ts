import { describe, expect, it } from 'vitest';
import { aRecord, faultsOf, litres, noteCodes, starts } from '../support/aRecord.ts';

const hour = (k: number): string => `2025-01-01T${String(k).padStart(2, '0')}:00:00Z`;
const hourly = (values: readonly (number | string)[], header = 'time,flow'): string =>
  `${header}\n${values.map((value, k) => `${hour(k)},${value}`).join('\n')}\n`;

describe('the canonical form', () => {
  it('becomes a log in SI with its figures', () => {
    const { log, report } = aRecord(hourly([10, 20, 30]));
    expect(Array.from(log.flow!)).toEqual([0.01, 0.02, 0.03]);
    expect(report).toMatchObject({ from: '2025-01-01T00:00:00Z', to: '2025-01-01T03:00:00Z', intervals: 3 });
    expect(report).toMatchObject({ stepSeconds: 3600, hours: 3, gapHours: 0, gaps: [], notes: [] });
    expect(report.volumeM3).toBeCloseTo(216, 9); // (10 + 20 + 30) L/s · 3600 s
    expect(report.meanFlowM3s).toBeCloseTo(0.02, 12);
    expect([report.minFlowM3s, report.maxFlowM3s]).toEqual([0.01, 0.03]);
  });

  it('carries every other channel, in SI', () => {
    const header = 'time,flow,level,static_head,power_kw,pumps_on,P1_on,p2_speed,P1_kw';
    const { log } = aRecord(`${header}\n${hour(0)},36,1.5,10,20,1.5,ON,0.8,12\n${hour(1)},36,,,,,stopped,,\n`, {
      units: { flow: 'm3/h', head: 'ft', power: 'hp' },
    });
    expect(log.flow![0]).toBeCloseTo(0.01, 15);
    expect(log.level![0]).toBeCloseTo(0.4572, 15); // 1.5 ft of 0.3048 m
    expect(log.staticHead![0]).toBeCloseTo(3.048, 15);
    expect(log.power![0]).toBe(20_000); // the column's name says kW, whatever the station's unit
    expect(log.pumpsOn![0]).toBe(1.5);
    expect(log.pumps.map((pump) => pump.name)).toEqual(['P1', 'P2']);
    expect(Array.from(log.pumps[0]!.on!)).toEqual([1, 0]);
    expect(log.pumps[0]!.power![0]).toBe(12_000);
    expect(Array.from(log.pumps[1]!.speed!)).toEqual([0.8, Number.NaN]);
    expect(log.pumps[1]!.on).toBeNull();
    expect(log.level![1]).toBeNaN();
  });

  it('believes a name that ends in kW, whatever else stands with it', () => {
    const units = { flow: 'gpm', head: 'ft', power: 'hp' } as const;
    const power = (title: string) => aRecord(hourly(['1,2', '1,2'], `time,flow,${title}`), { units }).log.power![0];
    expect(power('power_kw (avg)')).toBe(2000);
    expect(power('power')).toBeCloseTo(2 * 745.699872, 5); // NIST SP 811 table B.8: 550 ft·lbf/s × 7.456999 E+02 W
  });

  it('takes levels with run states for a flow, and has no flow then', () => {
    const { log, report } = aRecord(hourly(['2,0', '2.5,1', ',1'], 'time,level,P1_on'));
    expect(log.flow).toBeNull();
    expect(report).toMatchObject({ hours: 2, gapHours: 1, volumeM3: null, meanFlowM3s: null });
  });

  it('keeps an empty flow as a gap and never as 0', () => {
    const record = aRecord(hourly([10, '', 'NaN', 'Bad', 30]));
    expect(litres(record)).toEqual([10, null, null, null, 30]);
    expect(record.report).toMatchObject({ intervals: 5, hours: 2, gapHours: 3, volumeM3: expect.closeTo(144, 9) });
    expect(record.report.gaps).toEqual([{ from: hour(1), to: hour(4), hours: 3 }]);
    expect(record.report.notes).toEqual([
      { code: 'missing-words', text: expect.stringContaining("'NaN' (1), 'Bad' (1), first in line 4") },
    ]);
  });

  it('takes no level for what loggers write where they have none', () => {
    expect(faultsOf(() => aRecord(hourly(['1,2,0', '1,-9999,0'], 'time,flow,level,P1_on')))).toEqual([
      "out_of_range flow.csv line 3: found level '-9999'; wanted a level, or an empty cell for a gap",
    ]);
    expect(aRecord(hourly(['1,-980,0', '1,-980,0'], 'time,flow,level,P1_on')).log.level![0]).toBe(-980);
  });

  it('says that some times have an offset and some have none', () => {
    const mixed = aRecord('time,flow\n2025-07-01T10:00:00Z,1\n2025-07-01T11:00:00Z,2\n2025-07-01 13:00,3\n');
    expect(starts(mixed)).toEqual(['2025-07-01T10:00', '2025-07-01T11:00', '2025-07-01T12:00']);
    expect(mixed.report.notes).toEqual([
      { code: 'mixed-times', text: expect.stringContaining('an offset (2) and some have none (1)') },
    ]);
    expect(aRecord('time,flow\n2025-07-01 13:00,1\n2025-07-01 14:00,2\n').report.notes).toEqual([]);
  });

  it('counts time without rows as a gap', () => {
    const text = `time,flow\n${[0, 1, 2, 7, 8, 9].map((k) => `${hour(k)},1`).join('\n')}\n`;
    expect(aRecord(text).report).toMatchObject({
      hours: 6,
      gapHours: 4,
      gaps: [{ from: hour(3), to: hour(7), hours: 4 }],
    });
  });

  it('weights by time where the step changes', () => {
    const minutes = Array.from({ length: 30 }, (_, k) => `2025-01-01T12:${String(k).padStart(2, '0')}:00Z,60`);
    const text = `${hourly(Array(12).fill(10))}${minutes.join('\n')}\n`;
    // 12 h of 10 L/s and 30 min of 60 L/s: 432 + 108 m³
    expect(aRecord(text).report).toMatchObject({ hours: 12.5, volumeM3: expect.closeTo(540, 9) });
  });
});

describe('flow units in the header', () => {
  it.each([
    ['flow (m3/h)', 36, 10],
    ['Flow [m³/h]', 36, 10],
    ['flow_m3h', 36, 10],
    ['flow m3/h', 36, 10],
    ['Inflow, L/s', 10, 10],
    ['FLOW_LPS', 10, 10],
    ['flow in gpm', 100, 6.30902], // NIST SP 811 table B.8: gal/min × 6.309020 E−05 m³/s
    ['flow_mgd', 1, 43.8126], // the same, 10⁶ gal in 86 400 s
    ['flow (ML/d)', 0.864, 10],
    ['flow (avg)', 10, 10],
    ['Q', 10, 10],
  ])('%s', (title, value, expected) => {
    const record = aRecord(`time;${title}\n${hour(0)};${value}\n${hour(1)};${value}\n`);
    expect(litres(record)[0]! / expected - 1).toBeCloseTo(0, 5); // printed to six or seven figures
  });

  it('stand in a row of their own under the header', () => {
    const text = `Timestamp\tFlow\n\tm³/h\n\tavg\n${hour(0)}\t36\n${hour(1)}\t72\n`;
    expect(litres(aRecord(text))).toEqual([10, 20]);
  });

  it('are refused if unknown, and overridden on demand', () => {
    const text = `time,flow (furlong)\n${hour(0)},36\n${hour(1)},36\n`;
    expect(faultsOf(() => aRecord(text))).toEqual([
      expect.stringMatching(
        /^unknown_unit flow.csv line 1: found 'furlong' in column flow \(furlong\); wanted one of m3\/s/,
      ),
    ]);
    expect(litres(aRecord(text, { options: { flowUnit: 'm3/h' } }))).toEqual([10, 10]);
    expect(faultsOf(() => aRecord(`time,flow,level (bananas)\n${hour(0)},1,1\n`))[0]).toContain('wanted m or ft');
  });
});

describe('where the header stands and what it is called', () => {
  it('below metadata, and itself commented', () => {
    const preamble = Array.from({ length: 38 }, (_, k) => `# key ${k},value, and more`).join('\n');
    const record = aRecord(`${preamble}\n# Time,Flow\n\n${hour(0)},1\n${hour(1)},2\n`);
    expect(litres(record)).toEqual([1, 2]);
  });

  it('below metadata that has a date and a name in it', () => {
    const record = aRecord(
      `Station,North\nDate,2025-01-01\nExported by,nobody\nTimestamp,Flow\n${hour(0)},1\n${hour(1)},2\n`,
    );
    expect(litres(record)).toEqual([1, 2]);
  });

  it('with date and time apart', () => {
    const record = aRecord('Date,Time,Flow\n1/13/25,12:00:00 AM,1\n1/13/25,1:00:00 AM,2\n1/13/25,2:00:00 PM,3\n');
    expect(starts(record)).toEqual(['2025-01-13T00:00', '2025-01-13T01:00', '2025-01-13T14:00']);
  });

  it('with a row number called index beside the time', () => {
    expect(litres(aRecord(`index,time,flow\n0,${hour(0)},1\n1,${hour(1)},2\n`))).toEqual([1, 2]);
  });

  it('but refuses bare hours beside a date, which may count from 0 or from 1', () => {
    expect(faultsOf(() => aRecord('Date;Hour;Flow\n13.01.2025;1;10\n13.01.2025;2;10\n'))).toEqual([
      'ambiguous_time flow.csv line 1: found column Hour beside Date without times of day in it; ' +
        'wanted times of day such as 13:00',
    ]);
  });

  it('by an unnamed first column of times, and by a mark inside the quotes', () => {
    expect(litres(aRecord(`,flow\n${hour(0)},1\n${hour(1)},2\n`))).toEqual([1, 2]);
    expect(litres(aRecord(`"\uFEFFtime",flow\n${hour(0)},1\n${hour(1)},2\n`))).toEqual([1, 2]);
  });

  it('by the names a person gives', () => {
    const options = { timeColumn: 'When', flowColumn: 'FT-101' };
    expect(litres(aRecord(`x,ft-101,when\n5,1,${hour(0)}\n6,2,${hour(1)}\n`, { options }))).toEqual([1, 2]);
  });

  it.each([
    ['time,level', "found columns time, level; wanted a column 'flow', or 'level' with run states"],
    ['time,flo', 'found columns time, flo; wanted'],
    ['when,flow', "found columns when, flow; wanted a column 'time' (column when holds times"],
  ])('names the columns found where one is missing: %s', (header, fault) => {
    expect(faultsOf(() => aRecord(hourly([1, 2], header)))).toEqual([expect.stringContaining(fault)]);
    expect(faultsOf(() => aRecord(hourly([1, 2], header)))[0]).toMatch(/^missing_column flow.csv line 1: /);
  });

  it('refuses a file without a header, and one column alone', () => {
    expect(faultsOf(() => aRecord(`${hour(0)},1\n${hour(1)},2\n`))[0]).toMatch(/^missing_column .*header row/);
    expect(faultsOf(() => aRecord('flow\n1\n2\n'))[0]).toMatch(
      /^missing_column .*found columns flow; wanted a column 'time'/,
    );
  });

  it('refuses two columns of one meaning', () => {
    const text = `time,flow (L/s),flow (m3/h)\n${hour(0)},1,3.6\n${hour(1)},1,3.6\n`;
    expect(faultsOf(() => aRecord(text))[0]).toMatch(/^duplicate_name .*flow \(L\/s\) and flow \(m3\/h\)/);
  });

  it('says which columns it does not use', () => {
    expect(aRecord(hourly(['1,x', '2,x'], 'time,flow,P9_on')).report.notes).toEqual([
      { code: 'ignored-columns', text: 'columns not used: P9_on' },
    ]);
  });
});

describe('order and repetition of rows', () => {
  it('sorts late blocks and says so', () => {
    const record = aRecord(`time,flow\n${[0, 1, 4, 5, 2, 3, 6].map((k) => `${hour(k)},${k}`).join('\n')}\n`);
    expect(litres(record)).toEqual([0, 1, 2, 3, 4, 5, 6]);
    expect(noteCodes(record)).toEqual(['sorted']);
  });

  it('drops rows that repeat an instant with the same values, and fills an empty one', () => {
    const record = aRecord(`time,flow\n${hour(0)},1\n${hour(0)},1\n${hour(1)},\n${hour(1)},2\n${hour(2)},3\n`);
    expect(litres(record)).toEqual([1, 2, 3]);
    expect(noteCodes(record)).toEqual(['duplicates']);
  });

  it('refuses two values at one instant, naming both lines', () => {
    const text = `time,flow\n${hour(0)},1\n${hour(1)},12.5\n2025-01-01T02:00:00+01:00,13.1\n${hour(2)},3\n`;
    expect(faultsOf(() => aRecord(text))).toEqual([
      'conflicting_rows flow.csv line 4: found flow 13.1 beside 12.5 at 2025-01-01T01:00:00Z (first in line 3); ' +
        'wanted one value at one instant',
    ]);
  });
});

describe('rows that do not fit', () => {
  it('takes missing trailing cells for empty ones and forgives trailing delimiters', () => {
    const record = aRecord(`time,flow,level\n${hour(0)},1\n${hour(1)},2,3,,\n,,\n`);
    expect(litres(record)).toEqual([1, 2]);
    expect(record.log.level![0]).toBeNaN();
  });

  it('leaves out comments and sums at the end, and says so', () => {
    const record = aRecord(`time,flow\n${hour(0)},1\n# pump swapped\n${hour(1)},2\nTotals:,3\n,,\n`);
    expect(litres(record)).toEqual([1, 2]);
    expect(noteCodes(record)).toEqual(['footer', 'comments']);
  });

  it.each([
    ['12O4', "not_a_number flow.csv line 3: found flow '12O4'; wanted a number"],
    ['0x10', "not_a_number flow.csv line 3: found flow '0x10'; wanted a number"],
    ['Infinity', "not_a_number flow.csv line 3: found flow 'Infinity'; wanted a number"],
    ['-0.5', "negative_flow flow.csv line 3: found flow '-0.5'; wanted a flow of 0 or more"],
    ['1,204', 'ragged_row flow.csv line 3: found 3 cells; wanted 2, as in the header'],
    ['"1,204"', "ambiguous_number flow.csv line 3: found flow '1,204'; wanted the decimal mark"],
  ])('refuses %s once, with its line', (cell, fault) => {
    expect(faultsOf(() => aRecord(hourly([1, cell, 3])))).toEqual([expect.stringContaining(fault)]);
  });

  it.each([
    ['P1_on', 'perhaps', 'not_a_number'],
    ['P1_on', '2', 'out_of_range'],
    ['P1_speed', '50', 'out_of_range'],
    ['static_head', '-1', 'static_head_negative'],
    ['power_kw', '-1', 'out_of_range'],
  ])('refuses %s %s', (column, cell, code) => {
    const faults = faultsOf(() => aRecord(hourly([`1,${cell}`, '1,1'], `time,flow,${column}`)));
    expect(faults).toEqual([expect.stringMatching(new RegExp(`^${code} flow.csv line 2: found ${column} '${cell}'`))]);
  });

  it('reads the dust of arithmetic below 0 as 0 and says so', () => {
    const record = aRecord(hourly(['-1.58E-16', 2]));
    expect(litres(record)).toEqual([0, 2]);
    expect(noteCodes(record)).toEqual(['negative-dust']);
  });

  it('lists all faults of a file from top to bottom, one a line, and counts those beyond fifty', () => {
    const text = `time,flow\nsoon,x\n${hour(1)},x1\n2025-02-30 00:00,1\n${hour(2)},-4\n`;
    expect(faultsOf(() => aRecord(text)).map((line) => line.slice(0, line.indexOf(': ')))).toEqual([
      ...['not_a_number flow.csv line 2', 'not_a_number flow.csv line 3', 'not_a_time flow.csv line 4'],
      'negative_flow flow.csv line 5',
    ]);
    const many = faultsOf(() =>
      aRecord(`time,flow\n${Array.from({ length: 80 }, () => `${hour(0)},x1`).join('\n')}\n`),
    );
    expect(many).toHaveLength(51);
    expect(many[50]).toContain('30 more faults');
  });
});

describe('numbers of the whole file', () => {
  it('with decimal comma and thousands marks', () => {
    const text = 'sep=;\r\nzeit;flow\r\n01.02.2025 00:00;1.234,5\r\n01.02.2025 01:00;987\r\n01.02.2025 02:00;1.100\r\n';
    expect(litres(aRecord(text))).toEqual([1234.5, 987, 1100]);
  });

  it('with a comma that could be either, until a person says which', () => {
    const text = 'time;flow\n2025-01-01 00:00;100,500\n2025-01-01 01:00;101,250\n';
    expect(faultsOf(() => aRecord(text))[0]).toMatch(
      /^ambiguous_number flow.csv line 2: found flow '100,500' \(and 1 more/,
    );
    expect(litres(aRecord(text, { options: { decimal: ',' } }))).toEqual([100.5, 101.25]);
    expect(litres(aRecord(text, { options: { decimal: '.' } }))).toEqual([100_500, 101_250]);
  });

  it('and a point where the rest has commas is no number', () => {
    const text = 'time;flow\n2025-01-01 00:00;1,5\n2025-01-01 01:00;2,5\n2025-01-01 02:00;2.55\n';
    expect(faultsOf(() => aRecord(text))).toEqual([
      expect.stringMatching(/^not_a_number flow.csv line 4: found flow '2.55'/),
    ]);
  });
});

describe('the order of day and month', () => {
  const text = (dates: readonly string[]): string => `time,flow\n${dates.map((d) => `${d} 12:00,1`).join('\n')}\n`;

  it('comes from a day above 12 anywhere in the column', () => {
    expect(starts(aRecord(text(['11/1/2025', '12/1/2025', '13/1/2025'])))[0]).toBe('2025-01-11T12:00');
    expect(starts(aRecord(text(['1/11/2025', '1/12/2025', '1/13/2025'])))[0]).toBe('2025-01-11T12:00');
    expect(starts(aRecord(text(['03.04.2025', '04.04.2025'])))[0]).toBe('2025-04-03T11:00'); // Irish summer time
  });

  it('is asked for where no day exceeds 12', () => {
    expect(faultsOf(() => aRecord(text(['3/4/2025', '4/4/2025'])))).toEqual([
      expect.stringMatching(/^ambiguous_time flow.csv line 2: found time '3\/4\/2025 12:00'; wanted the date order/),
    ]);
    expect(faultsOf(() => aRecord(text(['12/1/2025', '12/2/2025'])))[0]).toMatch(/^ambiguous_time /);
    expect(starts(aRecord(text(['3/4/2025', '4/4/2025']), { options: { dateOrder: 'dmy' } }))[0]).toBe(
      '2025-04-03T11:00',
    );
  });

  it('is refused where the file contradicts itself', () => {
    expect(faultsOf(() => aRecord(text(['13/1/2025', '1/14/2025'])))[0]).toMatch(
      /^ambiguous_time .*day first in line 2 and month first in line 3/,
    );
  });
});

describe('files that are no record', () => {
  it.each([
    ['prose', 'hello world\nthis is prose\n', /^not_csv /],
    ['a workbook', 'PK\u0003\u0004\u0000', /^not_csv /],
    ['a header alone', 'time,flow\n', /^empty_record .*no rows/],
    ['one row', `time,flow\n${hour(0)},1\n`, /^empty_record .*one row/],
    ['one instant', `time,flow\n${hour(0)},1\n${hour(0)},1\n`, /^empty_record /],
    ['steps below a second', `time,flow\n${hour(0)},1\n2025-01-01T00:00:00.500Z,1\n`, /^step_out_of_range .*0.5 s/],
    ['steps of a week', 'time,flow\n2025-01-01,1\n2025-01-08,1\n2025-01-15,1\n', /^step_out_of_range .*604800 s/],
  ])('%s', (_, text, fault) => {
    expect(faultsOf(() => aRecord(text))).toEqual([expect.stringMatching(fault)]);
  });

  it('or of a place that does not exist', () => {
    expect(faultsOf(() => aRecord(hourly([1, 2]), { timeZone: 'Europe/Atlantis' }))[0]).toMatch(
      /^unknown_zone .*Atlantis/,
    );
  });
});

it('reads steps of a second and of a day', () => {
  const second = (k: number): string => `2025-01-01T00:00:0${k}Z`;
  expect(aRecord(`time,flow\n${[0, 1, 2].map((k) => `${second(k)},1`).join('\n')}\n`).report.stepSeconds).toBe(1);
  expect(aRecord('time,flow\n2025-01-01,1\n2025-01-02,1\n').report).toMatchObject({ stepSeconds: 86_400, hours: 48 });
});

it('reads a year of minutes whole', () => {
  const from = Date.UTC(2025, 0, 1);
  const rows = Array.from(
    { length: 525_600 },
    (_, k) => `${new Date(from + k * 60_000).toISOString().slice(0, 19)}Z,${k % 50}`,
  );
  const { report } = aRecord(new TextEncoder().encode(`time,flow\n${rows.join('\n')}\n`));
  // 525 600 = 10 512 rounds of 0 + 1 + … + 49 = 1225 L/s, a minute each
  expect(report).toMatchObject({ intervals: 525_600, hours: 8760, gapHours: 0 });
  expect(report.volumeM3! / ((10_512 * 1225 * 60) / 1000) - 1).toBeCloseTo(0, 9);
});
