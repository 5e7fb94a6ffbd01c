import { describe, expect, it } from 'vitest';
import { typicalDrive } from '../../server/drive/driveTables.ts';
import { efficiencyAt } from '../../server/drive/partLoad.ts';
import { HORSEPOWER } from '../../server/units.ts';

const at = (hp: number, load: number): number => efficiencyAt(typicalDrive(hp * HORSEPOWER), load);

/** US DOE Motor Systems Tip Sheet #11, DOE/GO-102012-3730, Table 1; its 81 at 200 hp and 12.5 % is a misprint, left out. */
const SHEET: readonly (readonly [number, readonly (number | null)[]])[] = [
  [5, [35, 80, 88, 91, 92, 94, 95]],
  [10, [41, 83, 90, 93, 94, 95, 96]],
  [20, [47, 86, 93, 94, 95, 96, 97]],
  [30, [50, 88, 93, 95, 95, 96, 97]],
  [50, [46, 86, 92, 95, 95, 96, 97]],
  [60, [51, 87, 92, 95, 95, 96, 97]],
  [75, [47, 86, 93, 95, 96, 97, 97]],
  [100, [55, 89, 94, 95, 96, 97, 97]],
  [200, [61, null, 95, 96, 96, 97, 97]],
];

describe('a typical drive', () => {
  it.each(SHEET)('of %s hp has the efficiencies of the sheet', (hp, row) => {
    [0.016, 0.125, 0.25, 0.42, 0.5, 0.75, 1].forEach((load, i) => {
      if (row[i] !== null) expect(100 * at(hp, load)).toBeCloseTo(row[i]!, 9);
    });
  });

  it.each([
    // C. Bell, fluids 1.3.1, VFD_efficiency: the same data by bilinear interpolation, rounded to four decimals
    [10, 1, 0.96],
    [100, 0.2, 0.92],
    [100, 0.5, 0.96],
    [8, 0.016, 0.386],
    [25, 0.5, 0.95],
    [40, 0.6, 0.954],
    [15, 0.1875, 0.88],
    [50, 0.75, 0.96],
    [200, 0.125, 0.91],
  ])('of %s hp at load %s has %s', (hp, load, wanted) => {
    expect(Math.abs(at(hp, load) - wanted)).toBeLessThan(5.1e-5);
  });

  it('gives the worked example of the sheet: a fan of 20 hp at half speed draws 2.8 kW', () => {
    // motor 77.8 %, one eighth of the power, the sheet's column of 12.5 % load
    expect(Math.abs((0.746 * 20 * 0.125) / (0.778 * at(20, 0.125)) - 2.8)).toBeLessThan(0.05);
  });

  it('is not stretched beyond the sizes of the sheet', () => {
    expect(typicalDrive(1 * HORSEPOWER)).toEqual(typicalDrive(5 * HORSEPOWER));
    expect(typicalDrive(500 * HORSEPOWER)).toEqual(typicalDrive(200 * HORSEPOWER));
  });
});
