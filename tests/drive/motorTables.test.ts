import { describe, expect, it } from 'vitest';
import { fullLoadEfficiency, type MotorName, motorTable, partLoadLoss } from '../../server/drive/motorTables.ts';
import { efficiencyAt } from '../../server/drive/partLoad.ts';
import { HORSEPOWER } from '../../server/units.ts';

const percentAt = (name: MotorName, watts: number): number => 100 * fullLoadEfficiency(name, watts);

/** IEC 60034-30-1:2014, 4 poles, 50 Hz, as two code tables quote it: kW, IE1, IE2, IE3, IE4. */
const IEC = [
  [0.75, 72.1, 79.6, 82.5, 85.7],
  [1.1, 75.0, 81.4, 84.1, 87.2],
  [1.5, 77.2, 82.8, 85.3, 88.2],
  [2.2, 79.7, 84.3, 86.7, 89.5],
  [3, 81.5, 85.5, 87.7, 90.4],
  [4, 83.1, 86.6, 88.6, 91.1],
  [5.5, 84.7, 87.7, 89.6, 91.9],
  [7.5, 86.0, 88.7, 90.4, 92.6],
  [11, 87.6, 89.8, 91.4, 93.3],
  [15, 88.7, 90.6, 92.1, 93.9],
  [18.5, 89.3, 91.2, 92.6, 94.2],
  [22, 89.9, 91.6, 93.0, 94.5],
  [30, 90.7, 92.3, 93.6, 94.9],
  [37, 91.2, 92.7, 93.9, 95.2],
  [45, 91.7, 93.1, 94.2, 95.4],
  [55, 92.1, 93.5, 94.6, 95.7],
  [75, 92.7, 94.0, 95.0, 96.0],
  [90, 93.0, 94.2, 95.2, 96.1],
  [110, 93.3, 94.5, 95.4, 96.3],
  [132, 93.5, 94.7, 95.6, 96.4],
  [160, 93.8, 94.9, 95.8, 96.6],
  [200, 94.0, 95.1, 96.0, 96.7],
  [250, 94.0, 95.1, 96.0, 96.7],
  [315, 94.0, 95.1, 96.0, 96.7],
] as const;

describe('motors of IEC 60034-30-1', () => {
  it.each(IEC)('%s kW: IE1 %s, IE2 %s, IE3 %s, IE4 %s', (kw, ...wanted) => {
    const names = ['IE1', 'IE2', 'IE3', 'IE4'] as const;
    names.forEach((name, i) => {
      expect(percentAt(name, kw * 1000)).toBeCloseTo(wanted[i]!, 9);
      // Just beside a listed rating the standard's formula holds; the table is that formula rounded to 0.1.
      if (kw <= 200) expect(Math.abs(percentAt(name, kw * 999) - wanted[i]!)).toBeLessThan(0.06);
    });
  });

  it('lies between its neighbours between two ratings', () => {
    expect(percentAt('IE3', 33_000)).toBeGreaterThan(93.6);
    expect(percentAt('IE3', 33_000)).toBeLessThan(93.9);
  });
});

describe('motors of NEMA premium', () => {
  it.each([
    // 10 CFR 431.25(a) Table 1, 4 poles, enclosed
    ['1', 1, 85.5],
    ['1.5', 1.5, 86.5],
    ['2', 2, 86.5],
    ['3', 3, 89.5],
    ['5', 5, 89.5],
    ['7.5', 7.5, 91.7],
    ['10', 10, 91.7],
    ['15', 15, 92.4],
    ['20', 20, 93.0],
    ['25', 25, 93.6],
    ['30', 30, 93.6],
    ['40', 40, 94.1],
    ['50', 50, 94.5],
    ['60', 60, 95.0],
    ['75', 75, 95.4],
    ['100', 100, 95.4],
    ['125', 125, 95.4],
    ['150', 150, 95.8],
    ['200', 200, 96.2],
    // its rule for other ratings: at or above the midpoint of two listed ones the higher, below it the lower
    ['62, as 60', 62, 95.0],
    ['67.5, as 75', 67.5, 95.4],
    ['67.4, as 60', 67.4, 95.0],
    ['37 kW, as 50', 37_000 / HORSEPOWER, 94.5],
  ])('%s hp', (_, hp, percent) => expect(percentAt('NEMA premium', hp * HORSEPOWER)).toBeCloseTo(percent, 9));
});

describe('part load', () => {
  it.each([
    // 10 CFR 431 subpart Y appendix A, motor loss curve, worked by hand
    [0, 0.641],
    [0.25, 0.6039],
    [0.5, 0.6796],
    [0.75, 0.8257],
    [1, 1],
  ])('at load %s the loss is %s of that at full load', (load, share) => {
    expect(Math.abs(partLoadLoss(load) - share)).toBeLessThan(5e-5);
  });

  it.each([
    // the same curve: full-load efficiency, and efficiency at 25, 50, 75 and 100 % load
    [95.4, [89.57, 93.85, 94.96, 95.4]],
    [91.7, [82.06, 89.05, 90.94, 91.7]],
  ])('turns %s %% at full load into the efficiencies of a table', (full, wanted) => {
    const table = motorTable(full / 100);
    [0.25, 0.5, 0.75, 1].forEach((load, i) => {
      expect(Math.abs(100 * efficiencyAt(table, load) - wanted[i]!)).toBeLessThan(0.005);
    });
  });

  it('stays within 0.2 points of the curve between the loads of the table', () => {
    for (const full of [0.721, 0.9, 0.962]) {
      const table = motorTable(full);
      for (let load = 0.05; load <= 1; load += 0.005) {
        const exact = load / (load + partLoadLoss(load) * (1 / full - 1));
        expect(Math.abs(efficiencyAt(table, load) - exact)).toBeLessThan(0.002);
      }
    }
  });

  it('is on the careful side of the efficiency at 75 % load that DOE Motor Systems Tip Sheet #2 gives', () => {
    // DOE/GO-102012-3734, November 2012, Table 1: typical premium motors of 10 and 100 hp at 75 % load
    for (const [hp, percent, at] of [
      [10, 92.2, 1.4],
      [100, 95.3, 0.4],
    ] as const) {
      const found = 100 * efficiencyAt(motorTable(fullLoadEfficiency('NEMA premium', hp * HORSEPOWER)), 0.75);
      expect(percent - found).toBeGreaterThan(0);
      expect(percent - found).toBeLessThan(at);
    }
  });
});
