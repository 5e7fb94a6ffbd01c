import { findComparison } from '../db/comparisons.ts';
import type { Db } from '../db/open.ts';
import { findRecord, readLog } from '../db/records.ts';
import { findStation } from '../db/stations.ts';
import { findTariff } from '../db/tariffs.ts';
import type { CaseRequest } from './api.ts';
import { existing } from './context.ts';
import { readCase } from './economics/caseFile.ts';
import { refuse } from './errors.ts';
import { publicHolidayDates } from './holidays.ts';
import { type CaseResult, makeCase } from './makeCase.ts';
import { readStation } from './station/readStation.ts';
import { readTariff } from './tariff/tariffFile.ts';

/**
 * The case for a change on a stored comparison (as it was then), or on a stored station, record and tariff.
 *
 * @throws InputError for an id unknown, a comparison without a tariff, a fault in the case
 */
export function caseOfStored(db: Db, request: CaseRequest): CaseResult {
  const terms = readCase(request.case, 'case.json');
  const files = filesOf(db, request);
  if (files.tariff === null) {
    refuse({
      code: 'missing_field',
      file: 'request',
      at: 'tariffId',
      found: 'no tariff',
      wanted: 'a tariff: a case is about money',
    });
  }
  return makeCase(
    {
      station: readStation(files.station, 'station.json'),
      log: readLog(db, files.recordId)!,
      tariff: readTariff(files.tariff, 'tariff.json', publicHolidayDates),
      without: files.without,
    },
    terms,
  );
}

function filesOf(
  db: Db,
  request: CaseRequest,
): { station: unknown; tariff: unknown; recordId: number; without: readonly string[] } {
  if ('comparisonId' in request) {
    const stored = existing((id) => findComparison(db, id), request.comparisonId, 'comparisonId', 'comparison');
    return {
      station: stored.stationFile,
      tariff: stored.tariffFile,
      recordId: stored.recordId,
      without: stored.choices.without,
    };
  }
  const station = existing((id) => findStation(db, id), request.stationId, 'stationId', 'station');
  const record = existing((id) => findRecord(db, id), request.recordId, 'recordId', 'record');
  const tariff = existing((id) => findTariff(db, id), request.tariffId, 'tariffId', 'tariff');
  return { station: station.file, tariff: tariff.file, recordId: record.id, without: request.without ?? [] };
}
