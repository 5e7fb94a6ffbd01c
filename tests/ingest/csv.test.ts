import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { readCsv, rowCells } from '../../server/ingest/csv.ts';
import { faultsOf } from '../support/aRecord.ts';

const rowsOf = (data: string | Uint8Array): string[][] => {
  const table = readCsv('f.csv', data);
  return Array.from({ length: table.rowCount }, (_, row) => rowCells(table, row));
};

const utf16 = (text: string, littleEndian: boolean): Uint8Array => {
  const view = new DataView(new ArrayBuffer(text.length * 2 + 2));
  [0xfeff, ...Array.from(text, (c) => c.charCodeAt(0))].forEach((code, i) => {
    view.setUint16(i * 2, code, littleEndian);
  });
  return new Uint8Array(view.buffer);
};

describe('readCsv', () => {
  it('keeps the line number of each row through blank lines and quoted line breaks', () => {
    const table = readCsv('f.csv', 'a,b\n\n1,"x\ny"\n2,z\n');
    expect(Array.from(table.lineOf.slice(0, table.rowCount))).toEqual([1, 3, 5]);
    const windows = readCsv('f.csv', 'sep=,\r\na,b\r\n1,2\r\n3,4\r\n');
    expect(Array.from(windows.lineOf.slice(0, windows.rowCount))).toEqual([2, 3, 4]);
  });

  it.each([
    ['LF', 'a,b\n1,2\n'],
    ['CRLF', 'a,b\r\n1,2\r\n'],
    ['lone CR', 'a,b\r1,2\r'],
    ['no line end at the end', 'a,b\n1,2'],
    ['the old end-of-file character', 'a,b\n1,2\n\u001a'],
    ['padding', ' a , b \n 1 , 2 \n'],
  ])('reads %s', (_, text) => {
    expect(rowsOf(text)).toEqual([
      ['a', 'b'],
      ['1', '2'],
    ]);
  });

  it.each([
    ['UTF-8', new TextEncoder().encode('t\tm³/h\n1\t2\n'), 'utf-8'],
    ['UTF-8 with mark', new TextEncoder().encode('\uFEFFt\tm³/h\n1\t2\n'), 'utf-8'],
    ['UTF-16LE', utf16('t\tm³/h\n1\t2\n', true), 'utf-16le'],
    ['UTF-16BE', utf16('t\tm³/h\n1\t2\n', false), 'utf-16be'],
    // 0xB3 is ³ in Windows-1252 and no UTF-8
    ['Windows-1252', Uint8Array.from('t\tm³/h\n1\t2\n', (c) => c.charCodeAt(0)), 'windows-1252'],
  ])('decodes %s', (_, data, encoding) => {
    expect(readCsv('f.csv', data).encoding).toBe(encoding);
    expect(rowsOf(data)).toEqual([
      ['t', 'm³/h'],
      ['1', '2'],
    ]);
  });

  it.each([
    [',', 'a,b\n1,2\n'],
    [';', 'a;b\n1,5;2,5\n3;4\n'],
    ['\t', 'a\tb\n1,5\t2,5\n'],
    [';', 'a,1;b,2\n1,5;2,5\n'],
    ['|', 'a|b\n1|2\n'],
    [';', 'sep=;\na;b\n1;2\n'],
    [';', 'Station A, north, main\nexported, by hand\nt;q\n1,5;2\n2,5;3\n3,5;3\n'],
    [',', 'a,b\n"x;y",2\n"x;y",3\n'],
  ])('finds the delimiter %j', (delimiter, text) => {
    expect(readCsv('f.csv', text).delimiter).toBe(delimiter);
  });

  it('opens a quote at the start of a cell only', () => {
    expect(rowsOf('a,b\n12" main,"say ""no"""\n"x"y,2\n')).toEqual([
      ['a', 'b'],
      ['12" main', 'say "no"'],
      ['"x"y', '2'],
    ]);
  });

  it('gives back whatever cells were written with RFC 4180 quoting', () => {
    const cell = fc.stringMatching(/^[a-z0-9,;"\n.-]{1,8}$/);
    fc.assert(
      fc.property(fc.array(fc.tuple(cell, cell), { minLength: 2, maxLength: 8 }), (rows) => {
        const quote = (text: string): string => `"${text.replaceAll('"', '""')}"`;
        const text = rows.map((row) => row.map(quote).join(',')).join('\r\n');
        expect(rowsOf(`sep=,\n${text}`)).toEqual(rows.map((row) => row.map((c) => c.trim())));
      }),
      { numRuns: 300, seed: 1 },
    );
  });

  it.each([
    ['a workbook', 'PK\u0003\u0004\u0000\u0000', 'not_csv f.csv: found bytes that are not text'],
    ['an image', '\u0001\u0002GIF', 'not_csv f.csv: found bytes that are not text'],
    ['a web page', '<!DOCTYPE html><p>x', 'not_csv f.csv line 1: found a markup document'],
    ['an open quote', 'a,b\n1,"2\n3,4\n', 'not_csv f.csv line 2: found a quote that is never closed'],
    ['nothing', ' \n', 'empty_record f.csv: found an empty file'],
  ])('refuses %s', (_, text, fault) => {
    expect(faultsOf(() => readCsv('f.csv', text))).toEqual([expect.stringContaining(fault)]);
  });
});
