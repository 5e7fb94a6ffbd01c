import { describe, expect, it } from 'vitest';
import { pumpPicture } from '../../client/edit/livePicture.ts';
import { newStation, newTariff } from '../../client/edit/newFiles.ts';
import { pathText, valueAt, withValue } from '../../client/edit/paths.ts';
import { curveAs, firstSteps, frictionAs } from '../../client/edit/reshape.ts';
import { DAYS } from '../../client/edit/TariffForm.tsx';
import { weekOfPrices } from '../../client/edit/weekOfPrices.ts';
import { faultsOf } from '../../client/faults.ts';
import { niceTicks } from '../../client/series.ts';
import { readStation } from '../../server/station/readStation.ts';
import type { StationFile } from '../../server/station/stationFile.ts';
import { readTariff } from '../../server/tariff/tariffFile.ts';
import { aStationFile } from '../support/aStation.ts';

const read = (file: unknown) => readStation(file, 'station.json');

describe('a path of a file', () => {
  it('is written to without touching the rest', () => {
    const file = { a: { b: 1 }, list: [{ x: 1 }, { x: 2 }] };
    const next = withValue(file, ['list', 1, 'x'], 3);
    expect(next).toEqual({ a: { b: 1 }, list: [{ x: 1 }, { x: 3 }] });
    expect(next.a).toBe(file.a);
    expect(file.list[1]).toEqual({ x: 2 });
  });

  it('makes what it passes through where that is missing', () => {
    expect(withValue({}, ['rules', 'flow-steps', 'bringOn', 0], 5)).toEqual({
      rules: { 'flow-steps': { bringOn: [5] } },
    });
  });

  it('takes fields and entries away, and with the last field of an optional part the part', () => {
    expect(withValue({ storage: { activeVolume: 5 }, name: 'x' }, ['storage', 'activeVolume'], undefined)).toEqual({
      name: 'x',
    });
    expect(withValue({ rules: { 'flow-steps': { bringOn: [1] } } }, ['rules', 'flow-steps'], undefined)).toEqual({});
    expect(withValue({ list: [1, 2, 3] }, ['list', 1], undefined)).toEqual({ list: [1, 3] });
    // A part that must be there stays, so that its fault has a place.
    expect(withValue({ friction: { coefficient: 1 } }, ['friction', 'coefficient'], undefined)).toEqual({
      friction: {},
    });
  });

  it('reads what is there, and is named as faults name it', () => {
    expect(valueAt({ a: [{ b: 7 }] }, ['a', 0, 'b'])).toBe(7);
    expect(valueAt({ a: null }, ['a', 0, 'b'])).toBeUndefined();
    expect(pathText(['pumps', 0, 'curve', 'bestFlow'])).toBe('pumps[0].curve.bestFlow');
  });
});

describe('faults in a form', () => {
  it('stand at the field they belong to, all of them', () => {
    const file = withValue(
      withValue(aStationFile(), ['pumps', 0, 'curve', 'bestFlow'], undefined),
      ['system', 'staticHead'],
      -1,
    );
    const faults = faultsOf(() => read(file));
    expect(faults.get('system.staticHead')).toBe('found -1; wanted 0 or more');
    expect(faults.get('pumps[0].curve.bestFlow')).toMatch(/^found nothing; wanted a number/);
    expect(faultsOf(() => read(aStationFile())).size).toBe(0);
  });

  it('are not made of bugs', () => {
    expect(() =>
      faultsOf(() => {
        throw new TypeError('a bug');
      }),
    ).toThrow(TypeError);
  });
});

describe('files to begin with', () => {
  it.each([true, false])('have no fault, US units: %s', (us) => {
    const place = { timeZone: 'Europe/Dublin', us };
    const station = read(newStation(place));
    expect(station.duty).toHaveLength(2);
    expect(pumpPicture(station).counts.every(({ point }) => point !== null && !point.overloaded)).toBe(true);
    expect(readTariff(newTariff(place, 'EUR'), 'tariff.json').energy).toHaveLength(2);
  });
});

describe('the same thing said another way', () => {
  const parabola = { shutoffHead: 30, shape: 0.003, bestFlow: 50, bestEfficiency: 0.78 };

  it('keeps a parabola through one point: 30 − 0.003·50² = 22.5', () => {
    const point = curveAs(parabola, 'point');
    expect(point).toMatchObject({ shutoffHead: 30, operatingPoint: { flow: 50, head: 22.5 } });
    expect(curveAs(point, 'shape')).toMatchObject({ shutoffHead: 30, shape: 0.003, bestFlow: 50 });
    expect(curveAs(parabola, 'shape')).toBe(parabola);
  });

  it('makes of a parabola a table on it, which the server reads', () => {
    const table = curveAs(parabola, 'points') as { points: { flow: number; head: number; efficiency: number }[] };
    for (const { flow, head, efficiency } of table.points) {
      expect(head).toBeCloseTo(30 - 0.003 * flow ** 2, 3);
      expect(efficiency).toBeCloseTo(0.78 * (flow / 50) * (2 - flow / 50), 4);
    }
    const file = withValue(aStationFile(), ['pumps', 0, 'curve'], table);
    expect(faultsOf(() => read(file)).size).toBe(0);
  });

  it('keeps the loss where friction is told by a point instead', () => {
    const file = aStationFile() as StationFile;
    const points = withValue(file, ['system', 'friction'], frictionAs(file, 'points'));
    const back = withValue(points, ['system', 'friction'], frictionAs(points, 'coefficient'));
    for (const each of [points, back]) expect(read(each).friction.at(0.05)).toBeCloseTo(2.5, 3); // 0.001 · 50²
    expect(faultsOf(() => read(withValue(file, ['system', 'friction'], frictionAs(file, 'pipes')))).size).toBe(0);
  });

  it('begins a step table that the server reads', () => {
    const steps = firstSteps(aStationFile() as StationFile, 1);
    expect(steps.bringOn).toEqual([50]);
    expect(faultsOf(() => read(withValue(aStationFile(), ['rules', 'flow-steps'], steps))).size).toBe(0);
  });
});

