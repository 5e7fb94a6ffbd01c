import type { Db } from './open.ts';
import type { NewFile } from './stations.ts';

/** A tariff as stored: the file its owner wrote, as parsed JSON. */
export interface StoredTariff {
  readonly id: number;
  readonly name: string;
  readonly demo: boolean;
  readonly file: Record<string, unknown>;
}

/** All tariffs, the demo last, otherwise in the order they came. */
export function listTariffs(db: Db): StoredTariff[] {
  const ids = db.prepare('SELECT id FROM tariff ORDER BY demo, id').pluck().all() as number[];
  return ids.flatMap((id) => findTariff(db, id) ?? []);
}

/** Stores a tariff and returns its id. */
export function insertTariff(db: Db, { name, file, demo = false, nowMs }: NewFile): number {
  const { lastInsertRowid } = db
    .prepare('INSERT INTO tariff (name, file, demo, created_ms, updated_ms) VALUES (?, ?, ?, ?, ?)')
    .run(name, JSON.stringify(file), demo ? 1 : 0, nowMs, nowMs);
  return Number(lastInsertRowid);
}

/** A tariff by id, or null. */
export function findTariff(db: Db, id: number): StoredTariff | null {
  const row = db.prepare('SELECT id, name, demo, file FROM tariff WHERE id = ?').get(id) as
    | { id: number; name: string; demo: number; file: string }
    | undefined;
  return row ? { ...row, demo: row.demo === 1, file: JSON.parse(row.file) } : null;
}

/** Replaces the file of a tariff; whether there was one. Comparisons already made keep the tariff they were made with. */
export function replaceTariff(db: Db, id: number, { name, file, nowMs }: NewFile): boolean {
  return (
    db
      .prepare('UPDATE tariff SET name = ?, file = ?, updated_ms = ? WHERE id = ?')
      .run(name, JSON.stringify(file), nowMs, id).changes > 0
  );
}

/** Removes a tariff; whether there was one. Comparisons made with it stay. */
export function deleteTariff(db: Db, id: number): boolean {
  return db.prepare('DELETE FROM tariff WHERE id = ?').run(id).changes > 0;
}
