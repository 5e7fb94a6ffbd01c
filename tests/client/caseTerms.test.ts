import { describe, expect, it } from 'vitest';
import {
  caseAnswer,
  caseFileOf,
  drivePrices,
  isPlaceholder,
  readable,
  shortVerdict,
  startingCase,
} from '../../client/questions/change/caseTerms.ts';
import { demoStations } from '../../server/demo/all.ts';
import { readCase } from '../../server/economics/caseFile.ts';
import { readRecord } from '../../server/ingest/record.ts';
import { makeCase } from '../../server/makeCase.ts';
import type { RuleResult } from '../../server/staging/result.ts';
import { readStation } from '../../server/station/readStation.ts';
import type { StationFile } from '../../server/station/stationFile.ts';
import { readTariff } from '../../server/tariff/tariffFile.ts';
import { aStationFile } from '../support/aStation.ts';
import { resultFor } from '../support/comparing.ts';
import { aBilledRule, aFormat, anOpened, aRule } from './builders.ts';

const pump = (fields: object) => ({ ...((aStationFile().pumps as object[])[0] as object), ...fields });
const aStation = (...pumps: object[]) => aStationFile(pumps.length > 0 ? { pumps } : {}) as StationFile;
const startOf = (rules: readonly RuleResult[], station = aStation()) =>
  startingCase(station, anOpened({ rules }).comparison);

describe('the placeholder for a drive', () => {
  it('is 2000 and 500 for each kW of motor, for each pump that needs one', () => {
    expect(drivePrices(aStation())).toEqual([17_000, 17_000]); // 2000 + 500 · 30 kW, twice
    const hp = { ...aStation(), units: { flow: 'gpm', head: 'ft', power: 'hp' } } as StationFile;
    expect(drivePrices(hp)[0]).toBe(13_200); // 30 hp · 0.7457 kW/hp = 22.371 kW: 2000 + 11 185.5, to the hundred
  });

  it('is not for drives that are there, nor for standby pumps', () => {
    const drive = { minSpeed: 0.5, efficiency: 0.97 };
    expect(drivePrices(aStation(pump({ drive })))).toEqual([]);
    expect(drivePrices(aStation(pump({ drive: null })))).toEqual([]);
    expect(drivePrices(aStation(pump({}), pump({ name: 'S', role: 'standby' })))).toHaveLength(2);
  });

  it('is unknown where a rating is', () => {
    expect(drivePrices(aStation(pump({ motor: { efficiency: 0.9 } })))).toEqual([null, null]);
  });
});

