import { type Note, refuse } from '../errors.ts';
import { DAY_MS, HOUR_MS, isoUtc, isTimeZone, SECOND_MS } from '../time.ts';
import type { FileUnits, FlowUnit } from '../units.ts';
import { type CsvTable, cellCount, cellText, type Delimiter, readCsv } from './csv.ts';
import { decodeText } from './decode.ts';
import { FaultList } from './faultList.ts';
import { intervalSeconds, localSteps } from './intervals.ts';
import { findLayout, isFooter, type Layout, type Role, type ValueColumn } from './layout.ts';
import { fixedOffsetMs, resolveLocal } from './localTime.ts';
import type { Channel, Log, QualityReport } from './log.ts';
import type { DecimalMark } from './numbers.ts';
import { readProfile } from './profile.ts';
import { qualityReport } from './quality.ts';
import { readTimes } from './times.ts';
import { type DateOrder, parseTime } from './timestamps.ts';
import { readValues } from './values.ts';

/** What a person says about a file beside it; each overrides what would be detected. */
export interface RecordOptions {
  readonly timeColumn?: string | undefined;
  readonly flowColumn?: string | undefined;
  readonly flowUnit?: FlowUnit | undefined;
  /** Zone of times without offset, IANA or fixed (`+01:00` for a logger that keeps winter time all year). */
  readonly timeZone?: string | undefined;
  readonly dateOrder?: DateOrder | undefined;
  readonly decimal?: DecimalMark | undefined;
  readonly delimiter?: Delimiter | undefined;
}

/** A file, and what its station says of units, zone and pumps. */
export interface RecordInput {
  readonly fileName: string;
  readonly data: Uint8Array | string;
  /** Units of the station; they hold for columns that name none. */
  readonly units: FileUnits;
  /** Zone of the station (IANA). */
  readonly timeZone: string;
  readonly pumpNames: readonly string[];
  readonly options?: RecordOptions | undefined;
}

/** A record, and what was done to make it. */
export interface ReadRecord {
  readonly log: Log;
  readonly report: QualityReport;
}

/** The longest local day (25 h) is still one daily step. */
const LONGEST_STEP = DAY_MS + HOUR_MS;

/**
 * A record file, CSV or profile, as a log in SI with a report of what was done to it. A gap stays a gap: an empty cell
 * or a word for "missing" becomes NaN, never 0.
 *
 * @throws InputError with every fault found: not_csv, empty_record, missing_column, duplicate_name, unknown_unit,
 *   unknown_zone, not_a_time, ambiguous_time, not_a_number, ambiguous_number, negative_flow, static_head_negative,
 *   out_of_range, ragged_row, conflicting_rows, step_out_of_range; of a profile also those of `readProfile`
 */
