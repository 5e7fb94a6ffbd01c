/**
 * How readings are stored, measured: one row per interval, or blocks of 4096 intervals per channel (what db/records.ts
 * does). A year of minutes with flow, static head and power, on a file of its own; medians of five.
 *
 *     node scripts/run.mjs bench/storage
 */
import { mkdtempSync, rmSync, statSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { migrate } from '../../db/migrate.ts';
import { type Db, openDatabase } from '../../db/open.ts';
import { insertRecord, readLog } from '../../db/records.ts';
import { insertStation } from '../../db/stations.ts';
import type { Log, QualityReport } from '../../server/ingest/log.ts';
import { DAY_MS, isoUtc, MINUTE_MS } from '../../server/time.ts';

const INTERVALS = 525_600;
const START = Date.UTC(2025, 0, 1);
const WEEK = { fromMs: START + 180 * DAY_MS, toMs: START + 187 * DAY_MS };
const ROUNDS = 5;

interface Layout {
  readonly name: string;
  prepare(db: Db): void;
  write(db: Db, log: Log): number;
  read(db: Db, id: number, range?: { fromMs: number; toMs: number }): Log | null;
}

const REPORT: QualityReport = {
  from: isoUtc(START),
  to: isoUtc(START + INTERVALS * MINUTE_MS),
  intervals: INTERVALS,
  stepSeconds: 60,
  hours: INTERVALS / 60,
  gapHours: 0,
  gaps: [],
  minFlowM3s: null,
  maxFlowM3s: null,
  meanFlowM3s: null,
  volumeM3: null,
  notes: [],
};

const BLOCKS: Layout = {
  name: 'blocks',
  prepare(db) {
    migrate(db);
    insertStation(db, { name: 'bench', file: {}, nowMs: START });
  },
  write(db, log) {
    const record = { stationId: 1, name: 'year', fileName: 'year.csv', sha256: '0'.repeat(64), nowMs: START };
    return insertRecord(db, { ...record, log, report: REPORT });
  },
  read: readLog,
};

let rowRecords = 0;

const ROWS: Layout = {
  name: 'rows',
  prepare(db) {
    db.exec(`CREATE TABLE reading (record_id INTEGER NOT NULL, start_ms INTEGER NOT NULL, seconds REAL NOT NULL,
      flow REAL, static_head REAL, power REAL, PRIMARY KEY (record_id, start_ms)) STRICT, WITHOUT ROWID`);
  },
  write(db, log) {
    const id = ++rowRecords;
    const insert = db.prepare('INSERT INTO reading VALUES (?, ?, ?, ?, ?, ?)');
    const orNull = (value: number): number | null => (Number.isNaN(value) ? null : value);
    db.transaction(() => {
      for (let i = 0; i < log.startMs.length; i++) {
        const values = [log.flow![i]!, log.staticHead![i]!, log.power![i]!].map(orNull);
        insert.run(id, log.startMs[i], log.seconds[i], ...values);
      }
    })();
    return id;
  },
  read(db, id, range = { fromMs: 0, toMs: Number.MAX_SAFE_INTEGER }) {
    const rows = db
      .prepare(
        'SELECT start_ms, seconds, flow, static_head, power FROM reading WHERE record_id = ? AND start_ms >= ? AND start_ms < ?',
      )
      .raw()
      .all(id, range.fromMs, range.toMs) as (number | null)[][];
    const column = (at: number): Float64Array => Float64Array.from(rows, (row) => row[at] ?? Number.NaN);
    const [startMs, seconds, flow, staticHead, power] = [0, 1, 2, 3, 4].map(column) as [
      Float64Array,
      Float64Array,
      Float64Array,
      Float64Array,
      Float64Array,
    ];
    return { startMs, seconds, flow, level: null, staticHead, power, pumpsOn: null, pumps: [] };
  },
};

function aYearOfMinutes(): Log {
  const column = (value: (i: number) => number): Float64Array =>
    Float64Array.from({ length: INTERVALS }, (_, i) => value(i));
  return {
    startMs: column((i) => START + i * MINUTE_MS),
    seconds: column(() => 60),
    flow: column((i) => (i % 5000 === 0 ? Number.NaN : 0.05 + 0.02 * Math.sin(i / 229))),
    level: null,
    staticHead: column((i) => 14 + Math.sin(i / 700)),
    power: column((i) => 22_000 + 5000 * Math.sin(i / 229)),
    pumpsOn: null,
    pumps: [],
  };
}

function medianMs(rounds: number, task: () => void): number {
  const times = Array.from({ length: rounds }, () => {
    const before = performance.now();
    task();
    return performance.now() - before;
  }).sort((a, b) => a - b);
  return times[Math.floor(rounds / 2)]!;
}

function measure(layout: Layout, log: Log): Record<string, string | number> {
  const folder = mkdtempSync(join(tmpdir(), 'nth-pump-bench-'));
  try {
    const path = join(folder, 'bench.sqlite');
    const db = openDatabase(path);
    layout.prepare(db);
    const id = layout.write(db, log);
    db.pragma('wal_checkpoint(TRUNCATE)');
    const megabytes = statSync(path).size / 1e6;
    const same = (read: Log | null): void => {
      const wrong = read?.flow?.findIndex((value, i) => !Object.is(value, log.flow![i]));
      if (read?.flow?.length !== INTERVALS || wrong !== -1)
        throw new Error(`${layout.name}: read is not what was written`);
    };
    same(layout.read(db, id));
    const result = {
      layout: layout.name,
      importMs: Math.round(medianMs(ROUNDS, () => layout.write(db, log))),
      wholeReadMs: Math.round(medianMs(ROUNDS, () => layout.read(db, id)) * 10) / 10,
      weekReadMs: Math.round(medianMs(ROUNDS, () => layout.read(db, id, WEEK)) * 100) / 100,
      megabytes: Math.round(megabytes * 10) / 10,
    };
    db.close();
    return result;
  } finally {
    rmSync(folder, { recursive: true });
  }
}

const log = aYearOfMinutes();
console.table([ROWS, BLOCKS].map((layout) => measure(layout, log)));
