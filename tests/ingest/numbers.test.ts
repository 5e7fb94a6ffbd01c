import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  decideMark,
  decimalEvidence,
  isMissing,
  numberFromText,
  plainNumber,
  runState,
} from '../../server/ingest/numbers.ts';

describe('plainNumber', () => {
  it('is the correctly rounded value, as the language itself reads it', () => {
    const digits = fc.tuple(fc.bigInt(0n, 999_999_999_999_999n), fc.nat(14), fc.boolean());
    fc.assert(
      fc.property(digits, ([integer, decimals, negative]) => {
        const text = integer
          .toString()
          .padStart(decimals + 1, '0')
          .slice(-15);
        const cell = `${negative ? '-' : ''}${text.slice(0, text.length - decimals)}.${text.slice(text.length - decimals)}`;
        expect(plainNumber(`x${cell} y`, 1, cell.length + 2)).toBe(Number(cell) + 0);
      }),
      { numRuns: 2000, seed: 1 },
    );
  });

  it.each(['', '-', '.', '1e3', '1,5', '1.2.3', '0x10', '12O4', '1 2', '1234567890123456'])(
    'leaves %j alone',
    (text) => {
      expect(plainNumber(text, 0, text.length)).toBeNaN();
    },
  );

  it('reads -0.000 as plain 0', () => {
    expect(Object.is(plainNumber('-0.000', 0, 6), 0)).toBe(true);
  });
});

describe('numberFromText', () => {
  it.each([
    ['1,234.5', '.', 1234.5],
    ['1.234,5', ',', 1234.5],
    ['1 234,5', ',', 1234.5],
    ['1\u00a0234,5', ',', 1234.5],
    ['1\u202f234\u202f567', ',', 1234567],
    ["1'234.5", '.', 1234.5],
    ['\u22123.5', '.', -3.5],
    ['.235', '.', 0.235],
    ['5.', '.', 5],
    ['+1.5E-03', '.', 0.0015],
    ['1.234.567', ',', 1234567],
    ['0,5', ',', 0.5],
  ] as const)('reads %j with mark %j', (cell, mark, value) => {
    expect(numberFromText(cell, mark)).toBe(value);
  });

  it.each(['', '12O4', '0x10', 'Infinity', '1e999', 'NaN', '1,23', '1,2345', '1 23', '12 L/s', '1-2', '١٢'])(
    'refuses %j',
    (cell) => {
      expect(numberFromText(cell, '.')).toBeNaN();
    },
  );
});

describe('the decimal mark of a file', () => {
  it.each([
    ['1.234,5', ','],
    ['1,234.5', '.'],
    ['1 234,5', ','],
    ['5,3', ','],
    ['0,500', ','],
    ['1204,500', ','],
    ['1,234,567', '.'],
    ['1.234.567', ','],
    ['100,500', 'either'],
    ['1.204', 'either'],
    ['987', 'none'],
    ['Bad', 'none'],
  ])('%j proves %j', (cell, evidence) => {
    expect(decimalEvidence(cell)).toBe(evidence);
  });

  it('is undecidable for a lone 100,500, and decided by any cell that proves one', () => {
    expect(decideMark(['12', '100,500'])).toEqual({ kind: 'ambiguous', index: 1, count: 1 });
    expect(decideMark(['100,500', '7,25'])).toEqual({ kind: 'mark', mark: ',' });
    expect(decideMark(['100,500', '7.25'])).toEqual({ kind: 'mark', mark: '.' });
    expect(decideMark(['100.500'])).toEqual({ kind: 'mark', mark: '.' });
  });
});

it.each(['', 'NaN', 'n/a', '#N/A', '#REF!', 'null', '---', '-', 'Bad', 'No Data', '\u2014'])(
  '%j means missing',
  (cell) => {
    expect(isMissing(cell)).toBe(true);
  },
);

it.each(['12O4', 'x', 'Infinity', '0'])('%j does not mean missing', (cell) => {
  expect(isMissing(cell)).toBe(false);
});

it('reads run states in words', () => {
  expect(['ON', 'Running', 'true', 'OFF', 'Stopped', 'FALSE'].map(runState)).toEqual([1, 1, 1, 0, 0, 0]);
  expect(runState('perhaps')).toBeNaN();
});
