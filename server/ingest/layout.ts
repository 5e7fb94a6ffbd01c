import { type FileUnits, FLOW_UNITS, type FlowUnit, HEAD_UNITS, POWER_UNITS } from '../units.ts';
import { type CsvTable, cellCount, cellText, rowCells } from './csv.ts';
import type { FaultList } from './faultList.ts';
import { type HeaderName, plainName, type Quantity, readHeader, unitFactor } from './headerUnits.ts';
import { isMissing, numberFromText } from './numbers.ts';
import { isTimeOfDay, parseTime } from './timestamps.ts';

/** What a column of values means. `pump` counts in the station's list of pump names. */
export type Role =
  | { readonly kind: 'flow' | 'level' | 'staticHead' | 'power' | 'pumpsOn' }
  | { readonly kind: 'on' | 'speed' | 'pumpPower'; readonly pump: number };

/** A column of values, and what it holds. */
export interface ValueColumn {
  readonly index: number;
  readonly title: string;
  readonly role: Role;
  /** SI value of one unit of the file. */
  readonly factor: number;
}

/** Which row and column of a table holds what. */
export interface Layout {
  readonly headerRow: number;
  /** First row of data: after the header and any rows of units. */
  readonly firstRow: number;
  readonly columnCount: number;
  readonly timeColumn: number;
  /** A second column with the time of day, where date and time stand apart. */
  readonly clockColumn: number | null;
  /** Zone named in the header of the time column, e.g. `UTC`. */
  readonly headerZone: string | null;
  readonly values: readonly ValueColumn[];
  /** Titles of columns that mean nothing to this program. */
  readonly ignored: readonly string[];
}

/** A table, and what its owner says of it. */
export interface LayoutInput {
  readonly table: CsvTable;
  readonly faults: FaultList;
  readonly units: FileUnits;
  readonly pumpNames: readonly string[];
  readonly timeColumn?: string | undefined;
  readonly flowColumn?: string | undefined;
  readonly flowUnit?: FlowUnit | undefined;
}

/** Lines of metadata that may stand before the header. */
const PREAMBLE = 41;

const TIME_NAMES = new Set([
  ...['time', 'timestamp', 'time stamp', 'datetime', 'date time', 'date and time', 'index', 'utc', 'time utc'],
  ...['timestamp utc', 'datetime utc', 'local time', 'time local', 'time start', 'start time', 'start', 'from'],
  ...[
    'interval start',
    'period start',
    'zeit',
    'zeitstempel',
    'zeitpunkt',
    'datum zeit',
    'fecha hora',
    'horodate',
    'ts',
  ],
]);
const DATE_NAMES = new Set(['date', 'day', 'datum', 'fecha', 'data', 'local date']);
const CLOCK_NAMES = new Set(['time', 'time of day', 'hour', 'zeit', 'uhrzeit', 'hora', 'heure', 'clock', 'local time']);
const FLOW_NAMES = new Set(['flow', 'inflow', 'flow rate', 'flowrate', 'q', 'discharge', 'mean flow', 'flow mean']);
const LEVEL_NAMES = new Set(['level', 'water level', 'well level', 'wet well level', 'tank level']);
const POWER_NAMES = new Set(['power', 'power kw', 'total power', 'station power']);
const COUNT_NAMES = new Set(['pumps on', 'pumps running', 'running pumps', 'pump count']);

/**
 * Finds the header row and what each column means. All faults go to the list; where the layout cannot be told at all
 * the list throws.
 *
 * @throws InputError not_csv, missing_column, unknown_unit, duplicate_name
 */
