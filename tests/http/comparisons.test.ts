import { beforeEach, describe, expect, it } from 'vitest';
import { aStationFile } from '../support/aStation.ts';
import { aTariffFile } from '../support/tariffs.ts';
import { NOW, rowCounts, type Served, type StoredIds, served, storeThree } from './support.ts';

let api: Served;
let ids: StoredIds;

beforeEach(async () => {
  api = served();
  ids = await storeThree(api);
});

const compare = async (more: object = {}) => {
  const answer = await api.http.post('/api/comparisons').send({ ...ids, ...more });
  expect(answer.status, JSON.stringify(answer.body)).toBe(201);
  return answer;
};
const ruleOf = (body: { rules: { rule: string }[] }, rule: string): Record<string, number> =>
  body.rules.find((each) => each.rule === rule) as unknown as Record<string, number>;

describe('a comparison', () => {
  it('is made, stored and read back the same', async () => {
    const made = await compare({ rules: ['fixed-speed', 'best-count'] });
    expect(made.headers.location).toBe(`/api/comparisons/${made.body.id}`);
    expect(made.body).toMatchObject({
      ...ids,
      createdAt: new Date(NOW).toISOString().replace('.000', ''),
      format: 'nth-pump/result/1',
      record: { intervals: 47, hours: 47, gapHours: 1 },
    });
    expect(made.body.rules.map((rule: { rule: string }) => rule.rule)).toEqual(['fixed-speed', 'best-count']);
    for (const rule of made.body.rules) expect(rule.energyCost / rule.energyKwh).toBeCloseTo(0.2, 9); // the one rate
    expect((await api.http.get(`/api/comparisons/${made.body.id}`)).body).toEqual(made.body);
    const list = await api.http.get('/api/comparisons').query({ stationId: ids.stationId });
    expect(list.body).toEqual([{ id: made.body.id, ...ids, createdAt: made.body.createdAt }]);
    expect((await api.http.get('/api/stations')).body[0].tariffId).toBe(ids.tariffId);
  });

  it('without a tariff has energy and no money', async () => {
    const { body } = await compare({ tariffId: null });
    expect(body.tariffId).toBeNull();
    expect(body.rules.length).toBeGreaterThan(1);
    for (const rule of body.rules) {
      expect(rule.energyKwh).toBeGreaterThan(0);
      expect(Object.keys(rule).filter((key) => /cost|months|carbon/i.test(key))).toEqual([]);
    }
  });

  it('keeps what it was made from when station and tariff change', async () => {
    const before = await compare();
    const curve = (await api.http.get(`/api/comparisons/${before.body.id}/power-over-flow`)).body;
    await api.http
      .put(`/api/stations/${ids.stationId}`)
      .send(aStationFile({ system: { staticHead: 4, friction: { coefficient: 0.001 } } }));
    await api.http.put(`/api/tariffs/${ids.tariffId}`).send(aTariffFile({ energy: [{ name: 'all', rate: 0.4 }] }));
    // A second server on the same database has nothing in memory.
    const again = served({ db: api.db });
    expect((await again.http.get(`/api/comparisons/${before.body.id}`)).body).toEqual(before.body);
    expect((await again.http.get(`/api/comparisons/${before.body.id}/power-over-flow`)).body).toEqual(curve);
  });

  it('moves with the static head: crossings, table and bill', async () => {
    const before = (await compare()).body;
    const curveBefore = (await api.http.get(`/api/comparisons/${before.id}/power-over-flow`)).body;
    await api.http
      .put(`/api/stations/${ids.stationId}`)
      .send(aStationFile({ system: { staticHead: 6, friction: { coefficient: 0.001 } } }));
    const after = (await compare()).body;
    const curveAfter = (await api.http.get(`/api/comparisons/${after.id}/power-over-flow`)).body;
    expect([curveBefore.staticHeadM, curveAfter.staticHeadM]).toEqual([12, 6]);
    expect(curveAfter.crossings[0].flowM3s).not.toBeCloseTo(curveBefore.crossings[0].flowM3s, 3);
    for (const rule of ['fixed-speed', 'best-count']) {
      // The same water at half the lift: lift energy halves exactly, the totals fall.
      const [high, low] = [ruleOf(before, rule), ruleOf(after, rule)];
      expect((low.ledgerKwh as unknown as { lift: number }).lift).toBeCloseTo(
        (high.ledgerKwh as unknown as { lift: number }).lift / 2,
        9,
      );
      expect(low.totalCost).toBeLessThan(high.totalCost!);
    }
  });

  it('of a what-if takes the station sent and leaves the stored one alone', async () => {
    const changed = aStationFile({ system: { staticHead: 6, friction: { coefficient: 0.001 } } });
    const { body } = await compare({ station: { id: 5, demo: true, ...changed } });
    await api.http.put(`/api/stations/${ids.stationId}`).send(changed);
    const stored = (await compare()).body;
    expect(body.rules).toEqual(stored.rules);
    expect(body.inputs).toEqual(stored.inputs);
    expect((await api.http.get(`/api/comparisons/${body.id}/power-over-flow`)).body.staticHeadM).toBe(6);
    await api.http.put(`/api/stations/${ids.stationId}`).send(aStationFile());
    expect((await compare()).body.rules).not.toEqual(body.rules);
    const negative = aStationFile({ system: { staticHead: -1, friction: { coefficient: 0.001 } } });
    const refused = await api.http
      .post('/api/comparisons')
      .send({ ...ids, station: negative })
      .expect(422);
    expect(refused.body.errors).toEqual(['system.staticHead']);
  });

  it('leaves pumps out', async () => {
    const { body } = await compare({ without: ['P-2'], rules: ['fixed-speed'] });
    expect(body.without).toEqual(['P-2']);
    expect(Object.keys(body.rules[0].hoursByCount)).toEqual(['0', '1']);
    expect(body.rules[0].shortfallM3).toBeGreaterThan(0);
  });

  it('gives its pictures', async () => {
    const { body } = await compare({ rules: ['fixed-speed', 'best-count'] });
    const at = `/api/comparisons/${body.id}`;
    const curve = (await api.http.get(`${at}/power-over-flow`).expect(200)).body;
    expect(curve.counts.map((each: { count: number }) => each.count)).toEqual([1, 2]);
    const hours = curve.hours.reduce((sum: number, each: { hours: number }) => sum + each.hours, 0);
    expect(hours).toBeCloseTo(47, 9);

    const whole = (await api.http.get(`${at}/series`).query({ rule: 'best-count' }).expect(200)).body;
    expect(whole).toMatchObject({ rule: 'best-count', exact: true });
    expect(whole.startMs).toHaveLength(47);
    const energy = whole.powerKw.reduce((sum: number, kw: number) => sum + kw, 0); // an hour each
    expect(energy).toBeCloseTo(ruleOf(body, 'best-count').energyKwh!, 6);
    const few = (await api.http.get(`${at}/series`).query({ rule: 'best-count', buckets: 10 })).body;
    expect(few.startMs.length).toBeLessThanOrEqual(12); // ten, and one more at most after the gap and at the end
    const day = { rule: 'best-count', fromMs: Date.UTC(2025, 0, 6), toMs: Date.UTC(2025, 0, 7) };
    expect((await api.http.get(`${at}/series`).query(day)).body.startMs).toHaveLength(24);
  });

  it.each([
    ['a rule that was not run', { rule: 'fixed-speed' }, 404, 'rule'],
    ['a rule that is none', { rule: 'worst-count' }, 422, 'rule'],
    ['no rule', {}, 422, 'rule'],
    ['too few buckets', { rule: 'best-count', buckets: 1 }, 422, 'buckets'],
    ['buckets in words', { rule: 'best-count', buckets: 'many' }, 422, 'buckets'],
  ])('has no series for %s', async (_, query, status, path) => {
    const { body } = await compare({ rules: ['best-count'] });
    const answer = await api.http.get(`/api/comparisons/${body.id}/series`).query(query);
    expect([answer.status, answer.body.errors]).toEqual([status, [path]]);
    expect(api.bugs).toEqual([]);
  });

  it.each([
    ['a station unknown', { stationId: 99 }, 404, 'stationId'],
    ['a record unknown', { recordId: 'x' }, 404, 'recordId'],
    ['a tariff unknown', { tariffId: 99 }, 404, 'tariffId'],
    ['a rule unknown', { rules: ['worst-count'] }, 422, 'rules'],
    ['no rule at all', { rules: [] }, 422, 'rules'],
    ['a pump unknown', { without: ['P-9'] }, 422, 'without'],
    ['no pump left', { without: ['P-1', 'P-2'] }, 422, 'without'],
    ['a field too many', { colour: 'red' }, 422, 'colour'],
    ['an id of the wrong kind', { recordId: [1] }, 422, 'recordId'],
  ])('of %s is refused with the field', async (_, wrong, status, path) => {
    const answer = await api.http.post('/api/comparisons').send({ ...ids, ...wrong });
    expect([answer.status, answer.type]).toEqual([status, 'application/problem+json']);
    expect(answer.body.errors).toEqual([path]);
    expect(rowCounts(api.db).comparison).toBe(0);
    expect(api.bugs).toEqual([]);
  });

  it('of a record of another station, or in another currency, is refused', async () => {
    const other = (await api.http.post('/api/stations').send(aStationFile({ currency: 'USD' }))).body.id;
    const ofOther = await api.http
      .post('/api/comparisons')
      .send({ ...ids, stationId: other })
      .expect(404);
    expect(ofOther.body.errors).toEqual(['recordId']);
    await api.http.put(`/api/stations/${ids.stationId}`).send(aStationFile({ currency: 'USD' }));
    const dollars = await api.http.post('/api/comparisons').send(ids).expect(422);
    expect(dollars.body.faults[0].code).toBe('currency_mismatch');
    expect(api.bugs).toEqual([]);
  });
});