describe('the case to begin with', () => {
  const rules = [
    aBilledRule('fixed-speed', 100),
    aBilledRule('one-trimmed', 90),
    aBilledRule('flow-steps', 120),
    aBilledRule('best-count', 80),
  ];

  it('goes from the station’s own steps to the best count, with restaging and one drive beside it', () => {
    const { draft, placeholder } = startOf(rules)!;
    expect(draft).toMatchObject({ baseline: 'flow-steps', proposed: 'best-count', capital: 34_000 });
    expect(draft.options!.map(({ rule, capital }) => [rule, capital])).toEqual([
      ['fixed-speed', 0],
      ['one-trimmed', 17_000],
    ]);
    expect(placeholder).toMatch(/placeholders, EUR 2000 a drive and 500 per kW/);
    // The server reads it as it stands.
    expect(readCase(caseFileOf(draft), 'case.json').options).toHaveLength(2);
  });

  it('goes from fixed speed where there are no steps', () => {
    expect(startOf(rules.filter(({ rule }) => rule !== 'flow-steps'))!.draft.baseline).toBe('fixed-speed');
  });

  it('does not restage for less than half a percent', () => {
    const near = rules.map((each) => (each.rule === 'flow-steps' ? { ...each, totalCost: 100.4 } : each));
    expect(startOf(near)!.draft.options!.map(({ rule }) => rule)).toEqual(['one-trimmed']);
    const off = rules.map((each) => (each.rule === 'flow-steps' ? { ...each, totalCost: 100.6 } : each));
    expect(startOf(off)!.draft.options!.map(({ rule }) => rule)).toEqual(['fixed-speed', 'one-trimmed']);
  });

  it('does not restage to what leaves flow unmet', () => {
    const short = rules.map((each) => (each.rule === 'fixed-speed' ? { ...each, shortfallHours: 3 } : each));
    const { options } = startOf([...short, { ...aBilledRule('batch', 110), needsDrives: 0 }])!.draft;
    expect(options![0]!.rule).toBe('batch');
  });

  it('asks for a price where it knows none', () => {
    const { comparison } = anOpened({ rules });
    const yen = { ...comparison, inputs: { ...comparison.inputs, currency: 'JPY' } };
    const start = startingCase(aStation(), yen)!;
    expect(start.draft.capital).toBeNull();
    expect(caseFileOf(start.draft)).toBeNull();
    expect(start.placeholder).toMatch(/No placeholder price is known in JPY/);
  });

  it('proposes restaging where there is no drive to buy, and nothing where there is nothing', () => {
    const none = aStation(pump({ drive: null }));
    const start = startOf([aBilledRule('fixed-speed', 100), aBilledRule('flow-steps', 120)], none)!;
    expect(start.draft).toMatchObject({ baseline: 'flow-steps', proposed: 'fixed-speed', capital: 0 });
    expect(start.placeholder).toBeNull();
    expect(startOf([aRule('fixed-speed')], none)).toBeNull();
  });

  it('says that a price is a placeholder until it is replaced', () => {
    const start = startOf(rules)!;
    expect(isPlaceholder(start.draft, start)).toBe(true);
    expect(isPlaceholder({ ...start.draft, capital: 33_000 }, start)).toBe(false);
    const sentence = 'It pays: with a drive the station saves 1 200 EUR a year; net present value 9 000 EUR.';
    const format = aFormat();
    expect(caseAnswer({ sentence }, format, { placeholder: true })).toMatch(/€9,000\. The price is a placeholder$/);
    expect(caseAnswer({ sentence }, format, { placeholder: false })).toMatch(/€9,000$/);
    const long = { sentence: 'Restage first: it is free. Beyond that, no. Of the options, one drive is worth most.' };
    expect(caseAnswer(long, format, { placeholder: false })).toBe(
      'Restage first: it is free. Of the options, one drive is worth most',
    );
  });

  it('writes money as everywhere on the page and calls rules by its names', () => {
    expect(readable('the same pumps under fixed-speed save 2 680 EUR and -12 300.5 EUR, 45 %', aFormat())).toBe(
      'the same pumps under fixed speed save €2,680 and -€12,300, 45\u00a0%',
    );
    expect(
      shortVerdict({ sentence: 'Restage first: they save 2.5 MWh for nothing. Beyond that, no.' }, aFormat()),
    ).toBe('Restage first: they save 2.5 MWh for nothing');
  });
});

describe('the demo stations, under the terms the page begins with', () => {
  it.each([
    ['Withy Bank lift station', 'restage-first', /^Restage first: .* for nothing\./, /friction/],
    ['Juniper Bench booster station', 'pays', /^It pays: /, /valve loss −/],
    ['Quoll Ridge raw-water lift', 'does-not-pay', /^It does not pay: /, /drive loss \+/],
    ['Larkrigg high-lift station', 'pays', /^It pays: .*restaging to best count .*saves /, /pipe friction −/],
  ])('%s: %s', (name, advice, said, reason) => {
    const demo = demoStations().find(({ station }) => station.name === name)!;
    const station = readStation(demo.station, 'station.json');
    const tariff = readTariff(demo.tariff, 'tariff.json');
    const { log } = readRecord({
      fileName: 'record.csv',
      data: demo.recordCsv,
      units: demo.station.units,
      timeZone: demo.station.timeZone,
      pumpNames: [],
    });
    const { draft } = startingCase(demo.station, resultFor({ station, log, tariff }))!;
    const made = makeCase({ station, log, tariff }, readCase(caseFileOf(draft), 'case.json'));
    expect(made.advice).toBe(advice);
    expect(made.sentence).toMatch(said);
    expect(made.reason).toMatch(reason);
  });
});