export function findLayout(input: LayoutInput): Layout {
  const { table, faults } = input;
  const headerRow = findHeader(input);
  if (headerRow === null) return refuseHeaderless(input);
  const headers = rowCells(table, headerRow).map(readHeader);
  while (headers.length > 0 && headers.at(-1)!.title === '') headers.pop();
  const line = table.lineOf[headerRow]!;
  const found = `columns ${headers.map((h) => (h.title === '' ? '(no name)' : h.title)).join(', ')}`;

  const time = timeColumns(input, headerRow, headers);
  if (time === null) {
    const wanted = input.timeColumn ?? 'time';
    const hint = headers.findIndex((_, column) => holdsDates(table, headerRow, column));
    const advice = hint < 0 ? '' : ` (column ${headers[hint]!.title} holds times: name it as the time column)`;
    faults.atLine(line, 'missing_column', found, `a column '${wanted}'${advice}`);
    faults.throwIfAny();
  }
  const { timeColumn, clockColumn } = time!;
  const unitRow = findUnitRow(table, headerRow, headers.length, timeColumn);
  const withUnits = headers.map((header, column) => {
    const unit = unitRow === null ? '' : cellText(table, unitRow, column);
    return unit === '' || header.unit !== null ? header : { ...header, unit: unit.replace(/^[[(](.*)[)\]]$/, '$1') };
  });

  const values: ValueColumn[] = [];
  const ignored: string[] = [];
  const asked = input.flowColumn === undefined ? null : plainName(input.flowColumn);
  const rolesSeen = new Map<string, HeaderName>();
  const usesExactFlow = asked === null && withUnits.some((header) => header.name === 'flow');
  withUnits.forEach((header, index) => {
    if (index === timeColumn || index === clockColumn) return;
    const role = roleOf(header, input.pumpNames, asked, usesExactFlow);
    if (role === null) {
      if (header.title !== '') ignored.push(header.title);
      return;
    }
    const key = JSON.stringify(role);
    const twin = rolesSeen.get(key);
    if (twin !== undefined) {
      const advice = role.kind === 'flow' ? '; name the flow column' : '';
      faults.add(`line ${line}`, 'duplicate_name', `columns ${twin.title} and ${header.title}`, `one of them${advice}`);
      return;
    }
    rolesSeen.set(key, header);
    const factor = factorOf(header, role, input);
    if (factor === null) {
      const advice = role.kind === 'flow' ? ', or the flow unit given beside the file' : '';
      const known = knownUnits(role);
      faults.add(`line ${line}`, 'unknown_unit', `'${header.unit}' in column ${header.title}`, `${known}${advice}`);
      return;
    }
    values.push({ index, title: header.title, role, factor });
  });

  const has = (kind: Role['kind']): boolean => [...rolesSeen.keys()].some((key) => JSON.parse(key).kind === kind);
  if (!has('flow') && (asked !== null || !has('level') || !(has('on') || has('pumpsOn')))) {
    const wanted =
      asked === null
        ? "a column 'flow', or 'level' with run states ('pumps_on' or NAME_on); another name can be given as the flow column"
        : `a column '${input.flowColumn}'`;
    faults.add(`line ${line}`, 'missing_column', found, wanted);
  }
  faults.throwIfAny();

  return {
    headerRow,
    firstRow: firstDataRow(table, unitRow ?? headerRow, headers.length, timeColumn),
    columnCount: headers.length,
    timeColumn,
    clockColumn,
    headerZone: zoneInHeader(headers[timeColumn]!),
    values,
    ignored,
  };
}

/** Header row: one that names a time, followed by times, or one that names a flow or level. */
function findHeader(input: LayoutInput): number | null {
  const { table } = input;
  const last = Math.min(table.rowCount, PREAMBLE);
  const wantedTime = input.timeColumn === undefined ? null : plainName(input.timeColumn);
  const wantedFlow = input.flowColumn === undefined ? null : plainName(input.flowColumn);
  let fallback: number | null = null;
  for (let row = 0; row < last; row++) {
    const headers = rowCells(table, row).map(readHeader);
    const isValue = (h: HeaderName): boolean =>
      FLOW_NAMES.has(h.name) || LEVEL_NAMES.has(h.name) || h.name === wantedFlow || h.whole === wantedFlow;
    const named = headers.filter((h) => h.title !== '').length;
    const timeAt = headers.findIndex((h) => isTimeName(h) || h.name === wantedTime || h.whole === wantedTime);
    if (
      timeAt >= 0 &&
      (headers.some(isValue) ||
        (named >= 2 && !headers.some((h) => isTimeLike(h.title)) && timesFollow(table, row, timeAt)))
    )
      return row;
    if (fallback === null && (headers.some(isValue) || (timeAt >= 0 && headers.length === 1))) fallback = row;
  }
  return fallback;
}

function isTimeName(header: HeaderName): boolean {
  return TIME_NAMES.has(header.name) || TIME_NAMES.has(header.whole) || DATE_NAMES.has(header.name);
}

function timesFollow(table: CsvTable, row: number, column: number): boolean {
  for (let next = row + 1; next <= Math.min(row + 4, table.rowCount - 1); next++) {
    if (isTimeLike(cellText(table, next, column))) return true;
  }
  return false;
}

function isTimeLike(cell: string): boolean {
  return cell !== '' && (typeof parseTime(cell, 'dmy') === 'object' || typeof parseTime(cell, 'mdy') === 'object');
}

