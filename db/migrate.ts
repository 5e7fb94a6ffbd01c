import { createHash } from 'node:crypto';
import { readdirSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import type { Db } from './open.ts';

/** The migrations of this checkout. */
const MIGRATIONS = fileURLToPath(new URL('../migrations', import.meta.url));

/** The database and the migrations on disk do not fit together; the message says how, for a person. */
export class MigrationError extends Error {
  override readonly name = 'MigrationError';
}

interface Migration {
  readonly number: number;
  readonly name: string;
  readonly sha256: string;
  readonly sql: string;
}

/**
 * Brings a database up to the numbered files of a folder. Each file and the record that it was applied are one
 * transaction: a file that fails leaves nothing behind, and those before it stay.
 *
 * @returns names of the files applied now
 * @throws  MigrationError where the files are not, in order and content, those applied before; nothing is changed then
 */
export function migrate(db: Db, folder: string = MIGRATIONS): string[] {
  const onDisk = migrationsIn(folder);
  db.exec(`CREATE TABLE IF NOT EXISTS migration (
    number     INTEGER PRIMARY KEY,
    name       TEXT    NOT NULL,
    sha256     TEXT    NOT NULL,
    applied_at TEXT    NOT NULL DEFAULT (strftime('%Y-%m-%dT%H:%M:%SZ', 'now'))
  ) STRICT`);
  const applied: string[] = [];
  for (const migration of onDisk) {
    // Asked again under the write lock each time: two processes may start on one database.
    const apply = db.transaction(() => {
      if (requireSameHistory(db, onDisk) >= migration.number) return;
      db.exec(migration.sql);
      db.prepare('INSERT INTO migration (number, name, sha256) VALUES (?, ?, ?)').run(
        migration.number,
        migration.name,
        migration.sha256,
      );
      applied.push(migration.name);
    });
    apply.immediate();
  }
  return applied;
}

/** The number of the last migration applied, after checking that all of them are those on disk. */
function requireSameHistory(db: Db, onDisk: readonly Migration[]): number {
  const applied = db.prepare('SELECT number, name, sha256 FROM migration ORDER BY number').all() as Omit<
    Migration,
    'sql'
  >[];
  for (const [index, before] of applied.entries()) {
    const now = onDisk[index];
    if (now === undefined) {
      throw new MigrationError(
        `The database has ${before.name}, which this version of the program does not know. ` +
          'It was last used by a newer version: use that one, or another database file (NTH_PUMP_DB).',
      );
    }
    if (now.name !== before.name) {
      throw new MigrationError(
        `The database was brought up by ${before.name}, but the migrations folder has ${now.name} in its place. ` +
          'Migrations keep their order: give the new one the next free number.',
      );
    }
    if (now.sha256 !== before.sha256) {
      throw new MigrationError(
        `${now.name} is not what was applied to the database: its content has changed since. ` +
          'Put the file back as it was, and make the change in a migration with the next number.',
      );
    }
  }
  return applied.length;
}

function migrationsIn(folder: string): Migration[] {
  const names = readdirSync(folder)
    .filter((name) => name.endsWith('.sql'))
    .sort();
  return names.map((name, index) => {
    const number = Number(/^(\d{4})_[a-z0-9_]+\.sql$/.exec(name)?.[1]);
    if (number !== index + 1) {
      throw new MigrationError(
        `${name} breaks the numbering of migrations: number ${String(index + 1).padStart(4, '0')} is wanted here, ` +
          'as in 0001_station.sql, none left out and none twice.',
      );
    }
    // Line ends are not content: a checkout may have turned them.
    const sql = readFileSync(`${folder}/${name}`, 'utf8').replaceAll('\r\n', '\n');
    return { number, name, sha256: createHash('sha256').update(sql).digest('hex'), sql };
  });
}
