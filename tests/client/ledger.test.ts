import { describe, expect, it } from 'vitest';
import { ledgerSentence } from '../../client/questions/cost/LedgerBars.tsx';
import { ledgerBars } from '../../client/questions/cost/ledger.ts';
import { aFormat, aRule } from './builders.ts';

const plain = (text: string) => text.replaceAll('\u00a0', ' ');

describe('the bars of the ledger', () => {
  const fixed = aRule('fixed-speed', { energyKwh: 1000 });
  const best = aRule('best-count', {
    energyKwh: 800,
    ledgerKwh: { lift: 500, pipeFriction: 60, branch: 10, valve: 0, pump: 150, motor: 60, drive: 20, standby: 1e-8 },
  });

  it('stand on one scale and add up to each rule’s energy; what is 0 or dust is left out', () => {
    const [longer, shorter] = ledgerBars([fixed, best], 750);
    const sum = (bar: typeof longer) => bar!.parts.reduce((all, { share }) => all + share, 0);
    expect(sum(longer)).toBeCloseTo(1, 9);
    expect(sum(shorter)).toBeCloseTo(0.8, 9);
    expect(shorter!.parts.map(({ part }) => part)).toEqual([
      'lift',
      'pipeFriction',
      'branch',
      'pump',
      'motor',
      'drive',
    ]);
    expect(longer!.parts[0]).toEqual({ part: 'lift', name: 'Lift', kwh: 500, share: 0.5 });
  });

  it('show what lies above the floor at their end', () => {
    const [longer, shorter] = ledgerBars([fixed, best], 750);
    expect(longer!.above).toEqual({ from: 0.75, share: 0.25 });
    expect(shorter!.above!.share).toBeCloseTo(0.05, 12);
    expect(ledgerBars([best], 800 * (1 + 1e-12))[0]!.above!.share).toBe(0);
    expect(ledgerBars([fixed], undefined)[0]!.above).toBeNull();
  });

  it('are told in a sentence', () => {
    expect(plain(ledgerSentence({ ...fixed, aboveFloorPercent: 33.33 }, aFormat()))).toBe(
      'At fixed speed 50 % of the energy lifts the water; the whole is 33.3 % above the least possible',
    );
    expect(plain(ledgerSentence({ ...fixed, aboveFloorPercent: 9e-15 }, aFormat()))).toMatch(/takes less$/);
    expect(plain(ledgerSentence(fixed, aFormat()))).toBe('At fixed speed 50 % of the energy lifts the water');
  });
});
