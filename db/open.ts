import { mkdirSync } from 'node:fs';
import { dirname } from 'node:path';
import BetterSqlite3 from 'better-sqlite3';

/** An open connection. Only the files of this folder speak SQL to it. */
export type Db = BetterSqlite3.Database;

/**
 * Opens (or creates, with its folder) a database file; `:memory:` gives one that lives as long as the process.
 * Foreign keys are enforced, readers do not wait for a writer (WAL), and a second writer waits up to five seconds.
 */
export function openDatabase(path: string): Db {
  if (path !== ':memory:') mkdirSync(dirname(path), { recursive: true });
  const db = new BetterSqlite3(path);
  db.pragma('journal_mode = WAL');
  db.pragma('foreign_keys = ON');
  db.pragma('busy_timeout = 5000');
  return db;
}
