import { existsSync, readFileSync } from 'node:fs';
import { basename, resolve } from 'node:path';
import { parseArgs } from 'node:util';
import { type Fault, faultLine, InputError, type Note, refuse } from '../../server/errors.ts';
import { publicHolidayDates } from '../../server/holidays.ts';
import { type ReadRecord, type RecordOptions, readRecord } from '../../server/ingest/record.ts';
import { parseJson } from '../../server/readFile.ts';
import { readStation } from '../../server/station/readStation.ts';
import type { Station } from '../../server/station/station.ts';
import type { Tariff } from '../../server/tariff/tariff.ts';
import { readTariff } from '../../server/tariff/tariffFile.ts';

/** What every command of the program shares: options, files, exit codes. */

export type Given = Readonly<Record<string, string | boolean | undefined>>;

/**
 * Runs a command. `--help` prints its help; faults in the input go to stderr, one line each, with exit code 2; anything
 * unexpected is shown whole, with exit code 1.
 *
 * @param options  names of options that take a value, and of those that are switches; whether a word may stand by itself
 *   beside them, given as `operand`
 */
export function runCommand(
  help: string,
  options: { readonly values: readonly string[]; readonly switches?: readonly string[]; readonly operand?: boolean },
  main: (given: Given) => void | Promise<void>,
): void {
  let given: Given = {};
  const run = async () => {
    given = readArguments(options.values, ['help', ...(options.switches ?? [])], options.operand ?? false);
    if (given.help === true) process.stdout.write(help);
    else await main(given);
  };
  run().catch((error: unknown) => {
    if (error instanceof InputError) {
      process.stderr.write(`${error.faults.map((fault) => faultLine(inFile(fault, given))).join('\n')}\n`);
      process.exitCode = 2;
    } else {
      console.error(error);
      process.exitCode = 1;
    }
  });
}

/** Where files do not go together the fault names a part, such as `tariff`; a person knows the file given as it. */
function inFile(fault: Fault, given: Given): Fault {
  const path = ['station', 'record', 'tariff'].includes(fault.file) ? given[fault.file] : undefined;
  return typeof path === 'string' ? { ...fault, file: basename(path) } : fault;
}

function readArguments(values: readonly string[], switches: readonly string[], operand: boolean): Given {
  const options = {
    ...Object.fromEntries(values.map((name) => [name, { type: 'string' as const }])),
    ...Object.fromEntries(switches.map((name) => [name, { type: 'boolean' as const }])),
  };
  const refused = (found: string): never =>
    refuse({ code: 'bad_option', file: 'arguments', at: '', found, wanted: 'the options of --help' });
  try {
    const { values: given, positionals } = parseArgs({ args: withNegatives(), options, allowPositionals: operand });
    if (positionals.length > 1) refused(`'${positionals[1]}'`);
    return positionals[0] === undefined ? given : { ...given, operand: positionals[0] };
  } catch (error) {
    if (!(error instanceof TypeError)) throw error;
    return refused(error.message.split('\n')[0]!);
  }
}

/** What was typed, with `--level -2` as `--level=-2`: a number below 0 is a value and no option. */
function withNegatives(): string[] {
  const words: string[] = [];
  for (const word of process.argv.slice(2)) {
    const option = words.at(-1);
    if (/^-[\d.]/.test(word) && option?.startsWith('--') && !option.includes('=')) words.push(`${words.pop()}=${word}`);
    else words.push(word);
  }
  return words;
}

/** The value of an option that must be there. */
export function required(given: Given, name: string): string {
  const value = given[name];
  if (typeof value === 'string' && value !== '') return value;
  refuse({ code: 'bad_option', file: 'arguments', at: `--${name}`, found: 'nothing', wanted: 'a value; see --help' });
}

/** The value of an option, or null where it was not given. */
export function optional(given: Given, name: string): string | null {
  return given[name] === undefined ? null : required(given, name);
}

/** The text of an option as a number; undefined where it was not given. */
export function numberOf(text: string, option: string): number;
export function numberOf(text: string | null, option: string): number | undefined;
export function numberOf(text: string | null, option: string): number | undefined {
  if (text === null) return undefined;
  const value = /^[-+]?(\d+\.?\d*|\.\d+)([eE][-+]?\d+)?$/.test(text) ? Number(text) : Number.NaN;
  if (Number.isNaN(value)) {
    refuse({ code: 'not_a_number', file: 'arguments', at: option, found: `'${text}'`, wanted: 'a number' });
  }
  return value;
}

/** A list given as `a,b,c`. */
export function list(given: Given, name: string): string[] | undefined {
  const text = optional(given, name);
  if (text === null) return undefined;
  return text
    .split(',')
    .map((part) => part.trim())
    .filter((part) => part !== '');
}

/** What was noticed in a record, where it does not get in the way of data. */
export function warn(notes: readonly Note[]): void {
  for (const { code, text } of notes) process.stderr.write(`${code}: ${text}\n`);
}

/** The bytes of a file, or a fault that names it. */
export function readBytes(path: string): Uint8Array {
  try {
    return readFileSync(found(path));
  } catch (error) {
    const reason = (error as NodeJS.ErrnoException).code;
    if (reason === undefined) throw error;
    refuse({ code: 'not_found', file: path, at: '', found: `no readable file (${reason})`, wanted: 'a file' });
  }
}

/** npm runs commands in the checkout; a path that is not there is looked for where npm was called. */
function found(path: string): string {
  const called = resolve(process.env.INIT_CWD ?? '.', path);
  return !existsSync(path) && existsSync(called) ? called : path;
}

/** A JSON file, parsed. */
export function readJson(path: string): unknown {
  return parseJson(Buffer.from(readBytes(path)).toString('utf8'), basename(path));
}

export function stationFrom(path: string): { station: Station; file: unknown } {
  const file = readJson(path);
  return { station: readStation(file, basename(path)), file };
}

export function tariffFrom(path: string): { tariff: Tariff; file: unknown } {
  const file = readJson(path);
  return { tariff: readTariff(file, basename(path), publicHolidayDates), file };
}

/** A record file read in the units, zone and pump names of a station. */
export function recordFrom(path: string, station: Station, options?: RecordOptions): ReadRecord & { data: Uint8Array } {
  const data = readBytes(path);
  const read = readRecord({
    fileName: basename(path),
    data,
    units: station.units,
    timeZone: station.timeZone,
    pumpNames: [...station.duty, ...station.standby].map((pump) => pump.name),
    options,
  });
  return { ...read, data };
}
