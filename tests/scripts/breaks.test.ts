import { existsSync, mkdirSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { BREAKS } from '../../scripts/breaks/list.ts';
import { outcomeOf, row, rowStart, SECTION, withRows } from '../../scripts/breaks/outcome.ts';
import { TreeCopy } from '../../scripts/breaks/treeCopy.ts';
import { command } from './support.ts';

const ROOT = fileURLToPath(new URL('../..', import.meta.url));
const text = (path: string) => readFileSync(join(ROOT, path), 'utf8');

describe('the breaks', () => {
  it.each(BREAKS.map((each) => [each.what, each] as const))('%s: one line, that is there once', (_, each) => {
    expect(text(each.file).split(each.find)).toHaveLength(2);
    expect(each.put).not.toBe(each.find);
    expect(each.find + each.put).not.toContain('\n');
    expect(existsSync(join(ROOT, each.tests)), each.tests).toBe(true);
  });

  it('all have their row in DEVELOPERS.md, with the test that goes red, and no others have', () => {
    const developers = text('DEVELOPERS.md');
    const section = developers.slice(developers.indexOf(`\n${SECTION}\n`)).split(/\n## /)[1]!;
    const rows = section.split('\n').filter((line) => line.startsWith('|'));
    expect(rows).toHaveLength(BREAKS.length + 2);
    for (const [i, each] of BREAKS.entries()) {
      const start = rowStart(each);
      expect(rows[i + 2]!.slice(0, start.length)).toBe(start);
      expect(rows[i + 2]!.length).toBeGreaterThan(start.length + 10);
    }
  });
});

describe('what the tests said', () => {
  const test = (status: string, title = 'adds up') => ({ status, title, ancestorTitles: ['a bill'] });
  const report = (...files: { message?: string; assertionResults: ReturnType<typeof test>[] }[]) => ({
    testResults: files,
  });

  it('is green only where every file ran and none failed', () => {
    expect(outcomeOf(report({ assertionResults: [test('passed'), test('skipped')] }))).toEqual({
      kind: 'green',
      passed: 1,
    });
    const loadFailed = { message: 'Cannot find module\nat', assertionResults: [] };
    for (const files of [[loadFailed], [{ assertionResults: [test('passed')] }, loadFailed]]) {
      expect(outcomeOf(report(...files))).toEqual({ kind: 'silent', why: 'Cannot find module' });
    }
    expect(outcomeOf(report({ assertionResults: [test('skipped')] })).kind).toBe('silent');
    expect(outcomeOf(report()).kind).toBe('silent');
    expect(outcomeOf(null).kind).toBe('silent');
  });

  it('is red by the first test that failed', () => {
    const files = [{ assertionResults: [test('passed'), test('failed', 'one|two'), test('failed', 'three')] }];
    expect(outcomeOf(report(...files))).toEqual({ kind: 'red', test: 'a bill › one|two' });
  });

  it('goes into the table in the place of what stood there', () => {
    const head = `${SECTION}\n\nwords\n\n| what is broken | where | first test that goes red |\n|---|---|---|\n`;
    const each = { what: 'a < b', file: 'x.ts', find: '<', put: '>', tests: 'x.test.ts' };
    const line = row(each, 'one|two');
    expect(line).toBe('| a \\< b | `x.ts` | `x.test.ts`: one\\|two |');
    expect(withRows(`# A\n\n${head}| old |\n\n## B\n`, [line])).toBe(`# A\n\n${head}${line}\n\n## B\n`);
    expect(() => withRows('# A\n', [line])).toThrow(SECTION);
  });
});

describe('a copy of a checkout', () => {
  it('is broken and mended, and the checkout is not', async () => {
    const checkout = mkdtempSync(join(tmpdir(), 'nth-pump-checkout-'));
    try {
      mkdirSync(join(checkout, '.git'));
      writeFileSync(join(checkout, 'x.ts'), 'const two = 1 + 1;\n');
      const copy = new TreeCopy(checkout);
      try {
        const there = () => readFileSync(join(copy.folder, 'x.ts'), 'utf8');
        const each = { what: '', file: 'x.ts', find: '1 + 1', put: '1 - $&', tests: '' };
        expect(await copy.broken(each, async () => there())).toBe('const two = 1 - $&;\n');
        await expect(copy.broken(each, () => Promise.reject(new Error('stopped')))).rejects.toThrow('stopped');
        expect(there()).toBe('const two = 1 + 1;\n');
        expect(existsSync(join(copy.folder, '.git'))).toBe(false);
      } finally {
        copy.remove();
      }
      expect(existsSync(copy.folder)).toBe(false);
      expect(readFileSync(join(checkout, 'x.ts'), 'utf8')).toBe('const two = 1 + 1;\n');
    } finally {
      rmSync(checkout, { recursive: true });
    }
  });

  it('is not made for options that go wrong', () => {
    const { code, stderr } = command('breaks', ['--only', 'no such words']);
    expect(code).toBe(2);
    expect(stderr).toContain('--only');
  });
});
