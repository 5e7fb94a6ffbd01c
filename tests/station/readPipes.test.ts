import { describe, expect, it } from 'vitest';
import { PipeFriction } from '../../server/hydraulics/pipe.ts';
import { waterViscosity } from '../../server/hydraulics/water.ts';
import { readStation } from '../../server/station/readStation.ts';
import { faultsOf } from '../support/aRecord.ts';
import { aStationFile } from '../support/aStation.ts';

const steel = { length: 400, diameter: 250, roughness: 0.05 };
const read = (pipes: readonly unknown[], fields: Record<string, unknown> = {}) =>
  readStation(aStationFile({ system: { staticHead: 12, friction: { pipes } }, ...fields }), 'station.json');
const faults = (pipes: readonly unknown[], fields: Record<string, unknown> = {}) => faultsOf(() => read(pipes, fields));

describe('pipes of a station file', () => {
  it('are read in metres and millimetres, with the viscosity of water at 15 °C', () => {
    const { friction, density } = read([{ ...steel, minorLoss: 1.5, fittings: [{ type: 'elbow-90', count: 2 }] }]);
    const pipe = { length: 400, diameter: 0.25, wall: { roughness: 5e-5 }, minorLoss: 1.5 + 2 * 0.31 };
    expect(friction.at(0.08)).toBe(new PipeFriction([pipe], waterViscosity(15) / density).at(0.08));
  });

  it('are read in feet and inches where heads are in feet', () => {
    const inFeet = read([{ length: 1000, diameter: 10, roughness: 0.0018 }], {
      units: { flow: 'gpm', head: 'ft', power: 'hp' },
      liquid: { temperature: 20 },
    });
    const inMetres = read([{ length: 304.8, diameter: 254, roughness: 0.04572 }], { liquid: { temperature: 20 } });
    expect(Math.abs(inFeet.friction.at(0.08) / inMetres.friction.at(0.08) - 1)).toBeLessThan(1e-13);
  });

  it('lose more in colder water', () => {
    const at = (temperature: number) => read([steel], { liquid: { temperature } }).friction.at(0.02);
    expect(at(5)).toBeGreaterThan(1.02 * at(30));
  });

  it('have the velocity limits of common practice, or their own', () => {
    const { main } = read([steel, { length: 20, diameter: 200, hazenWilliamsC: 130 }]);
    expect(main).toMatchObject({ leastVelocity: 0.6, mostVelocity: 3 });
    expect(main!.widestArea).toBeCloseTo(Math.PI * 0.125 ** 2, 12);
    expect(main!.narrowestArea).toBeCloseTo(Math.PI * 0.1 ** 2, 12);
    const system = { staticHead: 12, friction: { pipes: [steel] }, velocity: { from: 0.9, to: 2.5 } };
    expect(readStation(aStationFile({ system }), 'station.json').main).toMatchObject({
      leastVelocity: 0.9,
      mostVelocity: 2.5,
    });
  });

  it('say so where the viscosity is assumed', () => {
    const codes = (pipes: readonly unknown[]) =>
      read(pipes, { liquid: { density: 1010 } }).notes.map(({ code }) => code);
    expect(codes([steel])).toContain('viscosity-assumed');
    expect(codes([{ length: 400, diameter: 250, hazenWilliamsC: 130 }])).not.toContain('viscosity-assumed');
  });
});

describe('pipes are refused', () => {
  it.each([
    [
      'with neither wall',
      { length: 400, diameter: 250 },
      'missing_field station.json system.friction.pipes[0]: found neither roughness nor hazenWilliamsC; wanted one of the two',
    ],
    [
      'with both walls',
      { ...steel, hazenWilliamsC: 130 },
      'unknown_field station.json system.friction.pipes[0].hazenWilliamsC: found hazenWilliamsC beside roughness; wanted one of the two',
    ],
    [
      'rougher than the formula holds for',
      { ...steel, diameter: 0.25 },
      'out_of_range station.json system.friction.pipes[0].roughness: found 0.05 for a diameter of 0.25, both in mm; wanted at most 0.05 of the diameter, for which the formula holds',
    ],
    [
      'with a fitting unknown',
      { ...steel, fittings: [{ type: 'elbow' }] },
      'unknown_name station.json system.friction.pipes[0].fittings[0].type: found "elbow"; wanted one of bell-mouth-inlet, square-inlet, inward-inlet, exit, elbow-90, gate-valve, swing-check-valve, foot-valve; give the K of any other in minorLoss',
    ],
    [
      'without a diameter',
      { length: 400, roughness: 0.05 },
      'missing_field station.json system.friction.pipes[0].diameter: found nothing; wanted a number',
    ],
    [
      'with a C of no pipe',
      { length: 400, diameter: 250, hazenWilliamsC: 1.3 },
      'out_of_range station.json system.friction.pipes[0].hazenWilliamsC: found 1.3; wanted 20 or more',
    ],
  ])('%s', (_, pipe, line) => expect(faults([pipe])).toEqual([line]));

  it('where there is no pipe', () => {
    expect(faults([])).toEqual(['out_of_range station.json system.friction.pipes: found []; wanted an entry or more']);
  });

  it('where limits of velocity have no pipe to go by', () => {
    const system = { staticHead: 12, friction: { coefficient: 0.001 }, velocity: { from: 0.6, to: 3 } };
    expect(faultsOf(() => readStation(aStationFile({ system }), 'station.json'))).toEqual([
      'unknown_field station.json system.velocity: found limits of velocity; wanted friction.pipes, which give a diameter',
    ]);
  });
});
