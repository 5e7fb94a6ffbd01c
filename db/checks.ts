import type { Db } from './open.ts';

/** Promises about the data that no single constraint can hold: the query returns the rows that break it. */
const PROMISES = [
  {
    promise: 'every channel of a record covers each of its intervals once',
    sql: `SELECT record.id AS record, channel, pump, sum(block.intervals) AS found, record.intervals AS wanted
          FROM record JOIN reading_block AS block ON block.record_id = record.id
          GROUP BY record.id, channel, pump HAVING found <> wanted`,
  },
  {
    promise: 'every record has its instants and their lengths',
    sql: `SELECT id AS record FROM record
          WHERE (SELECT count(DISTINCT channel) FROM reading_block
                 WHERE record_id = record.id AND channel IN ('start_ms', 'seconds')) < 2`,
  },
  {
    promise: 'blocks of a channel do not overlap',
    sql: `SELECT a.record_id AS record, a.channel, a.pump, a.from_ms FROM reading_block AS a
          JOIN reading_block AS b USING (record_id, channel, pump)
          WHERE a.from_ms < b.from_ms AND a.to_ms > b.from_ms`,
  },
  {
    promise: 'a pump channel belongs to a pump that the record names',
    sql: `SELECT record_id AS record, channel, pump FROM reading_block JOIN record ON record.id = record_id
          WHERE pump > json_array_length(record.pumps)`,
  },
] as const;

/** What is wrong with the stored data; nothing, unless the program or another hand broke it. */
export function brokenPromises(db: Db): { readonly promise: string; readonly rows: readonly unknown[] }[] {
  return PROMISES.map(({ promise, sql }) => ({ promise, rows: db.prepare(sql).all() })).filter(
    ({ rows }) => rows.length > 0,
  );
}
