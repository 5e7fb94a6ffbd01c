import { linearRegression } from 'simple-statistics';
import { describe, expect, it } from 'vitest';
import { EqualPumps } from '../../server/staging/equalPumps.ts';
import { MixedPumps } from '../../server/staging/mixedPumps.ts';
import { readStation } from '../../server/station/readStation.ts';
import { FLOW_UNITS, FOOT } from '../../server/units.ts';
import { aStationFile } from '../support/aStation.ts';

const off = (found: number, wanted: number): number => Math.abs(found / wanted - 1);
const motor = { efficiency: 1 };
/** One cubic foot per second [m³/s], exact. */
const CFS = FOOT ** 3;

function stationOf(units: object, system: object, pumps: readonly object[]) {
  return readStation(aStationFile({ units, system, pumps }), 'station.json');
}

describe('different pumps in parallel', () => {
  // G. M. Fair, J. C. Geyer and D. A. Okun, Water and Wastewater Engineering, 3rd ed., Table 8.1, p. 275: mgd and ft of
  // three pumps alone, of which a parabola is laid through each three points, and of pairs. The pairs at the other four
  // heads of the table lie above the points of one of their pumps, and are left out.
  const ALONE: readonly (readonly (readonly [number, number])[])[] = [
    [
      [10, 81],
      [15, 66],
      [16.5, 62],
    ],
    [
      [21, 83],
      [25, 78],
      [28.5, 66],
    ],
    [
      [33.5, 88],
      [37, 84],
      [40.5, 73],
    ],
  ];
  const pumps = ALONE.map((points, i) => {
    const { m, b } = linearRegression(points.map(([flow, head]) => [flow * flow, head]));
    const curve = { shutoffHead: b, shape: -m, bestFlow: points[1]![0], bestEfficiency: 0.89 };
    return { name: `No.${i + 1}`, curve, motor };
  });

  it.each([
    // pair, head, flow printed, flow by adding the parabolas at that head, worked out independently
    ['1 and 2 at 80 ft', [0, 1], 80, 34, 33.4],
    ['1 and 2 at 73 ft', [0, 1], 73, 40, 39.17],
    ['1 and 3 at 85 ft', [0, 2], 85, 43.5, 43.44],
    ['1 and 3 at 79 ft', [0, 2], 79, 49.5, 49.09],
    ['2 and 3 at 84 ft', [1, 2], 84, 56.5, 57.09],
  ])('agree with a handbook: %s', (_, pair, head, printed, added) => {
    const two = pair.map((i) => pumps[i]!);
    const system = { staticHead: head, friction: { coefficient: 0 } };
    const station = stationOf({ flow: 'MGD', head: 'ft', power: 'hp' }, system, two);
    const state = new MixedPumps(station, station.duty).fixed(2);
    expect(state.count).toBe(2);
    const mgd = state.flow / FLOW_UNITS.MGD;
    expect(Math.abs(mgd - added)).toBeLessThan(0.006); // two decimals
    expect(off(mgd, printed)).toBeLessThan(0.022); // the table was read off drawn curves
  });

  it('leave out a pump that cannot open its check valve', () => {
    // No. 1 stops at 97.5 ft by its parabola, No. 3 at 123 ft
    const system = { staticHead: 100, friction: { coefficient: 0 } };
    const station = stationOf({ flow: 'MGD', head: 'ft', power: 'hp' }, system, [pumps[0]!, pumps[2]!]);
    const state = new MixedPumps(station, station.duty).fixed(2);
    expect(state.running.map(({ pump }) => pump.name)).toEqual(['No.3']);
  });
});

describe('equal pumps, solved as if they differed', () => {
  it.each([1, 2, 3, 5])('%s in parallel meet the closed form Q = √((H0 − H_st)/(k + a/n²))', (n) => {
    const curve = { shutoffHead: 30, shape: 0.003, bestFlow: 50, bestEfficiency: 0.8 };
    const station = stationOf(
      { flow: 'L/s', head: 'm', power: 'kW' },
      { staticHead: 12, friction: { coefficient: 0.001 } },
      [{ name: 'P', count: 5, curve, motor }],
    );
    const flow = 1000 * new MixedPumps(station, station.duty).fixed(n).flow;
    expect(off(flow, Math.sqrt(18 / (0.001 + 0.003 / n ** 2)))).toBeLessThan(1e-12);
  });
});

