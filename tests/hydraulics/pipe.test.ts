import { describe, expect, it } from 'vitest';
import { fittingLoss } from '../../server/hydraulics/fittings.ts';
import { colebrookWhite, frictionFactor, type Pipe, PipeFriction } from '../../server/hydraulics/pipe.ts';

const off = (found: number, wanted: number): number => Math.abs(found / wanted - 1);

describe('the friction factor', () => {
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

it('a fitting that the table does not have has no K', () => {
  expect(fittingLoss('elbow')).toBeNull();
  expect(fittingLoss('toString')).toBeNull();
});