export function readRecord(input: RecordInput): ReadRecord {
  const { fileName, options = {} } = input;
  const zoneGiven = options.timeZone ?? input.timeZone;
  if (!isTimeZone(zoneGiven) && fixedOffsetMs(zoneGiven) === null) {
    const wanted = "a zone such as 'Europe/Dublin', or an offset such as +01:00";
    refuse({ code: 'unknown_zone', file: fileName, at: 'time zone', found: `'${zoneGiven}'`, wanted });
  }
  if (startsWithBrace(input.data)) {
    const { log, notes } = readProfile({
      fileName,
      text: decodeText(input.data).text,
      flowUnit: options.flowUnit ?? input.units.flow,
      timeZone: zoneGiven,
    });
    return { log, report: qualityReport(log, notes) };
  }

  const faults = new FaultList(fileName);
  const notes: Note[] = [];
  const table = readCsv(fileName, input.data, options.delimiter);
  if (table.encoding === 'windows-1252') {
    notes.push({ code: 'encoding', text: 'the file is not UTF-8; it is read as Windows-1252' });
  }
  const layout = findLayout({ table, faults, units: input.units, pumpNames: input.pumpNames, ...options });
  if (layout.ignored.length > 0) {
    notes.push({ code: 'ignored-columns', text: `columns not used: ${layout.ignored.join(', ')}` });
  }
  const rows = dataRows(table, layout, faults, notes);
  if (rows.length < 2) {
    faults.throwIfAny();
    const found = rows.length === 0 ? 'no rows under the header' : 'one row';
    faults.add('', 'empty_record', found, 'two rows or more: a step needs two');
    faults.throwIfAny();
  }
  const columns = layout.values;
  const values = readValues({ table, rows, columns, decimal: options.decimal, faults, notes });
  const { timeColumn, clockColumn } = layout;
  const times = readTimes({ table, rows, timeColumn, clockColumn, dateOrder: options.dateOrder, faults, notes });
  faults.throwIfAny();

  const lines = Int32Array.from(rows, (row) => table.lineOf[row]!);
  const written: Written = { ms: times.ms, local: times.local, lines, values };
  if (isNewestFirst(times.ms)) {
    reverse(written);
    notes.push({ code: 'reversed', text: 'the file runs from the newest row to the oldest; it was turned round' });
  }
  const zone = options.timeZone ?? layout.headerZone ?? input.timeZone;
  noteMixedTimes(written.local, zone, notes);
  const dated = toInstants({ zone, written, columns, faults, notes });
  faults.throwIfAny();
  const ordered = inOrder(dated, notes);
  const distinct = withoutDuplicates(ordered, columns, faults, notes);
  faults.throwIfAny();

  const startMs = distinct.ms;
  if (startMs.length < 2) {
    refuse({
      code: 'empty_record',
      file: fileName,
      at: '',
      found: 'one instant',
      wanted: 'two or more: a step needs two',
    });
  }
  const steps = localSteps(startMs);
  checkSteps(steps, distinct.lines, faults);
  faults.throwIfAny();
  const log = logOf(startMs, intervalSeconds(startMs, steps), columns, distinct.values, input.pumpNames);
  return { log, report: qualityReport(log, notes) };
}

/** A profile is JSON: the first character that is no blank is a brace. */
function startsWithBrace(data: Uint8Array | string): boolean {
  const head = typeof data === 'string' ? data.slice(0, 200) : decodeText(data.subarray(0, 200)).text;
  return head.trimStart().startsWith('{');
}

/** Table rows that hold data: no empty rows, comments or sums at the end; a row with too many cells is a fault. */
function dataRows(table: CsvTable, layout: Layout, faults: FaultList, notes: Note[]): Int32Array {
  const { firstRow, columnCount, timeColumn } = layout;
  let end = table.rowCount;
  let sums = 0;
  for (; end > firstRow; end--) {
    if (isEmptyRow(table, end - 1)) continue;
    if (!isFooterRow(table, end - 1, timeColumn)) break;
    sums++;
  }
  if (sums > 0) notes.push({ code: 'footer', text: `rows at the end that sum up others were left out: ${sums}` });
  const rows = new Int32Array(Math.max(0, end - firstRow));
  let count = 0;
  let comments = 0;
  for (let row = firstRow; row < end; row++) {
    const cells = cellCount(table, row);
    if (cells > columnCount) {
      let extra = 0;
      for (let column = columnCount; column < cells; column++) if (cellText(table, row, column) !== '') extra++;
      if (extra > 0) {
        faults.atLine(table.lineOf[row]!, 'ragged_row', `${cells} cells`, `${columnCount}, as in the header`);
      }
    }
    const first = table.firstCell[row]!;
    const start = table.starts[first + Math.min(timeColumn, cells - 1)]!;
    const code = table.text.charCodeAt(start);
    if (code >= 48 && code <= 57) rows[count++] = row;
    else if (table.text.charCodeAt(table.starts[first]!) === 35) comments++;
    else if (!isEmptyRow(table, row)) rows[count++] = row;
  }
  if (comments > 0) notes.push({ code: 'comments', text: `lines that begin with # were left out: ${comments}` });
  return rows.subarray(0, count);
}

