import { describe, expect, it } from 'vitest';
import type { Log } from '../../server/ingest/log.ts';
import { compareRules, resultOf } from '../../server/staging/compare.ts';
import type { RuleId, RuleResult } from '../../server/staging/result.ts';
import { readStation } from '../../server/station/readStation.ts';
import { faultsOf } from '../support/aRecord.ts';
import { aStationFile } from '../support/aStation.ts';

/** Hours of flow in L/s, with levels in m where they are given. */
function hours(flows: readonly number[], levels: readonly number[] | null = null): Log {
  return {
    startMs: Float64Array.from(flows, (_, i) => Date.UTC(2025, 0, 6, i)),
    seconds: new Float64Array(flows.length).fill(3600),
    flow: Float64Array.from(flows, (flow) => flow / 1000),
    level: levels && Float64Array.from(levels),
    staticHead: null,
    power: null,
    pumpsOn: null,
    pumps: [],
  };
}

function compared(file: Readonly<Record<string, unknown>>, log: Log, rule: RuleId) {
  const station = readStation(file, 'station.json');
  const result = resultOf(compareRules({ station, log, tariff: null, rules: [rule] }), {
    station: '',
    record: '',
    tariff: null,
  });
  const codes = result.notes.map(({ code }) => code);
  return { rule: result.rules[0] as RuleResult, codes, notes: result.notes };
}

const pumpWith = (curve: object = {}, more: object = {}) => ({
  name: 'P',
  curve: { shutoffHead: 30, shape: 0.003, bestFlow: 50, bestEfficiency: 0.78, ...curve },
  motor: { efficiency: 0.9 },
  ...more,
});

describe('velocity in the main', () => {
  // 500 m of 0.25 m by Hazen and Williams behind 20 m of 0.2 m, and one pump at rated speed: solved here by halving.
  const pipes = [
    { length: 500, diameter: 250, hazenWilliamsC: 130 },
    { length: 20, diameter: 200, hazenWilliamsC: 130 },
  ];
  const loss = (q: number) =>
    [
      [500, 0.25],
      [20, 0.2],
    ].reduce((sum, [l, d]) => sum + (10.667 * l! * (q / 1000) ** 1.852) / (130 ** 1.852 * d! ** 4.871), 0);
  let [low, high] = [0, 77];
  for (let i = 0; i < 100; i++) {
    const q = (low + high) / 2;
    if (30 - 0.003 * q * q > 12 + loss(q)) low = q;
    else high = q;
  }
  const widest = low / 1000 / ((Math.PI / 4) * 0.25 ** 2);
  const narrowest = low / 1000 / ((Math.PI / 4) * 0.2 ** 2);
  const at = (velocity?: object) =>
    compared(
      aStationFile({
        system: { staticHead: 12, friction: { pipes }, ...(velocity && { velocity }) },
        pumps: [pumpWith()],
      }),
      hours([low / 2, low / 4, 0]),
      'fixed-speed',
    );

  it('is that of the states entered, not of the mean flow', () => {
    const { rule, codes } = at();
    expect(rule.main!.minVelocityMs).toBeCloseTo(widest, 9);
    expect(rule.main!.maxVelocityMs).toBeCloseTo(narrowest, 9);
    expect(rule.main).toMatchObject({ hoursBelowScouring: 0, hoursAboveMaximum: 0 });
    expect(codes).not.toContain('main-slow');
    expect(codes).not.toContain('main-fast');
  });

  it('counts the hours that pumps run, where it is slow or fast', () => {
    const slow = at({ from: widest + 0.01, to: narrowest + 0.01 });
    expect(slow.rule.main!.hoursBelowScouring).toBeCloseTo(0.75, 9);
    expect(slow.rule.main!.hoursAboveMaximum).toBe(0);
    expect(slow.codes).toContain('main-slow');
    expect(slow.codes).not.toContain('main-fast');
    const fast = at({ from: widest - 0.01, to: narrowest - 0.01 });
    expect(fast.rule.main!.hoursBelowScouring).toBe(0);
    expect(fast.rule.main!.hoursAboveMaximum).toBeCloseTo(0.75, 9);
    expect(fast.codes).toContain('main-fast');
  });

  it('is left out where the file has no pipes, and unknown where no pump ran', () => {
    expect(compared(aStationFile(), hours([20]), 'fixed-speed').rule.main).toBeUndefined();
    const file = aStationFile({ system: { staticHead: 12, friction: { pipes } }, pumps: [pumpWith()] });
    expect(compared(file, hours([0, 0]), 'fixed-speed').rule.main).toEqual({
      minVelocityMs: null,
      maxVelocityMs: null,
      hoursBelowScouring: 0,
      hoursAboveMaximum: 0,
    });
  });
});

