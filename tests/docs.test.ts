import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { z } from 'zod';
import { comparisonRequest, recordQuery, seriesQuery } from '../server/api.ts';
import { caseFileSchema, readCase } from '../server/economics/caseFile.ts';
import { readRecord } from '../server/ingest/record.ts';
import { makeCase } from '../server/makeCase.ts';
import { cardOf } from '../server/operatorCard.ts';
import { compareRules, resultOf } from '../server/staging/compare.ts';
import { RULE_IDS } from '../server/staging/result.ts';
import { RULES } from '../server/staging/rules/all.ts';
import { readStation } from '../server/station/readStation.ts';
import { stationFile } from '../server/station/stationFile.ts';
import { readTariff, tariffFileSchema } from '../server/tariff/tariffFile.ts';
import { command } from './scripts/support.ts';
import { routes } from './support/routes.ts';

/** What the documents promise to describe is described, and the files that they show can be used as they stand. */

const ROOT = fileURLToPath(new URL('..', import.meta.url));
const text = (path: string) => readFileSync(join(ROOT, path), 'utf8');
const README = text('README.md');
const DEVELOPERS = text('DEVELOPERS.md');

/** Texts of the files in some folders that end in one of some ways. */
function texts(folders: readonly string[], ending: RegExp): string[] {
  return folders.flatMap((folder) =>
    readdirSync(join(ROOT, folder), { recursive: true, encoding: 'utf8' })
      .filter((name) => ending.test(name))
      .map((name) => text(join(folder, name))),
  );
}