/** Whether a column holds dates as such: epoch and day numbers could be anything. */
function holdsDates(table: CsvTable, headerRow: number, column: number): boolean {
  for (let row = headerRow + 1; row <= Math.min(headerRow + 4, table.rowCount - 1); row++) {
    const cell = cellText(table, row, column);
    if (isTimeLike(cell) && !/^\d+(?:\.\d+)?$/.test(cell)) return true;
  }
  return false;
}

function timeColumns(
  input: LayoutInput,
  headerRow: number,
  headers: readonly HeaderName[],
): { timeColumn: number; clockColumn: number | null } | null {
  const { table } = input;
  if (input.timeColumn !== undefined) {
    const wanted = plainName(input.timeColumn);
    const index = headers.findIndex((h) => h.whole === wanted || h.name === wanted);
    return index < 0 ? null : { timeColumn: index, clockColumn: null };
  }
  const dateAt = headers.findIndex((h) => DATE_NAMES.has(h.name));
  const clockAt = headers.findIndex((h, index) => index !== dateAt && CLOCK_NAMES.has(h.name));
  if (dateAt >= 0 && clockAt >= 0 && clockOnly(table, headerRow, clockAt)) {
    return { timeColumn: dateAt, clockColumn: clockAt };
  }
  if (dateAt >= 0 && clockAt >= 0 && headers[clockAt]!.name !== 'time' && !timesFollow(table, headerRow, clockAt)) {
    // A column of bare hours: 1 may be the hour that begins at 1:00 or the one that ends there.
    const found = `column ${headers[clockAt]!.title} beside ${headers[dateAt]!.title} without times of day in it`;
    input.faults.atLine(table.lineOf[headerRow]!, 'ambiguous_time', found, 'times of day such as 13:00');
    input.faults.throwIfAny();
  }
  // A row number is often called index and stands beside the time: what holds times comes first.
  const named = headers.flatMap((h, index) => (isTimeName(h) ? [index] : []));
  const timeAt = named.find((index) => timesFollow(table, headerRow, index)) ?? named[0];
  if (timeAt !== undefined) return { timeColumn: timeAt, clockColumn: null };
  const unnamed = headers.findIndex((h) => h.title === '');
  if (unnamed >= 0 && holdsDates(table, headerRow, unnamed)) return { timeColumn: unnamed, clockColumn: null };
  return null;
}

function clockOnly(table: CsvTable, headerRow: number, column: number): boolean {
  for (let row = headerRow + 1; row <= Math.min(headerRow + 4, table.rowCount - 1); row++) {
    if (isTimeOfDay(cellText(table, row, column))) return true;
  }
  return false;
}

/** The row of units under the header, if there is one: no time in it, and a known unit somewhere. */
function findUnitRow(table: CsvTable, headerRow: number, columns: number, timeColumn: number): number | null {
  const row = headerRow + 1;
  if (row >= table.rowCount || isTimeLike(cellText(table, row, timeColumn))) return null;
  for (let column = 0; column < columns; column++) {
    const cell = cellText(table, row, column);
    if (column === timeColumn || cell === '') continue;
    if ((['flow', 'head', 'power'] as const).some((quantity) => unitFactor(quantity, cell) !== null)) return row;
  }
  return null;
}

/** Skips rows of words such as "mean, mean, sum" that some exports put under the units. */
function firstDataRow(table: CsvTable, headRow: number, columns: number, timeColumn: number): number {
  const next = headRow + 1;
  if (next >= table.rowCount || isTimeLike(cellText(table, next, timeColumn))) return next;
  const cells = Array.from({ length: Math.min(columns, cellCount(table, next)) }, (_, c) => cellText(table, next, c));
  const words = cells.every((cell, c) =>
    c === timeColumn ? !/\d/.test(cell) : isMissing(cell) || Number.isNaN(numberFromText(cell, '.')),
  );
  return words && cells.some((cell) => /^(?:avg|average|mean|sum|min|max|last|first|smp|tot|total)$/i.test(cell))
    ? next + 1
    : next;
}

