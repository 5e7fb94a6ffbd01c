import { spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { migrate } from '../../db/migrate.ts';
import { type Db, openDatabase } from '../../db/open.ts';
import { insertStation } from '../../db/stations.ts';
import { importRecord } from '../../server/importRecord.ts';
import { flowsOf, recordCsv, START_MS, stationFile, TARIFF_FILE, YEAR_OF_MINUTES } from './made.ts';
import { type Measured, measured, shortest } from './measure.ts';

/** What the measured commands need on disk. */
export interface BenchFiles {
  readonly folder: string;
  readonly station: string;
  readonly record: string;
  readonly tariff: string;
}

/** Writes the files of a year of minutes for the time of a task, and removes them. */
export function withFiles<T>(task: (files: BenchFiles) => T): T {
  const folder = mkdtempSync(join(tmpdir(), 'nth-pump-bench-'));
  const at = (name: string) => join(folder, name);
  const files = { folder, station: at('station.json'), record: at('record.csv'), tariff: at('tariff.json') };
  try {
    writeFileSync(files.station, JSON.stringify(stationFile(6, 'parabola')));
    writeFileSync(files.record, recordCsv(flowsOf(YEAR_OF_MINUTES, 6)));
    writeFileSync(files.tariff, JSON.stringify(TARIFF_FILE));
    return task(files);
  } finally {
    rmSync(folder, { recursive: true });
  }
}

/** Import of a year of minutes against a bare loop into the same schema, one into plain rows, and the sqlite3 shell. */
export function benchImport(files: BenchFiles, rounds: number, shell: number | null): Measured[] {
  const db = openDatabase(join(files.folder, 'ours.sqlite'));
  migrate(db);
  const file = stationFile(6, 'parabola');
  const stored = { id: insertStation(db, { name: 'bench', file, nowMs: START_MS }), name: 'bench', demo: false, file };
  const ours = shortest(rounds, () => {
    const record = { fileName: 'record.csv', data: readFileSync(files.record) };
    importRecord(db, stored, record, START_MS);
  });
  const sameSchema = shortest(rounds, () => bareBlocks(db, files.record));
  const rows = openDatabase(join(files.folder, 'rows.sqlite'));
  rows.exec('CREATE TABLE reading (start_ms INTEGER PRIMARY KEY, flow_m3s REAL) STRICT');
  const plainRows = shortest(rounds, () => bareRows(rows, files.record));
  db.close();
  rows.close();
  const what = 'import, a year of minutes';
  return [
    measured(what, ours, { what: 'bare better-sqlite3 loop, same schema', milliseconds: sameSchema, aim: 1.5 }),
    measured(what, ours, { what: 'bare better-sqlite3 loop, a row each', milliseconds: plainRows, aim: 1.5 }),
    ...(shell === null
      ? []
      : [measured(what, ours, { what: "sqlite3 shell's .import", milliseconds: shell, aim: null })]),
  ];
}

/** Time of the shell's own import of the file, process and all; null where there is no shell. */
export function shellImport(files: BenchFiles, rounds: number): number | null {
  if (spawnSync('sqlite3', ['-version']).status !== 0) return null;
  let run = 0;
  return shortest(rounds, () => {
    const database = join(files.folder, `shell-${++run}.sqlite`);
    const create = 'CREATE TABLE reading (time TEXT PRIMARY KEY, flow REAL)';
    const { status, stderr } = spawnSync('sqlite3', [
      database,
      create,
      '.mode csv',
      `.import --skip 1 ${files.record} reading`,
    ]);
    if (status !== 0) throw new Error(`sqlite3: ${stderr}`);
  });
}

/** Reads without a question asked: split, Date.parse, Number. */
function bareColumns(path: string): { startMs: Float64Array; flow: Float64Array } {
  const lines = readFileSync(path, 'utf8').split('\n');
  const n = lines.length - 2;
  const startMs = new Float64Array(n);
  const flow = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    const [time, value] = lines[i + 1]!.split(',');
    startMs[i] = Date.parse(time!);
    flow[i] = Number(value);
  }
  return { startMs, flow };
}

function bareBlocks(db: Db, path: string): void {
  const { startMs, flow } = bareColumns(path);
  const seconds = new Float64Array(flow.length).fill(60);
  db.transaction(() => {
    const { lastInsertRowid } = db
      .prepare(
        `INSERT INTO record (station_id, name, file_name, sha256, report, pumps, intervals, from_ms, to_ms, created_ms)
         VALUES (1, 'bare', 'bare.csv', ?, '{}', '[]', ?, ?, ?, 0)`,
      )
      .run('0'.repeat(64), flow.length, startMs[0], startMs.at(-1)! + 60_000);
    const insert = db.prepare('INSERT INTO reading_block VALUES (?, ?, 0, ?, ?, ?, ?)');
    for (const [channel, samples] of Object.entries({ start_ms: startMs, seconds, flow_m3s: flow })) {
      for (let first = 0; first < samples.length; first += 4096) {
        const block = samples.subarray(first, first + 4096);
        const end = startMs[first + block.length - 1]! + 60_000;
        const bytes = Buffer.from(block.buffer, block.byteOffset, block.byteLength);
        insert.run(lastInsertRowid, channel, startMs[first], end, block.length, bytes);
      }
    }
  })();
}

function bareRows(db: Db, path: string): void {
  db.exec('DELETE FROM reading');
  const { startMs, flow } = bareColumns(path);
  const insert = db.prepare('INSERT INTO reading VALUES (?, ?)');
  db.transaction(() => {
    for (let i = 0; i < flow.length; i++) insert.run(startMs[i], flow[i]);
  })();
}