describe('one pump, two in series and two in parallel', () => {
  // Textbook problem (assignmentexpert.com question-59885; no answers shown, these worked out independently):
  // h = 365 − 20·Q² (cfs, ft), 290 ft of lift, 90 ft of 10 in with f 0.022 and 4900 ft of 8 in with f 0.028.
  const k = [
    [90, 10, 0.022],
    [4900, 8, 0.028],
  ].reduce((sum, [length, inches, f]) => {
    const diameter = inches! / 12;
    return sum + (f! * length!) / diameter / (64.4 * ((Math.PI / 4) * diameter ** 2) ** 2);
  }, 0);
  const state = (count: number, inSeries: number) => {
    const curve = { shutoffHead: 365, shape: 20 / CFS ** 2, bestFlow: 2 * CFS, bestEfficiency: 0.8 };
    const station = stationOf(
      { flow: 'm3/s', head: 'ft', power: 'hp' },
      { staticHead: 290, friction: { coefficient: k / CFS ** 2 } },
      [{ name: 'P', count, inSeries, curve, motor }],
    );
    const found = new EqualPumps(station, station.duty).fixed(count);
    const { pump, flow } = found.running[0]!;
    return { cfs: found.flow / CFS, feet: pump.head(flow, 1) / FOOT };
  };

  it('has the friction of its pipes', () => expect(k).toBeCloseTo(26.351, 3));

  it.each([
    ['one', 1, 1, 1.272, 332.64],
    ['two in series', 1, 2, 2.5752, 464.74],
    ['two in parallel', 2, 1, 1.5467, 353.04],
  ])('%s', (_, count, inSeries, cfs, feet) => {
    const found = state(count, inSeries);
    expect(Math.abs(found.cfs - cfs)).toBeLessThan(6e-5);
    expect(Math.abs(found.feet - feet)).toBeLessThan(6e-3);
  });

  it('combine as in a textbook: 12 − 0.10·Q² thrice is 36 − 0.30·Q² in series, 12 − 0.0111·Q² in parallel', () => {
    // D. A. Chin, Water-Resources Engineering, Example 2.13 (the problem; the curves by algebra)
    const curve = { shutoffHead: 12, shape: 0.1, bestFlow: 6, bestEfficiency: 0.8 };
    const units = { flow: 'm3/s', head: 'm', power: 'kW' };
    const train = stationOf(units, { staticHead: 1, friction: { coefficient: 0 } }, [
      { name: 'T', inSeries: 3, curve, motor },
    ]);
    expect(train.duty[0]!.head(5, 1)).toBeCloseTo(36 - 0.3 * 25, 12);
    const three = stationOf(units, { staticHead: 9, friction: { coefficient: 0 } }, [
      { name: 'P', count: 3, curve, motor },
    ]);
    const { flow } = new EqualPumps(three, three.duty).fixed(3);
    expect(12 - (0.1 / 9) * flow ** 2).toBeCloseTo(9, 10);
    expect(off(12 - 0.0111 * flow ** 2, 9)).toBeLessThan(0.001);
  });
});

describe('curves read from tables', () => {
  const table = (rows: readonly (readonly [number, number])[]) => ({
    points: rows.map(([flow, head]) => ({ flow, head, efficiency: 0.7 })),
  });
  const gpm = (curve: object, count: number, system: object) => {
    const units = { flow: 'gpm', head: 'ft', power: 'hp' };
    const station = stationOf(units, system, [{ name: 'P', count, curve, motor }]);
    return new EqualPumps(station, station.duty).fixed(count).flow / FLOW_UNITS.gpm;
  };

  it('two alike give twice the flow of one at a head: pumpworld.com, parallel pumping', () => {
    // Printed off a graph: one gives 470 gpm at 85 ft, two 660 gpm at 105 ft
    const curve = table([
      [100, 130],
      [190, 120],
      [280, 110],
      [360, 100],
      [470, 85],
    ]);
    expect(off(gpm(curve, 1, { staticHead: 85, friction: { coefficient: 0 } }), 470)).toBeLessThan(1e-9);
    expect(off(gpm(curve, 2, { staticHead: 105, friction: { coefficient: 0 } }), 660)).toBeLessThan(0.035);
  });

  it('meet their system where lecture notes find them: Texas Tech CE 3305, lesson 27, example 1', () => {
    // f 0.02, 1000 ft of 10 in, K 0.03 + 0.35 + 1.0, lift 10 ft. Printed about 3000 gpm; with straight lines between
    // the points 2951.4 gpm, worked out independently.
    const curve = table([
      [0, 76],
      [500, 75],
      [1000, 74],
      [1500, 73],
      [2000, 72],
      [2500, 70],
      [3000, 67],
      [3500, 59],
      [4000, 50],
      [4500, 22],
      [4900, 0],
    ]);
    const area = (Math.PI / 4) * (10 / 12) ** 2;
    const perCfs = ((0.02 * 1000) / (10 / 12) + 1.38) / (64.4 * area ** 2);
    const coefficient = perCfs * (FLOW_UNITS.gpm / CFS) ** 2;
    const found = gpm(curve, 1, { staticHead: 10, friction: { coefficient } });
    expect(off(found, 3000)).toBeLessThan(0.02);
    expect(off(found, 2951.4)).toBeLessThan(0.002);
  });

  it('meet the system of the Hydraulic Institute’s worked example', () => {
    // HI Data Library I.A and I.C: (0, 380), (150, 330.5), (200, 296), (300, 200) on 265 + 7.75e-4·Q²: 200 gpm. Two and
    // three alike, by the parabola H = 380 − 0.06·Q − 0.0018·Q² through the same points: 294.39 and 333.33 gpm.
    const curve = table([
      [0, 380],
      [150, 330.5],
      [200, 296],
      [300, 200],
    ]);
    const system = { staticHead: 265, friction: { coefficient: 7.75e-4 } };
    expect(off(gpm(curve, 1, system), 200)).toBeLessThan(1e-9);
    expect(off(gpm(curve, 1, { ...system, staticHead: 275 }), 190.6)).toBeLessThan(0.002);
    expect(off(gpm(curve, 2, system), 294.39)).toBeLessThan(0.005);
    expect(off(gpm(curve, 3, system), 333.33)).toBeLessThan(0.015);
  });
});
