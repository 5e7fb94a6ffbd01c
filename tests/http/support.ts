import supertest from 'supertest';
import { migrate } from '../../db/migrate.ts';
import { type Db, openDatabase } from '../../db/open.ts';
import { type AppOptions, createApp } from '../../server/app.ts';
import { aRecordCsv, aStationFile } from '../support/aStation.ts';
import { aTariffFile } from '../support/tariffs.ts';

export const NOW = Date.UTC(2026, 2, 1, 12);

export interface Served {
  readonly db: Db;
  readonly http: ReturnType<typeof supertest>;
  /** What the program took for faults of its own; a test of input expects none. */
  readonly bugs: unknown[];
}

/** The server on a new database in memory. */
export function served(options: Partial<AppOptions> = {}): Served {
  const db = openDatabase(':memory:');
  migrate(db);
  const bugs: unknown[] = [];
  const app = createApp({
    db,
    now: () => NOW,
    version: '1.2.3',
    clientFolder: null,
    token: null,
    loopback: true,
    log: (error) => void bugs.push(error),
    ...options,
  });
  return { db, http: supertest(app), bugs };
}

/** How many rows each table of people's data has. */
export function rowCounts(db: Db): Record<string, number> {
  const tables = ['station', 'record', 'reading_block', 'tariff', 'comparison'];
  return Object.fromEntries(
    tables.map((table) => [table, db.prepare(`SELECT count(*) FROM ${table}`).pluck().get()]),
  ) as Record<string, number>;
}

/** What a comparison is asked of. */
export interface StoredIds {
  readonly stationId: number;
  readonly recordId: number;
  readonly tariffId: number;
}

/** Sends a station, its record and a tariff as files. */
export async function storeThree({ http }: Served): Promise<StoredIds> {
  const stationId = (await http.post('/api/stations').send(aStationFile())).body.id;
  const csv = http.post(`/api/stations/${stationId}/records`).set('Content-Type', 'text/csv').send(aRecordCsv());
  const recordId = (await csv).body.id;
  const tariffId = (await http.post('/api/tariffs').send(aTariffFile())).body.id;
  return { stationId, recordId, tariffId };
}
