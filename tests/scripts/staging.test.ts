import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { aRecordCsv, aStationFile } from '../support/aStation.ts';
import { aTariffFile } from '../support/tariffs.ts';
import { command } from './support.ts';

const folder = mkdtempSync(join(tmpdir(), 'nth-pump-staging-'));
afterAll(() => rmSync(folder, { recursive: true }));
const file = (name: string) => join(folder, name);

/** Levels on the suction side from 2 m down to 0 m below a discharge at 14 m: static heads of 12 to 14 m. */
const RECORD = aRecordCsv()
  .split('\n')
  .map((row, i, all) => (i === 0 ? `${row},level` : `${row},${2 - (2 * (i - 1)) / (all.length - 2)}`))
  .join('\n');

const [pump] = aStationFile().pumps as [Record<string, unknown>];
const STATION = aStationFile({
  pumps: [{ ...pump, ratedSpeed: 1480 }],
  system: { staticHead: 12, dischargeLevel: 14, friction: { coefficient: 0.001 } },
  storage: { activeVolume: 10, levels: [{ start: 1.5, stop: 0.5 }] },
});

beforeAll(() => {
  writeFileSync(file('station.json'), JSON.stringify(STATION));
  writeFileSync(file('record.csv'), RECORD);
  writeFileSync(file('tariff.json'), JSON.stringify(aTariffFile()));
});

const staging = (...more: string[]) => command('staging', ['--station', file('station.json'), ...more]);
const withRecord = (...more: string[]) =>
  staging('--record', file('record.csv'), '--tariff', file('tariff.json'), ...more);

describe('npm run staging', () => {
  it('tells speeds in Hz and rpm, and the header in metres, kPa, bar and psi', () => {
    const card = JSON.parse(staging('--json').stdout);
    const { speedBefore, speedAfter, headerHead, headerKpa } = card.steps[0].atBringOn;
    const row = (...more: string[]) =>
      staging(...more)
        .stdout.split('\n')
        .find((line) => line.startsWith('1 to 2, bring on'))!
        .split(/\s{2,}/)
        .slice(1)
        .map(Number);
    const [hz1, rpm1, hz2, rpm2, metres, kPa, bar, psi] = row();
    expect(hz1).toBeCloseTo(50 * speedBefore, 1);
    expect(hz2).toBeCloseTo(50 * speedAfter, 1);
    expect(Math.abs(rpm1! - 1480 * speedBefore)).toBeLessThanOrEqual(0.5);
    expect(Math.abs(rpm2! - 1480 * speedAfter)).toBeLessThanOrEqual(0.5);
    expect(metres).toBeCloseTo(headerHead, 1);
    expect(kPa).toBeCloseTo(headerKpa, 0);
    expect(bar).toBeCloseTo(headerKpa / 100, 2);
    expect(psi).toBeCloseTo(headerKpa * 0.1450377, 1); // NIST SP 811, table B.8: 1 psi = 6.894757 kPa
    expect(row('--mains', '60')[0]).toBeCloseTo(60 * speedBefore, 1);
  });

  it('over a record, says how the steps move with its static heads and what staging late costs', () => {
    const { code, stdout, stderr } = withRecord('--json');
    expect(code, stderr).toBe(0);
    const card = JSON.parse(stdout);
    expect(card.moves.low.staticHead).toBeCloseTo(12, 9);
    expect(card.moves.high.staticHead).toBeCloseTo(14, 9);
    const at = (head: string) => JSON.parse(staging('--static-head', head, '--json').stdout).steps[0].flow;
    expect(card.moves.low.flows[0]).toBeCloseTo(at('12'), 9);
    expect(card.moves.high.flows[0]).toBeCloseTo(at('14'), 9);
    const compared = JSON.parse(
      command('compare', ['--station', 'station', '--record', 'record', '--tariff', 'tariff', '--json'].map(named))
        .stdout,
    );
    const cost = (id: string) => compared.rules.find(({ rule }: { rule: string }) => rule === id).totalCost;
    expect(card.lateStaging.cost).toBeCloseTo(cost('late-staging') - cost('best-count'), 9);
    expect(card.lateStaging.cost).toBeGreaterThan(0);
    const text = withRecord().stdout;
    expect(text).toMatch(/Static head 12 to 14 m: step 1 to 2, from \d/);
    expect(text).toContain('starts at 1.5 m, stops at 0.5 m');
    expect(text).toMatch(/flat out takes \d+ kWh and EUR \d+\.\d\d more/);
  });

  it('takes pumps out by name, with or without a space after the comma', () => {
    expect(JSON.parse(staging('--without', 'P-2, P-2', '--json').stdout).pumps).toEqual(['P-1']);
  });

  it.each([
    [['--mains', '55'], '--mains'],
    [['--tariff', file('tariff.json')], '--tariff'],
    [['--without', 'Q'], "'Q'"],
    [['--static-head', 'high'], '--static-head'],
  ])('refuses %j', (more, named) => {
    const { code, stdout, stderr } = staging(...more);
    expect(code).toBe(2);
    expect(stdout).toBe('');
    expect(stderr).toContain(named);
  });
});

function named(argument: string): string {
  const kinds: Record<string, string> = { station: 'station.json', record: 'record.csv', tariff: 'tariff.json' };
  return kinds[argument] === undefined ? argument : file(kinds[argument]!);
}