/** First cells, in code marks, of the table under a head, with what the row says of each. */
function table(document: string, head: string): Map<string, string> {
  const lines = document.split('\n');
  const from = lines.findIndex((line) => line.startsWith(`| ${head} |`));
  expect(from, `a table of ${head}`).toBeGreaterThan(-1);
  const rows = lines.slice(from + 2);
  const end = rows.findIndex((line) => !line.startsWith('|'));
  return new Map(
    rows.slice(0, end).map((line) => {
      const [, name, meaning] = /^\| `([^`]+)`[^|]*\| (.*) \|$/.exec(line) ?? [];
      return [name ?? line, meaning ?? ''];
    }),
  );
}

const faultCodes = (source: string) =>
  [.../FaultCode =([^;]+);/.exec(source)![1]!.matchAll(/'(\w+)'/g)].map(([, code]) => code!);

/** Codes of notes in a source: `code: 'so-and-so'`, or the first word of a call of `tell`. */
function noteCodes(source: string, faults: readonly string[]): string[] {
  return [...source.matchAll(/\bcode:\s*(?:[^'"{},;]*\?\s*)?'([a-z0-9_-]+)'|\btell\(\s*'([a-z0-9-]+)'/g)]
    .map(([, code, told]) => (code ?? told)!)
    .filter((code) => !faults.includes(code));
}

/** Environment variables that a source reads or hands on. */
function settings(source: string): string[] {
  const read = source.matchAll(/\b(?:process\.env|environment)\.(\w+)/g);
  const handedOn = source.matchAll(/^export ([A-Z_]+)=|\{ (TZ): /gm);
  return [...read, ...handedOn].map(([, name, other]) => (name ?? other)!);
}

describe('the codes', () => {
  const faults = faultCodes(text('server/errors.ts'));

  it('of faults are all described, and no others', () => {
    expect(faults.length).toBeGreaterThan(30);
    const described = table(DEVELOPERS, 'fault');
    expect([...described.keys()].sort()).toEqual([...faults].sort());
    for (const [code, meaning] of described) expect(meaning.length, code).toBeGreaterThan(15);
  });

  it('of notes are all described, and no others', () => {
    const notes = new Set(texts(['server'], /\.ts$/).flatMap((source) => noteCodes(source, faults)));
    expect(notes).toContain('short-record');
    expect(notes).toContain('near-dead-head');
    expect(notes).toContain('several-irr');
    const described = table(DEVELOPERS, 'note');
    expect([...described.keys()].sort()).toEqual([...notes].sort());
    for (const [code, meaning] of described) expect(meaning.length, code).toBeGreaterThan(15);
  });

  it('are found in every form in which sources write them', () => {
    const source = "notes.push({ code: 'a-b', text }); { code: x ? 'c-d' : y } tell(\n 'e-f', 1); { code: 'not_json' }";
    expect(noteCodes(source, ['not_json'])).toEqual(['a-b', 'c-d', 'e-f']);
    expect(faultCodes("export type FaultCode =\n // any\n | 'one'\n | 'two_three';")).toEqual(['one', 'two_three']);
  });
});

describe('for the developer', () => {
  it('every npm script is described, and no other', () => {
    const { scripts } = JSON.parse(text('package.json')) as { scripts: Record<string, string> };
    const names = Object.keys(scripts).map((name) => (/^(start|test)$/.test(name) ? `npm ${name}` : `npm run ${name}`));
    expect([...table(DEVELOPERS, 'command').keys()].sort()).toEqual(names.sort());
  });

  it('every environment setting is described, and no other', () => {
    const found = new Set([
      ...texts(['server', 'db', 'client', 'scripts', 'tests'], /\.(ts|tsx|mjs)$/).flatMap(settings),
      ...settings(text('.ci/run')),
    ]);
    expect(found).toContain('NTH_PUMP_TOKEN');
    expect(found).toContain('TZ');
    expect([...table(DEVELOPERS, 'variable').keys()].sort()).toEqual([...found].sort());
  });

  it('every route is described, and no other', () => {
    const found = routes();
    expect(found).toContain('POST /api/comparisons');
    expect([...table(DEVELOPERS, 'route').keys()].sort()).toEqual([...found].sort());
  });

  it('every choice of a request is named', () => {
    const names = [recordQuery, seriesQuery, comparisonRequest].flatMap(({ shape }) => Object.keys(shape));
    for (const name of names) expect(DEVELOPERS, name).toContain(`\`${name}\``);
  });

  it('every file of the calculation, the server, the database and the page is on the map', () => {
    const map = DEVELOPERS.slice(DEVELOPERS.indexOf('## Map'), DEVELOPERS.indexOf('### Which way'));
    const folders = ['ingest', 'hydraulics', 'drive', 'station', 'staging', 'tariff', 'economics'];
    for (const folder of folders) expect(map).toContain(`| \`server/${folder}/\` |`);
    const listed = [...folders.map((folder) => `server/${folder}`), 'server', 'db', 'client', 'client/chart'];
    for (const folder of listed) {
      const files = readdirSync(join(ROOT, folder)).filter((name) => /\.(ts|tsx|css)$/.test(name));
      expect(files.length, folder).toBeGreaterThan(2);
      for (const file of files) expect(map, `${folder}/${file}`).toMatch(new RegExp(`[\`/]${file}\``));
    }
  });
});

describe('for the operator', () => {
  it('every rule has its row; those that are not run yet are named', () => {
    const described = table(README, 'rule');
    expect([...described.keys()].sort()).toEqual(RULES.map(({ id }) => id).sort());
    for (const id of RULE_IDS) expect(README).toContain(`\`${id}\``);
  });

  it.each([
    ['station', stationFile],
    ['tariff', tariffFileSchema],
    ['case', caseFileSchema],
  ] as const)('every field of the %s file is named', (_name, schema) => {
    const names = new Set<string>();
    const collect = (node: unknown): void => {
      if (typeof node !== 'object' || node === null) return;
      if ('properties' in node) for (const key of Object.keys(node.properties as object)) names.add(key);
      for (const inner of Object.values(node)) collect(inner);
    };
    collect(z.toJSONSchema(schema, { unrepresentable: 'any' }));
    expect(names.size).toBeGreaterThan(12);
    // As a field of its own, at the end of a path, or in an example.
    const isNamed = (name: string) => new RegExp(`[\`."]${name}[\`".\\[]`).test(README);
    expect([...names].filter((name) => !isNamed(name))).toEqual([]);
  });
});

