import type { Db } from './open.ts';

/** A station as stored: the file its owner wrote, as parsed JSON. */
export interface StoredStation {
  readonly id: number;
  readonly name: string;
  readonly demo: boolean;
  readonly file: Record<string, unknown>;
}

/** One line of the list of stations. */
export interface StationEntry {
  readonly id: number;
  readonly name: string;
  readonly demo: boolean;
  /** How many records it has. */
  readonly records: number;
  /** The tariff it was last compared under. */
  readonly tariffId: number | null;
}

export interface NewFile {
  readonly name: string;
  readonly file: unknown;
  readonly demo?: boolean;
  /** When it is stored, UTC [ms]. */
  readonly nowMs: number;
}

/** All stations, the demo last, otherwise in the order they came. */
export function listStations(db: Db): StationEntry[] {
  const rows = db
    .prepare(
      `SELECT id, name, demo, tariff_id AS tariffId,
              (SELECT count(*) FROM record WHERE record.station_id = station.id) AS records
       FROM station ORDER BY demo, id`,
    )
    .all() as (Omit<StationEntry, 'demo'> & { demo: number })[];
  return rows.map((row) => ({ ...row, demo: row.demo === 1 }));
}

/** Stores a station and returns its id. */
export function insertStation(db: Db, { name, file, demo = false, nowMs }: NewFile): number {
  const { lastInsertRowid } = db
    .prepare('INSERT INTO station (name, file, demo, created_ms, updated_ms) VALUES (?, ?, ?, ?, ?)')
    .run(name, JSON.stringify(file), demo ? 1 : 0, nowMs, nowMs);
  return Number(lastInsertRowid);
}

/** A station by id, or null. */
export function findStation(db: Db, id: number): StoredStation | null {
  const row = db.prepare('SELECT id, name, demo, file FROM station WHERE id = ?').get(id) as
    | { id: number; name: string; demo: number; file: string }
    | undefined;
  return row ? { ...row, demo: row.demo === 1, file: JSON.parse(row.file) } : null;
}

/** The stations that bear a name; names need not differ. */
export function stationsNamed(db: Db, name: string): StoredStation[] {
  const ids = db.prepare('SELECT id FROM station WHERE name = ? ORDER BY id').pluck().all(name) as number[];
  return ids.flatMap((id) => findStation(db, id) ?? []);
}

/** Replaces the file of a station; whether there was one. Its records and comparisons stay as they are. */
export function replaceStation(db: Db, id: number, { name, file, nowMs }: NewFile): boolean {
  return (
    db
      .prepare('UPDATE station SET name = ?, file = ?, updated_ms = ? WHERE id = ?')
      .run(name, JSON.stringify(file), nowMs, id).changes > 0
  );
}

/** Removes a station with its records and comparisons; whether there was one. */
export function deleteStation(db: Db, id: number): boolean {
  return db.prepare('DELETE FROM station WHERE id = ?').run(id).changes > 0;
}

/** Remembers the tariff a station was compared under. */
export function rememberTariff(db: Db, stationId: number, tariffId: number): void {
  db.prepare('UPDATE station SET tariff_id = ? WHERE id = ?').run(tariffId, stationId);
}

/** Whether the database holds nothing of anybody's: no station and no tariff. */
export function isEmpty(db: Db): boolean {
  return (
    db.prepare('SELECT NOT EXISTS (SELECT 1 FROM station) AND NOT EXISTS (SELECT 1 FROM tariff)').pluck().get() === 1
  );
}
