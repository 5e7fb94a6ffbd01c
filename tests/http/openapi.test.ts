import type { Response } from 'supertest';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { demoStations } from '../../server/demo/all.ts';
import { aRecordCsv, aStationFile } from '../support/aStation.ts';
import { mismatches } from '../support/jsonSchema.ts';
import { madeStation } from '../support/madeStations.ts';
import { routes } from '../support/routes.ts';
import { aTariffFile } from '../support/tariffs.ts';
import { type Served, served } from './support.ts';

/** The description of the interface against the interface itself: every path, and what the paths really answer. */

interface Operation {
  readonly operationId: string;
  readonly summary: string;
  readonly parameters?: readonly { name: string; in: string; required: boolean; schema: Json }[];
  readonly requestBody?: { content: Record<string, { schema?: Json }> };
  readonly responses: Record<
    string,
    { $ref?: string; description?: string; content?: Record<string, { schema: Json }> }
  >;
}
type Json = Record<string, unknown>;
interface Document extends Json {
  readonly paths: Record<string, Record<string, Operation>>;
  readonly components: { readonly schemas: Record<string, Json> };
}

let api: Served;
let document: Document;

beforeAll(async () => {
  api = served();
  document = (await api.http.get('/api/openapi.json').expect(200)).body;
});
afterAll(() => expect(api.bugs).toEqual([]));

const operations = () =>
  Object.entries(document.paths).flatMap(([path, methods]) =>
    Object.entries(methods).map(([method, operation]) => ({ path, method, operation })),
  );

/** Every node of the document. */
function* nodes(node: unknown): Generator<Json> {
  if (typeof node !== 'object' || node === null) return;
  if (!Array.isArray(node)) yield node as Json;
  for (const inner of Object.values(node)) yield* nodes(inner);
}

