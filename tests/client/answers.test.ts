import { describe, expect, it } from 'vitest';
import {
  answersOf,
  basisAnswer,
  changeAnswer,
  changesOf,
  costAnswer,
  stepsText,
  whichAnswer,
} from '../../client/answers.ts';
import { yearCost } from '../../client/yearly.ts';
import { aBilledRule, aFormat, anOpened, aPower, aRule } from './builders.ts';

const format = aFormat();
const plain = (text: string) => text.replaceAll('\u00a0', ' ');
const rising = (to: number, flowM3s: number) => ({ from: to - 1, to, flowM3s, powerKw: 9, rising: true });
const falling = (to: number, flowM3s: number) => ({ ...rising(to, flowM3s), rising: false });
const three = [0.055, 0.09, 0.12].map((capacityM3s, i) => ({
  count: i + 1,
  pumps: ['A', 'B', 'C'].slice(0, i + 1),
  capacityM3s,
  powerKw: [],
}));

describe('which pump, when', () => {
  it('names the flow from which each further pump pays, and the static head', () => {
    const power = aPower({ counts: three, crossings: [rising(2, 0.052), rising(3, 0.098)] });
    expect(plain(whichAnswer(anOpened({ rules: [], power }), format))).toBe(
      'Second pump from 52 L/s, third from 98 L/s (at 14 m static head)',
    );
  });

  it('says where a pump never pays before it is needed', () => {
    const power = aPower({ counts: three, crossings: [rising(2, 0.052)] });
    expect(plain(stepsText(power, format))).toBe('Second pump from 52 L/s, third beyond 90 L/s, where two fall short');
  });

  it('tells every crossing where there are several', () => {
    const power = aPower({ crossings: [rising(2, 0.03), falling(2, 0.04), rising(2, 0.05)] });
    expect(plain(stepsText(power, format))).toBe('Second pump from 30 L/s to 40 L/s and from 50 L/s');
    const first = aPower({ crossings: [falling(2, 0.01), rising(2, 0.05)] });
    expect(plain(stepsText(first, format))).toBe('Second pump up to 10 L/s and from 50 L/s');
  });

  it('speaks of one pump, and of none that can lift the head', () => {
    expect(plain(stepsText(aPower({ counts: three.slice(0, 1) }), format))).toBe('One pump, up to 55 L/s');
    const none = three.map((each) => ({ ...each, capacityM3s: 0 }));
    expect(stepsText(aPower({ counts: none }), format)).toBe('No pump can lift the static head');
  });

  it('says that the static head of the record varies', () => {
    const notes = [{ code: 'static-head-from-record', text: '' }];
    expect(whichAnswer(anOpened({ rules: [], notes }), format)).toContain("the record's own varies");
  });
});

describe('a year', () => {
  it('scales energy by hours, demand by months, fixed charges by twelve, tax last', () => {
    const month = { month: '2025-01', energyKwh: 0, energyCost: 0, demand: [], demandCost: 0 };
    const months = [1, 2, 3].map(() => ({ ...month, fixedCost: 0, taxCost: 0, totalCost: 0 }));
    // A quarter of a year: 2190 h. By hand: (100 × 4 + 30 × 4 + 12 × 5) × 1.1 = 638.
    const rule = aRule('fixed-speed', {
      energyCost: 100,
      demandCost: 30,
      fixedCost: 14.8,
      taxCost: 14.48,
      totalCost: 159.28,
      months,
    });
    expect(yearCost(rule, 2190, 5)).toBeCloseTo(638, 9);
  });
});

describe('what it costs', () => {
  it('sets how the station runs beside the least', () => {
    const rules = [aBilledRule('fixed-speed', 1000), aBilledRule('best-count', 910)];
    expect(plain(costAnswer(anOpened({ rules }), format))).toBe(
      '€1,000 a year at fixed speed; best count costs 9 % less',
    );
  });

  it("takes the operator's own steps for how it runs, and the floor where it is known", () => {
    const rules = [aBilledRule('fixed-speed', 1000), aBilledRule('flow-steps', 1200, { aboveFloorPercent: 31.27 })];
    expect(plain(costAnswer(anOpened({ rules }), format))).toBe(
      '€1,200 a year by its own steps; 31.3 % above the least possible energy',
    );
  });

  it('never hides what is not met', () => {
    const rules = [aBilledRule('fixed-speed', 1000, { shortfallM3: 1234 })];
    expect(plain(costAnswer(anOpened({ rules }), format))).toMatch(
      /; the least of 1 rules. 1,230 m³ of the flow is not met$/,
    );
  });

  it('speaks of energy without a tariff, and says that it scaled', () => {
    const rules = [aRule('fixed-speed', { energyKwh: 100 }), aRule('best-count', { energyKwh: 120 })];
    expect(plain(costAnswer(anOpened({ rules, hours: 876, tariff: null }), format))).toBe(
      '1,000 kWh a year at fixed speed (scaled to a year), no tariff given; the least of 2 rules',
    );
  });
});

