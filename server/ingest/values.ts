import type { Note } from '../errors.ts';
import { type CsvTable, cellText } from './csv.ts';
import type { FaultList } from './faultList.ts';
import type { Role, ValueColumn } from './layout.ts';
import { type DecimalMark, decideMark, isMissing, numberFromText, plainNumber, runState } from './numbers.ts';

/** The columns of values, and where faults and notes go. */
export interface ValueInput {
  readonly table: CsvTable;
  readonly rows: Int32Array;
  readonly columns: readonly ValueColumn[];
  readonly decimal?: DecimalMark | undefined;
  readonly faults: FaultList;
  readonly notes: Note[];
}

/** No level lies this far from its datum [file units]: −9999 and its like are what loggers write for none. */
const NO_LEVEL = 9990;

/** Negative flow smaller than this [file units] is the dust of arithmetic, not of a meter, and is read as 0. */
const DUST = 1e-9;

/**
 * The values of each column, in SI, one per row; NaN where there is none. The decimal mark is decided once for all number
 * columns. Faults: not_a_number, ambiguous_number, negative_flow, static_head_negative, out_of_range.
 */
export function readValues(input: ValueInput): Float64Array[] {
  const { table, rows, columns } = input;
  const values = columns.map(() => new Float64Array(rows.length));
  const odd: { column: number; index: number }[] = [];
  columns.forEach((column, c) => {
    const target = values[c]!;
    for (let index = 0; index < rows.length; index++) {
      const row = rows[index]!;
      const cell = table.firstCell[row]! + column.index;
      const inRow = cell < table.firstCell[row + 1]!;
      const value = inRow ? plainNumber(table.text, table.starts[cell]!, table.ends[cell]!) : Number.NaN;
      target[index] = value;
      if (Number.isNaN(value)) odd.push({ column: c, index });
    }
  });
  const mark = odd.length === 0 ? '.' : markOf(input, odd);
  if (mark === ',') {
    // What was read so far took the point for a decimal mark: read every cell again.
    odd.length = 0;
    for (let c = 0; c < columns.length; c++)
      for (let index = 0; index < rows.length; index++) odd.push({ column: c, index });
  }
  readOddCells(input, odd, values, mark ?? '.');
  if (mark !== null) {
    for (const [c, column] of columns.entries()) checkAndScale(input, column, values[c]!);
  }
  return values;
}

function markOf(input: ValueInput, odd: readonly { column: number; index: number }[]): DecimalMark | null {
  if (input.decimal !== undefined) return input.decimal;
  const { table, rows, columns, faults } = input;
  const text = (cell: { column: number; index: number }): string =>
    cellText(table, rows[cell.index]!, columns[cell.column]!.index);
  if (!odd.some((cell) => /[.,]/.test(text(cell)))) return '.';
  function* all(): Generator<string> {
    for (const column of columns) for (const row of rows) yield cellText(table, row, column.index);
  }
  const decision = decideMark(all());
  if (decision.kind === 'mark') return decision.mark;
  const column = columns[Math.floor(decision.index / rows.length)]!;
  const row = rows[decision.index % rows.length]!;
  const others = decision.count > 1 ? ` (and ${decision.count - 1} more like it)` : '';
  faults.atLine(
    table.lineOf[row]!,
    'ambiguous_number',
    `${column.title} '${cellText(table, row, column.index)}'${others}`,
    'the decimal mark given beside the file: the comma may mark thousands or decimals',
  );
  return null;
}

function readOddCells(
  input: ValueInput,
  odd: readonly { column: number; index: number }[],
  values: readonly Float64Array[],
  mark: DecimalMark,
): void {
  const { table, rows, columns, faults, notes } = input;
  const words = new Map<string, number>();
  let wordRow = 0;
  for (const { column: c, index } of odd) {
    const column = columns[c]!;
    const row = rows[index]!;
    const cell = cellText(table, row, column.index);
    const target = values[c]!;
    target[index] = Number.NaN;
    if (isMissing(cell)) {
      if (cell === '') continue;
      if (words.size === 0) wordRow = row;
      words.set(cell, (words.get(cell) ?? 0) + 1);
      continue;
    }
    let value = numberFromText(cell, mark);
    if (Number.isNaN(value) && column.role.kind === 'on') value = runState(cell);
    target[index] = value;
    if (!Number.isNaN(value)) continue;
    const wanted = mark === ',' ? 'a number with a decimal comma, as in the rest of the file' : 'a number';
    if (column.role.kind === 'on') {
      faults.atLine(table.lineOf[row]!, 'not_a_number', `${column.title} '${cell}'`, 'on, off or a share from 0 to 1');
    } else faults.atLine(table.lineOf[row]!, 'not_a_number', `${column.title} '${cell}'`, wanted);
  }
  if (words.size > 0) {
    const list = [...words].map(([word, count]) => `'${word}' (${count})`).join(', ');
    notes.push({
      code: 'missing-words',
      text: `words for a missing value are read as gaps: ${list}, first in line ${table.lineOf[wordRow]}`,
    });
  }
}

/** Checks a column against what its quantity can be and turns it into SI. */
function checkAndScale(input: ValueInput, column: ValueColumn, values: Float64Array): void {
  const { table, rows, faults, notes } = input;
  const { least, most, code, wanted } = bounds(column.role, column.factor);
  let dust = 0;
  for (let index = 0; index < values.length; index++) {
    const value = values[index]!;
    if (value >= least && value <= most) {
      values[index] = value * column.factor;
    } else if (value < 0 && column.role.kind === 'flow' && value > -DUST) {
      values[index] = 0;
      dust++;
    } else if (!Number.isNaN(value)) {
      const row = rows[index]!;
      const found = `${column.title} '${cellText(table, row, column.index)}'`;
      faults.atLine(table.lineOf[row]!, code, found, wanted);
    }
  }
  if (dust > 0) {
    notes.push({ code: 'negative-dust', text: `flows between -1e-9 and 0 of the file's unit are read as 0: ${dust}` });
  }
}

interface Bounds {
  readonly least: number;
  readonly most: number;
  readonly code: 'negative_flow' | 'static_head_negative' | 'out_of_range';
  readonly wanted: string;
}

function bounds(role: Role, factor: number): Bounds {
  const most = Number.POSITIVE_INFINITY;
  switch (role.kind) {
    case 'flow':
      return { least: 0, most, code: 'negative_flow', wanted: 'a flow of 0 or more, or an empty cell for a gap' };
    case 'staticHead':
      return { least: 0, most, code: 'static_head_negative', wanted: 'a static head of 0 or more' };
    case 'level':
      return { least: -NO_LEVEL, most: NO_LEVEL, code: 'out_of_range', wanted: 'a level, or an empty cell for a gap' };
    case 'on':
      return { least: 0, most: 1 / factor, code: 'out_of_range', wanted: 'a share of the interval from 0 to 1' };
    case 'speed':
      return { least: 0, most: 2 / factor, code: 'out_of_range', wanted: 'a share of rated speed (1 = rated)' };
    case 'power':
    case 'pumpPower':
      return { least: 0, most, code: 'out_of_range', wanted: 'a power of 0 or more' };
    case 'pumpsOn':
      return { least: 0, most, code: 'out_of_range', wanted: 'a number of pumps, 0 or more' };
  }
}
