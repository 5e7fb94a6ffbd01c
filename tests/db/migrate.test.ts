import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { MigrationError, migrate } from '../../db/migrate.ts';
import { type Db, openDatabase } from '../../db/open.ts';

let folder: string;
let db: Db;

beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'nth-pump-migrations-'));
  db = openDatabase(join(folder, 'test.sqlite'));
});

afterEach(() => {
  db.close();
  rmSync(folder, { recursive: true });
});

const put = (name: string, sql: string): void => writeFileSync(join(folder, name), sql);
const tables = (): unknown[] =>
  db
    .prepare("SELECT name FROM sqlite_schema WHERE type = 'table' AND name NOT LIKE 'sqlite_%' ORDER BY name")
    .pluck()
    .all();
const recorded = (): unknown[] => db.prepare('SELECT name FROM migration ORDER BY number').pluck().all();

describe('migrate', () => {
  it('applies what is new, in order, once', () => {
    put('0001_a.sql', 'CREATE TABLE a (x INTEGER) STRICT;');
    put('0002_b.sql', 'ALTER TABLE a ADD COLUMN y TEXT;');
    expect(migrate(db, folder)).toEqual(['0001_a.sql', '0002_b.sql']);
    expect(migrate(db, folder)).toEqual([]);
    put('0003_c.sql', 'CREATE TABLE c (x INTEGER) STRICT;');
    expect(migrate(db, folder)).toEqual(['0003_c.sql']);
    expect(tables()).toEqual(['a', 'c', 'migration']);
  });

  it('leaves nothing of a file that fails half way, and keeps those before it', () => {
    put('0001_a.sql', 'CREATE TABLE a (x INTEGER) STRICT;');
    put('0002_b.sql', 'CREATE TABLE b (x INTEGER) STRICT; INSERT INTO b VALUES (1); INSERT INTO b VALUES (nothing);');
    expect(() => migrate(db, folder)).toThrow(/nothing/);
    expect(tables()).toEqual(['a', 'migration']);
    expect(recorded()).toEqual(['0001_a.sql']);
    put('0002_b.sql', 'CREATE TABLE b (x INTEGER) STRICT;');
    expect(migrate(db, folder)).toEqual(['0002_b.sql']);
  });

  it.each([
    [
      'a file whose content changed',
      { '0001_a.sql': 'CREATE TABLE other (x TEXT) STRICT;' },
      /0001_a\.sql is not what was applied/,
    ],
    [
      'a file put in between',
      { '0002_a2.sql': 'SELECT 1;' },
      /0002_b\.sql breaks the numbering of migrations: number 0003/,
    ],
    ['a number left out', { '0004_d.sql': 'SELECT 1;' }, /0004_d\.sql breaks the numbering of migrations: number 0003/],
  ])('stops at %s and changes nothing', (_, changed, sentence) => {
    put('0001_a.sql', 'CREATE TABLE a (x INTEGER) STRICT;');
    put('0002_b.sql', 'CREATE TABLE b (x INTEGER) STRICT;');
    migrate(db, folder);
    for (const [name, sql] of Object.entries(changed)) put(name, sql);
    expect(() => migrate(db, folder)).toThrow(sentence);
    expect(() => migrate(db, folder)).toThrow(MigrationError);
    expect(tables()).toEqual(['a', 'b', 'migration']);
  });

  it('stops where another file stands in the place of one applied, or a newer one was applied', () => {
    put('0001_a.sql', 'CREATE TABLE a (x INTEGER) STRICT;');
    put('0002_b.sql', 'CREATE TABLE b (x INTEGER) STRICT;');
    migrate(db, folder);
    rmSync(join(folder, '0002_b.sql'));
    expect(() => migrate(db, folder)).toThrow(/has 0002_b\.sql, which this version of the program does not know/);
    put('0002_other.sql', 'SELECT 1;');
    expect(() => migrate(db, folder)).toThrow(/0002_other\.sql in its place/);
  });

  it('takes turned line ends for the same file', () => {
    put('0001_a.sql', 'CREATE TABLE a (\n x INTEGER\n) STRICT;\n');
    migrate(db, folder);
    put('0001_a.sql', 'CREATE TABLE a (\r\n x INTEGER\r\n) STRICT;\r\n');
    expect(migrate(db, folder)).toEqual([]);
  });
});

describe("the program's own migrations", () => {
  it('give an empty database of STRICT tables with foreign keys on and a write-ahead log', () => {
    migrate(db);
    const loose = db.prepare(
      "SELECT name FROM pragma_table_list WHERE schema = 'main' AND strict = 0 AND name NOT LIKE 'sqlite_%'",
    );
    expect(loose.pluck().all()).toEqual([]);
    expect(tables()).toEqual(['comparison', 'migration', 'reading_block', 'record', 'station', 'tariff']);
    for (const table of ['comparison', 'reading_block', 'record', 'station', 'tariff']) {
      expect(db.prepare(`SELECT count(*) FROM ${table}`).pluck().get()).toBe(0);
    }
    expect(db.pragma('foreign_keys', { simple: true })).toBe(1);
    expect(db.pragma('journal_mode', { simple: true })).toBe('wal');
  });
});
