import { describe, expect, it } from 'vitest';
import { FITTINGS, fittingLoss } from '../../server/hydraulics/fittings.ts';
import {
  colebrookWhite,
  frictionFactor,
  hazenWilliamsLoss,
  type Pipe,
  PipeFriction,
} from '../../server/hydraulics/pipe.ts';
import { FOOT, INCH, US_GALLON } from '../../server/units.ts';

const GPM = US_GALLON / 60;
const off = (found: number, wanted: number): number => Math.abs(found / wanted - 1);

describe('the friction factor', () => {
  it('agrees with a general fluids library: Colebrook at Re 1e5, ε/D 1e-4', () => {
    // C. Bell, fluids, friction.py, docstring of Colebrook
    expect(off(colebrookWhite(1e5, 1e-4), 0.018513866077471)).toBeLessThan(5e-14); // printed to 14 figures
  });

  it('agrees with Crane TP-410 example 7.1: a smooth pipe at Re 100 600', () => {
    expect(off(colebrookWhite(100_600, 0), 0.0179)).toBeLessThan(0.01); // read off a chart there
  });

  it('is 64/Re in laminar flow', () => {
    // same source: friction_laminar(128) = 0.5
    expect(frictionFactor(128, 1e-4)).toBe(0.5);
  });

  it('lies near the explicit formulas of Haaland and of Swamee and Jain', () => {
    // same source, at Re 1e5, ε/D 1e-4; the formulas themselves claim 2 % and 1 %
    expect(off(colebrookWhite(1e5, 1e-4), 0.018265053014793857)).toBeLessThan(0.02);
    expect(off(colebrookWhite(1e5, 1e-4), 0.018452424431901808)).toBeLessThan(0.01);
  });

  it('solves its own equation to 1e-12 wherever it is used', () => {
    for (const reynolds of [4000, 1e4, 1e5, 1e6, 1e7, 1e8]) {
      for (const roughness of [0, 1e-6, 1e-4, 1e-2, 0.05]) {
        const x = 1 / Math.sqrt(colebrookWhite(reynolds, roughness));
        expect(off(-2 * Math.log10(roughness / 3.7 + (2.51 * x) / reynolds), x)).toBeLessThan(1e-12);
      }
    }
  });

  it.each([0, 1e-4, 0.05])(
    'passes from laminar to turbulent without a jump or a fall of the loss (ε/D %s)',
    (roughness) => {
      expect(off(frictionFactor(2000 + 1e-6, roughness), 64 / 2000)).toBeLessThan(1e-8);
      expect(off(frictionFactor(4000 - 1e-6, roughness), colebrookWhite(4000, roughness))).toBeLessThan(1e-8);
      let before = 0;
      for (let reynolds = 1500; reynolds <= 5000; reynolds += 5) {
        const loss = frictionFactor(reynolds, roughness) * reynolds ** 2;
        expect(loss).toBeGreaterThan(before);
        before = loss;
      }
    },
  );
});

const pipe = (changes: Partial<Pipe>): Pipe => ({
  length: 100,
  diameter: 0.5,
  wall: { roughness: 0.046e-3 },
  minorLoss: 0,
  ...changes,
});

