import { describe, expect, it } from 'vitest';
import { stepsText } from '../../client/answers.ts';
import { asTrain, withoutPart, withPart } from '../../client/edit/reshape.ts';
import { ladderOf, ladderSentence, ownOrderText } from '../../client/questions/which/cardText.ts';
import { mapSentence, rowText } from '../../client/questions/which/countMap.ts';
import { hoursSentence } from '../../client/questions/which/hoursSentence.ts';
import { runnersOf, setText } from '../../client/runners.ts';
import { crossingsOf, curvesOf, leastRunners, recordSteps } from '../../client/series.ts';
import type { HandedSet } from '../../server/operatorCard.ts';
import type { PowerOverFlow } from '../../server/staging/pictures.ts';
import { aFormat, aPower, aRule } from './builders.ts';

const plain = (text: string | null) => text?.replaceAll('\u00a0', ' ');
const format = aFormat();

/** J to 30 L/s, A to 70, J and A to 90: J comes back as flow rises. */
const power: PowerOverFlow = aPower({
  alike: false,
  flowM3s: [0.02, 0.04, 0.06, 0.08],
  sets: [
    { pumps: ['J'], powerKw: [3, null, null, null] },
    { pumps: ['A'], powerKw: [5, 7, 11, null] },
    { pumps: ['J', 'A'], powerKw: [null, 9, 12, 17] },
  ],
  stretches: [
    { set: 0, fromM3s: 0, toM3s: 0.03, fromKw: null },
    { set: 1, fromM3s: 0.03, toM3s: 0.07, fromKw: 6 },
    { set: 2, fromM3s: 0.07, toM3s: 0.09, fromKw: 14 },
  ],
});

describe('pumps that differ, by name', () => {
  it('stand side by side as sets, and the best of them at each flow', () => {
    expect(runnersOf(power).map(({ id, name, short }) => [id, name, short])).toEqual([
      [1, 'J', 'J'],
      [2, 'A', 'A'],
      [3, 'J and A', 'J + A'],
    ]);
    expect(leastRunners(power)).toEqual([1, 2, 2, 3]);
    expect(crossingsOf(power)).toEqual([
      { flowM3s: 0.03, powerKw: 6, from: 1, to: 2 },
      { flowM3s: 0.07, powerKw: 14, from: 2, to: 3 },
    ]);
    expect(curvesOf(power, format).lines.map(({ name }) => name)).toEqual(['J', 'A', 'J and A']);
  });

  it('are named in the answer, some of many', () => {
    expect(plain(stepsText(power, format))).toBe('J to 30 L/s, A to 70 L/s, J and A to 90 L/s');
    const many = Array.from({ length: 6 }, (_, i) => ({
      set: i % 3,
      fromM3s: i / 100,
      toM3s: (i + 1) / 100,
      fromKw: null,
    }));
    expect(plain(stepsText({ ...power, stretches: many }, format))).toBe(
      'J to 10 L/s, A to 20 L/s, J and A to 30 L/s, then 3 more sets to 60 L/s',
    );
  });

  it('without drives keep to the order of the station', () => {
    const order = aPower({ alike: false, counts: aPower().counts, crossings: [] });
    expect(plain(stepsText(order, format))).toBe('B beyond 55 L/s, where A falls short');
    expect(runnersOf(order).map(({ name }) => name)).toEqual(['A', 'A and B']);
  });

  it('are named in the hours, those that run little put together', () => {
    const hoursBySet = { off: 5, J: 20, A: 50, B: 10, 'J+A': 10, 'A+B': 5 };
    const rules = [aRule('best-count', { hoursBySet, hoursByCount: { 0: 5, 1: 80, 2: 15 } })];
    expect(plain(hoursSentence({ rules }, format, { alike: false }))).toBe(
      'Best count runs A for 50 %, J for 20 %, B for 10 % and other sets for 20 % of the hours',
    );
    expect(setText('J+A')).toBe('J and A');
    expect(setText('off')).toBe('none');
  });

  it('have a lane each in the record over time', () => {
    const series = {
      rule: 'best-count' as const,
      exact: true,
      startMs: [0, 3600_000],
      endMs: [3600_000, 7200_000],
      flowM3s: [0.02, 0.04],
      leastFlowM3s: [0.02, 0.04],
      mostFlowM3s: [0.02, 0.04],
      powerKw: [1, 2],
      count: [0.5, 1],
      mostCount: [1, 1],
      pumps: [
        { name: 'J', share: [0.5, 0] },
        { name: 'A', share: [0, 1] },
      ],
      shortfallM3: [0, 0],
    };
    const { lanes } = recordSteps(series, format, 2);
    expect(lanes.map(({ name }) => name)).toEqual(['J', 'A']);
    expect(lanes[0]!.share.map(({ y }) => y)).toEqual([0.5, 0, 0, null]);
  });

  it('are named in the map', () => {
    const map = {
      flowM3s: [0.01, 0.03, 0.05],
      staticHeadM: [10, 12],
      count: [
        [1, 1, 2],
        [1, 2, 0],
      ],
      sets: [['J'], ['A'], ['J', 'A']],
      set: [
        [0, 1, 2],
        [0, 2, null],
      ],
      hours: [
        [0, 0, 0],
        [0, 0, 0],
      ],
    };
    expect(plain(rowText(map, 0, format))).toBe('J to 20 L/s, A to 40 L/s, then J and A');
    expect(plain(rowText(map, 1, format))).toBe('J to 20 L/s, J and A to 40 L/s, then none can');
    expect(plain(mapSentence(map, format))).toBe(
      'From 10 m to 12 m static head J is best up to about 20 L/s; 2 other sets follow',
    );
  });
});

