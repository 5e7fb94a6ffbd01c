import { refuse } from '../errors.ts';
import { decodeText, type Encoding, isBinary } from './decode.ts';

export type Delimiter = ',' | ';' | '\t' | '|';

const QUOTE = 34;
const LF = 10;
const CR = 13;

/** In order of preference where two fit equally well: a comma may be a decimal mark, the others are nothing else. */
const DELIMITERS: readonly Delimiter[] = ['\t', ';', '|', ','];

/** Lines looked at to find the delimiter: the longest preamble seen in the field is about 40 lines. */
const SAMPLE_LINES = 120;

/**
 * A CSV file as spans of its text: cell k runs from `starts[k]` to `ends[k]`, quotes left out. Nothing is copied, so
 * a year of minutes costs a few arrays and no half a million strings; who needs a cell as text asks for it.
 */
export interface CsvTable {
  readonly text: string;
  readonly encoding: Encoding;
  readonly delimiter: Delimiter;
  /** Rows that are not blank lines. */
  readonly rowCount: number;
  /** First cell of each row; one entry more than rows. */
  readonly firstCell: Int32Array;
  /** Line of the file, from 1, on which each row begins. */
  readonly lineOf: Int32Array;
  readonly starts: Int32Array;
  readonly ends: Int32Array;
  /** Cells that hold doubled quotes, with these undone. */
  readonly unescaped: ReadonlyMap<number, string>;
}

/**
 * Rows and cells of a delimited text: UTF-8, UTF-16 with mark or Windows-1252; LF, CRLF or CR; quotes as in RFC 4180; a
 * first line `sep=;` obeyed, otherwise the delimiter found from the lines themselves.
 *
 * @throws InputError not_csv (binary, or a quote that is never closed), empty_record
 */
export function readCsv(fileName: string, data: Uint8Array | string, delimiter?: Delimiter): CsvTable {
  const { text, encoding } = decodeText(data);
  if (isBinary(text)) notCsv(fileName, '', 'bytes that are not text');
  if (/^\s*<(?:!doctype|html|\?xml)/i.test(text.slice(0, 200))) notCsv(fileName, 'line 1', 'a markup document');
  const declared = /^"?sep=([,;|\t])"?[ ]*(?:\r\n|\r|\n)/i.exec(text.slice(0, 20));
  const from = declared === null ? 0 : declared[0].length;
  if (text.slice(from, from + 100_000).trim() === '') {
    refuse({ code: 'empty_record', file: fileName, at: '', found: 'an empty file', wanted: 'a header row and rows' });
  }
  const mark = delimiter ?? (declared === null ? findDelimiter(text) : (declared[1] as Delimiter));
  return { ...scan({ fileName, text, delimiter: mark, from, firstLine: declared === null ? 1 : 2 }), encoding };
}

/** The text of a cell, trimmed; '' where the row is too short. */
export function cellText(table: CsvTable, row: number, column: number): string {
  const cell = (table.firstCell[row] ?? 0) + column;
  if (cell >= (table.firstCell[row + 1] ?? 0)) return '';
  return (table.unescaped.get(cell) ?? table.text.slice(table.starts[cell], table.ends[cell])).trim();
}

/** Number of cells in a row. */
export function cellCount(table: CsvTable, row: number): number {
  return (table.firstCell[row + 1] ?? 0) - (table.firstCell[row] ?? 0);
}

/** All cells of a row, trimmed. */
export function rowCells(table: CsvTable, row: number): string[] {
  return Array.from({ length: cellCount(table, row) }, (_, column) => cellText(table, row, column));
}

function notCsv(file: string, at: string, found: string): never {
  refuse({ code: 'not_csv', file, at, found, wanted: 'a CSV text file: a header row, then rows of cells' });
}

/**
 * The delimiter with the longest run of lines that hold it equally often. A preamble in prose breaks runs; so does a
 * decimal comma, which is missing where a value happens to be whole.
 */
function findDelimiter(text: string): Delimiter {
  const lines = text
    .slice(0, 200_000)
    .split(/\r\n|\r|\n/, SAMPLE_LINES)
    .filter((line) => line.trim() !== '');
  let best: { delimiter: Delimiter; run: number } = { delimiter: ',', run: 0 };
  for (const delimiter of DELIMITERS) {
    const run = longestRun(lines.map((line) => countOutsideQuotes(line, delimiter)));
    if (run > best.run) best = { delimiter, run };
  }
  return best.delimiter;
}

