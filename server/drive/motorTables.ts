import { HORSEPOWER } from '../units.ts';
import type { LoadPoint } from './partLoad.ts';

/**
 * Full-load efficiencies of motors by name, and how efficiency falls at part load.
 *
 * IE1 to IE4: IEC 60034-30-1:2014, 4 poles, 50 Hz (read in two code tables that cite the standard). From 200 kW on the
 * level stays; 355 and 375 kW are from memory.
 */
const IEC: Readonly<Record<'IE1' | 'IE2' | 'IE3' | 'IE4', readonly number[]>> = {
  IE1: [
    72.1, 75.0, 77.2, 79.7, 81.5, 83.1, 84.7, 86.0, 87.6, 88.7, 89.3, 89.9, 90.7, 91.2, 91.7, 92.1, 92.7, 93.0, 93.3,
    93.5, 93.8, 94.0,
  ],
  IE2: [
    79.6, 81.4, 82.8, 84.3, 85.5, 86.6, 87.7, 88.7, 89.8, 90.6, 91.2, 91.6, 92.3, 92.7, 93.1, 93.5, 94.0, 94.2, 94.5,
    94.7, 94.9, 95.1,
  ],
  IE3: [
    82.5, 84.1, 85.3, 86.7, 87.7, 88.6, 89.6, 90.4, 91.4, 92.1, 92.6, 93.0, 93.6, 93.9, 94.2, 94.6, 95.0, 95.2, 95.4,
    95.6, 95.8, 96.0,
  ],
  IE4: [
    85.7, 87.2, 88.2, 89.5, 90.4, 91.1, 91.9, 92.6, 93.3, 93.9, 94.2, 94.5, 94.9, 95.2, 95.4, 95.7, 96.0, 96.1, 96.3,
    96.4, 96.6, 96.7,
  ],
};

/** Ratings of the columns above [kW]. */
const IEC_KW = [0.75, 1.1, 1.5, 2.2, 3, 4, 5.5, 7.5, 11, 15, 18.5, 22, 30, 37, 45, 55, 75, 90, 110, 132, 160, 200];

const IEC_LARGEST_KW = 375;

/**
 * The standard's formula for ratings between the listed ones, η% = A·L³ + B·L² + C·L + D with L = log₁₀(P/1 kW), 0.75 to
 * 200 kW (coefficients from memory; they give every listed figure to its last digit).
 */
const IEC_FORMULA: Readonly<Record<keyof typeof IEC, readonly [number, number, number, number]>> = {
  IE1: [0.5234, -5.0499, 17.418, 74.3171],
  IE2: [0.0278, -1.9247, 10.4395, 80.9761],
  IE3: [0.0773, -1.8951, 9.2984, 83.7025],
  IE4: [0.2412, -2.3608, 8.446, 86.8321],
};

/**
 * NEMA premium, 60 Hz, 4 poles, enclosed: 10 CFR 431.25(a) Table 1, as horsepower and nominal full-load %. 250 to 500 hp
 * are from memory.
 */
const NEMA_PREMIUM: readonly (readonly [number, number])[] = [
  [1, 85.5],
  [1.5, 86.5],
  [2, 86.5],
  [3, 89.5],
  [5, 89.5],
  [7.5, 91.7],
  [10, 91.7],
  [15, 92.4],
  [20, 93.0],
  [25, 93.6],
  [30, 93.6],
  [40, 94.1],
  [50, 94.5],
  [60, 95.0],
  [75, 95.4],
  [100, 95.4],
  [125, 95.4],
  [150, 95.8],
  [200, 96.2],
  [250, 96.2],
  [300, 96.2],
  [350, 96.2],
  [400, 96.2],
  [450, 96.2],
  [500, 96.2],
];

export const MOTOR_NAMES = ['IE1', 'IE2', 'IE3', 'IE4', 'NEMA premium'] as const;

export type MotorName = (typeof MOTOR_NAMES)[number];

/** Smallest and largest rating [W] that a table has; it is not stretched beyond. */
export function motorRange(name: MotorName): { readonly least: number; readonly most: number } {
  if (name === 'NEMA premium') return { least: HORSEPOWER, most: 500 * HORSEPOWER };
  return { least: IEC_KW[0]! * 1000, most: IEC_LARGEST_KW * 1000 };
}

/**
 * Full-load efficiency of a motor by name.
 *
 * Between listed ratings: IE classes by the standard's formula; NEMA premium by the rule of 10 CFR 431.25, a rating at or
 * above the midpoint of two listed ones counts as the higher, below it as the lower.
 *
 * @param rated  its rating [W], within `motorRange`
 */
export function fullLoadEfficiency(name: MotorName, rated: number): number {
  return (name === 'NEMA premium' ? nemaPremium(rated / HORSEPOWER) : iec(name, rated / 1000)) / 100;
}

function iec(name: keyof typeof IEC, kw: number): number {
  const listed = IEC_KW.findIndex((each) => Math.abs(each / kw - 1) < 1e-6);
  if (listed >= 0) return IEC[name][listed]!;
  if (kw > 200) return IEC[name][IEC_KW.length - 1]!;
  const [a, b, c, d] = IEC_FORMULA[name];
  const l = Math.log10(kw);
  return ((a * l + b) * l + c) * l + d;
}

function nemaPremium(hp: number): number {
  let found = NEMA_PREMIUM[0]!;
  for (const entry of NEMA_PREMIUM) {
    // A rating that came from kW may miss the midpoint by a rounding.
    if (hp >= ((found[0] + entry[0]) / 2) * (1 - 1e-9)) found = entry;
  }
  return found[1];
}

/**
 * Loss of a motor at part load as a share of its loss at full load, y = −0.4508·x³ + 1.2399·x² − 0.4301·x + 0.6410.
 *
 * @param load  shaft power over rating, 0 to 1
 * @see         US DOE test procedure for pumps, 10 CFR 431 subpart Y appendix A (coefficients read in code that applies
 *              the rule). It is on the careful side: at 75 % load 0.3 to 1.3 points below DOE Motor Systems Tip Sheet #2
 */
export function partLoadLoss(load: number): number {
  return ((-0.4508 * load + 1.2399) * load - 0.4301) * load + 0.641;
}

/** Close enough that straight lines between them stay within 0.2 points of the curve. */
const LOADS = [0.05, 0.06, 0.07, 0.085, 0.1, 0.12, 0.14, 0.165, 0.2, 0.25, 0.3, 0.36, 0.43, 0.5, 0.6, 0.75, 1];

/** Efficiency over load from that at full load: loss = y·(rated/η − rated), η(x) = x/(x + y·(1/η − 1)). */
export function motorTable(fullLoad: number): LoadPoint[] {
  return LOADS.map((load) => ({
    load,
    efficiency: load === 1 ? fullLoad : load / (load + partLoadLoss(load) * (1 / fullLoad - 1)),
  }));
}