function isFooterRow(table: CsvTable, row: number, timeColumn: number): boolean {
  const time = cellText(table, row, timeColumn);
  return (isFooter(time) || isFooter(cellText(table, row, 0))) && typeof parseTime(time, 'dmy') === 'string';
}

function isEmptyRow(table: CsvTable, row: number): boolean {
  for (let cell = table.firstCell[row]!; cell < table.firstCell[row + 1]!; cell++) {
    if (table.text.slice(table.starts[cell], table.ends[cell]).trim() !== '') return false;
  }
  return true;
}

/** Rows on their way to a log: all arrays have one length. */
interface Rows {
  readonly ms: Float64Array;
  readonly lines: Int32Array;
  readonly values: readonly Float64Array[];
}

interface Written extends Rows {
  readonly local: Uint8Array;
}

function isNewestFirst(ms: Float64Array): boolean {
  let up = 0;
  let down = 0;
  for (let i = 1; i < ms.length; i++) {
    if (ms[i]! > ms[i - 1]!) up++;
    else if (ms[i]! < ms[i - 1]!) down++;
  }
  return down > up;
}

function reverse(rows: Written): void {
  rows.ms.reverse();
  rows.local.reverse();
  rows.lines.reverse();
  for (const channel of rows.values) channel.reverse();
}

interface ToInstants {
  readonly zone: string;
  readonly written: Written;
  readonly columns: readonly ValueColumn[];
  readonly faults: FaultList;
  readonly notes: Note[];
}

/** Loggers get replaced: what says its offset and what does not may be clocks of two kinds. */
function noteMixedTimes(local: Uint8Array, zone: string, notes: Note[]): void {
  const without = local.reduce((sum, each) => sum + each, 0);
  if (without === 0 || without === local.length) return;
  notes.push({
    code: 'mixed-times',
    text: `some times have an offset (${local.length - without}) and some have none (${without}): those are taken as local time of ${zone}`,
  });
}

/** Wall clocks to instants. An empty row in the hour that spring skips is a filler of the export; a value there is not. */
function toInstants({ zone, written, faults, notes }: ToInstants): Rows {
  const { ms, local, lines, values } = written;
  const { instants, skipped, writtenOnce } = resolveLocal(zone, ms, local);
  for (const wall of writtenOnce) {
    notes.push({
      code: 'repeated-hour-once',
      text: `the clock in ${zone} repeats the time from ${wallText(wall)}, the file writes it once: taken as the first pass, the second is a gap`,
    });
  }
  if (skipped.length === 0) return { ms: instants, lines, values };
  const dropped = new Set<number>();
  for (const row of skipped) {
    if (values.every((channel) => Number.isNaN(channel[row]))) dropped.add(row);
    else {
      const wanted = `a time that exists in ${zone} (a logger that keeps winter time all year needs its own time zone, such as +01:00)`;
      faults.atLine(lines[row]!, 'not_a_time', `time '${wallText(ms[row]!)}', which the clock skips`, wanted);
    }
  }
  if (dropped.size > 0) {
    notes.push({
      code: 'skipped-hour',
      text: `empty rows in the hour that spring skips were left out: ${dropped.size}`,
    });
  }
  return pick({ ms: instants, lines, values }, (row) => !dropped.has(row));
}

function wallText(wallMs: number): string {
  return isoUtc(wallMs).replace('T', ' ').replace(/Z$/, '');
}

function pick(rows: Rows, keep: (row: number) => boolean): Rows {
  const kept: number[] = [];
  for (let row = 0; row < rows.ms.length; row++) if (keep(row)) kept.push(row);
  return permuted(rows, kept);
}

