import { describe, expect, it } from 'vitest';
import { aStationFile } from '../support/aStation.ts';
import { served } from './support.ts';

const factsOf = async (fields: Readonly<Record<string, unknown>> = {}) => {
  const { http } = served();
  const { id } = (await http.post('/api/stations').send(aStationFile(fields)).expect(201)).body;
  return (await http.get(`/api/stations/${id}/facts`).expect(200)).body;
};

describe('facts of a station', () => {
  it('are the operating points of its pumps, by the closed form, in its own units', async () => {
    // h = 30 − 0.003·q² on 12 + 0.001·Q² (L/s, m): q = √(18/(0.003 + 0.001·n²)); water at 15 °C, IAPWS-95
    const facts = await factsOf();
    for (const n of [1, 2]) {
      const q = Math.sqrt(18 / (0.003 + 0.001 * n * n));
      const head = 12 + 0.001 * (n * q) ** 2;
      const x = q / 50;
      const kw = (n * 999.1026 * 9.80665 * (q / 1000) * head) / (0.78 * x * (2 - x)) / 0.92 / 1000;
      const point = facts.points[n - 1];
      expect(point).toMatchObject({ count: n, pumps: n === 1 ? 'P-1' : 'P-1+P-2', slowestMs: null, npshRatio: null });
      expect(point.flow).toBeCloseTo(n * q, 9);
      expect(point.systemHead).toBeCloseTo(head, 9);
      expect(point.powerKw / kw).toBeCloseTo(1, 6);
      expect(point.kwhPerM3).toBeCloseTo(point.powerKw / (n * q * 3.6), 12);
      expect(point.leastShareOfBest).toBeCloseTo(x, 12);
    }
    expect(facts.firmCapacity).toBeCloseTo(Math.sqrt(18 / 0.004), 9);
    expect(facts.pumps).toHaveLength(1);
    expect(facts.pumps[0].names).toEqual(['P-1', 'P-2']);
    expect(facts.pumps[0].machines[0]).toMatchObject({ shutoffHead: 30, bestEfficiency: 0.78, fit: null });
    expect(facts.pumps[0].machines[0].endFlow).toBeCloseTo((1 + Math.SQRT1_2) * 50, 9);
    expect(facts.liquid.kinematicViscosityMm2s).toBeCloseTo(1.13859, 2);
  });

  it('tell the row of a curve that was misread', async () => {
    const points = [0, 20, 40, 60, 80].map((flow) => ({ flow, head: 30 - 0.003 * flow ** 2, efficiency: 0.7 }));
    points[2]!.head += 2.4;
    const pump = { name: 'P', curve: { points }, motor: { efficiency: 0.9 } };
    const facts = await factsOf({ pumps: [pump] });
    const { fit } = facts.pumps[0].machines[0];
    expect(fit.row).toBe(3);
    expect(fit.rSquared).toBeGreaterThan(0.9);
    expect(fit.rSquared).toBeLessThan(0.999);
    expect(facts.notes.map((note: { code: string }) => note.code)).toEqual(['curve-off-parabola']);
    const sound = await factsOf({ pumps: [{ ...pump, curve: { points: points.filter((_, i) => i !== 2) } }] });
    expect(sound.pumps[0].machines[0].fit.rSquared).toBeCloseTo(1, 12);
    expect(sound.notes).toEqual([]);
  });

  it('have velocities and NPSH where the file says enough', async () => {
    const system = {
      staticHead: 12,
      friction: { pipes: [{ length: 400, diameter: 200, hazenWilliamsC: 130 }] },
      suctionLevel: 1,
      pumpLevel: 0,
      suctionLoss: { flow: 50, head: 0.5 },
    };
    const npshr = [
      { flow: 0, npshr: 4 },
      { flow: 100, npshr: 4 },
    ];
    const curve = { shutoffHead: 30, shape: 0.003, bestFlow: 50, bestEfficiency: 0.78, npshr };
    const [point] = (await factsOf({ system, pumps: [{ name: 'P', curve, motor: { efficiency: 0.9 } }] })).points;
    expect(point.slowestMs).toBeCloseTo(point.flow / 1000 / ((Math.PI / 4) * 0.2 ** 2), 9);
    expect(point.fastestMs).toBe(point.slowestMs);
    // (101 325 − 1705.74 Pa)/(ρ·g) + 1 m less 0.5 m·(q/50)²
    const available = (101_325 - 1705.74) / (999.1026 * 9.80665) + 1 - 0.5 * (point.flow / 50) ** 2;
    expect(point.npshRatio).toBeCloseTo(available / 4, 6);
  });

  it('are not found for a station that is not there', async () => {
    await served().http.get('/api/stations/7/facts').expect(404);
  });
});
