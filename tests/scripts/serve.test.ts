import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openDatabase } from '../../db/open.ts';
import { type Ended, type Server, server } from './support.ts';

let folder: string;
let env: Record<string, string>;
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'nth-pump-serve-'));
  env = { NTH_PUMP_DB: join(folder, 'test.sqlite'), PORT: '0', HOST: '127.0.0.1', NTH_PUMP_TOKEN: '' };
});
afterAll(() => rmSync(folder, { recursive: true }));

const started = async (more: Record<string, string> = {}): Promise<Server> => {
  const result = await server({ ...env, ...more });
  if ('code' in result) throw new Error(`ended with ${result.code}: ${result.stderr}`);
  return result;
};
const refused = async (more: Record<string, string>): Promise<Ended> => {
  const result = await server({ ...env, ...more });
  if ('code' in result) return result;
  await result.stop('SIGTERM');
  throw new Error('it serves');
};

describe('the server', () => {
  it('prints its address when it answers, with the demo in an empty database, and stops when told', async () => {
    const first = await started();
    expect(first.address).toMatch(/^http:\/\/127\.0\.0\.1:\d+$/);
    const stations = (await (await fetch(`${first.address}/api/stations`)).json()) as {
      id: number;
      demo: boolean;
      records: number;
      tariffId: number;
    }[];
    expect(stations.length).toBeGreaterThanOrEqual(3);
    for (const station of stations)
      expect(station).toMatchObject({ demo: true, records: 1, tariffId: expect.any(Number) });
    await fetch(`${first.address}/api/stations/${stations[0]!.id}`, { method: 'DELETE' });
    expect(await first.stop('SIGTERM')).toMatchObject({ code: 0, stdout: `${first.address}\n` });

    // What the person removed does not come back, and a second start takes less than three seconds.
    const second = await started();
    expect(((await (await fetch(`${second.address}/api/stations`)).json()) as unknown[]).length).toBe(
      stations.length - 1,
    );
    expect(second.startMs).toBeLessThan(3000);
    expect((await second.stop('SIGINT')).code).toBe(0);
  });

  it('says what is wrong with its settings in a sentence, and ends', async () => {
    const open = await refused({ HOST: '0.0.0.0' });
    expect(open).toMatchObject({ code: 1, stdout: '' });
    expect(open.stderr).toContain('NTH_PUMP_TOKEN');
    expect((await refused({ PORT: 'eight' })).stderr).toContain("PORT is 'eight'");
    const first = await started();
    const taken = await refused({ PORT: new URL(first.address).port });
    expect(taken).toMatchObject({ code: 1, stdout: '' });
    expect(taken.stderr).toContain('is taken');
    await first.stop('SIGTERM');
  });

  it('serves beyond this machine to those who bring the token', async () => {
    const { address, stop } = await started({ HOST: '0.0.0.0', NTH_PUMP_TOKEN: 'secret' });
    const at = `http://127.0.0.1:${new URL(address).port}/api/health`;
    expect((await fetch(at)).status).toBe(401);
    expect((await fetch(at, { headers: { Authorization: 'Bearer secret' } })).status).toBe(200);
    await stop('SIGTERM');
  });

  it('does not touch a database of another history', async () => {
    const NTH_PUMP_DB = join(folder, 'newer.sqlite');
    await (await started({ NTH_PUMP_DB })).stop('SIGTERM');
    const db = openDatabase(NTH_PUMP_DB);
    db.exec("INSERT INTO migration (number, name, sha256) VALUES (9999, '9999_later.sql', 'x')");
    db.close();
    const ended = await refused({ NTH_PUMP_DB });
    expect(ended.code).toBe(1);
    expect(ended.stderr).toMatch(/^The database has 9999_later\.sql, which this version/m);
  });
});