function permuted(rows: Rows, order: ArrayLike<number>): Rows {
  return {
    ms: Float64Array.from(order, (row) => rows.ms[row]!),
    lines: Int32Array.from(order, (row) => rows.lines[row]!),
    values: rows.values.map((channel) => Float64Array.from(order, (row) => channel[row]!)),
  };
}

/** Ascending by time; rows of one instant keep the order of the file. */
function inOrder(rows: Rows, notes: Note[]): Rows {
  let late = 0;
  for (let i = 1; i < rows.ms.length; i++) if (rows.ms[i]! < rows.ms[i - 1]!) late++;
  if (late === 0) return rows;
  notes.push({
    code: 'sorted',
    text: `rows out of order were sorted by time; places where the time goes back: ${late}`,
  });
  const order = Array.from(rows.ms.keys()).sort((a, b) => rows.ms[a]! - rows.ms[b]! || a - b);
  return permuted(rows, order);
}

/** One row per instant. Rows that agree, or of which one is empty where the other is not, are joined; others are faults. */
function withoutDuplicates(rows: Rows, columns: readonly ValueColumn[], faults: FaultList, notes: Note[]): Rows {
  const { ms, lines, values } = rows;
  const repeated = new Set<number>();
  let kept = 0;
  for (let row = 1; row < ms.length; row++) {
    if (ms[row] !== ms[kept]) {
      kept = row;
      continue;
    }
    repeated.add(row);
    values.forEach((channel, c) => {
      const [first, second] = [channel[kept]!, channel[row]!];
      if (Number.isNaN(first)) channel[kept] = second;
      else if (!Number.isNaN(second) && first !== second) {
        const { title, factor } = columns[c]!;
        const at = `${isoUtc(ms[row]!)} (first in line ${lines[kept]})`;
        const found = `${title} ${tidy(second / factor)} beside ${tidy(first / factor)} at ${at}`;
        faults.atLine(lines[row]!, 'conflicting_rows', found, 'one value at one instant');
      }
    });
  }
  if (repeated.size === 0) return rows;
  notes.push({
    code: 'duplicates',
    text: `rows that repeat an instant without another value were joined: ${repeated.size}`,
  });
  return pick(rows, (row) => !repeated.has(row));
}

/** A file's number after the way to SI and back, without the dust of the conversion. */
function tidy(value: number): string {
  return String(Number(value.toPrecision(12)));
}

function checkSteps(steps: Float64Array, lines: Int32Array, faults: FaultList): void {
  let wrong = 0;
  let first = -1;
  for (let row = 0; row < steps.length; row++) {
    if (steps[row]! >= SECOND_MS && steps[row]! <= LONGEST_STEP) continue;
    wrong++;
    if (first < 0) first = row;
  }
  if (wrong === 0) return;
  const more = wrong > 1 ? ` (one of ${wrong} such lines)` : '';
  const found = `a step of ${tidy(steps[first]! / SECOND_MS)} s${more}`;
  faults.atLine(lines[first]!, 'step_out_of_range', found, 'steps from 1 second to 1 day');
}

function logOf(
  startMs: Float64Array,
  seconds: Float64Array,
  columns: readonly ValueColumn[],
  values: readonly Float64Array[],
  pumpNames: readonly string[],
): Log {
  const channel = (kind: Role['kind'], pump?: number): Channel | null => {
    const at = columns.findIndex(({ role }) => role.kind === kind && (!('pump' in role) || role.pump === pump));
    return at < 0 ? null : values[at]!;
  };
  return {
    startMs,
    seconds,
    flow: channel('flow'),
    level: channel('level'),
    staticHead: channel('staticHead'),
    power: channel('power'),
    pumpsOn: channel('pumpsOn'),
    pumps: pumpNames
      .map((name, pump) => ({
        name,
        on: channel('on', pump),
        speed: channel('speed', pump),
        power: channel('pumpPower', pump),
      }))
      .filter((pump) => pump.on !== null || pump.speed !== null || pump.power !== null),
  };
}
