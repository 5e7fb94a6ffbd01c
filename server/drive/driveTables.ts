import { HORSEPOWER } from '../units.ts';
import type { LoadPoint } from './partLoad.ts';

export const DRIVE_NAMES = ['typical'] as const;

/** Loads of the columns below. */
const LOADS = [0.016, 0.125, 0.25, 0.42, 0.5, 0.75, 1];

/**
 * Efficiency % of typical pulse-width-modulated drives by size [hp] and load: US DOE Motor Systems Tip Sheet #11,
 * "Adjustable Speed Drive Part-Load Efficiency", DOE/GO-102012-3730, November 2012, Table 1. Its cell for 200 hp at
 * 12.5 % prints 81, between 61 and 95 and beside 89 at 100 hp; another printing of the same data has 91, which is taken.
 * The dips of 50, 60 and 75 hp at low load are in both, and are left as they are.
 */
const TYPICAL: readonly (readonly [number, readonly number[]])[] = [
  [5, [35, 80, 88, 91, 92, 94, 95]],
  [10, [41, 83, 90, 93, 94, 95, 96]],
  [20, [47, 86, 93, 94, 95, 96, 97]],
  [30, [50, 88, 93, 95, 95, 96, 97]],
  [50, [46, 86, 92, 95, 95, 96, 97]],
  [60, [51, 87, 92, 95, 95, 96, 97]],
  [75, [47, 86, 93, 95, 96, 97, 97]],
  [100, [55, 89, 94, 95, 96, 97, 97]],
  [200, [61, 91, 95, 96, 96, 97, 97]],
];

/**
 * Efficiency of a typical drive over load, its size taken as the motor's rating: linear between the sizes of the table,
 * that of 5 hp below it and that of 200 hp above. Linear between loads too, so the two together are bilinear.
 *
 * @param rated  rating of the motor [W]
 */
export function typicalDrive(rated: number): LoadPoint[] {
  const hp = rated / HORSEPOWER;
  const above = TYPICAL.findIndex(([size]) => size >= hp);
  const high = TYPICAL[above < 0 ? TYPICAL.length - 1 : above]!;
  const low = above > 0 ? TYPICAL[above - 1]! : high;
  const share = high === low ? 0 : (hp - low[0]) / (high[0] - low[0]);
  return LOADS.map((load, i) => ({
    load,
    efficiency: (low[1][i]! + share * (high[1][i]! - low[1][i]!)) / 100,
  }));
}
