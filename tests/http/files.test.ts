import { beforeEach, describe, expect, it } from 'vitest';
import { aRecordCsv, aStationFile } from '../support/aStation.ts';
import { aTariffFile } from '../support/tariffs.ts';
import { rowCounts, type Served, served } from './support.ts';

let api: Served;
beforeEach(() => {
  api = served();
});

describe('a fresh server', () => {
  it('is well and holds nothing', async () => {
    expect((await api.http.get('/api/health')).body).toEqual({ status: 'ok', version: '1.2.3' });
    for (const list of ['stations', 'tariffs', 'comparisons']) {
      const answer = await api.http.get(`/api/${list}`).expect(200);
      expect(answer.body).toEqual([]);
      expect(answer.headers['cache-control']).toBe('no-store');
    }
  });
});

describe.each([
  { kind: 'stations', file: aStationFile({ name: 'Ä' }), other: aStationFile({ name: 'B', standbyPower: 0.5 }) },
  { kind: 'tariffs', file: aTariffFile({ name: 'Ä' }), other: aTariffFile({ name: 'B', fixedPerMonth: 5 }) },
])('$kind', ({ kind, file, other }) => {
  it('are stored, read, replaced and removed as they were written', async () => {
    const made = await api.http.post(`/api/${kind}`).send(file).expect(201);
    const { id } = made.body as { id: number };
    expect(made.headers.location).toBe(`/api/${kind}/${id}`);
    expect(made.body).toEqual({ id, demo: false, ...file });
    const at = `/api/${kind}/${id}`;
    expect((await api.http.get(at).expect(200)).body).toEqual(made.body);
    expect((await api.http.get(`/api/${kind}`)).body).toMatchObject([{ id, name: 'Ä', demo: false }]);

    // What was got can be changed and put back: the fields of the answer do not count as fields of the file.
    const put = await api.http
      .put(at)
      .send({ ...made.body, ...other })
      .expect(200);
    expect(put.body).toEqual({ id, demo: false, ...other });
    expect((await api.http.get(at)).body).toEqual(put.body);

    await api.http.delete(at).expect(204);
    const gone = await api.http.get(at).expect(404);
    expect(gone.body).toMatchObject({ errors: ['id'], faults: [{ code: 'not_found' }] });
    await api.http.delete(at).expect(404);
    await api.http.put(at).send(file).expect(404);
  });

  it('are refused whole with the path of each field to mend', async () => {
    const { id } = (await api.http.post(`/api/${kind}`).send(file)).body as { id: number };
    const before = rowCounts(api.db);
    const bad = { ...file, currency: 'euro', colour: 'red', name: 7 };
    for (const request of [api.http.post(`/api/${kind}`), api.http.put(`/api/${kind}/${id}`)]) {
      const answer = await request.send(bad).expect(422);
      expect(answer.type).toBe('application/problem+json');
      expect(answer.body).toMatchObject({ status: 422, title: 'The input has faults' });
      expect([...answer.body.errors].sort()).toEqual(['colour', 'currency', 'name']);
      for (const fault of answer.body.faults) {
        expect(Object.keys(fault).sort()).toEqual(['at', 'code', 'file', 'found', 'wanted']);
        expect(answer.body.detail).toContain(fault.wanted);
      }
    }
    expect(rowCounts(api.db)).toEqual(before);
    expect((await api.http.get(`/api/${kind}/${id}`)).body).toEqual({ id, demo: false, ...file });
  });
});