function roleOf(
  header: HeaderName,
  pumpNames: readonly string[],
  askedFlow: string | null,
  exactFlow: boolean,
): Role | null {
  const { name, whole } = header;
  if (askedFlow !== null) {
    if (whole === askedFlow || name === askedFlow) return { kind: 'flow' };
  } else if (exactFlow ? name === 'flow' : FLOW_NAMES.has(name)) return { kind: 'flow' };
  for (let pump = 0; pump < pumpNames.length; pump++) {
    const prefix = `${plainName(pumpNames[pump]!)} `;
    const suffixes = [name, whole].filter((t) => t.startsWith(prefix)).map((t) => t.slice(prefix.length));
    if (suffixes.some((s) => s === 'on' || s === 'run' || s === 'running')) return { kind: 'on', pump };
    if (suffixes.includes('speed')) return { kind: 'speed', pump };
    if (suffixes.some((s) => s === 'kw' || s === 'power' || s === 'power kw')) return { kind: 'pumpPower', pump };
  }
  if (LEVEL_NAMES.has(name)) return { kind: 'level' };
  if (name === 'static head') return { kind: 'staticHead' };
  if (POWER_NAMES.has(name)) return { kind: 'power' };
  return COUNT_NAMES.has(name) ? { kind: 'pumpsOn' } : null;
}

function quantityOf(role: Role): Quantity | null {
  switch (role.kind) {
    case 'flow':
      return 'flow';
    case 'level':
    case 'staticHead':
      return 'head';
    case 'power':
    case 'pumpPower':
      return 'power';
    case 'on':
    case 'speed':
      return 'share';
    case 'pumpsOn':
      return null;
  }
}

/** SI factor of a column: the unit given beside the file, else the one in its header, else the station's. */
function factorOf(header: HeaderName, role: Role, input: LayoutInput): number | null {
  const quantity = quantityOf(role);
  if (quantity === null) return 1;
  if (role.kind === 'flow' && input.flowUnit !== undefined) return FLOW_UNITS[input.flowUnit];
  if (header.unit !== null) return unitFactor(quantity, header.unit);
  if (quantity === 'flow') return FLOW_UNITS[input.units.flow];
  if (quantity === 'head') return HEAD_UNITS[input.units.head];
  if (quantity === 'power') return / kw$/.test(header.name) ? POWER_UNITS.kW : POWER_UNITS[input.units.power];
  return 1;
}

function knownUnits(role: Role): string {
  switch (quantityOf(role)) {
    case 'flow':
      return `one of ${Object.keys(FLOW_UNITS).join(', ')}`;
    case 'head':
      return 'm or ft';
    case 'power':
      return 'kW or hp';
    default:
      return 'a share (1 = all) or %';
  }
}

/** `Time (UTC)`, `time_utc`, `Timestamp [UTC+1]`: an offset that holds for the whole column. */
function zoneInHeader(header: HeaderName): string | null {
  const text = `${header.whole} ${header.unit ?? ''}`.toUpperCase();
  const match = /(?:^|[\s(])(?:UTC|GMT)\s*(?:([+\s-])\s*(\d{1,2})(?:[: ]?(\d{2}))?)?(?=$|[\s)])/.exec(text);
  if (match === null) return null;
  if (match[2] === undefined) return 'UTC';
  // The plain name has lost the sign between words, so read it from the cell as written.
  const sign = /(?:UTC|GMT)\s*([+\u2212-])/i.exec(header.title)?.[1];
  if (sign === undefined) return 'UTC';
  return `${sign === '+' ? '+' : '-'}${match[2].padStart(2, '0')}:${match[3] ?? '00'}`;
}

/** A line that sums up the rows above it. */
export function isFooter(cell: string): boolean {
  return /^(?:grand )?(?:total|totals|sum|summe|average|mean|minimum|maximum|min|max|count|end of (?:file|data|report))\b/i.test(
    cell,
  );
}

/** No header found: say what stands there instead, or that this is no table. */
function refuseHeaderless({ table, faults }: LayoutInput): never {
  for (let row = 0; row < Math.min(table.rowCount, PREAMBLE); row++) {
    const cells = rowCells(table, row);
    if (cells.length < 2) continue;
    const next = row + 1 < table.rowCount ? rowCells(table, row + 1) : [];
    const isData = (list: readonly string[]): boolean =>
      list.length > 1 && list.some((cell) => isTimeLike(cell) || !Number.isNaN(numberFromText(cell, '.')));
    if (!isData(next) && !isData(cells)) continue;
    const shown = cells.map((cell) => (cell === '' ? '(no name)' : cell)).join(', ');
    faults.atLine(table.lineOf[row]!, 'missing_column', `columns ${shown}`, "a header row with 'time' and 'flow'");
    break;
  }
  if (faults.isEmpty)
    faults.add('line 1', 'not_csv', `'${rowCells(table, 0).join(table.delimiter).slice(0, 60)}'`, 'a header row');
  faults.throwIfAny();
  throw new Error('unreachable: a fault was added');
}