describe('the description of the interface', () => {
  it('has the parts that OpenAPI 3.1 asks for', () => {
    expect(document.openapi).toMatch(/^3\.1\.\d+$/);
    expect(document.info).toMatchObject({ title: 'Nth Pump', version: '1.2.3' });
    const ids = operations().map(({ operation }) => operation.operationId);
    expect(new Set(ids).size).toBe(ids.length);
    for (const { path, method, operation } of operations()) {
      const where = `${method} ${path}`;
      expect(path, where).toMatch(/^\/api(\/(\w|-|\.|\{\w+\})+)+$/);
      expect(['get', 'put', 'post', 'delete'], where).toContain(method);
      expect(operation.summary.length, where).toBeGreaterThan(4);
      // Every part of the path in braces is a parameter, required, with a schema; and no other is.
      const inPath = (operation.parameters ?? []).filter((parameter) => parameter.in === 'path');
      expect(inPath.map(({ name }) => name)).toEqual([...path.matchAll(/\{(\w+)\}/g)].map(([, name]) => name));
      for (const { required } of inPath) expect(required, where).toBe(true);
      for (const { schema, in: place } of operation.parameters ?? []) {
        expect(['path', 'query'], where).toContain(place);
        expect(schema.type ?? schema.enum, where).toBeDefined();
      }
      if (method === 'get' || method === 'delete') expect(operation.requestBody, where).toBeUndefined();
      else expect(Object.keys(operation.requestBody!.content).length, where).toBeGreaterThan(0);
      for (const [status, response] of Object.entries(operation.responses)) {
        expect(status).toMatch(/^[1-5](\d\d|XX)$/);
        expect(response.$ref ?? response.description, where).toBeTruthy();
      }
    }
  });

  it('refers to nothing that it does not have', () => {
    const references = [...nodes(document)].flatMap((node) => (typeof node.$ref === 'string' ? [node.$ref] : []));
    expect(references.length).toBeGreaterThan(30);
    for (const reference of new Set(references)) {
      const found = reference
        .replace(/^#\//, '')
        .split('/')
        .reduce<unknown>((node, step) => (node as Json | undefined)?.[step], document);
      expect(found, reference).toBeTypeOf('object');
    }
  });

  it('has every path of the server, and no other', () => {
    const described = operations().map(
      ({ path, method }) => `${method.toUpperCase()} ${path.replaceAll(/\{(\w+)\}/g, ':$1')}`,
    );
    expect(described.sort()).toEqual(routes().sort());
    expect(described).toContain('GET /api/schemas/:name');
  });
});

describe('what the server answers', () => {
  const met = new Set<string>();

  /** Holds an answer against what is described for its method, path and status. */
  function matches(method: string, path: string, response: Response): void {
    const operation = document.paths[path]?.[method];
    expect(operation, `${method} ${path}`).toBeDefined();
    const exact = operation!.responses[response.status];
    const described = exact ?? operation!.responses[`${String(response.status)[0]}XX`];
    expect(described, `${method} ${path} answered ${response.status}: ${response.text}`).toBeDefined();
    if (exact) met.add(`${method} ${path}`);
    const content = described!.$ref
      ? (document.components as unknown as Record<string, Record<string, typeof described>>).responses!.Problem!.content
      : described!.content;
    if (content === undefined) {
      expect(response.text).toBe('');
      return;
    }
    const schema = Object.values(content)[0]!.schema;
    expect(mismatches(schema, response.body, document)).toEqual([]);
  }

  const get = async (template: string, values: Json = {}, query: object = {}): Promise<Response> => {
    const response = await api.http.get(filled(template, values)).query(query);
    matches('get', template, response);
    return response;
  };
  const filled = (template: string, values: Json) =>
    template.replaceAll(/\{(\w+)\}/g, (_, name: string) => String(values[name]));

  const files: readonly (readonly [string, object])[] = [
    ['equal pumps', aStationFile({ allowable: { from: 0.5, to: 1.3 } })],
    [
      'pumps that differ, pipes and a known suction',
      {
        ...aStationFile(),
        system: {
          staticHead: 12,
          dischargeLevel: 14,
          suctionLevel: 2,
          pumpLevel: 1,
          friction: { pipes: [{ length: 400, diameter: 300, roughness: 0.1 }] },
        },
        pumps: [
          {
            name: 'A',
            curve: {
              points: [0, 20, 40, 60, 80].map((flow) => ({
                flow,
                head: 30 - flow ** 2 / 300,
                efficiency: 0.02 + flow / 110,
              })),
              npshr: [0, 40, 80].map((flow) => ({ flow, npshr: 2 + flow / 40 })),
            },
            motor: {
              ratedPower: 30,
              efficiency: [
                { load: 0.5, efficiency: 0.9 },
                { load: 1, efficiency: 0.92 },
              ],
            },
            drive: { minSpeed: 0.5, efficiency: 0.96 },
          },
          {
            name: 'B',
            inSeries: 2,
            curve: { shutoffHead: 14, shape: 0.002, bestFlow: 40, bestEfficiency: 0.7 },
            motor: { efficiency: 0.9 },
          },
        ],
      },
    ],
    ['a valve, in US units', madeStation(1, { surplus: 'throttle' })],
  ];

  it.each(files)('is as described, for %s', async (_name, file) => {
    const { http } = api;
    const created = await http.post('/api/stations').send(file);
    matches('post', '/api/stations', created);
    const id = created.body.id;
    expect(mismatches(document.components.schemas.StationFile!, file, document)).toEqual([]);
    matches('put', '/api/stations/{id}', await http.put(`/api/stations/${id}`).send(created.body));
    const record = await http.post(`/api/stations/${id}/records`).set('Content-Type', 'text/csv').send(aRecordCsv());
    matches('post', '/api/stations/{id}/records', record);
    const recordId = record.body.id;
    const tariffFile = aTariffFile({ currency: created.body.currency, demand: [{ name: 'peak', rate: 5 }] });
    const tariff = await http.post('/api/tariffs').send(tariffFile);
    matches('post', '/api/tariffs', tariff);
    const tariffId = tariff.body.id;
    matches('put', '/api/tariffs/{id}', await http.put(`/api/tariffs/${tariffId}`).send(tariff.body));

    await get('/api/stations');
    await get('/api/stations/{id}', { id });
    await get('/api/stations/{id}/facts', { id });
    await get('/api/stations/{id}/card', { id });
    await get('/api/stations/{id}/advice', { id }, { flow: 40 });
    await get('/api/stations/{id}/records', { id });
    await get('/api/stations/{id}/records/{recordId}', { id, recordId });
    await get('/api/tariffs');
    await get('/api/tariffs/{id}', { id: tariffId });
    const readings = {
      readings: [
        { flow: 30, head: 20, powerKw: 12, pumpsOn: 1 },
        { pumpsOn: 2, flow: 60 },
      ],
    };
    matches(
      'post',
      '/api/stations/{id}/spot-readings',
      await http.post(`/api/stations/${id}/spot-readings`).send(readings),
    );

    const ids = { stationId: id, recordId, tariffId };
    const compared = await http.post('/api/comparisons').send(ids);
    matches('post', '/api/comparisons', compared);
    const at = { id: compared.body.id };
    await get('/api/comparisons', {}, { stationId: id });
    await get('/api/comparisons/{id}', at);
    await get('/api/comparisons/{id}/power-over-flow', at);
    await get('/api/comparisons/{id}/series', at, { rule: 'best-count', buckets: 20 });
    await get('/api/comparisons/{id}/card', at);
    await get('/api/comparisons/{id}/map', at);
    const terms = {
      format: 'nth-pump/case/1',
      baseline: 'fixed-speed',
      proposed: 'best-count',
      capital: 20_000,
      years: 10,
      discountRate: 0.05,
    };
    matches('post', '/api/cases', await http.post('/api/cases').send({ ...ids, case: terms }));

    await get('/api/health');
    await get('/api/openapi.json');
    await get('/api/schemas/{name}', { name: 'station' });
    matches(
      'delete',
      '/api/stations/{id}/records/{recordId}',
      await http.delete(`/api/stations/${id}/records/${recordId}`),
    );
    matches('delete', '/api/tariffs/{id}', await http.delete(`/api/tariffs/${tariffId}`));
    matches('delete', '/api/stations/{id}', await http.delete(`/api/stations/${id}`));
  });

  it('was looked at for every operation', () => {
    expect([...met].sort()).toEqual(
      operations()
        .map(({ path, method }) => `${method} ${path}`)
        .sort(),
    );
  });

  it('is a problem as described where a request has faults', async () => {
    const unknown = await get('/api/stations/{id}', { id: 999 });
    expect(unknown.status).toBe(404);
    expect(unknown.type).toBe('application/problem+json');
    expect((await get('/api/schemas/{name}', { name: 'constructor' })).status).toBe(404);
    const few = await get('/api/comparisons/{id}/series', { id: 1 }, { rule: 'best-count', buckets: 1 });
    expect(few.status).toBeGreaterThan(399);
    const refused = await api.http.post('/api/stations').send({ name: 'x' });
    matches('post', '/api/stations', refused);
    expect(refused.body.faults.length).toBeGreaterThan(3);
  });
});

describe('the schemas of files', () => {
  const schemaOf = async (name: string): Promise<Json> => {
    const response = await api.http.get(`/api/schemas/${name}`).expect(200);
    expect(response.type).toBe('application/schema+json');
    return JSON.parse(response.text || response.body.toString());
  };

  it('take the files of the demo', async () => {
    const [station, tariff] = [await schemaOf('station'), await schemaOf('tariff')];
    const demos = demoStations();
    expect(demos.length).toBeGreaterThan(1);
    for (const each of demos) {
      expect(mismatches(station, each.station, station)).toEqual([]);
      expect(mismatches(tariff, each.tariff, tariff)).toEqual([]);
    }
  });

  it('refuse what the program refuses', async () => {
    const station = await schemaOf('station');
    expect(mismatches(station, { ...aStationFile(), colour: 'red' }, station)).toEqual(['value: has colour beside']);
    const { surplus: _surplus, ...without } = aStationFile();
    expect(mismatches(station, without, station)).toEqual(['value: lacks surplus']);
    const tariff = await schemaOf('tariff');
    const [wrong] = mismatches(tariff, { ...aTariffFile(), energy: [{ name: 'a', from: '25:00', rate: 1 }] }, tariff);
    expect(wrong).toMatch(/^value\.energy\[0\]\.from/);
    const profile = await schemaOf('profile');
    const short = {
      format: 'nth-pump/profile/1',
      year: 2025,
      flow: { weekday: [1, 2], weekend: new Array(24).fill(1) },
    };
    expect(mismatches(profile, short, profile)).toEqual(['value.flow.weekday: has 2 entries']);
    const change = await schemaOf('case');
    expect(mismatches(change, { baseline: 'fastest' }, change)[0]).toMatch(/baseline: "fastest" is none of/);
  });
});