describe('NPSH', () => {
  const npshr = [
    { flow: 0, npshr: 3 },
    { flow: 100, npshr: 8 },
  ];
  const system = {
    staticHead: 12,
    friction: { coefficient: 0.001 },
    dischargeLevel: 14,
    pumpLevel: 3,
    suctionLoss: { flow: 60, head: 1.2 },
  };
  const drive = { minSpeed: 0.4, efficiency: 0.97 };
  const file = (fields: object = {}, changes: object = {}) =>
    aStationFile({ system: { ...system, ...changes }, pumps: [pumpWith({ npshr }, { drive })], ...fields });
  // At 20 °C: IAPWS-95 density, IF97 vapour pressure; s²·h(q/s) = H_sys gives the speed of the one pump.
  const ratio = (q: number, level: number) => {
    const s = Math.sqrt((14 - level + 0.001 * q * q + 0.003 * q * q) / 30);
    const available = (101_325 - 2339.21) / (998.2072 * 9.80665) + level - 3 - 1.2 * (q / 60) ** 2;
    return available / (s * s * (3 + 0.05 * (q / s)));
  };
  const water = { liquid: { temperature: 20 } };

  it('is judged by the level of each interval and the speed of each pump', () => {
    const flows = [40, 60, 60];
    const levels = [2, 1, -1.5];
    const wanted = flows.map((q, i) => ratio(q, levels[i]!));
    expect(wanted.map((each) => each < 1.3)).toEqual([false, true, true]);
    const { rule, codes } = compared(file(water), hours(flows, levels), 'best-count');
    expect(rule.npsh!.leastRatio).toBeCloseTo(Math.min(...wanted), 5);
    expect(rule.npsh!.hoursBelowMargin).toBe(2);
    expect(codes).toContain('npsh-margin');
    const strict = compared(file({ ...water, npshMargin: 5 }), hours(flows, levels), 'best-count');
    expect(strict.rule.npsh!.hoursBelowMargin).toBe(3);
    const lax = compared(file({ ...water, npshMargin: 1 }), hours([40], [2]), 'best-count');
    expect(lax.rule.npsh!.hoursBelowMargin).toBe(0);
    expect(lax.codes).not.toContain('npsh-margin');
  });

  it('goes by the station where the record has no level', () => {
    const at = (fields: object, changes: object) =>
      compared(file(fields, changes), hours([50]), 'best-count').rule.npsh;
    // Static head is then the station's 12 m: that of a level of 2.
    expect(at(water, { suctionLevel: 2 })!.leastRatio).toBeCloseTo(ratio(50, 2), 5);
    const levels = [
      { start: 2.5, stop: 2.2 },
      { start: 2.6, stop: 2 },
    ];
    expect(at({ ...water, storage: { levels } }, {})!.leastRatio).toBeCloseTo(ratio(50, 2), 5);
    expect(at({ ...water, storage: { levels } }, { suctionLevel: 4 })!.leastRatio).toBeGreaterThan(ratio(50, 2));
  });

  it('is less on a mountain', () => {
    const at = (altitude: number) =>
      compared(file(water, { suctionLevel: 2, altitude }), hours([50]), 'best-count').rule.npsh!.leastRatio!;
    // 2000 m up the standard atmosphere has 79 495 Pa (from memory)
    expect(at(2000) / at(0)).toBeCloseTo(
      ((79_495 - 2339.21) / (998.2072 * 9.80665) - 1 - 1.2 * (50 / 60) ** 2) /
        ((101_325 - 2339.21) / (998.2072 * 9.80665) - 1 - 1.2 * (50 / 60) ** 2),
      4,
    );
  });

  it.each([
    ['the level', file(water), 'neither the record nor the station file'],
    ['pumpLevel', file(water, { pumpLevel: undefined, suctionLevel: 2 }), 'no system.pumpLevel.'],
    ['suctionLoss', file(water, { suctionLoss: undefined, suctionLevel: 2 }), 'no system.suctionLoss.'],
    ['the temperature', file({ liquid: { density: 1000 } }, { suctionLevel: 2 }), 'no liquid.temperature.'],
    ['the curve', file({ ...water, pumps: [pumpWith({}, { drive })] }), 'no curve.npshr of any pump.'],
  ])('is not checked without %s, and that is said once', (_, station, words) => {
    const { rule, notes } = compared(JSON.parse(JSON.stringify(station)), hours([50]), 'best-count');
    expect(rule.npsh).toBeUndefined();
    const said = notes.filter(({ code }) => code === 'npsh-unknown');
    expect(said).toHaveLength(1);
    expect(said[0]!.text).toContain(words);
  });

  it('is not spoken of where a file says nothing of it', () => {
    expect(compared(aStationFile(), hours([50]), 'fixed-speed').codes).not.toContain('npsh-unknown');
  });

  it('names the pumps it does not know', () => {
    const pumps = [pumpWith({ npshr }), pumpWith({}, { name: 'Q' })];
    const { notes } = compared(file({ ...water, pumps }, { suctionLevel: 2 }), hours([50]), 'fixed-speed');
    expect(notes.find(({ code }) => code === 'npsh-unknown')!.text).toContain('not checked for Q');
  });

  it('is refused with flows that fall, with a margin below 1 or with a single point', () => {
    const refused = (station: unknown) => faultsOf(() => readStation(station, 'station.json'));
    const at = 'station.json pumps[0].curve.npshr';
    expect(refused(file({ pumps: [pumpWith({ npshr: [...npshr].reverse() })] }))).toEqual([
      `out_of_range ${at}[1].flow: found 0; wanted more than 100, the flow before`,
    ]);
    expect(refused(file({ npshMargin: 0.9 }))).toEqual([
      'out_of_range station.json npshMargin: found 0.9; wanted 1 or more',
    ]);
    expect(refused(file({ pumps: [pumpWith({ npshr: npshr.slice(0, 1) })] }))[0]).toMatch(
      /^out_of_range station.json pumps\[0\].curve.npshr: /,
    );
  });
});