describe('the examples of the README', () => {
  const examples = new Map(
    [...README.matchAll(/<!-- example: (\S+) -->\n```\w+\n([\s\S]*?)```/g)].map(([, name, body]) => [name!, body!]),
  );
  const json = (name: string): unknown => JSON.parse(examples.get(name)!);
  const station = () => readStation(json('station.json'), 'station.json');
  const tariff = () => readTariff(json('tariff.json'), 'tariff.json');
  const record = (fileName: string) => {
    const { units, timeZone, duty } = station();
    const pumpNames = duty.map((pump) => pump.name);
    return readRecord({ fileName, data: examples.get(fileName)!, units, timeZone, pumpNames });
  };
  const hashes = { station: '', record: '', tariff: '' };
  const compared = (fileName: string) =>
    resultOf(compareRules({ station: station(), log: record(fileName).log, tariff: tariff() }), hashes);
  let folder: string;
  const path = (name: string) => join(folder, name);

  beforeAll(() => {
    folder = mkdtempSync(join(tmpdir(), 'nth-pump-readme-'));
    for (const [name, body] of examples) writeFileSync(path(name), body);
  });
  afterAll(() => rmSync(folder, { recursive: true }));

  /** The lines of an indented block that begins with a head. */
  const block = (head: string) => {
    const lines = README.split('\n');
    const from = lines.findIndex((line) => line.startsWith(`    ${head}`));
    expect(from, head).toBeGreaterThan(-1);
    const end = lines.findIndex((line, i) => i > from && !line.startsWith('    '));
    return lines.slice(from, end).map((line) => line.slice(4));
  };

  it('are a station, a record, a tariff, a case and a profile', () => {
    const names = ['station.json', 'record.csv', 'tariff.json', 'case.json', 'profile.json'];
    expect([...examples.keys()].sort()).toEqual(names.sort());
  });

  it('are read without a fault or a doubt, and every rule runs on them', () => {
    expect(station().notes).toEqual([]);
    const { report } = record('record.csv');
    expect(report.notes).toEqual([]);
    expect(report.gapHours).toBe(0);
    const result = compared('record.csv');
    expect(result.rules.map(({ rule }) => rule)).toEqual(RULES.map(({ id }) => id));
    for (const rule of result.rules) {
      expect(rule.shortfallM3).toBe(0);
      expect(rule.totalCost).toBeGreaterThan(0);
    }
    expect(result.notes.map(({ code }) => code)).not.toContain('rule-left-out');
  });

  it('give a year from the profile', () => {
    expect(record('profile.json').report.notes.map(({ code }) => code)).toEqual(['profile']);
    expect(compared('profile.json').record.hours).toBe(8760);
  });

  it('give a card and a case', () => {
    expect(cardOf(station(), {}).steps).toHaveLength(2);
    const terms = readCase(json('case.json'), 'case.json');
    const made = makeCase({ station: station(), log: record('record.csv').log, tariff: tariff() }, terms);
    expect(made.options.map(({ name }) => name)).toEqual(['leave as it is', 'three drives', 'one drive']);
  });

  it('print in the terminal what the README shows', () => {
    const files = ['--station', path('station.json'), '--record', path('record.csv'), '--tariff', path('tariff.json')];
    const lines = command('compare', files).stdout.split('\n');
    for (const line of block('rule          kWh')) expect(lines).toContain(line);
    const card = command('staging', ['--station', path('station.json')]).stdout.split('\n');
    for (const line of block('step    pays from')) expect(card).toContain(line);
    const verdict = command('case', [...files, '--case', path('case.json')]);
    expect(verdict.code).toBe(0);
    const advice = command('advice', ['--station', path('station.json'), '--flow', '70']);
    expect(advice.code).toBe(0);
  });

  it('have no field in their result that the README leaves out', () => {
    const result = compared('record.csv');
    const fields = [...Object.keys(result), ...result.rules.flatMap((rule) => Object.keys(rule))];
    const parts = Object.keys(result.rules[0]!.ledgerKwh);
    const isNamed = (name: string) => new RegExp(`\`(?:[\\w.]+\\.)?${name}[\`.]`).test(README);
    const known = new Set(['format', 'record', 'inputs', 'rules', 'rule']);
    const unnamed = [...new Set([...fields, ...parts])].filter((name) => !known.has(name) && !isNamed(name));
    expect(unnamed).toEqual([]);
  });
});
