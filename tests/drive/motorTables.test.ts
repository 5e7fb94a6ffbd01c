import { describe, expect, it } from 'vitest';
import { fullLoadEfficiency, type MotorName, motorTable, partLoadLoss } from '../../server/drive/motorTables.ts';
import { efficiencyAt } from '../../server/drive/partLoad.ts';
import { HORSEPOWER } from '../../server/units.ts';

const percentAt = (name: MotorName, watts: number): number => 100 * fullLoadEfficiency(name, watts);

// The published tables and the curve at part load are in tests/accuracy/machines.ts.
describe('motors of IEC 60034-30-1', () => {
  it('lies between its neighbours between two ratings', () => {
    expect(percentAt('IE3', 33_000)).toBeGreaterThan(93.6);
    expect(percentAt('IE3', 33_000)).toBeLessThan(93.9);
  });
});

it('a NEMA premium motor goes by the nearest listed rating, at the midpoint by the higher', () => {
  // The rule of 10 CFR 431.25: between 60 hp (95.0) and 75 hp (95.4) the midpoint is 67.5.
  expect(percentAt('NEMA premium', 67.4 * HORSEPOWER)).toBeCloseTo(95.0, 9);
  expect(percentAt('NEMA premium', 67.5 * HORSEPOWER)).toBeCloseTo(95.4, 9);
  expect(percentAt('NEMA premium', 37_000)).toBeCloseTo(94.5, 9); // as 50 hp
});

describe('part load', () => {
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
