import {
  findComparison,
  findSameComparison,
  insertComparison,
  keepNewest,
  type StoredComparison,
} from '../db/comparisons.ts';
import type { Db } from '../db/open.ts';
import { findRecord, readLog } from '../db/records.ts';
import { findStation, rememberTariff } from '../db/stations.ts';
import { findTariff } from '../db/tariffs.ts';
import { existing } from './context.ts';
import { jsonDigest } from './digest.ts';
import { refuse } from './errors.ts';
import { publicHolidayDates } from './holidays.ts';
import { type Comparison, compareRules, dutyWithout, resultOf } from './staging/compare.ts';
import type { RuleId } from './staging/result.ts';
import { RunSets } from './staging/runSets.ts';
import { readStation } from './station/readStation.ts';
import { dutyPumpsAreEqual } from './station/station.ts';
import { readTariff } from './tariff/tariffFile.ts';

/** What to compare: ids as they were sent, rules and pumps by name. */
export interface StoredComparisonRequest {
  readonly stationId: string | number;
  readonly recordId: string | number;
  readonly tariffId?: string | number | null | undefined;
  /** A station file to take instead of the stored one. */
  readonly station?: Readonly<Record<string, unknown>> | undefined;
  readonly rules?: readonly string[] | undefined;
  readonly without?: readonly string[] | undefined;
}

/** Raised whenever the arithmetic changes, so that a stored result is not taken for one of today's. */
const EDITION = 2;

/** Comparisons stored for one station: as many as an afternoon of what-ifs. */
const KEPT_PER_STATION = 300;

/**
 * Compares staging rules on a stored station and record, and stores the result with the files it was made from. The
 * same files and choices give the comparison that is already there.
 *
 * @param nowMs  when, UTC [ms]
 * @throws       InputError for an id, rule or pump unknown, a record of another station, a tariff that does not fit
 */
export function compareStored(db: Db, request: StoredComparisonRequest, nowMs: number): StoredComparison {
  const station = existing((id) => findStation(db, id), request.stationId, 'stationId', 'station');
  const record = existing((id) => findRecord(db, id), request.recordId, 'recordId', 'record');
  const tariff =
    request.tariffId == null ? null : existing((id) => findTariff(db, id), request.tariffId, 'tariffId', 'tariff');
  if (record.stationId !== station.id) {
    refuse({
      code: 'not_found',
      file: 'request',
      at: 'recordId',
      found: `record ${record.id} of station ${record.stationId}`,
      wanted: `a record of station ${station.id}`,
    });
  }
  const choices = {
    rules: (request.rules as RuleId[] | undefined) ?? null,
    without: request.without ?? [],
    edition: EDITION,
  };
  const files = { stationFile: request.station ?? station.file, tariffFile: tariff?.file ?? null };
  const ids = { stationId: station.id, recordId: record.id, tariffId: tariff?.id ?? null };
  if (tariff) rememberTariff(db, station.id, tariff.id);
  const same = findSameComparison(db, { ...ids, ...files, choices });
  if (same) return same;
  const computed = compute(db, { recordId: record.id, choices, ...files });
  const result = resultOf(computed.comparison, {
    station: jsonDigest(files.stationFile),
    record: record.sha256,
    tariff: tariff && jsonDigest(tariff.file),
  });
  const id = db.transaction(() => {
    const made = insertComparison(db, { ...ids, ...files, choices, result, nowMs });
    keepNewest(db, station.id, KEPT_PER_STATION);
    return made;
  })();
  keep(db, id, computed);
  return findComparison(db, id)!;
}

/** A comparison with what its pictures need beside it. */
export interface Computed {
  readonly comparison: Comparison;
  /** Which pumps ran in each interval; null where they are alike and the count says it. */
  readonly sets: RunSets | null;
}

/** How many comparisons are kept in memory with all their columns: the one on the screen, and a few beside it. */
const KEPT = 4;
const keptOf = new WeakMap<Db, Map<number, Computed>>();

function keep(db: Db, id: number, computed: Computed): void {
  const kept = keptOf.get(db) ?? new Map<number, Computed>();
  keptOf.set(db, kept);
  kept.delete(id);
  kept.set(id, computed);
  for (const oldest of kept.keys()) if (kept.size > KEPT) kept.delete(oldest);
}

/**
 * Stored comparisons worked out once more from the files they were made from, with the columns that pictures need. The
 * last few are kept, those just made among them, so that the pictures of one comparison cost no computation.
 */
export function recomputer(db: Db): (stored: StoredComparison) => Computed {
  return (stored) => {
    const computed = keptOf.get(db)?.get(stored.id) ?? compute(db, stored);
    keep(db, stored.id, computed);
    return computed;
  };
}

function compute(
  db: Db,
  {
    recordId,
    stationFile,
    tariffFile,
    choices,
  }: Pick<StoredComparison, 'recordId' | 'stationFile' | 'tariffFile' | 'choices'>,
): Computed {
  const station = readStation(stationFile, 'station.json');
  const log = readLog(db, recordId)!;
  const sets = dutyPumpsAreEqual(dutyWithout(station, choices.without)) ? null : new RunSets(log.startMs.length);
  const comparison = compareRules({
    station,
    log,
    tariff: tariffFile === null ? null : readTariff(tariffFile, 'tariff.json', publicHolidayDates),
    rules: choices.rules ?? undefined,
    without: choices.without,
    onAction: sets ? (rule, i, action) => sets.add(rule, i, action) : undefined,
  });
  return { comparison, sets };
}
