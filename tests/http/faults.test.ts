import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { aStationFile } from '../support/aStation.ts';
import { rowCounts, type Served, served } from './support.ts';

let api: Served;
beforeEach(() => {
  api = served();
});
afterEach(() => {
  expect(api.bugs).toEqual([]);
});

describe('a request that cannot be read', () => {
  const post = (body: string, type = 'application/json') =>
    api.http.post('/api/stations').set('Content-Type', type).send(body);

  it.each([
    ['malformed JSON', '{"name": \n\n nothing}', 400, 'not_json'],
    ['an empty body', '', 400, 'not_json'],
    ['a list', '[]', 422, null],
    ['a number', '7', 422, null],
    ['null', 'null', 422, null],
    ['lists within lists', '['.repeat(100_000) + ']'.repeat(100_000), 422, 'out_of_range'],
    ['a body of 6 MB', `{"name":"${'x'.repeat(6e6)}"}`, 413, 'too_large'],
    ['a field that is no field of its own', '{"__proto__":{"name":"x"}}', 422, null],
  ])('%s is a problem of the sender', async (_, body, status, code) => {
    const answer = await post(body);
    expect([answer.status, answer.type]).toEqual([status, 'application/problem+json']);
    expect(answer.body.status).toBe(status);
    if (code !== null) expect(answer.body.faults[0].code).toBe(code);
    expect(rowCounts(api.db).station).toBe(0);
  });

  it.each(['text/plain', 'application/x-www-form-urlencoded', 'application/json; charset=nonsense'])(
    'the type %s is not taken',
    async (type) => {
      const answer = await post(JSON.stringify(aStationFile()), type);
      expect([answer.status, answer.type]).toEqual([415, 'application/problem+json']);
    },
  );

  it('a record of another type is not taken', async () => {
    const { body } = await api.http.post('/api/stations').send(aStationFile());
    const answer = await api.http.post(`/api/stations/${body.id}/records`).set('Content-Type', 'image/png').send('x');
    expect(answer.status).toBe(415);
  });

  it.each([
    ['GET', '/api/nothing', 404],
    ['GET', '/api/stations/x', 404],
    ['GET', '/api/stations/1.0', 404],
    ['GET', '/api/stations/999999999999999999999', 404],
    ['GET', '/api/stations/%E0%A4%A', 400],
    ['GET', '/api/stations/1/records', 404],
    ['GET', '/api/comparisons/1/series?rule=best-count', 404],
    ['GET', '/api/comparisons?stationId=1', 404],
    ['GET', '/api/comparisons?station=1', 422],
    ['GET', '/nothing', 404],
  ])('%s %s is answered with a problem', async (_method, path, status) => {
    const answer = await api.http.get(path);
    expect([answer.status, answer.type]).toEqual([status, 'application/problem+json']);
  });

  it.each([
    ['patch', '/api/stations', 'GET, HEAD, POST'],
    ['post', '/api/stations/1', 'GET, HEAD, PUT, DELETE'],
    ['delete', '/api/comparisons', 'GET, HEAD, POST'],
    ['put', '/api/health', 'GET, HEAD'],
  ] as const)('%s %s names the methods that are', async (method, path, allow) => {
    const answer = await api.http[method](path).expect(405);
    expect(answer.headers.allow).toBe(allow);
    expect(answer.type).toBe('application/problem+json');
  });
});

describe('who is let in', () => {
  it('on this machine only: its own names, not one that points here', async () => {
    await api.http.get('/api/health').set('Host', 'localhost:8717').expect(200);
    await api.http.get('/api/health').set('Host', '[::1]:8717').expect(200);
    await api.http.get('/api/health').set('Host', 'elsewhere.example:8717').expect(421);
    await served({ loopback: false }).http.get('/api/health').set('Host', 'pumps.example').expect(200);
  });

  it('changes come from pages of this server', async () => {
    const send = (origin: string) =>
      api.http.post('/api/stations').set('Host', '127.0.0.1:1').set('Origin', origin).send(aStationFile());
    await send('http://elsewhere.example').expect(403);
    await send('http://127.0.0.1:2').expect(403);
    await send('null').expect(403);
    expect(rowCounts(api.db).station).toBe(0);
    await send('http://127.0.0.1:1').expect(201);
  });

  it('with a token set, nobody without it', async () => {
    const { http } = served({ token: 'open sesame' });
    for (const sent of [undefined, 'Bearer open', 'open sesame', 'Basic open sesame', 'Bearer open sesame ']) {
      const request = http.get('/api/stations');
      const answer = await (sent === undefined ? request : request.set('Authorization', sent));
      // Blanks at the end of a header are not part of it.
      expect(answer.status).toBe(sent?.trim() === 'Bearer open sesame' ? 200 : 401);
      if (answer.status === 401) expect(answer.headers['www-authenticate']).toBe('Bearer');
    }
  });
});

describe('the page', () => {
  let folder: string;
  beforeEach(() => {
    folder = mkdtempSync(join(tmpdir(), 'nth-pump-page-'));
    mkdirSync(join(folder, 'assets'));
    writeFileSync(join(folder, 'index.html'), '<!doctype html><title>page</title>');
    writeFileSync(join(folder, 'assets', 'main-1.js'), '1;');
  });
  afterEach(() => {
    rmSync(folder, { recursive: true });
  });

  it('is served from its own files under a policy that allows no others', async () => {
    const { http } = served({ clientFolder: folder });
    const page = await http.get('/').expect(200);
    expect(page.text).toContain('<title>page</title>');
    expect(page.headers['content-security-policy']).toContain("default-src 'self'");
    expect(page.headers['content-security-policy']).not.toMatch(/unsafe|\*/);
    expect(page.headers['x-content-type-options']).toBe('nosniff');
    expect(page.headers['cache-control']).toBe('no-cache');
    expect((await http.get('/assets/main-1.js').expect(200)).headers['cache-control']).toContain('immutable');
    await http.get('/assets/main-2.js').expect(404);
    await http.get('/..%2f..%2fpackage.json').expect(({ status }) => expect(status).toBeGreaterThanOrEqual(400));
  });
});

it('a fault of the program is a bare 500 with the whole of it in the log', async () => {
  const broken = served();
  broken.db.close();
  const answer = await broken.http.get('/api/stations').expect(500);
  expect(answer.type).toBe('application/problem+json');
  expect(JSON.stringify(answer.body)).not.toContain('database');
  expect(String(broken.bugs[0])).toContain('database connection is not open');
});
