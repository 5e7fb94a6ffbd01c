import { describe, expect, it } from 'vitest';
import { MixedPumps } from '../../server/staging/mixedPumps.ts';
import { readStation } from '../../server/station/readStation.ts';
import { aStationFile } from '../support/aStation.ts';

const off = (found: number, wanted: number): number => Math.abs(found / wanted - 1);
const motor = { efficiency: 1 };
const LITRES = { flow: 'L/s', head: 'm', power: 'kW' };
function stationOf(units: object, system: object, pumps: readonly object[]) {
  return readStation(aStationFile({ units, system, pumps }), 'station.json');
}

// Published examples of different pumps, and of pumps in series, are in tests/accuracy/parallel.ts.
it('a pump that cannot open its check valve is left out', () => {
  const pump = (name: string, shutoffHead: number) => ({
    name,
    curve: { shutoffHead, shape: 0.002, bestFlow: 60, bestEfficiency: 0.8 },
    motor,
  });
  const system = { staticHead: 25, friction: { coefficient: 0 } };
  const station = stationOf(LITRES, system, [pump('low', 24), pump('high', 33)]);
  const state = new MixedPumps(station, station.duty).fixed(2);
  expect(state.running.map(({ pump }) => pump.name)).toEqual(['high']);
  expect(1000 * state.flow).toBeCloseTo(Math.sqrt(8 / 0.002), 9);
});

describe('equal pumps, solved as if they differed', () => {
  it.each([1, 2, 3, 5])('%s in parallel meet the closed form Q = √((H0 − H_st)/(k + a/n²))', (n) => {
    const curve = { shutoffHead: 30, shape: 0.003, bestFlow: 50, bestEfficiency: 0.8 };
    const station = stationOf(LITRES, { staticHead: 12, friction: { coefficient: 0.001 } }, [
      { name: 'P', count: 5, curve, motor },
    ]);
    const flow = 1000 * new MixedPumps(station, station.duty).fixed(n).flow;
    expect(off(flow, Math.sqrt(18 / (0.001 + 0.003 / n ** 2)))).toBeLessThan(1e-12);
  });
});
