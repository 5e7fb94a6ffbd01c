import type { Note } from '../errors.ts';
import { isoUtc } from '../time.ts';
import { type CsvTable, cellText } from './csv.ts';
import type { FaultList } from './faultList.ts';
import { type DateOrder, IsoReader, orderEvidence, parseTime, type TimeFault } from './timestamps.ts';

/** The time of each row. */
export interface TimeColumn {
  /** Instant [ms], or the wall clock read as UTC where `local` is 1; NaN where a fault was found. */
  readonly ms: Float64Array;
  readonly local: Uint8Array;
}

/** The column of times, and where faults and notes go. */
export interface TimeInput {
  readonly table: CsvTable;
  /** Rows of the table that hold data, in file order. */
  readonly rows: Int32Array;
  readonly timeColumn: number;
  readonly clockColumn: number | null;
  readonly dateOrder?: DateOrder | undefined;
  readonly faults: FaultList;
  readonly notes: Note[];
}

/**
 * The time of every data row. The plain ISO forms are read straight from the characters; what is left is decided for the
 * whole column (day or month first), never cell by cell. Faults: not_a_time, ambiguous_time.
 */
export function readTimes(input: TimeInput): TimeColumn {
  const { table, rows, timeColumn, clockColumn, faults, notes } = input;
  const ms = new Float64Array(rows.length).fill(Number.NaN);
  const local = new Uint8Array(rows.length);
  const others: { index: number; cell: string }[] = [];
  const iso = new IsoReader();
  for (let index = 0; index < rows.length; index++) {
    const row = rows[index]!;
    const cell = table.firstCell[row]! + timeColumn;
    if (
      clockColumn === null &&
      cell < table.firstCell[row + 1]! &&
      iso.read(table.text, table.starts[cell]!, table.ends[cell]!)
    ) {
      ms[index] = iso.ms;
      local[index] = iso.local;
    } else {
      const date = cellText(table, row, timeColumn);
      others.push({ index, cell: clockColumn === null ? date : `${date} ${cellText(table, row, clockColumn)}`.trim() });
    }
  }
  if (others.length === 0) return { ms, local };

  const lineOf = (index: number): number => table.lineOf[rows[index]!]!;
  const order = dateOrderOf(input, others);
  let epochs = 0;
  let serials = 0;
  let midnights24 = 0;
  for (const { index, cell } of others) {
    const time = parseTime(cell, order);
    if (typeof time === 'string') {
      if (time !== 'needs-order') faults.atLine(lineOf(index), 'not_a_time', `time '${cell}'`, WANTED[time]);
      continue;
    }
    ms[index] = time.ms;
    local[index] = time.local ? 1 : 0;
    if (time.form === 'epoch') epochs++;
    else if (time.form === 'serial') serials++;
    else if (/(?:^|[T ])24[:.]00/.test(cell)) midnights24++;
  }
  if (epochs > 0) {
    const first = ms[others[0]!.index]!;
    const example = Number.isNaN(first) ? '' : `; the first is ${isoUtc(first)}`;
    notes.push({ code: 'epoch-times', text: `times are counted from 1970 in UTC${example}` });
  }
  if (serials > 0) {
    notes.push({
      code: 'serial-times',
      text: 'times are spreadsheet day numbers, taken to count from 1900 and rounded to the second',
    });
  }
  if (midnights24 > 0) {
    notes.push({
      code: 'hour-24',
      text: `times written 24:00: ${midnights24}; if rows are labelled at the end of their interval, all are one step late`,
    });
  }
  return { ms, local };
}

const WANTED: Record<Exclude<TimeFault, 'needs-order'>, string> = {
  'not-a-time': 'a time such as 2025-03-30T14:00:00Z',
  'no-such-day': 'a day and a time of day that exist',
};

/** Day or month first, from the whole column: points mean day first; else a number above 12 proves which is the day. */
function dateOrderOf(input: TimeInput, cells: readonly { index: number; cell: string }[]): DateOrder | null {
  if (input.dateOrder !== undefined) return input.dateOrder;
  const { table, rows, faults } = input;
  const lineOf = (index: number): number => table.lineOf[rows[index]!]!;
  let dayFirst = -1;
  let monthFirst = -1;
  let unsure = -1;
  let unsureCell = '';
  for (const { index, cell } of cells) {
    const evidence = orderEvidence(cell);
    if (evidence === null) continue;
    if (evidence.first > 12 && dayFirst < 0) dayFirst = index;
    else if (evidence.second > 12 && monthFirst < 0) monthFirst = index;
    else if (evidence.dotted && dayFirst < 0) dayFirst = index;
    else if (unsure < 0) {
      unsure = index;
      unsureCell = cell;
    }
  }
  if (dayFirst >= 0 && monthFirst >= 0) {
    const lines = `day first in line ${lineOf(dayFirst)} and month first in line ${lineOf(monthFirst)}`;
    faults.add('', 'ambiguous_time', `dates with ${lines}`, 'one order of day and month, or the date order given');
    return null;
  }
  if (dayFirst >= 0) return 'dmy';
  if (monthFirst >= 0) return 'mdy';
  if (unsure >= 0) {
    const wanted = 'the date order given beside the file (dmy or mdy): no day in it exceeds 12';
    faults.atLine(lineOf(unsure), 'ambiguous_time', `time '${unsureCell}'`, wanted);
  }
  return null;
}
