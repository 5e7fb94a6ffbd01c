import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { TOPICS } from './all.ts';
import type { OutsideCheck } from './check.ts';
import { found, groupsOf, section, tableOf, withSection } from './table.ts';

describe.each(TOPICS)('$heading', ({ checks }) => {
  const named = checks.map((check) => [`${check.what} (${check.source})`, check] as const);

  it.each(named)('%s', (_, check) => {
    const { ours, error, passes } = found(check);
    expect(passes, `ours ${error ?? ours} ${check.unit}, printed ${check.printed}, allowed ±${check.allowed}`).toBe(
      true,
    );
  });

  it('says of each figure what it is, whose, and why it may differ', () => {
    expect(checks.length).toBeGreaterThan(0);
    for (const { what, source, unit, why, printed, allowed } of checks) {
      expect(Number.isFinite(printed), what).toBe(true);
      expect(allowed, what).toBeGreaterThan(0);
      for (const words of [what, source, unit, why]) expect(words.trim(), what).not.toBe('');
      expect(source, what).not.toMatch(/\.$/);
    }
  });
});

it('holds no figure twice', () => {
  const keys = TOPICS.flatMap(({ checks }) => checks).map(({ what, source }) => `${what} (${source})`);
  expect(keys.filter((key, i) => keys.indexOf(key) < i)).toEqual([]);
});

describe('the table', () => {
  const check: OutsideCheck = {
    what: 'A third',
    kind: 'closed form',
    source: 'division',
    printed: 0.33,
    unit: '–',
    ours: () => 1 / 3,
    allowed: 0.005,
    why: 'two digits',
  };

  const rowsOf = (...checks: readonly OutsideCheck[]) => groupsOf({ heading: '', checks }).map(tableOf);

  it('cuts a figure of ours below what is allowed', () => {
    const zero = { ...check, printed: 0, ours: () => -1e-17, allowed: 1e-9 };
    expect(rowsOf(check, zero)).toEqual([
      [
        ['what', 'unit', 'printed', 'ours', 'difference', 'allowed'],
        ['A third', '–', '0.33', '0.3333', '0.0033', '0.005'],
        ['A third', '–', '0', '0', '0', '1e-9'],
      ],
    ]);
  });

  it('fails what is too far off, or no number', () => {
    expect(found(check).passes).toBe(true);
    expect(found({ ...check, allowed: 0.003 }).passes).toBe(false);
    expect(found({ ...check, ours: () => Number.NaN }).passes).toBe(false);
    const broken = () => {
      throw new Error('no such pump');
    };
    expect(found({ ...check, ours: broken })).toMatchObject({ passes: false, error: 'Error: no such pump' });
  });

  it('says once what neighbours share, and each reason where they differ', () => {
    const [two, other] = rowsOf(check, { ...check, why: 'other' }, { ...check, source: 'a book' });
    expect(two!.map((row) => row[6])).toEqual(['why', 'two digits', 'other']);
    expect(other!.map((row) => row.length)).toEqual([6, 6]);
  });

  it('keeps what Markdown would take for a mark', () => {
    const text = section([{ heading: 'One', checks: [{ ...check, what: 'Q* of a|b', source: 'k < H*' }] }]);
    expect(text).toContain('\n*closed form*: k \\< H\\*. Allowed: two digits.\n');
    expect(text).toContain('\n| Q\\* of a\\|b | – | 0.33 | 0.3333 | 0.0033 | 0.005 |\n');
    expect(text).toContain('\n| One | 0 | 0 | 0 | 1 | 0 | 1 |\n');
  });

  it('goes to the end of a document, in the place of an older one', () => {
    expect(withSection('# A\n\n## B\n\nb\n', '## Accuracy\n\nnew')).toBe('# A\n\n## B\n\nb\n\n## Accuracy\n\nnew\n');
    expect(withSection('# A\n\n## Accuracy\n\n### x\n\nold\n\n## B\n\nb\n', '## Accuracy\n\nnew')).toBe(
      '# A\n\n## B\n\nb\n\n## Accuracy\n\nnew\n',
    );
  });

  it('in the README is that of today; npm run accuracy -- --write renews it', () => {
    const readme = readFileSync(new URL('../../README.md', import.meta.url), 'utf8');
    const today = withSection(readme, section(TOPICS));
    expect(readme.slice(readme.indexOf('\n## Accuracy'))).toBe(today.slice(today.indexOf('\n## Accuracy')));
    expect(readme === today, 'the section is the last one').toBe(true);
  });
});
