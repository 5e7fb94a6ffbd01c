import { beforeAll, describe, expect, it } from 'vitest';
import { FixedSet } from '../../server/staging/fixedSet.ts';
import { MixedPumps } from '../../server/staging/mixedPumps.ts';
import { setLadder } from '../../server/staging/setLadder.ts';
import { readStation } from '../../server/station/readStation.ts';
import { aRecordCsv, aStationFile } from '../support/aStation.ts';
import { type Served, served } from './support.ts';

/** A jockey without a drive, a pump with one, and a bigger one without. */
const motor = { ratedPower: 40, efficiency: 0.92 };
const FILE = aStationFile({
  pumps: [
    { name: 'J', curve: { shutoffHead: 24, shape: 0.03, bestFlow: 16, bestEfficiency: 0.72 }, motor },
    {
      name: 'A',
      curve: { shutoffHead: 30, shape: 0.003, bestFlow: 50, bestEfficiency: 0.78 },
      motor,
      drive: { fitted: true, minSpeed: 0.5, maxSpeed: 1, efficiency: 0.97 },
    },
    { name: 'B', curve: { shutoffHead: 33, shape: 0.0025, bestFlow: 60, bestEfficiency: 0.8 }, motor },
  ],
});

let api: Served;
let at: string;
let stationId: number;

beforeAll(async () => {
  api = served();
  stationId = (await api.http.post('/api/stations').send(FILE)).body.id;
  const csv = api.http.post(`/api/stations/${stationId}/records`).set('Content-Type', 'text/csv').send(aRecordCsv());
  const made = await api.http.post('/api/comparisons').send({ stationId, recordId: (await csv).body.id });
  at = `/api/comparisons/${made.body.id}`;
});

describe('pictures of pumps that differ', () => {
  it.each(['best-count', 'one-trimmed', 'batch', 'fixed-speed'])(
    '%s: pumps run as long as the result says',
    async (rule) => {
      const { rules } = (await api.http.get(at)).body as {
        rules: { rule: string; hoursBySet: Record<string, number> }[];
      };
      const result = rules.find((each) => each.rule === rule)!;
      // Whole hours, and buckets that hold several.
      for (const buckets of [100, 12]) {
        const { body } = await api.http.get(`${at}/series?rule=${rule}&buckets=${buckets}`).expect(200);
        for (const { name, share } of body.pumps as { name: string; share: number[] }[]) {
          const said = Object.entries(result.hoursBySet)
            .filter(([set]) => set.split('+').includes(name))
            .reduce((sum, [, hours]) => sum + hours, 0);
          const hours = share.reduce((sum, each, i) => sum + (each * (body.endMs[i] - body.startMs[i])) / 3600_000, 0);
          expect(hours, `${name}, ${buckets} buckets`).toBeCloseTo(said, 4); // shares are kept in single precision
        }
      }
    },
  );

  it('show the set that advice gives at the same flow', async () => {
    const { body } = await api.http.get(`${at}/power-over-flow`).expect(200);
    expect(body.alike).toBe(false);
    expect(body.stretches.length).toBeGreaterThan(2);
    for (const { set, fromM3s, toM3s } of body.stretches) {
      const middle = ((fromM3s + toM3s) / 2) * 1000;
      const advice = (await api.http.get(`/api/stations/${stationId}/advice?flow=${middle}`)).body;
      const names = advice.best.pumps.map(({ name }: { name: string }) => name);
      expect(names, `${middle} L/s`).toEqual(body.sets[set].pumps);
    }
  });

  it('name in the map the set that the picture over flow has at the same static head', async () => {
    const [map, power] = await Promise.all(
      ['map', 'power-over-flow'].map(async (p) => (await api.http.get(`${at}/${p}`)).body),
    );
    const row = map.staticHeadM.findIndex((head: number) => head >= power.staticHeadM);
    const head = map.staticHeadM[row];
    const moved = { ...FILE, system: { ...(FILE.system as object), staticHead: head } };
    const station = readStation(moved, 'station.json');
    const ladder = setLadder(new MixedPumps(station, station.duty), 0.01);
    const wide = map.flowM3s[1] - map.flowM3s[0];
    for (const [column, flow] of (map.flowM3s as number[]).entries()) {
      const here = ladder.find(({ from, to }) => flow > from + wide / 10 && flow < to - wide / 10);
      const index = map.set[row][column];
      if (!here || index === null) continue;
      expect(map.sets[index]).toEqual(here.places.map((place) => station.duty[place]!.name));
      expect(map.count[row][column]).toBe(here.places.length);
    }
  });
});

describe('a change of sets', () => {
  it('comes where staying costs the band more, or the set can go no further, and goes back likewise', () => {
    const station = readStation(FILE, 'station.json');
    const pumps = new MixedPumps(station, station.duty);
    const band = 0.01;
    const ladder = setLadder(pumps, band);
    const power = (set: number, flow: number) => new FixedSet(pumps, set).figuresAt(flow)?.power ?? Infinity;
    for (const [i, { set, from, to, change }] of ladder.entries()) {
      if (change === null) {
        expect(i).toBe(0);
        continue;
      }
      const below = ladder[i - 1]!;
      const { bringOn, dropOff } = change;
      expect(bringOn).toBeGreaterThanOrEqual(from);
      expect(dropOff).toBeLessThanOrEqual(bringOn * (1 - band) * (1 + 1e-12));
      const dear = (stay: number, other: number, flow: number) => power(stay, flow) / power(other, flow) - 1;
      // Rounding at the border itself, and where a set ends, is a hair of the flow.
      if (bringOn > from * (1 + 1e-6))
        expect(dear(below.set, set, bringOn * (1 - 1e-7))).toBeLessThanOrEqual(band * 1.001);
      if (bringOn < to * (1 - 1e-6)) expect(dear(below.set, set, bringOn * (1 + 1e-4))).toBeGreaterThan(band * 0.99);
    }
    expect(ladder.length).toBeGreaterThan(2);
  });
});

describe('gauge readings', () => {
  const lay = (readings: object[]) => api.http.post(`/api/stations/${stationId}/spot-readings`).send({ readings });

  it('are laid on the curves of the pumps that are named', async () => {
    const [reading] = (await lay([{ flow: 40, pumps: ['B'] }]).expect(200)).body.readings;
    // B alone: 33 − 0.0025·q² at 40 L/s, and 33 − 0.0025·Q² = 12 + 0.001·Q²
    expect(reading.curveHead).toBeCloseTo(33 - 0.0025 * 40 ** 2, 9);
    expect(reading.curveFlow).toBeCloseTo(Math.sqrt(21 / 0.0035), 6);
    expect(reading).toMatchObject({ pumps: ['B'], pumpsOn: 1 });
  });

  it('are refused where a name is not known, or where both ways or neither say who ran', async () => {
    const unknown = await lay([{ flow: 40, pumps: ['Z'] }]).expect(422);
    expect(JSON.stringify(unknown.body)).toMatch(/readings\[0\]\.pumps.*'Z'.*one of J, A, B/);
    for (const reading of [{ flow: 40 }, { flow: 40, pumps: ['A'], pumpsOn: 1 }]) {
      expect((await lay([reading])).status).toBe(422);
    }
    expect(api.bugs).toEqual([]);
  });
});
