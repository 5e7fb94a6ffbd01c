import { describe, expect, it } from 'vitest';
import { adviceNow } from '../../server/staging/advice.ts';
import { operatorCard } from '../../server/staging/card.ts';
import { readStation } from '../../server/station/readStation.ts';
import { aStationFile } from '../support/aStation.ts';
import { flowLog, resultFor, ruleIn } from '../support/comparing.ts';

/** A jockey pump that makes `jockeyHead` m at no flow beside two pumps of 30 m, against 12 m + 0.001·Q² (Q in L/s). */
function stationOf(jockeyHead: number, fields: object = {}) {
  const motor = { ratedPower: 30, efficiency: 0.92 };
  const drive = { minSpeed: 0.5, maxSpeed: 1, efficiency: 0.97 };
  const jockey = { shutoffHead: jockeyHead, shape: 0.01, bestFlow: 12, bestEfficiency: 0.7 };
  const big = { shutoffHead: 30, shape: 0.003, bestFlow: 50, bestEfficiency: 0.78 };
  const pumps = [
    { name: 'J', curve: jockey, motor, drive },
    { name: 'P', count: 2, curve: big, motor, drive },
  ];
  return readStation(aStationFile({ pumps, ...fields }), 'station.json');
}

const shutOut = (notes: readonly { code: string; text: string }[]) =>
  notes.filter(({ code }) => code === 'dead-headed').map(({ text }) => text);

describe('a pump that cannot open its check valve', () => {
  it('is never advised, and the advice says why', () => {
    const station = stationOf(11);
    const { best, nextBest, notes } = adviceNow(station, station.duty, 0.04, 12);
    for (const way of [best!, nextBest!]) expect(way.state.set % 2).toBe(0); // J is the first in the order
    expect(shutOut(notes)).toEqual([expect.stringMatching(/^At a header head of .* J is dead-headed .* is 11 m/)]);
  });

  it('is shut out by the others above the flow at which the header asks for more than it makes', () => {
    const station = stationOf(15);
    const { notes } = operatorCard(station, station.duty);
    // 12 + 0.001·Q² = 15 at Q = √3000 = 54.77 L/s
    expect(shutOut(notes)).toEqual([expect.stringMatching(/^Above 54.77 L\/s .* J is dead-headed .* is 15 m/)]);
    expect(shutOut(adviceNow(station, station.duty, 0.05477, 12).notes)).toEqual([]);
    expect(shutOut(adviceNow(station, station.duty, 0.05478, 12).notes)).toHaveLength(1);
  });

  it('does not make a card say that none can lift', () => {
    const station = stationOf(11);
    const { notes } = operatorCard(station, station.duty);
    expect(notes.map(({ code }) => code)).toEqual(['dead-headed']);
    const high = operatorCard(station, station.duty, { staticHead: 31 });
    expect(high.notes).toEqual([{ code: 'cannot-lift', text: expect.stringContaining('31 m') }]);
  });

  it('is told of with its hours in a comparison, and runs in no set then', () => {
    const log = flowLog([0.03, 0.05, 0.06, 0.07]);
    const never = resultFor({ station: stationOf(11), log, tariff: null });
    expect(shutOut(never.notes)).toEqual([expect.stringMatching(/^For 4.0 h of the record J /)]);
    for (const { hoursBySet } of never.rules) expect(Object.keys(hoursBySet).join()).not.toContain('J');
    const part = resultFor({ station: stationOf(15), log, tariff: null, rules: ['best-count'] });
    expect(shutOut(part.notes)).toEqual([expect.stringMatching(/^For 2.0 h of the record J /)]);
    expect(ruleIn(part, 'best-count').shortfallHours).toBe(0);
    expect(shutOut(resultFor({ station: stationOf(25), log, tariff: null }).notes)).toEqual([]);
  });

  it('is told in the units of the file', () => {
    const units = { flow: 'gpm', head: 'ft', power: 'hp' };
    const pump = (name: string, shutoffHead: number) => ({
      name,
      curve: { shutoffHead, shape: 2e-5, bestFlow: 800, bestEfficiency: 0.8 },
      motor: { efficiency: 0.92 },
      drive: { minSpeed: 0.5, efficiency: 0.97 },
    });
    const system = { staticHead: 40, friction: { coefficient: 1e-5 } };
    const file = aStationFile({ units, system, pumps: [pump('J', 38), pump('P', 90)], storage: {} });
    const station = readStation(file, 'station.json');
    expect(shutOut(operatorCard(station, station.duty).notes)).toEqual([
      expect.stringMatching(/header head of 40 ft J .* is 38 ft/),
    ]);
  });
});