describe('the live picture', () => {
  it('has pumps and system meet where both curves say so', () => {
    const picture = pumpPicture(read(aStationFile()));
    for (const { count, point } of picture.counts) {
      // 30 − 0.003·(Q/n)² = 12 + 0.001·Q², in L/s
      const flow = Math.sqrt(18 / (0.003 / count ** 2 + 0.001));
      expect(point!.flow * 1000).toBeCloseTo(flow, 8);
      expect(point!.head).toBeCloseTo(12 + 0.001 * flow ** 2, 8);
    }
    for (const { flow, head } of picture.system) expect(head).toBeCloseTo(12 + 0.001 * (1000 * flow) ** 2, 8);
    for (const { flow, head } of picture.counts[1]!.curve) expect(head).toBeCloseTo(30 - 0.003 * (500 * flow) ** 2, 6);
  });

  it('has no point where the pumps cannot lift', () => {
    const high = withValue(aStationFile(), ['system', 'staticHead'], 40);
    expect(pumpPicture(read(high)).counts.map(({ point }) => point)).toEqual([null, null]);
  });

  it('takes pumps that differ, in the order of the station', () => {
    const [one] = aStationFile().pumps as object[];
    const pumps = [
      { ...one, count: 1 },
      { ...one, name: 'Big', count: 1, curve: { shutoffHead: 30, shape: 0.001, bestFlow: 80, bestEfficiency: 0.8 } },
    ];
    const [, both] = pumpPicture(read({ ...aStationFile(), pumps })).counts;
    // Both give into one header H: Q = √((30 − H)/0.003) + √((30 − H)/0.001), and H = 12 + 0.001·Q².
    const { flow, head } = both!.point!;
    const spare = 30 - head;
    expect(flow * 1000).toBeCloseTo(Math.sqrt(spare / 0.003) + Math.sqrt(spare / 0.001), 6);
    expect(head).toBeCloseTo(12 + 0.001 * (1000 * flow) ** 2, 8);
  });

  it('is there within a tenth of a second, twenty pumps with tables of points included', () => {
    const [one] = aStationFile().pumps as object[];
    const points = [0, 20, 40, 50, 60, 75].map((flow) => ({
      flow,
      head: 30 - 0.003 * flow ** 2,
      efficiency: 0.78 * (flow / 50) * (2 - flow / 50),
    }));
    const file = { ...aStationFile(), pumps: [{ ...one, count: 20, curve: { points } }] };
    pumpPicture(read(file));
    const times = Array.from({ length: 5 }, () => {
      const from = performance.now();
      pumpPicture(read(file));
      return performance.now() - from;
    });
    expect(Math.min(...times)).toBeLessThan(100);
  });
});

describe('a week of prices', () => {
  const tariff = {
    ...newTariff({ timeZone: 'Europe/Dublin' }, 'EUR'),
    seasons: [
      { name: 'winter', from: '11-01', to: '02-28' },
      { name: 'rest', from: '03-01', to: '10-31' },
    ],
    energy: [
      {
        name: 'peak',
        season: 'winter',
        days: ['mon', 'tue', 'wed', 'thu', 'fri'],
        from: '17:00',
        to: '19:00',
        rate: 0.33,
      },
      { name: 'night', from: '23:00', to: '08:00', rate: 0.13 },
      { name: 'day', rate: 0.2 },
    ],
  };

  it('takes of the prices that fit the first, over midnight too', () => {
    const [winter, rest] = weekOfPrices(readTariff(tariff, 'tariff.json'));
    const at = (week: typeof winter, day: number, hour: number) => week!.days[day]![hour];
    expect([winter!.season, rest!.season]).toEqual(['winter', 'rest']);
    expect([at(winter, 0, 16), at(winter, 0, 17), at(winter, 0, 18), at(winter, 0, 19)]).toEqual([
      0.2, 0.33, 0.33, 0.2,
    ]);
    expect([at(winter, 5, 17), at(rest, 0, 17)]).toEqual([0.2, 0.2]);
    expect([at(rest, 6, 22), at(rest, 6, 23), at(rest, 6, 7), at(rest, 6, 8)]).toEqual([0.2, 0.13, 0.13, 0.2]);
  });

  it('shows hours without a price', () => {
    const gap = { ...tariff, energy: [{ name: 'night', from: '23:00', to: '08:00', rate: 0.13 }] };
    expect(weekOfPrices(readTariff(gap, 'tariff.json'))[0]!.days[0]![12]).toBeNull();
  });

  it.each([undefined, ['mon', 'tue', 'wed', 'thu', 'fri'], ['sat', 'sun'], ['mon', 'fri']])(
    'names days %o and back',
    (days) => {
      expect(DAYS.write(DAYS.read(days))).toEqual(days);
    },
  );
});

describe('ticks of an axis', () => {
  it.each([
    [0, 106, 7, [0, 20, 40, 60, 80, 100]],
    [8.1, 13.2, 6, [9, 10, 11, 12, 13]],
    [0, 0.3, 3, [0, 0.1, 0.2, 0.3]],
    [5, 5, 4, []],
  ])('from %s to %s, about %s', (from, to, wanted, ticks) => {
    expect(niceTicks(from, to, wanted)).toEqual(ticks);
  });
});
