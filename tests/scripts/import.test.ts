import { existsSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { migrate } from '../../db/migrate.ts';
import { openDatabase } from '../../db/open.ts';
import { listRecords, readLog } from '../../db/records.ts';
import { insertStation } from '../../db/stations.ts';
import { served } from '../http/support.ts';
import { aRecordCsv, aStationFile } from '../support/aStation.ts';
import { aTariffFile } from '../support/tariffs.ts';
import { command } from './support.ts';

let folder: string;
let NTH_PUMP_DB: string;
const file = (name: string): string => join(folder, name);
const run = (...args: string[]) => command('import', args, { NTH_PUMP_DB });
const stored = () => {
  const db = openDatabase(NTH_PUMP_DB);
  const records = listRecords(db, 1).map((record) => ({ ...record, log: readLog(db, record.id)! }));
  db.close();
  return records;
};

beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'nth-pump-import-'));
  NTH_PUMP_DB = file('test.sqlite');
  const db = openDatabase(NTH_PUMP_DB);
  migrate(db);
  insertStation(db, { name: 'Mill Lane', file: aStationFile(), nowMs: 1 });
  insertStation(db, { name: 'Twin', file: aStationFile({ name: 'Twin' }), nowMs: 1 });
  insertStation(db, { name: 'Twin', file: aStationFile({ name: 'Twin' }), nowMs: 1 });
  db.close();
  writeFileSync(file('flow.csv'), aRecordCsv());
  writeFileSync(file('bad.csv'), aRecordCsv().replace(',20\n', ',2O\n').replace(',90\n', ',-90\n'));
});
afterAll(() => rmSync(folder, { recursive: true }));

describe('npm run import', () => {
  it('stores a record under a station and says what was found', () => {
    const named = run('--station', 'Mill Lane', '--record', file('flow.csv'));
    expect(named).toMatchObject({ code: 0, stderr: '' });
    expect(named.stdout).toContain("'flow' of station 1");
    expect(named.stdout).toContain('gap 2025-01-07T06:00:00Z to 2025-01-07T07:00:00Z (1.0 h)');
    const byId = run(
      '--station',
      '1',
      '--record',
      file('flow.csv'),
      '--name',
      'Winter',
      '--flow-unit',
      'm3/h',
      '--json',
    );
    expect(byId.code).toBe(0);
    expect(JSON.parse(byId.stdout)).toMatchObject({ stationId: 1, name: 'Winter', fileName: 'flow.csv' });
    const [inFileUnits, asTold] = stored();
    expect(inFileUnits?.log.flow?.[0]).toBeCloseTo(0.02, 12); // 20 L/s
    expect(asTold?.log.flow?.[0]).toBeCloseTo(20 / 3600, 12); // the same 20, said to be m³/h
    expect(stored()).toHaveLength(2);
  });

  it.each([
    [
      'every fault of a bad record',
      () => ['--station', '1', '--record', file('bad.csv')],
      [/^bad\.csv line 2: found .*2O/, /^bad\.csv line 25: found .*-90/],
    ],
    [
      'a station that is not there',
      () => ['--station', 'Nowhere', '--record', file('flow.csv')],
      [/'Nowhere'; wanted one of 1 \(Mill Lane\)/],
    ],
    [
      'a name that two stations bear',
      () => ['--station', 'Twin', '--record', file('flow.csv')],
      [/2 stations named 'Twin'; wanted an id: 2, 3/],
    ],
    [
      'a file that is not there',
      () => ['--station', '1', '--record', file('none.csv')],
      [/none\.csv: found no readable file/],
    ],
    ['an option that is none', () => ['--station', '1', '--recrod', 'x'], [/--recrod/]],
    ['an option left out', () => ['--station', '1'], [/--record: found nothing/]],
    [
      'a unit that is none',
      () => ['--station', '1', '--record', file('flow.csv'), '--flow-unit', 'buckets'],
      [/flowUnit: found "buckets"/],
    ],
  ])('tells %s with one line each and exit code 2, and stores nothing', (_, args, lines) => {
    const before = stored().length;
    const ended = run(...args());
    expect([ended.code, ended.stdout]).toEqual([2, '']);
    const told = ended.stderr.trimEnd().split('\n');
    expect(told).toHaveLength(lines.length);
    for (const [i, line] of lines.entries()) expect(told[i]).toMatch(line);
    expect(stored()).toHaveLength(before);
  });

  it('explains itself', () => {
    const { code, stdout } = run('--help');
    expect(code).toBe(0);
    for (const option of [
      '--station',
      '--record',
      '--time-column',
      '--flow-column',
      '--flow-unit',
      '--time-zone',
      '--date-order',
      '--decimal',
      '--delimiter',
    ]) {
      expect(stdout).toContain(option);
    }
  });
});

describe('the same files', () => {
  it('give the same figures in the terminal and over HTTP', async () => {
    writeFileSync(file('station.json'), JSON.stringify(aStationFile(), null, 4));
    writeFileSync(file('tariff.json'), JSON.stringify(aTariffFile(), null, 1));
    const inTerminal = command('compare', [
      '--station',
      file('station.json'),
      '--record',
      file('flow.csv'),
      '--tariff',
      file('tariff.json'),
      '--json',
    ]);
    expect(inTerminal.code, inTerminal.stderr).toBe(0);
    const { http } = served();
    const send = (path: string, type: string, name: string) =>
      http
        .post(path)
        .set('Content-Type', type)
        .send(readFileSync(file(name), 'utf8'))
        .expect(201);
    const stationId = (await send('/api/stations', 'application/json', 'station.json')).body.id;
    const recordId = (await send(`/api/stations/${stationId}/records`, 'text/csv', 'flow.csv')).body.id;
    const tariffId = (await send('/api/tariffs', 'application/json', 'tariff.json')).body.id;
    const { body } = await http.post('/api/comparisons').send({ stationId, recordId, tariffId }).expect(201);
    const { id: _id, stationId: _s, recordId: _r, tariffId: _t, createdAt: _c, without: _w, ...result } = body;
    expect(result.rules.length).toBeGreaterThan(2);
    expect(result).toEqual(JSON.parse(inTerminal.stdout));
  });
});

describe('npm run migrate', () => {
  it('makes a database, and finds nothing to do the second time', () => {
    const path = file('new/deep.sqlite');
    const first = command('migrate', [], { NTH_PUMP_DB: path });
    expect(first).toMatchObject({ code: 0 });
    expect(first.stdout).toContain('0001_station.sql');
    expect(existsSync(path)).toBe(true);
    expect(command('migrate', [], { NTH_PUMP_DB: path }).stdout).toContain('nothing to apply');
  });

  it('takes no other option, and touches no database then', () => {
    const path = file('never.sqlite');
    const ended = command('migrate', ['--to', '3'], { NTH_PUMP_DB: path });
    expect(ended).toMatchObject({ code: 2, stdout: '' });
    expect(ended.stderr).toContain('--to');
    expect(command('migrate', ['--help'], { NTH_PUMP_DB: path })).toMatchObject({ code: 0 });
    expect(existsSync(path)).toBe(false);
  });

  it('a script that is none ends with 2', () => {
    expect(command('no-such-script', [])).toMatchObject({ code: 2, stdout: '' });
  });
});