describe('records', () => {
  let at: string;
  beforeEach(async () => {
    const { body } = await api.http.post('/api/stations').send(aStationFile());
    at = `/api/stations/${body.id}/records`;
  });

  it.each(['text/csv', 'text/plain; charset=utf-8', 'application/octet-stream'])('come in as %s', async (type) => {
    const csv = Buffer.from(aRecordCsv());
    const made = await api.http
      .post(`${at}?name=January&fileName=jan.csv`)
      .set('Content-Type', type)
      .send(csv)
      .expect(201);
    const { id, stationId } = made.body;
    expect(made.headers.location).toBe(`${at}/${id}`);
    // 47 hours of 48 have a value; (20 + 90)/2 L/s is the mean of both days, less hour 6 of the second at 20 + 6·70/23
    const volume = ((48 * 55 - (20 + (6 * 70) / 23)) * 3600) / 1000;
    expect(made.body).toMatchObject({
      stationId,
      name: 'January',
      fileName: 'jan.csv',
      report: {
        intervals: 47,
        stepSeconds: 3600,
        hours: 47,
        gapHours: 1,
        from: '2025-01-06T00:00:00Z',
        to: '2025-01-08T00:00:00Z',
      },
    });
    expect(made.body.report.volumeM3).toBeCloseTo(volume, 6);
    expect((await api.http.get(at)).body).toEqual([made.body]);
    expect((await api.http.get(`${at}/${id}`)).body).toEqual(made.body);
    expect((await api.http.get('/api/stations')).body[0].records).toBe(1);
    await api.http.delete(`${at}/${id}`).expect(204);
    await api.http.get(`${at}/${id}`).expect(404);
    expect(rowCounts(api.db)).toMatchObject({ record: 0, reading_block: 0 });
  });

  it('come in as a profile', async () => {
    const day = Array.from({ length: 24 }, (_, hour) => 20 + hour);
    const profile = { format: 'nth-pump/profile/1', year: 2025, flow: { weekday: day, weekend: day } };
    const made = await api.http.post(at).send(profile).expect(201);
    expect(made.body).toMatchObject({ name: 'record', report: { hours: 8760, stepSeconds: 3600 } });
  });

  it('of levels and run states are reported with the inflow they come to, and compared', async () => {
    // 40 m² fill at 10 L/s for ten minutes and are drawn down at 60 L/s for five, five times over and a minute more.
    const rows: string[] = [];
    for (let i = 0, level = 1; i < 77; i++) {
      const on = i % 15 >= 10 ? 1 : 0;
      rows.push(`${new Date(Date.UTC(2025, 0, 6, 0, i)).toISOString()},${level},${on},0`);
      level += ((0.01 - 0.06 * on) * 60) / 40;
    }
    const csv = ['time,level,P-1_on,P-2_on', ...rows].join('\n');
    const send = (path: string) => api.http.post(path).set('Content-Type', 'text/csv').send(csv).expect(201);
    const unsaid = (await send(at)).body;
    expect(unsaid.report).toMatchObject({ volumeM3: null, notes: [{ code: 'levels-without-volume' }] });
    const ids = { stationId: Number(/\d+/.exec(at)![0]), recordId: unsaid.id };
    const refused = await api.http.post('/api/comparisons').send(ids).expect(422);
    expect(refused.body.faults).toEqual([expect.objectContaining({ code: 'missing_field', at: 'storage.area' })]);

    const file = aStationFile({ storage: { activeVolume: 10, area: 40 } });
    const stationId = (await api.http.post('/api/stations').send(file)).body.id;
    const { id: recordId, report } = (await send(`/api/stations/${stationId}/records`)).body;
    expect(report.volumeM3).toBeCloseTo(76 * 60 * 0.01, 9);
    expect(report.minFlowM3s).toBeCloseTo(0.01, 9);
    expect(report.maxFlowM3s).toBeCloseTo(0.01, 9);
    expect(report.notes).toEqual([expect.objectContaining({ code: 'inflow-from-levels' })]);
    const { body } = await api.http.post('/api/comparisons').send({ stationId, recordId }).expect(201);
    expect(body.record.volumeM3).toBeCloseTo(76 * 60 * 0.01, 9);
    expect(body.pumpTests).toEqual([expect.objectContaining({ pumps: ['P-1'], runs: 5 })]);
    expect(body.pumpTests[0].pumpedM3s).toBeCloseTo(0.06, 9);
    const codes = body.notes.map(({ code }: { code: string }) => code);
    expect(codes).toEqual(expect.arrayContaining(['inflow-from-levels', 'pump-test']));
  });

  it('obey what the person says of the file', async () => {
    const csv = 'when;Q1;Q2\n01.02.2025 00:00;1,5;9\n01.02.2025 01:00;2,5;9\n01.02.2025 02:00;3,5;9\n';
    const options = {
      timeColumn: 'when',
      flowColumn: 'Q1',
      flowUnit: 'm3/h',
      dateOrder: 'dmy',
      decimal: ',',
      timeZone: '+01:00',
    };
    const made = await api.http.post(at).query(options).set('Content-Type', 'text/csv').send(csv).expect(201);
    expect(made.body.report.from).toBe('2025-01-31T23:00:00Z');
    expect(made.body.report.volumeM3).toBeCloseTo(7.5, 9); // 1.5 + 2.5 + 3.5 m³/h, an hour each
  });

  it('of one station are not found under another', async () => {
    const { body } = await api.http.post(at).set('Content-Type', 'text/csv').send(aRecordCsv());
    const other = await api.http.post('/api/stations').send(aStationFile());
    await api.http.get(`/api/stations/${other.body.id}/records/${body.id}`).expect(404);
    await api.http.delete(`/api/stations/${other.body.id}/records/${body.id}`).expect(404);
    await api.http.get(`${at}/${body.id}`).expect(200);
  });

  it.each([
    ['text in a number', aRecordCsv().replace(',20\n', ',2O\n'), 422, 'not_a_number', 'line 2'],
    ['a negative flow', aRecordCsv().replace(',20\n', ',-20\n'), 422, 'negative_flow', 'line 2'],
    ['two values at one instant', `${aRecordCsv()}\n2025-01-06T00:00:00Z,21`, 422, 'conflicting_rows', 'line 49'],
    ['a missing column', aRecordCsv().replace('flow', 'wind'), 422, 'missing_column', 'line 1'],
    ['an empty file', '', 422, null, null],
    ['no table', '\u0000\u0001\u0002', 422, null, null],
    [
      'nested JSON without end',
      `{"a":${'['.repeat(200_000)}${']'.repeat(200_000)}}`,
      422,
      'out_of_range',
      'record.csv',
    ],
  ])('with %s are refused whole', async (_, csv, status, code, place) => {
    const answer = await api.http.post(at).set('Content-Type', 'text/csv').send(csv);
    expect([answer.status, answer.type]).toEqual([status, 'application/problem+json']);
    if (code !== null) expect(answer.body.faults[0].code).toBe(code);
    if (place !== null) expect(answer.body.errors).toContain(place);
    expect(answer.body.faults.length).toBeGreaterThan(0);
    expect(rowCounts(api.db)).toMatchObject({ record: 0, reading_block: 0 });
    expect(api.bugs).toEqual([]);
  });

  it.each([
    ['an unknown option', { speling: 'x' }, 'speling'],
    ['a unit that is none', { flowUnit: 'buckets' }, 'flowUnit'],
    ['an option given twice', { decimal: ['.', ','] }, 'decimal'],
  ])('with %s are refused', async (_, query, path) => {
    const answer = await api.http.post(at).query(query).set('Content-Type', 'text/csv').send(aRecordCsv()).expect(422);
    expect(answer.body.errors).toEqual([path]);
    expect(rowCounts(api.db).record).toBe(0);
  });
});