function longestRun(counts: readonly number[]): number {
  let longest = 0;
  let run = 0;
  let previous = 0;
  for (const count of counts) {
    run = count > 0 && count === previous ? run + 1 : 1;
    if (count > 0 && run > longest) longest = run;
    previous = count;
  }
  return longest;
}

function countOutsideQuotes(line: string, delimiter: Delimiter): number {
  let count = 0;
  let quoted = false;
  for (const character of line) {
    if (character === '"') quoted = !quoted;
    else if (character === delimiter && !quoted) count++;
  }
  return count;
}

interface ScanInput {
  readonly fileName: string;
  readonly text: string;
  readonly delimiter: Delimiter;
  readonly from: number;
  readonly firstLine: number;
}

/** One pass over the characters. A quote opens only at the start of a cell; elsewhere it is an inch mark. */
function scan({ fileName, text, delimiter, from, firstLine }: ScanInput): Omit<CsvTable, 'encoding'> {
  const separator = delimiter.charCodeAt(0);
  const length = text.length;
  let starts = new Int32Array(1024);
  let ends = new Int32Array(1024);
  let firstCell = new Int32Array(512);
  let lineOf = new Int32Array(512);
  const unescaped = new Map<number, string>();
  let cell = 0;
  let row = 0;
  let line = firstLine;
  let position = from;
  while (position < length) {
    const rowLine = line;
    const rowCell = cell;
    for (let open = true; open; ) {
      let start = position;
      let end: number;
      if (text.charCodeAt(position) === QUOTE) {
        const close = closingQuote(text, position);
        if (close < 0) notCsv(fileName, `line ${line}`, 'a quote that is never closed');
        let after = close + 1;
        while (after < length && text.charCodeAt(after) === 32 && separator !== 32) after++;
        const next = after < length ? text.charCodeAt(after) : LF;
        if (next === separator || next === LF || next === CR) {
          start = position + 1;
          end = close;
          const inner = text.slice(start, end);
          if (inner.includes('""')) unescaped.set(cell, inner.replaceAll('""', '"'));
          line += lineBreaks(inner);
          position = after;
        } else {
          position = endOfCell(text, position, separator);
          end = position;
        }
      } else {
        let code = 0;
        while (position < length) {
          code = text.charCodeAt(position);
          if (code === separator || code === LF || code === CR) break;
          position++;
        }
        end = position;
      }
      if (cell === starts.length) {
        starts = grown(starts);
        ends = grown(ends);
      }
      starts[cell] = start;
      ends[cell] = end;
      cell++;
      const stop = position < length ? text.charCodeAt(position) : LF;
      position++;
      if (stop !== separator) {
        open = false;
        if (stop === CR && position < length && text.charCodeAt(position) === LF) position++;
      }
    }
    line++;
    if (cell === rowCell + 1 && isBlank(text, starts[rowCell] ?? 0, ends[rowCell] ?? 0)) {
      cell = rowCell;
      continue;
    }
    if (row + 1 >= firstCell.length) {
      firstCell = grown(firstCell);
      lineOf = grown(lineOf);
    }
    firstCell[row] = rowCell;
    lineOf[row] = rowLine;
    row++;
    firstCell[row] = cell;
  }
  return { text, delimiter, rowCount: row, firstCell, lineOf, starts, ends, unescaped };
}

/** Position of the quote that closes the one at `open`, or −1. */
function closingQuote(text: string, open: number): number {
  let close = text.indexOf('"', open + 1);
  while (close >= 0 && text.charCodeAt(close + 1) === QUOTE) close = text.indexOf('"', close + 2);
  return close;
}

function endOfCell(text: string, from: number, separator: number): number {
  let position = from;
  while (position < text.length) {
    const code = text.charCodeAt(position);
    if (code === separator || code === LF || code === CR) break;
    position++;
  }
  return position;
}

function lineBreaks(text: string): number {
  return text.match(/\r\n|\r|\n/g)?.length ?? 0;
}

function isBlank(text: string, start: number, end: number): boolean {
  return start === end || text.slice(start, end).trim() === '' || (end === start + 1 && text.charCodeAt(start) === 26);
}

function grown(array: Int32Array<ArrayBuffer>): Int32Array<ArrayBuffer> {
  const larger = new Int32Array(array.length * 2);
  larger.set(array);
  return larger;
}
