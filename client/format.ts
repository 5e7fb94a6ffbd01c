import { type FileUnits, FLOW_UNITS, type FlowUnit, HEAD_UNITS, type HeadUnit, US_GALLON } from '../server/units.ts';

/** Whose units the reader wants: those of the station file, or one of the two families. */
export const UNIT_CHOICES = ['file', 'metric', 'us'] as const;
export type UnitChoice = (typeof UNIT_CHOICES)[number];

/** A number made readable: what the screen shows, and all its figures for whoever asks. */
export interface Shown {
  readonly text: string;
  readonly full: string;
}

/** One quantity in the reader's unit: multiply by `factor` to come from the unit of the API. */
export interface Measure {
  /** Unit as written; for money the currency's code. */
  readonly unit: string;
  readonly factor: number;
  readonly money?: true;
}

export interface FormatOptions {
  readonly file: FileUnits;
  readonly choice: UnitChoice;
  readonly currency: string;
  readonly timeZone: string;
  /** BCP 47; the reader's own where it is left out. */
  readonly locale?: string | undefined;
}

/** Where a value has none: a word, never 0. */
export const UNKNOWN = 'unknown';

/** As many figures as a conversion leaves meaning in; more would show the dust of binary fractions. */
const ALL_FIGURES = 12;

const METRIC_FLOW: FlowUnit = 'L/s';
const US_FLOW: FlowUnit = 'gpm';

/** Numbers and times as the reader wants them. */
export class Format {
  readonly flow: Measure;
  readonly head: Measure;
  /** Electric power is in kW and energy in kWh everywhere: that is how they are metered and billed. */
  readonly power: Measure = { unit: 'kW', factor: 1 };
  readonly energy: Measure = { unit: 'kWh', factor: 1 };
  readonly hours: Measure = { unit: 'h', factor: 1 };
  readonly percent: Measure = { unit: '%', factor: 1 };
  readonly carbon: Measure = { unit: 'kg CO₂', factor: 1 };
  readonly plain: Measure = { unit: '', factor: 1 };
  readonly volume: Measure;
  readonly specific: Measure;
  readonly money: Measure;
  readonly timeZone: string;
  readonly #locale: string | undefined;
  readonly #numbers = new Map<string, Intl.NumberFormat>();

  constructor({ file, choice, currency, timeZone, locale }: FormatOptions) {
    const flow = flowUnit(file.flow, choice);
    const head: HeadUnit = choice === 'file' ? file.head : choice === 'us' ? 'ft' : 'm';
    const us = flow === 'gpm' || flow === 'MGD';
    this.flow = { unit: shownFlowUnit(flow), factor: 1 / FLOW_UNITS[flow] };
    this.head = { unit: head, factor: 1 / HEAD_UNITS[head] };
    this.volume = us ? { unit: 'Mgal', factor: 1 / (1e6 * US_GALLON) } : { unit: 'm³', factor: 1 };
    this.specific = us ? { unit: 'kWh/Mgal', factor: 1e6 * US_GALLON } : { unit: 'kWh/m³', factor: 1 };
    this.money = { unit: currency, factor: 1, money: true };
    this.timeZone = timeZone;
    this.#locale = locale;
  }

  /** With its unit: `52 L/s`, `€41,200`, `8.3 %`. */
  with(measure: Measure, value: number | null | undefined): Shown {
    if (value == null || Number.isNaN(value)) return { text: UNKNOWN, full: UNKNOWN };
    const joined = (number: string) => {
      if (measure.money || measure.unit === '') return number;
      return `${number}\u00a0${measure.unit}`; // a number never parts from its unit
    };
    const number = this.bare(measure, value);
    return { text: joined(number.text), full: joined(number.full) };
  }