describe('the preferred range', () => {
  // Two different pumps at one header head: A carries 60 L/s, B what its own curve gives.
  const pumps = [pumpWith({}, { name: 'A' }), pumpWith({ shutoffHead: 24, shape: 0.003, bestFlow: 50 }, { name: 'B' })];
  const head = 30 - 0.003 * 60 * 60;
  const b = Math.sqrt((24 - head) / 0.003);
  const file = (preferred?: object) =>
    aStationFile({
      system: { staticHead: head, friction: { coefficient: 0 } },
      pumps,
      ...(preferred && { preferred }),
    });

  it('counts hours by pump', () => {
    expect(b / 50).toBeLessThan(0.9);
    // 60/50 = 1.2 is inside the usual range of 0.7 to 1.2; B is inside as well, until the range is narrowed.
    const usual = compared(file(), hours([60 + b, 60 + b]), 'fixed-speed').rule;
    expect(usual.outsidePreferredHours).toBeCloseTo(0, 9);
    const narrow = compared(file({ from: 0.9, to: 1.25 }), hours([60 + b, 30]), 'fixed-speed').rule;
    expect(narrow.outsidePreferredHours).toBeCloseTo(1, 9);
    expect(narrow.outsidePreferredHoursByPump!.A).toBe(0);
    expect(narrow.outsidePreferredHoursByPump!.B).toBeCloseTo(1, 9);
    const low = compared(file({ from: 0.5, to: 1.1 }), hours([60 + b, 30]), 'fixed-speed').rule;
    expect(low.outsidePreferredHoursByPump!.A).toBeCloseTo(1.5, 9);
    expect(low.outsidePreferredHoursByPump!.B).toBe(0);
  });

  it('is 0.7 to 1.2 of best-efficiency flow where the file has none', () => {
    const at = (bestFlow: number) => {
      const one = [pumpWith({ bestFlow })];
      const station = aStationFile({ system: { staticHead: head, friction: { coefficient: 0 } }, pumps: one });
      return compared(station, hours([60]), 'fixed-speed').rule.outsidePreferredHours!;
    };
    expect(at(60 / 1.19)).toBe(0);
    expect(at(60 / 1.21)).toBeCloseTo(1, 9);
    expect(at(60 / 0.71)).toBe(0);
    expect(at(60 / 0.69)).toBeCloseTo(1, 9);
  });

  it('counts each of some equal pumps', () => {
    const { rule } = compared(aStationFile({ preferred: { from: 0.9, to: 1.1 } }), hours([90]), 'best-count');
    expect(rule.outsidePreferredHoursByPump).toEqual({
      'P-1': rule.outsidePreferredHours,
      'P-2': rule.outsidePreferredHours,
    });
  });
});
