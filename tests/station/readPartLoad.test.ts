import { describe, expect, it } from 'vitest';
import { typicalDrive } from '../../server/drive/driveTables.ts';
import { efficiencyAt } from '../../server/drive/partLoad.ts';
import { readStation } from '../../server/station/readStation.ts';
import { HORSEPOWER } from '../../server/units.ts';
import { faultsOf } from '../support/aRecord.ts';
import { aStationFile } from '../support/aStation.ts';

const file = (motor: object, drive: object = {}, units: object = { flow: 'L/s', head: 'm', power: 'kW' }) =>
  aStationFile({
    units,
    pumps: [
      {
        name: 'P',
        curve: { shutoffHead: 30, shape: 0.003, bestFlow: 50, bestEfficiency: 0.78 },
        motor,
        drive: { minSpeed: 0.5, efficiency: 0.97, ...drive },
      },
    ],
  });
const machine = (...parts: Parameters<typeof file>) =>
  readStation(file(...parts), 'station.json').duty[0]!.machines[0]!;
const faults = (...parts: Parameters<typeof file>) => faultsOf(() => readStation(file(...parts), 'station.json'));

const MOTOR = 'station.json pumps[0].motor.efficiency';
const DRIVE = 'station.json pumps[0].drive.efficiency';

describe('motors and drives by name', () => {
  it('are read by the rating, in the units of the file', () => {
    // IEC 60034-30-1: 30 kW, IE3 93.6 %; 10 CFR 431.25: 50 hp 94.5 %
    expect(efficiencyAt(machine({ ratedPower: 30, efficiency: 'IE3' }).motor.efficiency, 1)).toBeCloseTo(0.936, 9);
    const inHp = machine({ ratedPower: 50, efficiency: 'nema Premium' }, {}, { flow: 'gpm', head: 'ft', power: 'hp' });
    expect(efficiencyAt(inHp.motor.efficiency, 1)).toBeCloseTo(0.945, 9);
  });

  it('take a drive by the rating of its motor', () => {
    const { drive } = machine({ ratedPower: 30, efficiency: 'IE3' }, { efficiency: 'typical' });
    expect(drive!.efficiency).toEqual(typicalDrive(30_000));
    // between 30 and 50 hp at full load both rows print 97 %
    expect(30_000 / HORSEPOWER).toBeGreaterThan(40);
    expect(efficiencyAt(drive!.efficiency, 1)).toBeCloseTo(0.97, 9);
  });
});

describe('names are refused', () => {
  it('that no table has', () => {
    expect(faults({ ratedPower: 30, efficiency: 'IE5' }, { efficiency: 'good' })).toEqual([
      `unknown_name ${MOTOR}: found "IE5"; wanted a number, a table over load, or one of IE1, IE2, IE3, IE4, NEMA premium`,
      `unknown_name ${DRIVE}: found "good"; wanted a number, a table over load, or one of typical`,
    ]);
  });

  it('without a rating to go by', () => {
    expect(faults({ efficiency: 'IE3' }, { efficiency: 'typical' })).toEqual([
      `missing_field ${MOTOR}: found "IE3", with no motor.ratedPower; wanted motor.ratedPower`,
      `missing_field ${DRIVE}: found "typical", with no motor.ratedPower; wanted motor.ratedPower`,
    ]);
  });

  it('for a rating beyond their table', () => {
    expect(faults({ ratedPower: 0.5, efficiency: 'IE3' })).toEqual([
      `out_of_range ${MOTOR}: found IE3 for a rating of 0.5; wanted a rating from 0.75 to 375, which the table of IE3 covers, or the efficiency itself`,
    ]);
    expect(faults({ ratedPower: 500, efficiency: 'NEMA premium' })).toEqual([
      `out_of_range ${MOTOR}: found NEMA premium for a rating of 500; wanted a rating from 0.7457 to 372.8, which the table of NEMA premium covers, or the efficiency itself`,
    ]);
  });

  it('and so is an efficiency above 1, or a table without a rating, or with loads that fall', () => {
    expect(faults({ ratedPower: 30, efficiency: 93 })).toEqual([`out_of_range ${MOTOR}: found 93; wanted 1 or less`]);
    const table = [
      { load: 0.5, efficiency: 0.9 },
      { load: 0.25, efficiency: 0.9 },
    ];
    expect(faults({ efficiency: table })).toEqual([
      `missing_field ${MOTOR}: found a table over load, with no motor.ratedPower; wanted motor.ratedPower`,
      `out_of_range ${MOTOR}[1].load: found 0.25; wanted more than 0.5, the load before`,
    ]);
  });
});
