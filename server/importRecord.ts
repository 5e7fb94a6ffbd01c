import type { Db } from '../db/open.ts';
import { findRecord, insertRecord, type StoredRecord } from '../db/records.ts';
import type { StoredStation } from '../db/stations.ts';
import { sha256 } from './digest.ts';
import { type RecordOptions, readRecord } from './ingest/record.ts';
import { refuseDeepNesting } from './nesting.ts';
import { readStation } from './station/readStation.ts';

export interface RecordToImport {
  /** Its name in lists; by default the file's, without its ending. */
  readonly name?: string | undefined;
  readonly fileName: string;
  readonly data: Uint8Array;
  /** What the person said of the file; it overrides what is found in it. */
  readonly options?: RecordOptions | undefined;
}

/**
 * Reads a record in the units, zone and pump names of its station and stores it: the whole file, or nothing.
 *
 * @param nowMs  when, UTC [ms]
 * @throws       InputError with every fault of the file
 */
export function importRecord(db: Db, station: StoredStation, record: RecordToImport, nowMs: number): StoredRecord {
  const { fileName, data, options } = record;
  const { units, timeZone, duty, standby } = readStation(station.file, 'station.json');
  if (startsWithBrace(data)) refuseDeepNesting(data, fileName); // a profile, which is JSON
  const pumpNames = [...duty, ...standby].map((pump) => pump.name);
  const { log, report } = readRecord({ fileName, data, units, timeZone, pumpNames, ...(options && { options }) });
  const name = record.name?.trim() || fileName.replace(/^.*[\\/]/, '').replace(/(.)\.[^.]+$/, '$1') || 'record';
  const id = insertRecord(db, { stationId: station.id, name, fileName, sha256: sha256(data), log, report, nowMs });
  return findRecord(db, id)!;
}

function startsWithBrace(data: Uint8Array): boolean {
  const first = data.find((byte) => byte > 32 && byte < 128); // past blanks and a byte order mark
  return first === '{'.charCodeAt(0);
}
