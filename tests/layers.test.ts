import { readdirSync, readFileSync } from 'node:fs';
import { dirname, join, posix } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';

/** Which way the arrows point, as DEVELOPERS.md has it: who may import whom, and what the calculation may not know. */

const ROOT = fileURLToPath(new URL('..', import.meta.url));
const CALCULATION = ['ingest', 'hydraulics', 'drive', 'station', 'staging', 'tariff', 'economics'];
const PACKAGES_OF_CALCULATION = ['zod', '@date-fns/tz', 'date-fns', 'csv-parse', 'csv-parse/sync', 'simple-statistics'];

interface Import {
  /** A path from the checkout, or the name of a package. */
  readonly target: string;
  readonly isPackage: boolean;
  readonly typeOnly: boolean;
}

interface Source {
  readonly file: string;
  /** Without comments. */
  readonly code: string;
  readonly imports: readonly Import[];
}

function source(file: string, text: string): Source {
  const code = withoutComments(text);
  const imports: Import[] = [];
  const add = (specifier: string, typeOnly: boolean) => {
    const isPackage = !specifier.startsWith('.');
    imports.push({ target: isPackage ? specifier : posix.join(dirname(file), specifier), isPackage, typeOnly });
  };
  for (const [, clause = '', specifier] of code.matchAll(
    /\b(?:import|export)\s+((?:type\s+)?[\w$*{][\w\s$*{},]*?)\s*from\s*['"]([^'"]+)['"]/g,
  )) {
    add(specifier!, isTypeOnly(clause));
  }
  for (const [, specifier] of code.matchAll(/\bimport\s*\(?\s*['"]([^'"]+)['"]/g)) add(specifier!, false);
  return { file, code, imports };
}

/** `type X`, `type { A }`, or `{ type A, type B }`. */
function isTypeOnly(clause: string): boolean {
  if (/^type\s/.test(clause)) return true;
  const names = /^\{(.*)\}$/s.exec(clause.trim())?.[1];
  if (names === undefined) return false;
  return names
    .split(',')
    .filter((name) => name.trim() !== '')
    .every((name) => /^\s*type\s/.test(name));
}

/** Comments go; text in quotes stays, whatever it looks like. */
function withoutComments(text: string): string {
  return text.replace(
    /('(?:\\.|[^'\\\n])*'|"(?:\\.|[^"\\\n])*")|\/\*[\s\S]*?\*\/|(?<![:\\/])\/\/[^\n]*/g,
    (_all, quoted: string | undefined) => quoted ?? ' ',
  );
}

function sources(): Source[] {
  return ['server', 'client', 'db', 'scripts'].flatMap((folder) =>
    readdirSync(join(ROOT, folder), { recursive: true, encoding: 'utf8' })
      .filter((name) => /\.(?:ts|tsx|mjs)$/.test(name))
      .map((name) => posix.join(folder, name.replaceAll('\\', '/')))
      .map((file) => source(file, readFileSync(join(ROOT, file), 'utf8'))),
  );
}

const isCalculation = (file: string) => CALCULATION.some((folder) => file.startsWith(`server/${folder}/`));

/** The calculation folders and every file that they reach: all of it runs in a browser as it does in a test. */
function reachedByCalculation(all: readonly Source[]): Source[] {
  const byFile = new Map(all.map((each) => [each.file, each]));
  const reached = new Set(all.filter(({ file }) => isCalculation(file)));
  for (const each of reached) {
    for (const { target, isPackage } of each.imports) {
      const next = isPackage ? undefined : byFile.get(target);
      if (next) reached.add(next);
    }
  }
  return [...reached];
}

const IMPURE: readonly (readonly [RegExp, string])[] = [
  [/\bprocess\s*\./, 'the environment or the process'],
  [/\bimport\.meta\b/, 'where it lies'],
  [/\bDate\.now\b|\bnew Date\b(?!\s*\()|\bnew Date\(\s*\)|(?<!new )\bDate\(\s*\)|\bperformance\./, 'the clock'],
  [/\bMath\.random\b/, 'chance'],
  [/\bBuffer\b|\brequire\(/, 'Node'],
  [/\bfetch\(|\bdocument\.|\bwindow\./, 'a network or a page'],
  [/\bSELECT\s.+\sFROM\b|\bINSERT INTO\b/, 'SQL'],
];

/** Each breach of the arrows as a sentence. */
function breaches(all: readonly Source[]): string[] {
  const found: string[] = [];
  for (const { file, code, imports } of reachedByCalculation(all)) {
    for (const [pattern, what] of IMPURE) if (pattern.test(code)) found.push(`${file} knows ${what}`);
    for (const { target, isPackage } of imports) {
      if (isPackage && !PACKAGES_OF_CALCULATION.includes(target)) found.push(`${file} imports ${target}`);
      if (!isPackage && !/^server\/(?!routes\/)/.test(target)) found.push(`${file} imports ${target}`);
    }
  }
  const forbid = (from: RegExp, to: RegExp, unless: (each: Import) => boolean = () => false) => {
    for (const { file, imports } of all) {
      if (!from.test(file)) continue;
      for (const each of imports)
        if (to.test(each.target) && !unless(each)) found.push(`${file} imports ${each.target}`);
    }
  };
  forbid(/^server\/(hydraulics|drive)\//, /^server\/(staging|station|tariff|economics|ingest)\//);
  forbid(/^server\/drive\//, /^server\/hydraulics\//);
  forbid(/^server\/(ingest|tariff)\//, /^server\/(staging|station|economics|hydraulics|drive)\//);
  forbid(/^server\/(station|staging)\//, /^server\/economics\//);
  forbid(
    /^db\//,
    /^(server\/(routes\/|[a-z]+Routes|app\.|main\.|compareRules|importRecord|makeCase)|client\/|express$)/,
  );
  forbid(/^server\/(?!main\.ts$)/, /^server\/(main|app)\.ts$/);
  forbid(/^server\/(?!app\.ts$)/, /^server\/routes\/(?!ownFields)/);
  forbid(/^server\//, /^client\//);
  forbid(/^(?!db\/|scripts\/bench\/)/, /^better-sqlite3$/);
  forbid(/^(?!client\/chart\/)/, /^chart\.js/);
  forbid(/^client\/(?!vite\.config)/, /^(db\/|scripts\/|node:|express$)/);
  // The page takes types from anywhere in the server, and code only from what is pure.
  const pure = new Set(reachedByCalculation(all).map(({ file }) => file));
  forbid(/^client\/(?!vite\.config)/, /^server\//, (each) => each.typeOnly || pure.has(each.target));
  for (const { file, code } of all) {
    if (/^(server\/(?!main\.ts$)|db\/|client\/(?!vite))/.test(file) && /\bprocess\.env\b/.test(code)) {
      found.push(`${file} reads the environment`);
    }
  }
  return [...new Set(found)].sort();
}

/** A circle of imports, types among them, as its files in order; null where there is none. */
function circle(all: readonly Source[]): string[] | null {
  const byFile = new Map(all.map((each) => [each.file, each]));
  const done = new Set<string>();
  const path: string[] = [];
  const visit = (file: string): string[] | null => {
    const at = path.indexOf(file);
    if (at >= 0) return [...path.slice(at), file];
    if (done.has(file)) return null;
    path.push(file);
    for (const { target, isPackage } of byFile.get(file)?.imports ?? []) {
      const found = isPackage || !byFile.has(target) ? null : visit(target);
      if (found) return found;
    }
    path.pop();
    done.add(file);
    return null;
  };
  for (const { file } of all) {
    const found = visit(file);
    if (found) return found;
  }
  return null;
}

describe('the arrows between folders', () => {
  const all = sources();

  it('are kept by every source file', () => {
    expect(all.length).toBeGreaterThan(100);
    for (const folder of CALCULATION) expect(all.some(({ file }) => file.startsWith(`server/${folder}/`))).toBe(true);
    expect(breaches(all)).toEqual([]);
  });

  it('never lead back to where they came from', () => {
    expect(circle(all)).toBeNull();
    const line = "import type { Run } from './run.ts';";
    const broken = all.map((each) =>
      each.file === 'server/staging/state.ts' ? source(each.file, `${line}\n${each.code}`) : each,
    );
    expect(circle(broken)).toContain('server/staging/state.ts');
  });

  it('finds an import for each line that has one', () => {
    for (const { file, code, imports } of all) {
      const lines = code.match(/\bfrom\s*['"][^'"]+['"];/g)?.length ?? 0;
      const bare = code.match(/^import\s*['"]/gm)?.length ?? 0;
      expect(imports.length, file).toBeGreaterThanOrEqual(lines + bare);
    }
  });

  it.each([
    ['server/staging/run.ts', "import { readFileSync } from 'node:fs';", 'imports node:fs'],
    ['server/tariff/bill.ts', "import express from 'express';", 'imports express'],
    ['server/ingest/record.ts', "import Database from 'better-sqlite3';", 'imports better-sqlite3'],
    ['server/station/storage.ts', "import { openDatabase } from '../../db/open.ts';", 'imports db/open.ts'],
    ['server/economics/irr.ts', "import { stationRoutes } from '../routes/stations.ts';", 'imports server/routes/'],
    ['server/economics/irr.ts', "import { api } from '../../client/api.ts';", 'imports client/api.ts'],
    ['server/drive/partLoad.ts', 'export const port = process.env.PORT;', 'knows the environment'],
    ['server/tariff/plan.ts', 'export const now = Date.now();', 'knows the clock'],
    ['server/tariff/plan.ts', 'export const now = new Date();', 'knows the clock'],
    ['server/staging/floor.ts', 'export const seed = Math.random();', 'knows chance'],
    ['server/units.ts', "import { cpus } from 'node:os';", 'imports node:os'],
    ['server/hydraulics/pump.ts', "import { runRule } from '../staging/run.ts';", 'imports server/staging/run.ts'],
    ['server/drive/partLoad.ts', "export * from '../staging/run.ts';", 'imports server/staging/run.ts'],
    ['db/stations.ts', "import { stationRoutes } from '../server/routes/stations.ts';", 'imports server/routes/'],
    ['client/App.tsx', "import { createApp } from '../server/app.ts';", 'imports server/app.ts'],
    ['client/App.tsx', "import { type Fault, comparisonRequest } from '../server/api.ts';", 'imports server/api.ts'],
    ['client/App.tsx', "const late = import('../db/open.ts');", 'imports db/open.ts'],
    ['client/series.ts', "import { Chart } from 'chart.js';", 'imports chart.js'],
    ['server/digest.ts', 'export const token = process.env.NTH_PUMP_TOKEN;', 'reads the environment'],
  ])('sees that %s may not have "%s"', (file, line, breach) => {
    const broken = all.map((each) => (each.file === file ? source(file, `${line}\n${each.code}`) : each));
    expect(breaches(broken)).toContainEqual(expect.stringContaining(`${file} ${breach}`));
  });

  it.each([
    "import type { Fault } from '../server/errors.ts';",
    "import { type StationEntry, type RecordEntry } from '../server/api.ts';",
    "import { compareRules } from '../server/staging/compare.ts';",
    '// new Date() and process.env in a comment are nobody’s business',
  ])('lets the page have "%s"', (line) => {
    const file = 'client/series.ts';
    expect(breaches(all.map((each) => (each.file === file ? source(file, `${line}\n${each.code}`) : each)))).toEqual(
      [],
    );
  });
});