  /** Without its unit, for a column whose head carries it; money keeps its sign of currency. */
  bare(measure: Measure, value: number | null | undefined): Shown {
    if (value == null || Number.isNaN(value)) return { text: UNKNOWN, full: UNKNOWN };
    const inUnit = value * measure.factor || 0; // never -0
    if (measure.money)
      return { text: this.#moneyText(inUnit, measure.unit), full: this.#moneyFull(inUnit, measure.unit) };
    return {
      text: this.#number({ maximumSignificantDigits: 3 }).format(inUnit),
      full: this.#number({ maximumSignificantDigits: ALL_FIGURES }).format(inUnit),
    };
  }

  /** The text alone, for a sentence. */
  say(measure: Measure, value: number | null | undefined): string {
    return this.with(measure, value).text;
  }

  /** Whole things that are counted, such as hours of a record: all their figures, none behind the point. */
  whole(value: number): string {
    return this.#number({ maximumFractionDigits: 0 }).format(value || 0);
  }

  /** From the reader's unit to that of the API. */
  toApi(measure: Measure, shown: number): number {
    return shown / measure.factor;
  }

  /** `12 Mar 2025, 14:00` in the station's zone. */
  instant(ms: number): string {
    return this.#time({ dateStyle: 'medium', timeStyle: 'short' }, ms);
  }

  /** `12 Mar 2025` in the station's zone. */
  day(ms: number): string {
    return this.#time({ dateStyle: 'medium' }, ms);
  }

  /** A label under a time axis; the coarser the step, the fewer parts. */
  tick(ms: number, step: 'hour' | 'day' | 'month'): string {
    if (step === 'hour') return this.#time({ hour: '2-digit', minute: '2-digit', hourCycle: 'h23' }, ms);
    if (step === 'day') return this.#time({ day: 'numeric', month: 'short' }, ms);
    return this.#time({ month: 'short', year: '2-digit' }, ms);
  }

  #time(options: Intl.DateTimeFormatOptions, ms: number): string {
    return new Intl.DateTimeFormat(this.#locale, { ...options, timeZone: this.timeZone }).format(ms);
  }

  #moneyText(value: number, currency: string): string {
    const style = { style: 'currency', currency } as const;
    // Under a hundred the smaller coin counts; above, three figures and no decimals.
    if (Math.abs(value) < 99.995) return this.#number(style).format(value);
    return this.#number({ ...style, maximumSignificantDigits: 3 }).format(value);
  }

  #moneyFull(value: number, currency: string): string {
    return this.#number({ style: 'currency', currency, currencyDisplay: 'code', maximumFractionDigits: 6 }).format(
      value,
    );
  }

  #number(options: Intl.NumberFormatOptions): Intl.NumberFormat {
    const key = JSON.stringify(options);
    let found = this.#numbers.get(key);
    if (!found) {
      found = new Intl.NumberFormat(this.#locale, options);
      this.#numbers.set(key, found);
    }
    return found;
  }
}

function flowUnit(file: FlowUnit, choice: UnitChoice): FlowUnit {
  if (choice === 'file') return file;
  const fileIsUs = file === 'gpm' || file === 'MGD';
  if (choice === 'us') return fileIsUs ? file : US_FLOW;
  return fileIsUs ? METRIC_FLOW : file;
}

/** A unit of flow as it is written on the page. */
export function shownFlowUnit(unit: FlowUnit): string {
  return unit.replace('m3', 'm³');
}

/** The ordinal of a pump as a word: second, third, … then 11th. */
export function ordinal(n: number): string {
  const words = [
    'zeroth',
    'first',
    'second',
    'third',
    'fourth',
    'fifth',
    'sixth',
    'seventh',
    'eighth',
    'ninth',
    'tenth',
  ];
  const word = words[n];
  if (word !== undefined) return word;
  const tail = n % 100 >= 11 && n % 100 <= 13 ? 'th' : (['th', 'st', 'nd', 'rd'][n % 10] ?? 'th');
  return `${n}${tail}`;
}

/** Small numbers in a sentence as words: `two`; larger ones in figures. */
export function inWords(n: number): string {
  return ['none', 'one', 'two', 'three', 'four', 'five', 'six', 'seven', 'eight', 'nine'][n] ?? String(n);
}

/** `1 h`, `15 min`, `30 s`: a step of a record in its largest whole unit. */
export function stepText(seconds: number): string {
  if (seconds % 3600 === 0) return `${seconds / 3600}\u00a0h`;
  if (seconds % 60 === 0) return `${seconds / 60}\u00a0min`;
  return `${seconds}\u00a0s`;
}

/** `1 pump`, `2 pumps` */
export function pumps(n: number): string {
  return `${n} ${n === 1 ? 'pump' : 'pumps'}`;
}

/** The first letter of a sentence in capitals. */
export function sentence(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1);
}

/** A sentence of the server with its units as they are written on the page: `m³/h` for `m3/h`. */
export function typeset(text: string): string {
  return text.replace(/\bm3(?=\/[sh]\b)/g, 'm³');
}

/** `a, b and c` */
export function list(parts: readonly string[]): string {
  if (parts.length < 2) return parts.join('');
  return `${parts.slice(0, -1).join(', ')} and ${parts.at(-1)}`;
}
