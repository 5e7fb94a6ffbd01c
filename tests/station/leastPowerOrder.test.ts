import { describe, expect, it } from 'vitest';
import { readStation } from '../../server/station/readStation.ts';
import { faultsOf } from '../support/aRecord.ts';
import { aStationFile } from '../support/aStation.ts';
import { flowLog, resultFor, ruleIn } from '../support/comparing.ts';

const pump = (name: string, shutoffHead: number, bestEfficiency: number, shape = 0.003) => ({
  name,
  curve: { shutoffHead, shape, bestFlow: 50, bestEfficiency },
  motor: { efficiency: 0.92 },
});
const file = (pumps: object[], fields: object = {}) => aStationFile({ pumps, order: 'least-power', ...fields });
const names = (pumps: object[], fields: object = {}) =>
  readStation(file(pumps, fields), 'station.json').duty.map(({ name }) => name);

describe('an order of least power', () => {
  it('begins with the pump of better efficiency where the curves are alike', () => {
    expect(names([pump('Worn', 30, 0.6), pump('New', 30, 0.8), pump('Old', 30, 0.7)])).toEqual(['New', 'Old', 'Worn']);
  });

  it('is that of power over flow, by hand', () => {
    // Against 12 m + 0.001·Q²: 30 − 0.003·q² meets it at √(18/0.004) = 67.1 L/s and 16.5 m, with
    // x = 67.1/50 and η = 0.78·(2x − x²) = 0.688; 20 − 0.003·q² at √(8/0.004) = 44.7 L/s and 14.0 m, with η = 0.69·0.989
    // = 0.682. Head over efficiency is 24.0 m and 20.5 m: the lower pump lifts a m³ for less, though it is the poorer.
    expect(names([pump('High', 30, 0.78), pump('Low', 20, 0.69)])).toEqual(['Low', 'High']);
  });

  it('puts a pump that cannot lift last, and keeps the order of the file where pumps are equal', () => {
    expect(names([pump('Weak', 11, 0.85), pump('B', 30, 0.7), pump('A', 30, 0.7)])).toEqual(['B', 'A', 'Weak']);
  });

  it('is the order in which fixed-speed brings pumps on', () => {
    const pumps = [pump('Worn', 30, 0.6), pump('New', 30, 0.8)];
    const run = (fields: object) => {
      const station = readStation(file(pumps, fields), 'station.json');
      return ruleIn(resultFor({ station, log: flowLog([0.03]), tariff: null, rules: ['fixed-speed'] }), 'fixed-speed');
    };
    expect(Object.keys(run({}).hoursBySet)).toEqual(['off', 'New']);
    const listed = run({ order: ['Worn', 'New'] });
    expect(Object.keys(listed.hoursBySet)).toEqual(['off', 'Worn']);
    // Efficiencies are the one difference, so the power of the pump is as 0.8 to 0.6.
    expect(listed.energyKwh / run({}).energyKwh).toBeCloseTo(0.8 / 0.6, 9);
  });

  it('is refused under another word', () => {
    expect(faultsOf(() => readStation(file([pump('A', 30, 0.7)], { order: 'cheapest' }), 'station.json'))[0]).toContain(
      'station.json order',
    );
  });
});
