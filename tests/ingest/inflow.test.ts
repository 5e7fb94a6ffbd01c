import { describe, expect, it } from 'vitest';
import { drawdownTests } from '../../server/ingest/drawdown.ts';
import { type Inflow, inflowFromLevels } from '../../server/ingest/inflow.ts';
import { aRecord } from '../support/aRecord.ts';

const at = (seconds: number): string => new Date(Date.UTC(2025, 0, 1) + seconds * 1000).toISOString();

/** A record of levels [m] and run states, one row every `step` seconds. */
const levels = (rows: readonly (readonly (number | string)[])[], step: number, header = 'time,level,P1_on,P2_on') =>
  aRecord(`${header}\n${rows.map((row, k) => `${at(k * step)},${row.join(',')}`).join('\n')}\n`).log;

const well = (area: number) => (level: number) => area * level;

// Drawdown tests that others have worked out are in tests/accuracy/storage.ts.
describe('with inflow running', () => {
  it('adds the inflow of the fills to what is drawn down', () => {
    // By hand: 4 m², up 0.60 m in 240 s is 10 L/s; down 0.60 m in 120 s is 20 L/s more out than in: 30 L/s.
    const rows = [1, 1.15, 1.3, 1.45, 1.6, 1.3, 1, 1.15, 1.3].map((level, k) => [level, k === 4 || k === 5 ? 1 : 0, 0]);
    const inflow = inflowFromLevels({ log: levels(rows, 60), volume: well(4), side: 'suction' });
    expect(Array.from(inflow.log.flow!, (q) => Number((q * 1000).toFixed(9)))).toEqual(Array(8).fill(10));
    expect(drawdownTests(inflow)).toEqual([
      expect.objectContaining({ startMs: Date.UTC(2025, 0, 1, 0, 4), seconds: 120, pumps: ['P1'], pumpsOn: 1 }),
    ]);
    expect(drawdownTests(inflow)[0]!.pumpedM3s).toBeCloseTo(0.03, 12);
    expect(drawdownTests(inflow)[0]!.drawnM3).toBeCloseTo(2.4, 12);
  });

  /** A well simulated second by second: inflow falls evenly, P1 gives 40 L/s, P1 and P2 together 70 L/s. */
  const simulated = (inflowAt: (second: number) => number): { inflow: Inflow; true: number[] } => {
    const rows: (number | string)[][] = [];
    const truth: number[] = [];
    let volume = 10;
    for (let k = 0; k <= 120; k++) {
      const phase = k % 40;
      const [one, two] = [phase >= 20 && phase < 30 ? 1 : 0, phase >= 25 && phase < 30 ? 1 : 0];
      rows.push([volume / 5, one, two]);
      truth.push(inflowAt(k * 30 + 15));
      volume += (inflowAt(k * 30 + 15) - (one === 0 ? 0 : two === 0 ? 0.04 : 0.07)) * 30;
    }
    return { inflow: inflowFromLevels({ log: levels(rows, 30), volume: well(5), side: 'suction' }), true: truth };
  };

  it('finds an inflow that changes evenly, and each set of pumps, exactly', () => {
    const { inflow, true: truth } = simulated((second) => 0.02 - 2e-6 * second);
    inflow.log.flow!.forEach((flow, i) => {
      // The run after the last fill has only the fill before it; all else lies between two.
      expect(flow).toBeCloseTo(truth[i]!, i < 100 ? 9 : 2);
    });
    const tests = drawdownTests(inflow).slice(0, 4);
    expect(tests.map((test) => test.pumps)).toEqual([['P1'], ['P1', 'P2'], ['P1'], ['P1', 'P2']]);
    for (const test of tests) expect(test.pumpedM3s).toBeCloseTo(test.pumpsOn === 1 ? 0.04 : 0.07, 9);
  });

  it('takes the run of one pump straight after another for two tests', () => {
    // 6 m² with no inflow: P1 draws 0.6 m³ in a minute, then P2 0.3 m³
    const rows = [
      [2, 0, 0],
      [2, 1, 0],
      [1.9, 0, 1],
      [1.85, 0, 0],
      [1.85, 0, 0],
    ];
    const tests = drawdownTests(inflowFromLevels({ log: levels(rows, 60), volume: well(6), side: 'suction' }));
    expect(tests.map(({ pumps, pumpedM3s }) => [pumps, Number(pumpedM3s.toFixed(9))])).toEqual([
      [['P1'], 0.01],
      [['P2'], 0.005],
    ]);
  });

  it('closes the balance: inflow − pumped = change in store', () => {
    const { inflow } = simulated((second) => 0.02 + 0.005 * Math.sin(second / 300));
    const { log, pumped } = inflow;
    const net = log.flow!.reduce((sum, flow, i) => sum + (flow - pumped[i]!) * log.seconds[i]!, 0);
    const stored = inflow.stretches.reduce((sum, stretch) => sum + stretch.gain, 0);
    const last = 5 * log.level!.at(-1)! + (log.flow!.at(-1)! - pumped.at(-1)!) * 30; // volume at the end of the last row
    expect(net).toBeCloseTo(last - 10, 9);
    expect(net).toBeCloseTo(stored, 9);
  });
});

