import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { Pump } from '../../server/hydraulics/pump.ts';
import { ParabolaCurve, type PumpCurve, speedCorrection, TableCurve } from '../../server/hydraulics/pumpCurve.ts';

const SEEDED = { seed: 3, numRuns: 200 };

const DENSITY = 1000;
const G = 9.80665;
const common = { maxFlow: null, speedCorrection: false, density: DENSITY };

/** 30 m at shut-off, 0.05 m³/s at best, SI throughout. */
const parabola = (changes: Partial<ConstructorParameters<typeof ParabolaCurve>[0]> = {}) =>
  new ParabolaCurve({ shutoffHead: 30, shape: 3000, bestFlow: 0.05, bestEfficiency: 0.78, ...common, ...changes });

const FLOWS = [0, 0.02, 0.035, 0.05, 0.06, 0.075];
const HEADS = [31, 29.6, 27.4, 23.8, 20.1, 13.2];
const EFFICIENCIES = [0, 0.48, 0.69, 0.78, 0.75, 0.58];
const table = (changes: Partial<ConstructorParameters<typeof TableCurve>[0]> = {}) =>
  new TableCurve({ flows: FLOWS, heads: HEADS, efficiencies: EFFICIENCIES, powers: null, ...common, ...changes });

const machine = (curve: PumpCurve) => ({
  curve,
  inSeries: 1,
  motor: { ratedPower: null, serviceFactor: 1, efficiency: 1 },
  drive: { fitted: true, minSpeed: 0.3, maxSpeed: 1.2, efficiency: 1 },
});
const pumpOf = (branchLoss: number, ...curves: readonly PumpCurve[]) =>
  new Pump({ name: 'P', make: 'P', ratedSpeed: null, machines: curves.map(machine), branchLoss, density: DENSITY });

const CURVES: readonly (readonly [string, PumpCurve])[] = [
  ['a parabola', parabola()],
  ['a table', table()],
  ['a table of power', table({ efficiencies: null, powers: [6000, 9000, 11_500, 14_000, 15_500, 17_500] })],
  [
    'a table that begins beyond 0',
    table({ flows: FLOWS.slice(1), heads: HEADS.slice(1), efficiencies: EFFICIENCIES.slice(1) }),
  ],
];

const share = fc.double({ min: 0.02, max: 0.98, noNaN: true });
const speed = fc.double({ min: 0.3, max: 1.2, noNaN: true });

describe('a parabola', () => {
  it('ends where the first of three limits is met', () => {
    // √(30/3000) = 0.1 where the head is gone; (1 + √½)·0.05 = 0.08536 where half the efficiency is left
    expect(parabola().endFlow).toBeCloseTo(0.05 * (1 + Math.SQRT1_2), 12);
    expect(parabola().efficiency(parabola().endFlow)).toBeCloseTo(0.39, 12);
    expect(parabola({ shape: 6000 }).endFlow).toBeCloseTo(Math.sqrt(0.005), 12);
    expect(parabola({ maxFlow: 0.06 }).endFlow).toBe(0.06);
    expect(parabola({ shape: 0 }).endFlow).toBeCloseTo(0.05 * (1 + Math.SQRT1_2), 12);
  });

  it('has its best efficiency at its best flow, and at no flow the power that the formula tends to', () => {
    expect(parabola().efficiency(0.05)).toBe(0.78);
    // ρ·g·H0·q_b/(2·η_b)
    expect(parabola().shaft(0)).toBeCloseTo((DENSITY * G * 30 * 0.05) / (2 * 0.78), 9);
  });
});

describe('a table', () => {
  it('goes through its points and ends at its last', () => {
    FLOWS.forEach((flow, i) => {
      expect(table().head(flow)).toBeCloseTo(HEADS[i]!, 12);
      expect(table().efficiency(flow)).toBeCloseTo(EFFICIENCIES[i]!, 12);
    });
    expect(table()).toMatchObject({ endFlow: 0.075, bestFlow: 0.05, bestEfficiency: 0.78, shutoffHead: 31 });
    expect(table({ maxFlow: 0.06 }).endFlow).toBe(0.06);
  });

  it('of power has the efficiency that follows from it', () => {
    const powers = [6000, 9000, 11_500, 14_000, 15_500, 17_500];
    const curve = table({ efficiencies: null, powers });
    FLOWS.forEach((flow, i) => {
      expect(curve.shaft(flow)).toBeCloseTo(powers[i]!, 8);
      expect(curve.efficiency(flow)).toBeCloseTo((DENSITY * G * flow * HEADS[i]!) / powers[i]!, 12);
    });
    expect(curve.bestFlow).toBe(0.05);
  });

  it('holds the head left of its highest point', () => {
    const drooping = table({ heads: [29, 31, 30, 23.8, 20.1, 13.2] });
    expect([0, 0.01, 0.02].map((flow) => drooping.head(flow))).toEqual([31, 31, 31]);
    expect(drooping.head(0.035)).toBeCloseTo(30, 12);
    expect(drooping.head(0.021)).toBeLessThanOrEqual(31);
  });

  it('has a power at no flow that small flows tend to', () => {
    expect(table().shaft(1e-9) / table().shaft(0)).toBeCloseTo(1, 6);
    expect(table().shaft(0)).toBeGreaterThan(0);
  });
});

