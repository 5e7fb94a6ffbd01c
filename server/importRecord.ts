import type { Db } from '../db/open.ts';
import { findRecord, insertRecord, type StoredRecord } from '../db/records.ts';
import type { StoredStation } from '../db/stations.ts';
import { sha256 } from './digest.ts';
import type { Log, QualityReport } from './ingest/log.ts';
import { qualityReport } from './ingest/quality.ts';
import { type RecordOptions, readRecord } from './ingest/record.ts';
import { refuseDeepNesting } from './nesting.ts';
import { flowOfLog } from './staging/flowOfLog.ts';
import { readStation } from './station/readStation.ts';
import type { Station } from './station/station.ts';

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
  const read = readStation(station.file, 'station.json');
  const { units, timeZone, duty, standby } = read;
  if (startsWithBrace(data)) refuseDeepNesting(data, fileName); // a profile, which is JSON
  const pumpNames = [...duty, ...standby].map((pump) => pump.name);
  const { log, report } = readRecord({ fileName, data, units, timeZone, pumpNames, ...(options && { options }) });
  const name = record.name?.trim() || fileName.replace(/^.*[\\/]/, '').replace(/(.)\.[^.]+$/, '$1') || 'record';
  const kept = log.flow === null ? reportOfLevels(read, log, report) : report;
  const id = insertRecord(db, {
    stationId: station.id,
    name,
    fileName,
    sha256: sha256(data),
    log,
    report: kept,
    nowMs,
  });
  return findRecord(db, id)!;
}

/** The report of a log of levels, with the inflow that they come to; or with what the station file lacks for it. */
function reportOfLevels(station: Station, log: Log, report: QualityReport): QualityReport {
  if (station.storage.table === null) {
    const text =
      'the record has levels and no flow, and the station file has no storage.area or storage.points to turn them into ' +
      'one: it can be compared once it has';
    return { ...report, notes: [...report.notes, { code: 'levels-without-volume', text }] };
  }
  const inflow = flowOfLog(station, log);
  return qualityReport(inflow.log, [...report.notes, ...inflow.notes]);
}

function startsWithBrace(data: Uint8Array): boolean {
  const first = data.find((byte) => byte > 32 && byte < 128); // past blanks and a byte order mark
  return first === '{'.charCodeAt(0);
}