it('mirrors for a tower: with the pumps at rest its fall is the demand', () => {
  // 50 m²: down 0.06 m in 60 s is 50 L/s; up 0.03 m in 60 s is 25 L/s more in than out: 75 L/s.
  const rows = [5, 4.94, 4.88, 4.91, 4.94, 4.88].map((level, k) => [level, k === 2 || k === 3 ? 1 : 0, 0]);
  const inflow = inflowFromLevels({ log: levels(rows, 60), volume: well(50), side: 'discharge' });
  for (const flow of inflow.log.flow!) expect(flow).toBeCloseTo(0.05, 12);
  expect(drawdownTests(inflow)[0]!.pumpedM3s).toBeCloseTo(0.075, 12);
});

describe('what cannot be known', () => {
  it('stays a gap where a level is missing, and is not bridged', () => {
    const rows = [
      [1, 0, 0],
      [1.1, 0, 0],
      ['', 0, 0],
      [1.3, 0, 0],
      [1.4, 0, 0],
    ];
    const { log } = inflowFromLevels({ log: levels(rows, 60), volume: well(6), side: 'suction' });
    expect(Array.from(log.flow!, (q) => Number(q.toFixed(9)))).toEqual([0.01, Number.NaN, Number.NaN, 0.01]);
  });

  it('stays a gap where rows are missing', () => {
    const rows = [0, 60, 120, 600, 660, 720].map((second) => `${at(second)},${1 + second / 600},0`);
    const { log } = aRecord(`time,level,P1_on\n${rows.join('\n')}\n`);
    const inflow = inflowFromLevels({ log, volume: well(6), side: 'suction' });
    expect(Array.from(inflow.log.flow!, (q) => Number(q.toFixed(9)))).toEqual([0.01, 0.01, Number.NaN, 0.01, 0.01]);
  });

  it('gives an uneven fill its mean, which keeps its volume', () => {
    const rows = [1, 1.2, 1.15, 1.3].map((level) => [level, 0, 0]);
    const inflow = inflowFromLevels({ log: levels(rows, 60), volume: well(6), side: 'suction' });
    for (const flow of inflow.log.flow!) expect(flow).toBeCloseTo((6 * 0.3) / 180, 12);
    expect(inflow.notes.map((note) => note.code)).toContain('fill-mean');
  });

  it('says that a store loses volume at rest, and gives no inflow there', () => {
    const rows = [1.3, 1.2, 1.1].map((level) => [level, 0, 0]);
    const inflow = inflowFromLevels({ log: levels(rows, 60), volume: well(6), side: 'suction' });
    expect(Array.from(inflow.log.flow!)).toEqual([Number.NaN, Number.NaN]);
    expect(inflow.notes.map((note) => note.code)).toEqual(['no-fills', 'loss-at-rest']);
  });

  it('is no test where a pump ran for part of an interval', () => {
    const rows = [1, 1.1, 1.2, 1.1, 1.2].map((level, k) => [level, k === 2 ? 0.5 : 0, 0]);
    const inflow = inflowFromLevels({ log: levels(rows, 60), volume: well(6), side: 'suction' });
    expect(drawdownTests(inflow)).toEqual([]);
    expect(inflow.log.flow![2]).toBeCloseTo(0.01, 12);
  });

  it('knows counts without names', () => {
    const rows = [1, 1.1, 1.2, 1, 1.1].map((level, k) => [level, k === 2 ? 2 : 0]);
    const inflow = inflowFromLevels({ log: levels(rows, 60, 'time,level,pumps_on'), volume: well(6), side: 'suction' });
    // 10 L/s in, and 6 m² · 0.2 m in 60 s: 20 L/s more out
    expect(drawdownTests(inflow)).toEqual([expect.objectContaining({ pumps: null, pumpsOn: 2 })]);
    expect(drawdownTests(inflow)[0]!.pumpedM3s).toBeCloseTo(0.03, 12);
  });
});
