import { beforeEach, describe, expect, it } from 'vitest';
import { aStationFile } from '../support/aStation.ts';
import { type Served, type StoredIds, served, storeThree } from './support.ts';

/** What the three people take away, over HTTP; expected values by formulas written out here, from the model alone. */

let api: Served;
let ids: StoredIds;

beforeEach(async () => {
  api = served();
  ids = await storeThree(api);
});

// The station of aStationFile: h = 30 − 0.003·q² and η = 0.78·(2x − x²) with x = q/50 (L/s, m), H_sys = 12 + 0.001·Q².
const RHO = 999.1026; // clean water at 15 °C, IAPWS-95 as quoted in the check values
const speed = (n: number, flow: number) => Math.sqrt((12 + 0.001 * flow ** 2 + 0.003 * (flow / n) ** 2) / 30);
const power = (n: number, flow: number) => {
  const q = flow / n;
  const s = speed(n, flow);
  const x = q / s / 50;
  const shaft = (RHO * 9.80665 * (q / 1000) * (12 + 0.001 * flow ** 2)) / (0.78 * (2 * x - x * x));
  return (n * shaft) / 0.92 / 0.97 / 1000;
};
const bisect = (f: (x: number) => number, a: number, b: number) => {
  let [low, high] = [a, b];
  const rising = f(b) > 0;
  for (let i = 0; i < 200; i++) {
    const middle = (low + high) / 2;
    if (f(middle) > 0 === rising) high = middle;
    else low = middle;
  }
  return (low + high) / 2;
};

describe('the operator’s card', () => {
  it('has its crossing, band and speeds where the formulas put them', async () => {
    const { body } = await api.http.get(`/api/stations/${ids.stationId}/card`).expect(200);
    const [step] = body.steps;
    const crossing = bisect((q) => power(1, q) - power(2, q), 20, 65);
    const bringOn = bisect((q) => power(1, q) - 1.01 * power(2, q), 20, 65);
    const dropOff = bisect((q) => 1.01 * power(1, q) - power(2, q), 20, 65);
    expect(step.flow).toBeCloseTo(crossing, 4); // the density of water is good to six figures
    expect(step.bringOn).toBeCloseTo(bringOn, 4);
    expect(step.dropOff).toBeCloseTo(dropOff, 4);
    expect(step.speedBefore).toBeCloseTo(speed(1, crossing), 5);
    expect(step.speedAfter).toBeCloseTo(speed(2, crossing), 5);
    expect(step.atBringOn.headerKpa).toBeCloseTo((RHO * 9.80665 * (12 + 0.001 * bringOn ** 2)) / 1000, 2);
    expect(body.cautions.join(' ')).toMatch(/controls nothing/);
  });

  it('moves with the static head, and with the band', async () => {
    const at = async (query: object) =>
      (await api.http.get(`/api/stations/${ids.stationId}/card`).query(query)).body.steps[0];
    const plain = await at({});
    expect((await at({ staticHead: 4 })).flow).not.toBeCloseTo(plain.flow, 1);
    const wide = await at({ bandPercent: 3 });
    expect(wide.flow).toBeCloseTo(plain.flow, 9);
    expect(wide.bringOn).toBeGreaterThan(plain.bringOn);
    expect(wide.dropOff).toBeLessThan(plain.dropOff);
  });

  it('says what staging late costs over the record of a comparison', async () => {
    const made = (await api.http.post('/api/comparisons').send(ids)).body;
    const { body } = await api.http.get(`/api/comparisons/${made.id}/card`).expect(200);
    const of = (rule: string) => made.rules.find((each: { rule: string }) => each.rule === rule);
    expect(body.lateStaging.energyKwh).toBeCloseTo(of('late-staging').energyKwh - of('best-count').energyKwh, 9);
    expect(body.lateStaging.energyKwh).toBeGreaterThan(0);
  });

  it.each([
    [{ staticHead: -1 }, 'staticHead'],
    [{ bandPercent: 0 }, 'band'],
    [{ bandPercent: 'x' }, 'bandPercent'],
    [{ without: 'Q' }, 'without'],
  ])('refuses %o', async (query, at) => {
    const { body, status } = await api.http.get(`/api/stations/${ids.stationId}/card`).query(query);
    expect(status).toBeGreaterThanOrEqual(400);
    expect(status).toBeLessThan(500);
    expect(JSON.stringify(body.faults)).toContain(at);
  });
});

