import type { RecordEntry } from '../server/api.ts';
import { type CaseFile, readCase } from '../server/economics/caseFile.ts';
import { faultLine, InputError } from '../server/errors.ts';
import { type api, linesOf, type StationBody, type TariffBody } from './api.ts';
import { looksLikeJson, type Told, tellFile } from './files.ts';

/** A file that a person gave, told by its content, with what is wrong with it. */
export interface Given {
  readonly name: string;
  readonly file: Blob;
  readonly told: Told;
  readonly faults: readonly string[];
}

/** The part of the HTTP interface that an import needs. */
export type Storing = Pick<typeof api, 'addStation' | 'removeStation' | 'addTariff' | 'removeTariff' | 'addRecord'>;

export interface Imported {
  readonly station: StationBody | null;
  readonly tariff: TariffBody | null;
  /** The last of the records, which is the one to open. */
  readonly record: RecordEntry | null;
  /** Terms of a change; they are kept by the page and not stored. */
  readonly caseFile: CaseFile | null;
}

export interface ImportOutcome {
  /** What is stored now, or null where something had a fault and nothing was kept. */
  readonly imported: Imported | null;
  /** What is still in hand: files with faults, and those that wait for another. */
  readonly inHand: readonly Given[];
  /** Why files wait, in a sentence; null where none do. */
  readonly waitsFor: string | null;
}

/** Enough of a text file to tell what it is. */
const BEGINNING = 65_536;

/** Reads as much of a file as telling it takes. */
export async function given(file: Blob & { readonly name: string }): Promise<Given> {
  const beginning = await file.slice(0, BEGINNING).text();
  const text = looksLikeJson(beginning) && file.size > BEGINNING ? await file.text() : beginning;
  const told = tellFile(file.name, text);
  return { name: file.name, file, told, faults: faultsOf(told, file.name) };
}

function faultsOf(told: Told, name: string): readonly string[] {
  if (told.kind === 'unknown') return [told.line];
  if (told.kind !== 'case') return [];
  try {
    readCase(told.content, name);
    return [];
  } catch (error) {
    if (error instanceof InputError) return error.faults.map(faultLine);
    throw error;
  }
}

/**
 * What is in hand when more comes: a file of the same name is the mended one, and so is a station or tariff for one with
 * a fault; a file that could not be told goes as soon as anything else comes.
 */
export function together(inHand: readonly Given[], more: readonly Given[]): Given[] {
  const mends = (old: Given) =>
    more.some(
      (next) =>
        next.name === old.name ||
        (old.faults.length > 0 && (old.told.kind === 'unknown' || old.told.kind === next.told.kind)),
    );
  return [...inHand.filter((old) => !mends(old)), ...more].map((each) => ({
    ...each,
    faults: faultsOf(each.told, each.name),
  }));
}

/**
 * Stores what was given: station first, then tariff, then records. All of it, or nothing: what was stored before a fault
 * showed is taken back, and every file is asked about so that all faults are told at once.
 *
 * @param openStationId  the station that a record without a station file belongs to; null where that is not certain
 * @param say            told what is being done
 */
export async function importFiles(
  files: readonly Given[],
  { openStationId, storing, say }: { openStationId: number | null; storing: Storing; say: (line: string) => void },
): Promise<ImportOutcome> {
  const faults = new Map<Given, readonly string[]>();
  for (const each of files) if (each.faults.length > 0) faults.set(each, each.faults);
  const of = (kind: Told['kind']) => files.filter((each) => each.told.kind === kind);
  for (const kind of ['station', 'tariff', 'case'] as const) {
    for (const second of of(kind).slice(1)) {
      faults.set(second, [`${second.name}: found a second ${kind} file; wanted one at a time`]);
    }
  }
  const stationId = of('station').length > 0 ? null : openStationId;
  if (of('record').length > 0 && of('station').length === 0 && stationId === null && faults.size === 0) {
    return { imported: null, inHand: files, waitsFor: 'The record waits for the station file it belongs to.' };
  }

  const step = async <T>(each: Given | undefined, doing: (each: Given) => Promise<T>): Promise<T | null> => {
    if (each === undefined || faults.has(each)) return null;
    say(`Reading ${each.name}…`);
    try {
      return await doing(each);
    } catch (error) {
      faults.set(each, linesOf(error));
      return null;
    }
  };
  const content = (each: Given) => ('content' in each.told ? each.told.content : null);
  const station = await step(of('station')[0], (each) => storing.addStation(content(each), each.name));
  const tariff = await step(of('tariff')[0], (each) => storing.addTariff(content(each), each.name));
  const recordsOf = station?.id ?? stationId;
  let record: RecordEntry | null = null;
  // With a fault before them, records of a station that stays would be half an import.
  for (const each of recordsOf !== null && (station !== null || faults.size === 0) ? of('record') : []) {
    const type = 'type' in each.told ? each.told.type : 'text/csv';
    record = (await step(each, () => storing.addRecord(recordsOf!, each.file, each.name, type))) ?? record;
  }
  if (faults.size === 0) {
    const [terms] = of('case');
    const caseFile = terms === undefined ? null : (content(terms) as CaseFile);
    return { imported: { station, tariff, record, caseFile }, inHand: [], waitsFor: null };
  }

  // A station takes its records along.
  if (station) await storing.removeStation(station.id);
  if (tariff) await storing.removeTariff(tariff.id);
  const inHand = files.map((each) => ({ ...each, faults: faults.get(each) ?? [] }));
  return { imported: null, inHand, waitsFor: 'Nothing was stored. Mend what is marked and give those files again.' };
}