describe('whether a change is worth it', () => {
  const told = (fixed: number, best: number) =>
    plain(
      changeAnswer(anOpened({ rules: [aBilledRule('fixed-speed', fixed), aBilledRule('best-count', best)] }), format),
    );

  it('says by how much drives lose, as plainly as by how much they save', () => {
    expect(told(1000, 1230)).toBe('Drives would lose €230 a year against fixed speed');
    expect(told(1230, 1000)).toBe('Drives would save €230 a year against fixed speed, before what they cost');
    expect(told(100_000, 100_010)).toBe('Drives would make next to no difference against fixed speed (€10.00 a year)');
  });

  it('does not credit drives with what restaging brings for nothing', () => {
    const rules = [
      aBilledRule('fixed-speed', 1000),
      aBilledRule('flow-steps', 1300),
      aBilledRule('best-count', 900),
      aBilledRule('one-trimmed', 950),
    ];
    expect(changesOf(anOpened({ rules }))?.changes.map(({ kind, gainPerYear }) => [kind, gainPerYear])).toEqual([
      ['restage', 300],
      ['drives', 100],
      ['one-drive', 50],
    ]);
    expect(plain(changeAnswer(anOpened({ rules }), format))).toBe(
      'Restaging to fixed speed saves €300 a year for nothing. ' +
        'Drives would save €100 a year against fixed speed, before what they cost',
    );
  });

  it('warns where two rules do not deliver the same', () => {
    const rules = [
      aBilledRule('fixed-speed', 1000, { shortfallM3: 500, deliveredM3: 9500 }),
      aBilledRule('best-count', 1100),
    ];
    expect(plain(changeAnswer(anOpened({ rules }), format))).toBe(
      'Drives would lose €100 a year against fixed speed. ' +
        'Not like for like: fixed speed leaves 500 m³ unmet, best count leaves nothing unmet',
    );
  });

  it('takes drives that are fitted for what is there', () => {
    const { pumps } = anOpened({ rules: [] }).station as unknown as { pumps: Record<string, unknown>[] };
    const fitted = { pumps: [{ ...pumps[0], drive: { fitted: true, minSpeed: 0.5, efficiency: 0.97 } }] };
    const rules = [aBilledRule('fixed-speed', 1000), aBilledRule('late-staging', 800), aBilledRule('best-count', 760)];
    expect(plain(changeAnswer(anOpened({ rules, station: fitted }), format))).toBe(
      'Restaging to best count saves €40.00 a year for nothing. Drives save €240 a year against fixed speed',
    );
  });

  it('says unknown where there is nothing to compare', () => {
    expect(changeAnswer(anOpened({ rules: [aRule('fixed-speed')] }), format)).toMatch(/^Unknown: /);
    expect(changeAnswer(anOpened({ rules: [] }), format)).toMatch(/^Unknown: /);
  });
});

describe('what it is based on', () => {
  it('counts hours with a value, pumps and gaps', () => {
    const open = anOpened({ rules: [], hours: 8736, gapHours: 24, tariff: 'Two seasons' });
    expect(basisAnswer(open, format)).toBe(
      '8,736 of 8,760 hours, 2 pumps, Two seasons. 24 hours have no value, left out',
    );
    expect(basisAnswer(anOpened({ rules: [], tariff: null }), format)).toBe('8,760 hours, 2 pumps, no tariff');
  });
});

it('answers all four questions', () => {
  const answers = answersOf(anOpened({ rules: [aBilledRule('fixed-speed', 10)] }), format);
  expect(Object.keys(answers)).toEqual(['which', 'cost', 'change', 'basis']);
  for (const answer of Object.values(answers)) expect(answer).not.toBe('');
});