describe.each(CURVES)('%s', (_, curve) => {
  const pump = pumpOf(0, curve);

  it('asks for the shaft power ρ·g·q·h/η', () => {
    fc.assert(
      fc.property(share, (x) => {
        const q = x * curve.endFlow;
        expect(curve.shaft(q) / ((DENSITY * G * q * curve.head(q)) / curve.efficiency(q))).toBeCloseTo(1, 12);
      }),
      SEEDED,
    );
  });

  it('falls as flow grows', () => {
    fc.assert(
      fc.property(share, share, (a, b) => {
        const [low, high] = [Math.min(a, b) * curve.endFlow, Math.max(a, b) * curve.endFlow];
        expect(curve.head(low)).toBeGreaterThanOrEqual(curve.head(high) - 1e-12);
      }),
      SEEDED,
    );
  });

  it('follows the affinity laws at any speed', () => {
    fc.assert(
      fc.property(share, speed, (x, s) => {
        const q = x * curve.endFlow;
        expect(pump.head(s * q, s) / (s ** 2 * curve.head(q))).toBeCloseTo(1, 12);
        expect(pump.electric(s * q, s, true) / (s ** 3 * curve.shaft(q))).toBeCloseTo(1, 12);
        expect(pump.endFlow(s) / (s * curve.endFlow)).toBeCloseTo(1, 12);
      }),
      SEEDED,
    );
  });

  it('is given back the speed at which it lifts a flow by a head', () => {
    fc.assert(
      fc.property(share, speed, (x, s) => {
        const q = x * s * curve.endFlow;
        expect(pump.speedFor(q, pump.head(q, s)) / s).toBeCloseTo(1, 10);
      }),
      SEEDED,
    );
  });

  it('runs no slower than where a flow is its end', () => {
    fc.assert(
      fc.property(speed, (s) => {
        const q = s * curve.endFlow;
        expect(pump.speedFor(q, 0.5 * pump.head(q, s)) / s).toBeCloseTo(1, 12);
      }),
      SEEDED,
    );
  });

  it.each([0, 400])('sends into a header what its head and a branch loss of %s·q² allow', (branchLoss) => {
    const behind = pumpOf(branchLoss, curve);
    // A table that begins beyond 0 has one head for every flow left of its first point.
    const first = curve.points?.[0]?.flow ?? 0;
    fc.assert(
      fc.property(share, speed, (x, s) => {
        const q = s * (first + x * (curve.endFlow - first));
        const header = behind.head(q, s) - branchLoss * q ** 2;
        fc.pre(header > 0);
        expect(behind.flowInto(header, s) / q).toBeCloseTo(1, 9);
      }),
      SEEDED,
    );
    expect(behind.flowInto(behind.shutoffHead(0.8) * (1 + 1e-9), 0.8)).toBe(0);
    expect(behind.flowInto(-1e3, 0.8)).toBeCloseTo(0.8 * curve.endFlow, 12);
  });
});

describe('two in series', () => {
  const first = parabola();
  const second = table();
  const train = pumpOf(0, first, second);

  it('share one flow, and add heads and powers, at any speed', () => {
    fc.assert(
      fc.property(share, speed, (x, s) => {
        const q = x * s * Math.min(first.endFlow, second.endFlow);
        expect(train.head(q, s) / (s ** 2 * (first.head(q / s) + second.head(q / s)))).toBeCloseTo(1, 12);
        const shafts = s ** 3 * (first.shaft(q / s) + second.shaft(q / s));
        expect(train.electric(q, s, true) / shafts).toBeCloseTo(1, 12);
        expect(train.speedFor(q, train.head(q, s)) / s).toBeCloseTo(1, 10);
      }),
      SEEDED,
    );
  });

  it('run no slower than where a flow is the end of the first of them', () => {
    const both = pumpOf(0, first, parabola({ maxFlow: 0.06 }));
    for (const [each, end] of [
      [train, 0.075],
      [both, 0.06],
    ] as const) {
      expect(each.speedFor(0.9 * end, 0.5 * each.head(0.9 * end, 0.9))).toBeCloseTo(0.9, 12);
    }
  });

  it('end where the first of them does', () => expect(train.endFlow(0.9)).toBeCloseTo(0.9 * 0.075, 12));
});

describe('the speed correction', () => {
  it('is none at rated speed and grows as speed falls', () => {
    expect(speedCorrection(0.78, 1)).toBe(1);
    let before = 1;
    for (const s of [0.9, 0.7, 0.5, 0.3]) {
      const now = speedCorrection(0.78, s);
      expect(now).toBeLessThan(before);
      before = now;
    }
  });

  it('is what a pump asks for more, at every flow', () => {
    const corrected = pumpOf(0, parabola({ speedCorrection: true }));
    const plain = pumpOf(0, parabola());
    for (const q of [0, 0.01, 0.03]) {
      expect(plain.electric(q, 0.7, true) / corrected.electric(q, 0.7, true)).toBeCloseTo(
        speedCorrection(0.78, 0.7),
        12,
      );
      expect(corrected.electric(q, 1, false)).toBe(plain.electric(q, 1, false));
    }
  });
});
