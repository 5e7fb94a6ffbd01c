import { describe, expect, it } from 'vitest';
import { inWords, list, ordinal, stepText, UNKNOWN } from '../../client/format.ts';
import { aFormat } from './builders.ts';

const NBSP = '\u00a0';

describe('numbers', () => {
  const format = aFormat();

  it.each([
    [41_234, '41,200'],
    [52.349, '52.3'],
    [0.0581234, '0.0581'],
    [0, '0'],
    [-1234.5, '-1,230'],
  ])('shows three figures of %d', (value, text) => {
    expect(format.bare(format.energy, value).text).toBe(text);
  });

  it('has all figures at hand, without the dust of binary fractions', () => {
    expect(format.bare(format.energy, 41_234.567).full).toBe('41,234.567');
    expect(format.bare(format.energy, 0.1 + 0.2).full).toBe('0.3');
  });

  it('never shows minus nothing', () => {
    expect(format.bare(format.energy, -0).text).toBe('0');
  });

  it.each([null, undefined, Number.NaN])('says unknown for %s', (value) => {
    expect(format.with(format.flow, value)).toEqual({ text: UNKNOWN, full: UNKNOWN });
    expect(format.bare(format.money, value).text).toBe('unknown');
  });

  it('keeps a number and its unit on one line', () => {
    expect(format.say(format.flow, 0.052)).toBe(`52${NBSP}L/s`);
  });

  it('writes money with its currency: cents under a hundred, three figures above', () => {
    expect(format.say(format.money, 41_234.56)).toBe('€41,200');
    expect(format.say(format.money, 9.5)).toBe('€9.50');
    expect(format.with(format.money, 41_234.5678).full).toBe(`EUR${NBSP}41,234.5678`);
    const australian = aFormat({ currency: 'AUD' });
    expect(australian.say(australian.money, 251_400)).toBe('A$251,000');
  });

  it('follows the locale of the reader', () => {
    const german = aFormat({ locale: 'de-DE' });
    expect(german.say(german.energy, 41_234)).toBe(`41.200${NBSP}kWh`);
  });

  it('counts whole things with all their figures', () => {
    expect(format.whole(8747)).toBe('8,747');
  });
});

describe('units', () => {
  // 1 US gallon = 231 in³ = 3.785411784 L and 1 ft = 0.3048 m, both exact.
  it('are those of the file', () => {
    const us = aFormat({ file: { flow: 'gpm', head: 'ft', power: 'hp' } });
    expect(us.with(us.flow, 0.003785411784 / 60).full).toBe(`1${NBSP}gpm`);
    expect(us.with(us.head, 3.048).full).toBe(`10${NBSP}ft`);
  });

  it('change family as the reader wishes, and stay where the file is of that family', () => {
    const file = { flow: 'm3/h', head: 'm', power: 'kW' } as const;
    expect(aFormat({ file, choice: 'us' }).flow.unit).toBe('gpm');
    expect(aFormat({ file, choice: 'metric' }).flow.unit).toBe('m³/h');
    expect(aFormat({ file: { ...file, flow: 'MGD', head: 'ft' }, choice: 'metric' })).toMatchObject({
      flow: { unit: 'L/s' },
      head: { unit: 'm' },
    });
  });

  it('give energy per million gallons where flow is in gallons', () => {
    const us = aFormat({ choice: 'us' });
    // 1 kWh/m³ over 3785.411784 m³, a million gallons.
    expect(us.with(us.specific, 1).full).toBe(`3,785.411784${NBSP}kWh/Mgal`);
    expect(us.with(us.volume, 3785.411784).full).toBe(`1${NBSP}Mgal`);
  });

  it('go back to the unit of the API', () => {
    const format = aFormat({ choice: 'us' });
    expect(format.toApi(format.head, 10)).toBeCloseTo(3.048, 12);
  });

  it('of time are local to the station, not to the reader', () => {
    expect(aFormat().instant(Date.UTC(2025, 6, 1, 23, 30))).toBe('2 Jul 2025, 00:30');
    expect(aFormat({ timeZone: 'Australia/Hobart' }).day(Date.UTC(2025, 0, 1, 14))).toBe('2 Jan 2025');
  });
});

describe('words', () => {
  it('count pumps', () => {
    expect([2, 3, 11, 12, 13, 21, 22].map(ordinal)).toEqual([
      'second',
      'third',
      '11th',
      '12th',
      '13th',
      '21st',
      '22nd',
    ]);
    expect([0, 1, 9, 10].map(inWords)).toEqual(['none', 'one', 'nine', '10']);
  });

  it('join a list', () => {
    expect([[], ['a'], ['a', 'b'], ['a', 'b', 'c']].map(list)).toEqual(['', 'a', 'a and b', 'a, b and c']);
  });

  it('name a step in its largest whole unit', () => {
    expect([3600, 900, 90, 86_400].map(stepText)).toEqual([`1${NBSP}h`, `15${NBSP}min`, `90${NBSP}s`, `24${NBSP}h`]);
  });
});
