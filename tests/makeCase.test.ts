import { describe, expect, it } from 'vitest';
import { type CaseFile, readCase } from '../server/economics/caseFile.ts';
import { makeCase } from '../server/makeCase.ts';
import { readStation } from '../server/station/readStation.ts';
import { aStationFile } from './support/aStation.ts';
import { flowLog } from './support/comparing.ts';
import { aTariff } from './support/tariffs.ts';

const terms: CaseFile = {
  format: 'nth-pump/case/1',
  baseline: 'fixed-speed',
  proposed: 'best-count',
  capital: 1_000,
  years: 10,
  discountRate: 0.05,
};

/** A day of two pumps that lift 12 m through friction: drives save. */
const caseOf = (fields: Partial<CaseFile>, station: Readonly<Record<string, unknown>> = {}) =>
  makeCase(
    {
      station: readStation(aStationFile(station), 'station.json'),
      log: flowLog(Array.from({ length: 24 }, (_, hour) => 0.02 + 0.002 * hour)),
      tariff: aTariff(),
    },
    readCase({ ...terms, ...fields }, 'case.json'),
  );

describe('the sentence of a case', () => {
  it.each([
    ['three drives', 'with three drives the station saves'],
    ['one drive', 'with one drive the station saves'],
    ['A drive on each pump', 'with a drive on each pump the station saves'],
    ['Drives and a panel', 'with drives and a panel the station saves'],
    ['Acme quotation', 'with Acme quotation the station saves'],
    ['All-new', 'with All-new the station saves'],
    [undefined, 'with best-count the station saves'],
  ])('agrees in number with %s', (name, text) => {
    expect(caseOf(name === undefined ? {} : { name }).sentence).toContain(`It pays: ${text} `);
  });

  it('names another option that is worth more', () => {
    const dear = { name: 'all drives', capital: 1_000_000 };
    const cheap = { name: 'One drive', rule: 'one-trimmed' as const, capital: 100 };
    const { sentence, options } = caseOf({ ...dear, options: [cheap] });
    expect(options[2]!.npv).toBeGreaterThan(options[1]!.npv);
    expect(sentence).toMatch(/Of the options, one drive has the highest net present value: [\d ]+ EUR\.$/);
    // Worth less than what is proposed, it goes without a word.
    expect(caseOf({ name: 'all drives', capital: 0, options: [{ ...cheap, capital: 1e6 }] }).sentence).not.toContain(
      'Of the options',
    );
  });

  it('says short paybacks in months', () => {
    const yearly = caseOf({}).annualCostSaving;
    const sentenceAt = (years: number) => caseOf({ capital: years * yearly }).sentence;
    expect(sentenceAt(0.42)).toContain('pays back in 5 months;');
    expect(sentenceAt(1 / 12)).toContain('pays back in 1 month;');
    expect(sentenceAt(0.01)).toContain('pays back in less than a month;');
    expect(sentenceAt(1.02)).toContain('pays back in 1 year;');
    expect(sentenceAt(4.17)).toContain('pays back in 4.2 years;');
  });

  it('says a loss as a cost, and what it would have to save', () => {
    // Hardly any friction to save, and a poor drive.
    const station = {
      system: { staticHead: 25, friction: { coefficient: 1e-6 } },
      pumps: [
        {
          name: 'P',
          count: 2,
          curve: { shutoffHead: 30, shape: 0.003, bestFlow: 50, bestEfficiency: 0.78 },
          motor: { ratedPower: 30, efficiency: 0.92 },
          drive: { fitted: false, minSpeed: 0.99, efficiency: 0.8 },
        },
      ],
    };
    const { sentence, wouldChange } = caseOf({ name: 'two drives' }, station);
    expect(sentence).toMatch(/^It does not pay: with two drives the station costs [\d ]+ EUR a year more to run\.$/);
    expect(wouldChange[0]).toMatch(/\(now it costs [\d ]+ EUR more\)\.$/);
  });
});

describe('what would change a case', () => {
  const steps = { rules: { 'flow-steps': { bringOn: [25], dropOff: [24] } } };

  it('is told beyond restaging where that comes first', () => {
    const { advice, sentence, wouldChange, options, annualCostSaving } = caseOf(
      { baseline: 'flow-steps', capital: 40_000 },
      {
        ...steps,
        pumps: [
          { ...(aStationFile().pumps as object[])[0], drive: { fitted: false, minSpeed: 0.5, efficiency: 0.97 } },
        ],
      },
    );
    expect(advice).toBe('restage-first');
    const beyond = Number(
      /Beyond that, with best-count the station saves ([\d ]+) EUR/.exec(sentence)![1]!.replaceAll(' ', ''),
    );
    expect(beyond).toBeLessThan(annualCostSaving);
    for (const line of wouldChange.slice(0, 2)) expect(line).toMatch(/^Beyond restaging, it breaks even where it /);
    // Ten years at 5 % are worth 7.7217 times the first; money is told to three figures.
    const price = Number(/it costs ([\d ]+) EUR/.exec(wouldChange[0]!)![1]!.replaceAll(' ', ''));
    expect(Math.abs(price / (7.7217 * beyond) - 1)).toBeLessThan(0.01);
    expect(price).toBeLessThan(40_000);
    expect(options[0]!.notes).toEqual([]);
  });
});
