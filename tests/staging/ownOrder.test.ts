import { describe, expect, it } from 'vitest';
import { compareRules } from '../../server/staging/compare.ts';
import { ownOrderCost } from '../../server/staging/ownOrder.ts';
import { readStation } from '../../server/station/readStation.ts';
import { aStationFile } from '../support/aStation.ts';
import { differs, flowLog } from '../support/comparing.ts';

const RHO = 1000;
const motor = { efficiency: 0.92 };
const drive = { minSpeed: 0.5, efficiency: 0.97 };
const small = { shutoffHead: 20, shape: 0.01, bestFlow: 12, bestEfficiency: 0.7 };
const big = { shutoffHead: 30, shape: 0.003, bestFlow: 50, bestEfficiency: 0.78 };

/** A small pump and a big one against 12 m + 0.001·Q² (Q in L/s). */
function stationOf(order: readonly string[]) {
  const pumps = [
    { name: 'J', curve: small, motor, drive },
    { name: 'P', curve: big, motor, drive },
  ];
  return readStation(aStationFile({ pumps, order, liquid: { density: RHO } }), 'station.json');
}

/** Electric kW of one pump that gives q L/s alone: s from s²·H0 − a·q² = H, η = η_b·(2x − x²) at x = q/(s·q_b). */
function kilowatts({ shutoffHead, shape, bestFlow, bestEfficiency }: typeof small, q: number): number {
  const head = 12 + 0.001 * q * q;
  const x = q / Math.sqrt((head + shape * q * q) / shutoffHead) / bestFlow;
  return (RHO * 9.80665 * q * head) / (bestEfficiency * (2 * x - x * x)) / 0.92 / 0.97 / 1e6;
}

const costOf = (order: readonly string[], flows: readonly number[]) =>
  ownOrderCost(compareRules({ station: stationOf(order), log: flowLog(flows), tariff: null, rules: ['best-count'] }));

describe("what the station's own order costs", () => {
  it('is the difference between the pump that comes first and the one that is best', () => {
    // At 10 L/s the big pump needs 0.64 of its speed; the small one makes 8.3 m at that and would be dead-headed.
    const cost = costOf(['P', 'J'], new Array(24).fill(0.01))!;
    expect(differs(cost.energyKwh, 24 * (kilowatts(big, 10) - kilowatts(small, 10)))).toBeLessThan(1e-4); // a grid of flows
    expect(cost).toMatchObject({ cost: null, hours: 24 });
  });

  it('is nothing where the order is that of least power', () => {
    expect(Math.abs(costOf(['J', 'P'], new Array(24).fill(0.01))!.energyKwh)).toBeLessThan(1e-3);
  });

  it('is not told for equal pumps, or where the best sets were not looked for', () => {
    const station = readStation(aStationFile(), 'station.json');
    const log = flowLog([0.03]);
    expect(ownOrderCost(compareRules({ station, log, tariff: null }))).toBeNull();
    const mixed = stationOf(['J', 'P']);
    expect(ownOrderCost(compareRules({ station: mixed, log, tariff: null, rules: ['late-staging'] }))).toBeNull();
  });
});
