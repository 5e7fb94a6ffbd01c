import { describe, expect, it } from 'vitest';
import {
  ladderOf,
  ladderSentence,
  lateText,
  mainsOf,
  pressureMeasure,
  siOf,
  speedText,
} from '../../client/questions/which/cardText.ts';
import type { HandedCard, HandedStep } from '../../server/operatorCard.ts';
import { aFormat } from './builders.ts';

const plain = (text: string) => text.replaceAll('\u00a0', ' ');
const point = { speedBefore: 1, speedAfter: 0.8, headerHead: 12, headerKpa: 118 };

function aStep(from: number, dropOff: number, bringOn: number): HandedStep {
  return {
    from,
    to: from + 1,
    pump: ['A', 'B', 'C'][from]!,
    flow: (dropOff + bringOn) / 2,
    bringOn,
    dropOff,
    speedBefore: 1,
    speedAfter: 0.8,
    atBringOn: point,
    atDropOff: point,
    reason: 'crossing',
    text: '',
    crossings: [],
  };
}

function aCard(steps: readonly HandedStep[], capacities: readonly number[]): HandedCard {
  return {
    format: 'nth-pump/card/1',
    station: 'Mill Lane',
    units: { flow: 'L/s', head: 'm', power: 'kW' },
    staticHead: 12,
    bandPercent: 1,
    basis: 'drives',
    pumps: ['A', 'B', 'C'],
    alike: true,
    ratedSpeedRpm: 1475,
    steps,
    sets: [],
    capacities,
    levels: [],
    moves: null,
    notes: [],
    cautions: [],
  };
}

describe('the ladder', () => {
  it('is drawn to the scale of flow, neighbours overlapping in the band', () => {
    // Top is what three pumps give, 100: so every share is the flow in hundredths.
    const ladder = ladderOf(aCard([aStep(1, 38, 42), aStep(2, 70, 75)], [50, 80, 100]))!;
    expect(ladder.top).toBe(100);
    expect(ladder.zones).toEqual([
      { id: 1, name: '1', from: 0, to: 0.42, middle: 0.19 },
      { id: 2, name: '2', from: 0.38, to: 0.75, middle: 0.56 },
      { id: 3, name: '3', from: 0.7, to: 1, middle: 0.875 },
    ]);
    expect(ladder.rungs).toEqual([
      { id: 2, dropOff: 0.38, bringOn: 0.42, told: 0.25 },
      { id: 3, dropOff: 0.7, bringOn: 0.75, told: 0.75 },
    ]);
  });

  it('of one pump has no rung, and there is none where no pump can lift', () => {
    expect(ladderOf(aCard([], [50]))).toEqual({
      top: 50,
      zones: [{ id: 1, name: '1', from: 0, to: 1, middle: 0.5 }],
      rungs: [],
    });
    expect(ladderOf(aCard([], [0, 0]))).toBeNull();
    expect(ladderSentence(aCard([], [0, 0]), aFormat())).toBe('No pump can run');
  });

  it('begins with the first count that can lift at all', () => {
    expect(ladderOf(aCard([aStep(2, 38, 42)], [0, 50, 80]))!.zones.map(({ id }) => id)).toEqual([2, 3]);
  });

  it('is told in a sentence, in the units of the reader', () => {
    const card = aCard([aStep(1, 38, 42), aStep(2, 70, 75)], [50, 80, 100]);
    expect(plain(ladderSentence(card, aFormat()))).toBe('Bring on the second pump at 42 L/s, the third at 75 L/s');
    // 42 L/s is 42 · 60 / 3.785411784 = 665.7 gpm.
    expect(plain(ladderSentence(card, aFormat({ choice: 'us' })))).toMatch(/^Bring on the second pump at 666 gpm/);
  });
});

describe('speeds and pressures', () => {
  it('gives a speed as share, frequency and turns', () => {
    // 0.8 · 50 Hz and 0.8 · 1475 rpm
    expect(plain(speedText(0.8, { mains: 50, ratedSpeedRpm: 1475 }, aFormat()))).toBe('80 % · 40 Hz · 1,180 rpm');
    expect(plain(speedText(0.8, { mains: 60, ratedSpeedRpm: null }, aFormat()))).toBe('80 % · 48 Hz');
  });

  it.each([
    // NIST SP 811, appendix B: 1 psi = 6.894757 kPa
    ['psi', 6.894757, '1 psi'],
    ['bar', 250, '2.5 bar'],
    ['kPa', 250, '250 kPa'],
  ] as const)('gives a pressure in %s', (pressure, kpa, said) => {
    const format = aFormat();
    expect(plain(format.say(pressureMeasure(pressure, format), kpa))).toBe(said);
  });

  it('guesses the mains by units and currency, until the reader says', () => {
    const metric = { units: { flow: 'L/s', head: 'm', power: 'kW' }, currency: 'EUR' } as const;
    const us = { units: { flow: 'gpm', head: 'ft', power: 'hp' }, currency: 'EUR' } as const;
    expect([mainsOf('auto', metric), mainsOf('auto', us), mainsOf('auto', { ...metric, currency: 'CAD' })]).toEqual([
      50, 60, 60,
    ]);
    expect([mainsOf('60', metric), mainsOf('50', us)]).toEqual([60, 50]);
  });

  it('takes flows and heads of the card to the units of the API', () => {
    const { flow, head } = siOf({ units: { flow: 'm3/h', head: 'ft', power: 'kW' } });
    expect(flow(3600)).toBeCloseTo(1, 12);
    expect(head(10)).toBeCloseTo(3.048, 12);
  });
});

describe('what staging late costs', () => {
  it.each([
    [{ energyKwh: 1000, cost: 150, hours: 8760 }, /costs €150 and 1,000 kWh more over the 8,760 hours/],
    [{ energyKwh: 1000, cost: null, hours: 8760 }, /costs 1,000 kWh more/],
    [{ energyKwh: 0, cost: 0, hours: 8760 }, /costs nothing more/],
    [{ energyKwh: -200, cost: -30, hours: 8760 }, /saves 200 kWh/],
  ])('%o', (late, said) => {
    expect(plain(lateText(late, aFormat())!)).toMatch(said);
  });

  it('is not told where it was not compared', () => {
    expect(lateText(null, aFormat())).toBeNull();
  });
});
