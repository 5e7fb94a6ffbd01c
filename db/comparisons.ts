import type { ComparisonResult, RuleId } from '../server/staging/result.ts';
import type { Db } from './open.ts';

/** What was asked beside station, record and tariff. */
export interface Choices {
  readonly rules: readonly RuleId[] | null;
  /** Names of pumps taken out. */
  readonly without: readonly string[];
  /** Which arithmetic made the result: two of one edition agree where their inputs do. */
  readonly edition: number;
}

export interface NewComparison {
  readonly stationId: number;
  readonly recordId: number;
  readonly tariffId: number | null;
  /** Station and tariff file as they were. */
  readonly stationFile: unknown;
  readonly tariffFile: unknown;
  readonly choices: Choices;
  readonly result: ComparisonResult;
  readonly nowMs: number;
}

export interface StoredComparison extends Omit<NewComparison, 'nowMs'> {
  readonly id: number;
  readonly createdMs: number;
}

/** One line of the list of comparisons. */
export interface ComparisonEntry {
  readonly id: number;
  readonly stationId: number;
  readonly recordId: number;
  readonly tariffId: number | null;
  readonly createdMs: number;
}

/** Stores a comparison and returns its id. */
export function insertComparison(db: Db, made: NewComparison): number {
  const { lastInsertRowid } = db
    .prepare(
      `INSERT INTO comparison (station_id, record_id, tariff_id, station_file, tariff_file, choices, result, created_ms)
       VALUES (?, ?, ?, ?, ?, ?, ?, ?)`,
    )
    .run(
      made.stationId,
      made.recordId,
      made.tariffId,
      JSON.stringify(made.stationFile),
      made.tariffFile === null ? null : JSON.stringify(made.tariffFile),
      JSON.stringify(made.choices),
      JSON.stringify(made.result),
      made.nowMs,
    );
  return Number(lastInsertRowid);
}

/** The newest comparison made from the very same files and choices, or null. */
export function findSameComparison(db: Db, asked: Omit<NewComparison, 'result' | 'nowMs'>): StoredComparison | null {
  const row = db
    .prepare(
      `SELECT id FROM comparison
       WHERE station_id = ? AND record_id = ? AND tariff_id IS ? AND station_file = ? AND tariff_file IS ? AND choices = ?
       ORDER BY id DESC LIMIT 1`,
    )
    .get(
      asked.stationId,
      asked.recordId,
      asked.tariffId,
      JSON.stringify(asked.stationFile),
      asked.tariffFile === null ? null : JSON.stringify(asked.tariffFile),
      JSON.stringify(asked.choices),
    ) as { id: number } | undefined;
  return row ? findComparison(db, row.id) : null;
}

/** Removes all but the newest comparisons of a station; what-ifs would else pile up with every touch of a number. */
export function keepNewest(db: Db, stationId: number, kept: number): void {
  db.prepare(
    `DELETE FROM comparison WHERE station_id = @stationId AND id NOT IN
       (SELECT id FROM comparison WHERE station_id = @stationId ORDER BY id DESC LIMIT @kept)`,
  ).run({ stationId, kept });
}

/** A comparison by id, or null. */
export function findComparison(db: Db, id: number): StoredComparison | null {
  const row = db
    .prepare(
      `SELECT id, station_id AS stationId, record_id AS recordId, tariff_id AS tariffId, station_file AS stationFile,
              tariff_file AS tariffFile, choices, result, created_ms AS createdMs
       FROM comparison WHERE id = ?`,
    )
    .get(id) as
    | (ComparisonEntry & Record<'stationFile' | 'choices' | 'result', string> & { tariffFile: string | null })
    | undefined;
  if (!row) return null;
  return {
    ...row,
    stationFile: JSON.parse(row.stationFile),
    tariffFile: row.tariffFile === null ? null : JSON.parse(row.tariffFile),
    choices: JSON.parse(row.choices),
    result: JSON.parse(row.result),
  };
}

/** The comparisons made, the newest first; of one station, or of all. */
export function listComparisons(db: Db, stationId: number | null): ComparisonEntry[] {
  return db
    .prepare(
      `SELECT id, station_id AS stationId, record_id AS recordId, tariff_id AS tariffId, created_ms AS createdMs
       FROM comparison WHERE @stationId IS NULL OR station_id = @stationId ORDER BY id DESC`,
    )
    .all({ stationId }) as ComparisonEntry[];
}