describe('advice for a moment', () => {
  it('is the count of least power, with the next best and what it costs', async () => {
    const { body } = await api.http.get(`/api/stations/${ids.stationId}/advice`).query({ flow: 60 }).expect(200);
    expect(body.best.pumps.map((pump: { name: string }) => pump.name)).toEqual(['P-1', 'P-2']);
    expect(body.best.powerKw).toBeCloseTo(power(2, 60), 4);
    expect(body.best.pumps[0].speed).toBeCloseTo(speed(2, 60), 5);
    expect(body.best.kwhPerM3).toBeCloseTo(power(2, 60) / (0.06 * 3600), 6);
    expect(body.nextBest.extraKw).toBeCloseTo(power(1, 60) - power(2, 60), 4);
  });

  it('never proposes a state near dead-head while there is another', async () => {
    // Two pumps at 12 L/s: 6 each at a speed near 0.64, where best flow is 32: a share of 0.19.
    const { body } = await api.http.get(`/api/stations/${ids.stationId}/advice`).query({ flow: 12, staticHead: 2 });
    expect(body.best.pumps).toHaveLength(1);
  });

  it('says that a drive is only proposed, and nothing where it is fitted', async () => {
    const codes = async (id: number) =>
      (await api.http.get(`/api/stations/${id}/advice?flow=30`).expect(200)).body.notes.map(
        ({ code }: { code: string }) => code,
      );
    expect(await codes(ids.stationId)).toEqual(['proposed-drives']);
    const [pump] = aStationFile().pumps as [{ drive: object }];
    const fitted = aStationFile({ pumps: [{ ...pump, drive: { ...pump.drive, fitted: true } }] });
    expect(await codes((await api.http.post('/api/stations').send(fitted)).body.id)).toEqual([]);
  });

  it.each(['flow=', 'flow=%20', 'flow=30&staticHead=', 'flow=30&level='])(
    'takes no empty number for 0: %s',
    async (query) => {
      const { body } = await api.http.get(`/api/stations/${ids.stationId}/advice?${query}`).expect(422);
      expect(body.errors).toEqual([/(\w+)=(%20)?$/.exec(query)![1]]);
    },
  );

  it('tells a flow above capacity, and refuses a negative one', async () => {
    const beyond = (await api.http.get(`/api/stations/${ids.stationId}/advice`).query({ flow: 500 })).body;
    // Two pumps flat out: 30 − 0.003·(Q/2)² = 12 + 0.001·Q², Q = √(18/0.00175).
    expect(beyond.shortfall).toBeCloseTo(500 - Math.sqrt(18 / 0.00175), 6);
    await api.http.get(`/api/stations/${ids.stationId}/advice`).query({ flow: -1 }).expect(422);
    await api.http.get(`/api/stations/${ids.stationId}/advice`).query({ flow: 5, level: 1 }).expect(422);
  });
});

describe('the case', () => {
  const aCase = {
    format: 'nth-pump/case/1',
    baseline: 'fixed-speed',
    proposed: 'best-count',
    capital: 1000,
    incentive: 100,
    maintenanceSavingPerYear: -10,
    years: 4,
    discountRate: 0.05,
    energyEscalation: 0.02,
  };

  it('scales the record to a year and puts the saving through the terms', async () => {
    const made = (await api.http.post('/api/comparisons').send(ids)).body;
    const { body } = await api.http.post('/api/cases').send({ comparisonId: made.id, case: aCase }).expect(200);
    const of = (rule: string) => made.rules.find((each: { rule: string }) => each.rule === rule);
    // One rate, nothing but energy: 47 hours of record scaled by 8760/47.
    const saving = ((of('fixed-speed').totalCost - of('best-count').totalCost) * 8760) / 47;
    expect(body.annualCostSaving).toBeCloseTo(saving, 6);
    expect(body.annualEnergySavingKwh).toBeCloseTo(saving / 0.2, 6);
    let npv = -900;
    for (let year = 1; year <= 4; year++) npv += (saving * 1.02 ** year - 10) / 1.05 ** year;
    expect(body.npv).toBeCloseTo(npv, 6);
    expect(body.simplePaybackYears).toBeCloseTo(900 / (saving - 10), 6);
    expect(body.verdict).toBe(npv > 0 ? 'pays' : 'does-not-pay');
    expect(body.options.map((option: { rule: string }) => option.rule)).toEqual(['fixed-speed', 'best-count']);
    expect(body.reason).toMatch(/no drive can save/);
    const stored = await api.http
      .post('/api/cases')
      .send({ ...ids, case: aCase })
      .expect(200);
    expect(stored.body).toEqual(body);
  });

  it.each([
    [{ years: 0 }, 'years'],
    [{ proposed: 'flow-steps' }, 'proposed'],
    [{ options: [{ name: 'x', rule: 'nothing' }] }, 'options[0].rule'],
    [{ capital: -5 }, 'capital'],
  ])('refuses %o with its field', async (fields, at) => {
    const answer = await api.http.post('/api/cases').send({ ...ids, case: { ...aCase, ...fields } });
    expect(answer.status).toBe(422);
    expect(answer.body.faults[0].at).toBe(at);
  });
});

describe('a comparison asked for twice', () => {
  it('is the one that is there, until a file changes', async () => {
    const ask = async () => (await api.http.post('/api/comparisons').send(ids)).body.id;
    const first = await ask();
    expect(await ask()).toBe(first);
    await api.http.put(`/api/stations/${ids.stationId}`).send(aStationFile({ standbyPower: 0.2 }));
    expect(await ask()).not.toBe(first);
  });
});

describe('readings on the curves', () => {
  it('lie where the formulas put them', async () => {
    const answer = await api.http
      .post(`/api/stations/${ids.stationId}/spot-readings`)
      .send({ readings: [{ flow: 50, head: 21, powerKw: 14, pumpsOn: 1 }] })
      .expect(200);
    const [reading] = answer.body.readings;
    expect(reading.curveHead).toBeCloseTo(30 - 0.003 * 50 ** 2, 9);
    expect(reading.systemHead).toBeCloseTo(12 + 0.001 * 50 ** 2, 9);
    expect(reading.curveFlow).toBeCloseTo(Math.sqrt(18 / 0.004), 6);
    expect(reading.curvePowerKw).toBeCloseTo((RHO * 9.80665 * 0.05 * 22.5) / 0.78 / 0.92 / 1000, 4);
  });
});
