/** Numbers as people and machines write them. `parseFloat` and `Number('')` are not used: both turn faults into values. */

export type DecimalMark = '.' | ',';

/** 10^k, exact in binary64 up to k = 22. */
const POWERS = Array.from({ length: 16 }, (_, k) => 10 ** k);

/**
 * A plain decimal `[-]digits[.digits]` between two positions of a text, blanks around it allowed; NaN for anything else.
 * Up to 15 digits the quotient of two exact integers is the correctly rounded value, the same that `Number` gives.
 */
export function plainNumber(text: string, from: number, to: number): number {
  let position = from;
  let end = to;
  while (position < end && text.charCodeAt(position) === 32) position++;
  while (end > position && text.charCodeAt(end - 1) === 32) end--;
  const negative = text.charCodeAt(position) === 45;
  if (negative && position < end) position++;
  let integer = 0;
  let digits = 0;
  let fraction = -1;
  for (; position < end; position++) {
    const code = text.charCodeAt(position);
    if (code >= 48 && code <= 57) {
      integer = integer * 10 + code - 48;
      digits++;
      if (fraction >= 0) fraction++;
    } else if (code === 46 && fraction < 0) fraction = 0;
    else return Number.NaN;
  }
  if (digits === 0 || digits > 15) return Number.NaN;
  const value = fraction > 0 ? integer / POWERS[fraction]! : integer;
  return negative && value !== 0 ? -value : value;
}

/** U+2212 as minus; no-break, narrow and thin spaces as blank; the curly apostrophe as the straight one. */
function plainMarks(cell: string): string {
  return cell
    .replace(/\u2212/g, '-')
    .replace(/[\u00A0\u2009\u202F]/g, ' ')
    .replace(/\u2019/g, "'")
    .trim();
}

/**
 * The value of a cell under the file's decimal mark, thousands marks (comma or point, blank, apostrophe) allowed in
 * whole groups of three; NaN where it is not a number. Hexadecimal and infinity are not numbers here.
 */
export function numberFromText(cell: string, mark: DecimalMark): number {
  let text = plainMarks(cell);
  if (mark === ',') text = text.replace(/[.,]/g, (sign) => (sign === ',' ? '.' : ','));
  if (/^[+-]?\d{1,3}([ ,'])\d{3}(?:\1\d{3})*(?:\.\d*)?$/.test(text)) text = text.replace(/[ ,']/g, '');
  if (!/^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?$/.test(text)) return Number.NaN;
  const value = Number(text);
  return Number.isFinite(value) ? value + 0 : Number.NaN;
}

/** Which decimal mark a cell proves: `either` may be thousands or decimals (`100,500`), `none` says nothing. */
export function decimalEvidence(cell: string): DecimalMark | 'either' | 'none' {
  const text = plainMarks(cell).replace(/^[+-]/, '');
  const match = /^([\d.,' ]*)([eE][+-]?\d+)?$/.exec(text);
  const body = match?.[1] ?? '';
  if (!/\d/.test(body)) return 'none';
  const commas = body.split(',').length - 1;
  const points = body.split('.').length - 1;
  if (commas > 0 && points > 0) {
    if (commas > 1 && points > 1) return 'none';
    return body.lastIndexOf(',') > body.lastIndexOf('.') ? ',' : '.';
  }
  if (commas === 0 && points === 0) return 'none';
  const sign = commas > 0 ? ',' : '.';
  const other = commas > 0 ? '.' : ',';
  if (commas > 1 || points > 1) return other;
  const [whole = '', decimals = ''] = body.split(sign);
  const grouped = /^[1-9]\d{0,2}$/.test(whole) && decimals.length === 3 && match?.[2] === undefined;
  return grouped ? 'either' : sign;
}

export type MarkDecision =
  | { readonly kind: 'mark'; readonly mark: DecimalMark }
  /** `cell` could be read both ways and nothing else in the file decides. */
  | { readonly kind: 'ambiguous'; readonly index: number; readonly count: number };

/**
 * The decimal mark of a file from all its number cells. A lone `100,500` is undecidable and says so; a lone `100.500` is
 * the canonical form. Where both marks are proven, the more frequent one is the file's and the others will not read.
 */
export function decideMark(cells: Iterable<string>): MarkDecision {
  let commas = 0;
  let points = 0;
  let unsure = 0;
  let firstUnsure = -1;
  let index = 0;
  for (const cell of cells) {
    const evidence = decimalEvidence(cell);
    if (evidence === ',') commas++;
    else if (evidence === '.') points++;
    else if (evidence === 'either' && cell.includes(',')) {
      unsure++;
      if (firstUnsure < 0) firstUnsure = index;
    }
    index++;
  }
  if (unsure > 0 && commas === points) return { kind: 'ambiguous', index: firstUnsure, count: unsure };
  return { kind: 'mark', mark: commas > points ? ',' : '.' };
}

const MISSING_WORDS = new Set([
  ...['nan', '1.#qnan', '-nan', 'na', 'n/a', 'n.a.', 'null', 'nil', 'none', 'nul', '(null)', '-', '--', '---', '----'],
  ...['\u2013', '\u2014', '.', '..', '...', '?', '*', '#n/a', '#na', '#ref!', '#value!', '#div/0!', '#num!', '#name?'],
  ...['no data', 'nodata', 'no_data', 'no value', 'missing', 'bad', 'bad input', 'bad data', 'bad quality', 'invalid'],
  ...['error', 'fault', 'fail', 'failed', 'comm fail', 'i/o timeout', 'timeout', 'offline', 'off-line', 'unknown'],
  ...['not available', 'not connected', 'no result', 'out of service', 'pt created', 'k.a.', 'undefined', 'empty'],
]);

/** Whether a text is one of the usual words for "no value"; the empty cell is one of them. */
export function isMissing(cell: string): boolean {
  return cell === '' || MISSING_WORDS.has(plainMarks(cell).toLowerCase());
}

const RUNNING = new Set([
  'on',
  'true',
  'yes',
  'y',
  't',
  'run',
  'running',
  'started',
  'start',
  'active',
  'ein',
  'marche',
]);
const STOPPED = new Set(['off', 'false', 'no', 'n', 'f', 'stop', 'stopped', 'standby', 'inactive', 'idle', 'aus']);

/** 1 for a running word, 0 for a stopped one, NaN for anything else. */
export function runState(cell: string): number {
  const word = cell.toLowerCase();
  if (RUNNING.has(word)) return 1;
  return STOPPED.has(word) ? 0 : Number.NaN;
}
