import type { Channel, Log, PumpChannels, QualityReport } from '../server/ingest/log.ts';
import type { Db } from './open.ts';

/** Intervals to a block: a day and a half of minutes in 32 kB, so that a week reads ten blocks and a year 130. */
const BLOCK_INTERVALS = 4096;

export interface NewRecord {
  readonly stationId: number;
  readonly name: string;
  readonly fileName: string;
  /** Digest of the file's bytes, hexadecimal. */
  readonly sha256: string;
  readonly log: Log;
  readonly report: QualityReport;
  readonly nowMs: number;
}

/** A record as stored, without its readings: {@link readLog} has those. */
export interface StoredRecord {
  readonly id: number;
  readonly stationId: number;
  readonly name: string;
  readonly fileName: string;
  readonly sha256: string;
  readonly report: QualityReport;
  readonly createdMs: number;
}

/** Stores a record with all its readings in one transaction, and returns its id. */
export function insertRecord(db: Db, record: NewRecord): number {
  return db.transaction(() => {
    const { log } = record;
    const intervals = log.startMs.length;
    const { lastInsertRowid } = db
      .prepare(
        `INSERT INTO record (station_id, name, file_name, sha256, report, pumps, intervals, from_ms, to_ms, created_ms)
         VALUES (?, ?, ?, ?, ?, ?, ?, ?, ?, ?)`,
      )
      .run(
        record.stationId,
        record.name,
        record.fileName,
        record.sha256,
        JSON.stringify(record.report),
        JSON.stringify(log.pumps.map((pump) => pump.name)),
        intervals,
        log.startMs[0]!,
        endMs(log, intervals - 1),
        record.nowMs,
      );
    const id = Number(lastInsertRowid);
    insertBlocks(db, id, log);
    return id;
  })();
}

function insertBlocks(db: Db, recordId: number, log: Log): void {
  const insert = db.prepare(
    `INSERT INTO reading_block (record_id, channel, pump, from_ms, to_ms, intervals, samples)
     VALUES (?, ?, ?, ?, ?, ?, ?)`,
  );
  for (const { channel, pump, samples } of channelsOf(log)) {
    for (let first = 0; first < samples.length; first += BLOCK_INTERVALS) {
      const block = samples.subarray(first, first + BLOCK_INTERVALS);
      const last = first + block.length - 1;
      const bytes = Buffer.from(block.buffer, block.byteOffset, block.byteLength);
      insert.run(recordId, channel, pump, log.startMs[first]!, endMs(log, last), block.length, bytes);
    }
  }
}

function endMs(log: Log, index: number): number {
  return Math.round(log.startMs[index]! + log.seconds[index]! * 1000);
}

function* channelsOf(log: Log): Generator<{ channel: string; pump: number; samples: Channel }> {
  const ofStation = {
    start_ms: log.startMs,
    seconds: log.seconds,
    flow_m3s: log.flow,
    level_m: log.level,
    static_head_m: log.staticHead,
    power_w: log.power,
    pumps_on: log.pumpsOn,
  };
  for (const [channel, samples] of Object.entries(ofStation)) if (samples) yield { channel, pump: 0, samples };
  for (const [index, { on, speed, power }] of log.pumps.entries()) {
    for (const [channel, samples] of Object.entries({ on, speed, power_w: power })) {
      if (samples) yield { channel, pump: index + 1, samples };
    }
  }
}

const RECORD_COLUMNS = `id, station_id AS stationId, name, file_name AS fileName, sha256, report, created_ms AS createdMs`;

type RecordRow = Omit<StoredRecord, 'report'> & { report: string };

const fromRow = (row: RecordRow): StoredRecord => ({ ...row, report: JSON.parse(row.report) });

/** The records of a station in the order they came. */
export function listRecords(db: Db, stationId: number): StoredRecord[] {
  const rows = db.prepare(`SELECT ${RECORD_COLUMNS} FROM record WHERE station_id = ? ORDER BY id`).all(stationId);
  return (rows as RecordRow[]).map(fromRow);
}

/** A record by id, or null. */
export function findRecord(db: Db, id: number): StoredRecord | null {
  const row = db.prepare(`SELECT ${RECORD_COLUMNS} FROM record WHERE id = ?`).get(id) as RecordRow | undefined;
  return row ? fromRow(row) : null;
}

/** Removes a record with its readings and comparisons; whether there was one. */
export function deleteRecord(db: Db, id: number): boolean {
  return db.prepare('DELETE FROM record WHERE id = ?').run(id).changes > 0;
}

/**
 * The readings of a record, whole or those intervals that touch fromMs ≤ t < toMs.
 *
 * @returns null where there is no such record
 */
export function readLog(
  db: Db,
  recordId: number,
  range?: { readonly fromMs: number; readonly toMs: number },
): Log | null {
  const names = db.prepare('SELECT pumps FROM record WHERE id = ?').pluck().get(recordId) as string | undefined;
  if (names === undefined) return null;
  const fromMs = range?.fromMs ?? Number.MIN_SAFE_INTEGER;
  const toMs = range?.toMs ?? Number.MAX_SAFE_INTEGER;
  const blocks = db
    .prepare(
      `SELECT channel, pump, samples FROM reading_block
       WHERE record_id = ? AND to_ms > ? AND from_ms < ? ORDER BY channel, pump, from_ms`,
    )
    .all(recordId, fromMs, toMs) as { channel: string; pump: number; samples: Buffer }[];
  const joined = joinBlocks(blocks);
  const startMs = joined.get('start_ms 0') ?? new Float64Array();
  const seconds = joined.get('seconds 0') ?? new Float64Array();

  // Blocks are wider than the range asked for: cut the ends.
  let first = 0;
  let end = startMs.length;
  while (first < end && startMs[first]! + seconds[first]! * 1000 <= fromMs) first++;
  while (end > first && startMs[end - 1]! >= toMs) end--;
  const channel = (name: string, pump: number): Channel | null =>
    joined.get(`${name} ${pump}`)?.subarray(first, end) ?? null;

  return {
    startMs: startMs.subarray(first, end),
    seconds: seconds.subarray(first, end),
    flow: channel('flow_m3s', 0),
    level: channel('level_m', 0),
    staticHead: channel('static_head_m', 0),
    power: channel('power_w', 0),
    pumpsOn: channel('pumps_on', 0),
    pumps: (JSON.parse(names) as string[]).map(
      (name, index): PumpChannels => ({
        name,
        on: channel('on', index + 1),
        speed: channel('speed', index + 1),
        power: channel('power_w', index + 1),
      }),
    ),
  };
}

function joinBlocks(blocks: readonly { channel: string; pump: number; samples: Buffer }[]): Map<string, Channel> {
  const parts = new Map<string, Buffer[]>();
  for (const { channel, pump, samples } of blocks) {
    const key = `${channel} ${pump}`;
    const list = parts.get(key);
    if (list) list.push(samples);
    else parts.set(key, [samples]);
  }
  const joined = new Map<string, Channel>();
  for (const [key, list] of parts) {
    const bytes = new Uint8Array(list.reduce((sum, part) => sum + part.length, 0));
    let at = 0;
    for (const part of list) {
      bytes.set(part, at);
      at += part.length;
    }
    joined.set(key, new Float64Array(bytes.buffer));
  }
  return joined;
}