describe('the card of sets', () => {
  const set = (pumps: string[], from: number, to: number, change: HandedSet['change'], text: string): HandedSet => ({
    from,
    to,
    pumps,
    add: [],
    drop: [],
    rests: false,
    savedKw: 0,
    text,
    change,
  });
  const at = { headerHead: 12, headerKpa: 118, before: [], after: [] };
  const card = {
    format: 'nth-pump/card/1' as const,
    station: 'Unlike Lane',
    units: { flow: 'L/s', head: 'm', power: 'kW' } as const,
    staticHead: 12,
    bandPercent: 1,
    basis: 'drives' as const,
    pumps: ['J', 'A'],
    alike: false,
    ratedSpeedRpm: null,
    steps: [],
    sets: [
      set(['J'], 0, 30, null, 'add J'),
      set(['A'], 30, 70, { ...at, bringOn: 31, dropOff: 29 }, 'add A, drop J'),
      set(['J', 'A'], 70, 90, { ...at, bringOn: 72, dropOff: 69 }, 'add J'),
    ],
    capacities: [30, 90],
    levels: [],
    moves: null,
    notes: [],
    cautions: [],
    lateStaging: null,
    ownOrder: null,
  };

  it('is a ladder of sets to the scale of flow, with their dead bands', () => {
    const ladder = ladderOf(card)!;
    expect(ladder.top).toBe(90);
    expect(ladder.zones.map(({ name, from, to }) => [name, Math.round(from * 90), Math.round(to * 90)])).toEqual([
      ['J', 0, 31],
      ['A', 29, 72],
      ['J + A', 69, 90],
    ]);
    expect(ladder.rungs.map(({ dropOff, bringOn }) => [Math.round(dropOff * 90), Math.round(bringOn * 90)])).toEqual([
      [29, 31],
      [69, 72],
    ]);
  });

  it('says what to add and to drop', () => {
    expect(plain(ladderSentence(card, format))).toBe('J first; add A, drop J at 31 L/s; add J at 72 L/s');
  });

  it('says what the order of the station costs, and nothing where it costs nothing', () => {
    const ownOrder = { energyKwh: 2000, cost: 300, hours: 8760 };
    expect(plain(ownOrderText({ ...card, ownOrder }, format))).toBe(
      'Keeping to the order J and A costs €300 and 2,000 kWh more over the 8,760 hours of the record, even with the best count at each flow.',
    );
    expect(ownOrderText({ ...card, ownOrder: { ...ownOrder, energyKwh: 0.1 } }, format)).toBeNull();
    expect(ownOrderText(card, format)).toBeNull();
  });
});

describe('a pump in series, in the form', () => {
  const machine = {
    curve: { shutoffHead: 30, shape: 0.003, bestFlow: 50, bestEfficiency: 0.78 },
    motor: { ratedPower: 30, efficiency: 0.92 },
  };
  const entry = { name: 'T', role: 'duty' as const, branchLoss: 0.0001, ...machine };

  it('begins as two alike, grows, and is a pump by itself again where one is left', () => {
    const train = asTrain(entry);
    expect(train).toEqual({ name: 'T', role: 'duty', branchLoss: 0.0001, train: [machine, machine] });
    expect(withPart(train).train).toHaveLength(3);
    expect(withoutPart(train, 0)).toEqual(entry);
    expect(withoutPart(withPart(train), 1)).toEqual(train);
  });

  it('keeps how many of a kind were in series', () => {
    expect(asTrain({ ...entry, inSeries: 2 }).train).toEqual([{ ...machine, inSeries: 2 }, machine]);
  });
});
