import { describe, expect, it } from 'vitest';
import { cellOf, mapSentence, namesOf, rowText, runsOf } from '../../client/questions/which/countMap.ts';
import type { BestCountMap } from '../../server/staging/bestCountMap.ts';
import { aFormat } from './builders.ts';

const plain = (text: string) => text.replaceAll('\u00a0', ' ');

/** Columns of 10 L/s from 0, rows of 2 m from 9. */
function aMap(count: readonly (readonly number[])[]): BestCountMap {
  return {
    flowM3s: count[0]!.map((_, i) => 0.005 + 0.01 * i),
    staticHeadM: count.map((_, i) => 10 + 2 * i),
    count,
    sets: [],
    set: [],
    hours: count.map((row) => row.map(() => 0)),
  };
}

describe('the map of the best count', () => {
  const map = aMap([
    [1, 1, 2, 2, 2],
    [1, 1, 1, 2, 0],
  ]);

  it('puts cells of one count together, edge to edge', () => {
    expect(cellOf(map).head).toBe(2);
    const runs = runsOf(map).map(({ row, who, fromM3s, toM3s }) => [
      row,
      who,
      Math.round(fromM3s * 1e5) / 100,
      Math.round(toM3s * 1e5) / 100,
    ]);
    expect(runs).toEqual([
      [0, 1, 0, 20],
      [0, 2, 20, 50],
      [1, 1, 0, 30],
      [1, 2, 30, 40],
      [1, 0, 40, 50],
    ]);
  });

  it('names each count once, in a long run', () => {
    const names = namesOf(runsOf(map)).map(({ who, row, flowM3s }) => [who, row, Math.round(flowM3s * 1e4) / 10]);
    expect(names).toEqual([
      [0, 1, 45],
      [1, 0, 10],
      [2, 0, 35],
    ]);
  });

  it('tells a row in words', () => {
    expect(plain(rowText(map, 1, aFormat()))).toBe('1 pump to 30 L/s, 2 pumps to 40 L/s, then none can');
  });

  it('says between which flows the second pump begins to pay', () => {
    expect(plain(mapSentence(map, aFormat()))).toBe(
      'From 10 m to 12 m static head the second pump begins to pay between 20 L/s and 30 L/s',
    );
    const steady = aMap([
      [1, 2, 2],
      [1, 2, 2],
    ]);
    expect(plain(mapSentence(steady, aFormat()))).toMatch(/the second pump pays from about 10 L\/s$/);
  });

  it('does without a second pump', () => {
    expect(plain(mapSentence(aMap([[1, 1, 0]]), aFormat()))).toMatch(/1 pump is all there is$/);
    expect(plain(mapSentence(aMap([[0, 0]]), aFormat()))).toMatch(/no pump can meet any flow$/);
  });
});