describe('loss along pipes', () => {
  it('agrees with a book: 0.416 m³/s in 100 m of 0.5 m', () => {
    // E. Maurer, Hydraulics and Water Resources: Examples Using R, ch. 4. It prints v 2.12 and f 0.0133, whose f·L/D·v²/2g
    // is 0.609 m; the 0.061 m printed beside them has its point one place off and is left out.
    const nu = 1.023053e-6;
    const head = new PipeFriction([pipe({})], nu).at(0.416);
    expect(off(head, (0.0133 * 200 * 2.12 ** 2) / (2 * 9.80665))).toBeLessThan(4e-3);
    expect(Math.abs(frictionFactor(1.03546e6, 0.046e-3 / 0.5) - 0.0133)).toBeLessThan(5e-5);
    // The inverse, printed 0.413 m³/s for 0.6 m.
    expect(off(new PipeFriction([pipe({})], nu).at(0.413), 0.6)).toBeLessThan(2e-3);
  });

  it('agrees with the worked system curve of the Hydraulic Institute in its minor losses', () => {
    // HI Data Library I.A: 2 flanged elbows, swing check, gate, exit: K 3.79; 4.026 in inside; 200 gpm is 5.040 ft/s.
    const k = 2 * FITTINGS['elbow-90'] + FITTINGS['swing-check-valve'] + FITTINGS['gate-valve'] + FITTINGS.exit;
    expect(k).toBeCloseTo(3.79, 12);
    const bare = { length: 0, diameter: 4.026 * INCH, wall: { roughness: 0 }, minorLoss: k };
    const feet = new PipeFriction([bare], 1e-6).at(200 * GPM) / FOOT;
    // K·v²/2g by hand with the velocity printed to three decimals and g = 32.2 ft/s²
    expect(off(feet, (3.79 * 5.04 ** 2) / 64.4)).toBeLessThan(1e-3);
  });

  it.each([
    // hand calculation of h = 10.667·L·Q^1.852/(C^1.852·D^4.871) in feet of the same case by three published forms
    ['engineering toolbox, 0.2083(100/C)^1.852 q^1.852/d^4.8655, printed 2.7 ft', 2.7022, 0.016],
    ['SI form with 10.67 and D^4.8704', 2.6635, 0.002],
    ['US form 4.727 with D^4.871', 2.6668, 0.0005],
  ])('Hazen–Williams, 200 gpm in 30 ft of 3.048 in, C 140: %s', (_, feet, tolerance) => {
    const head = hazenWilliamsLoss({ length: 30 * FOOT, diameter: 3.048 * INCH, c: 140 }, 200 * GPM);
    expect(off(head / FOOT, feet)).toBeLessThan(tolerance);
  });

  it('adds up pipes in series, of either formula', () => {
    const parts = [
      pipe({ minorLoss: 2 }),
      pipe({ diameter: 0.3, wall: { hazenWilliamsC: 120 } }),
      pipe({ length: 40 }),
    ];
    const whole = new PipeFriction(parts, 1.1e-6);
    for (const flow of [0, 1e-5, 1e-3, 0.02, 0.4]) {
      const sum = parts.reduce((total, part) => total + new PipeFriction([part], 1.1e-6).formulas(flow), 0);
      expect(Math.abs(whole.at(flow) - sum)).toBeLessThanOrEqual(1e-11 * sum);
    }
  });

  it('reads from its table what the formulas give, to 1e-11 at every flow', () => {
    const friction = new PipeFriction(
      [
        pipe({ minorLoss: 5 }),
        pipe({ diameter: 0.2, wall: { roughness: 0 } }),
        pipe({ wall: { hazenWilliamsC: 100 } }),
      ],
      1.3e-6,
    );
    let before = 0;
    for (let k = 0; k <= 20_000; k++) {
      const flow = Math.exp(-14 + (k / 20_000) * 15);
      const head = friction.at(flow);
      expect(off(head, friction.formulas(flow))).toBeLessThan(1e-11);
      expect(head).toBeGreaterThan(before);
      before = head;
    }
  });
});

describe('fittings', () => {
  it.each([
    // HI Data Library III.B, Tables 32a to 32c, and the worked example of I.A
    ['bell-mouth-inlet', 0.05],
    ['square-inlet', 0.5],
    ['inward-inlet', 1.0],
    ['exit', 1.0],
    ['swing-check-valve', 2.0],
    ['foot-valve', 0.8],
    ['elbow-90', 0.31],
    ['gate-valve', 0.17],
  ])('%s has K %s', (name, k) => expect(fittingLoss(name)).toBe(k));

  it('knows no other', () => {
    expect(fittingLoss('elbow')).toBeNull();
    expect(fittingLoss('toString')).toBeNull();
  });
});
