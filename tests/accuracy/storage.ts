import { drawdownTests } from '../../server/ingest/drawdown.ts';
import { inflowFromLevels } from '../../server/ingest/inflow.ts';
import type { Log } from '../../server/ingest/log.ts';
import { readStation } from '../../server/station/readStation.ts';
import { FOOT, INCH, US_GALLON } from '../../server/units.ts';
import { aStationFile } from '../support/aStation.ts';
import { flowLog, resultFor, ruleIn } from '../support/comparing.ts';
import { halfDigit, type OutsideCheck } from './check.ts';

const US_GPM = US_GALLON / 60;
const EXACT = 'a formula; only rounding is allowed';

/** A wet well pumped at fixed speed: what its pumps deliver, singly and together, its active volume and its inflow. */
interface Well {
  /** Head at which one pump, and two, meet the system [L/s]; from these follow curve and friction. */
  readonly one: number;
  readonly two: number;
  readonly volumeM3: number;
  readonly inflow: number;
}

/**
 * Time from one start to the next [min], from the starts that a comparison counts in an hour.
 *
 * With head = 10 + k·Q² and h = h0 − a·q², one pump gives `one` where h0 = 10 + (a + k)·one² and two together give `two`
 * where h0 = 10 + (a/4 + k)·two²: a = k·(two² − one²)/(one² − two²/4).
 */
function cycleMinutes({ one, two, volumeM3, inflow }: Well): number {
  const coefficient = 10 / one ** 2;
  const shape = (coefficient * (two ** 2 - one ** 2)) / (one ** 2 - two ** 2 / 4);
  const station = readStation(
    aStationFile({
      system: { staticHead: 10, friction: { coefficient, exponent: 2 } },
      storage: { activeVolume: volumeM3 },
      pumps: [
        {
          name: 'P',
          count: 2,
          curve: { shutoffHead: 10 + (shape + coefficient) * one ** 2, shape, bestFlow: one, bestEfficiency: 0.7 },
          motor: { efficiency: 0.9 },
        },
      ],
    }),
    'station.json',
  );
  const result = resultFor({ station, log: flowLog([inflow / 1000]), tariff: null, rules: ['fixed-speed'] });
  return 60 / ruleIn(result, 'fixed-speed').starts!;
}

/** One pump of so many L/s beside a second that stays off. */
const single = (litresPerSecond: number, volumeM3: number, share = 0.5): number =>
  cycleMinutes({ one: litresPerSecond, two: 1.5 * litresPerSecond, volumeM3, inflow: share * litresPerSecond });

/** L/s in one US gallon a minute. */
const GPM = US_GPM * 1000;
const HANDBOOK = 'US Department of Defense, MIL-HDBK-1005/9A, section 2.5.3.6, equations 1 and 2, worked by hand';
const ARMY = 'US Army, EI 11C201, 1 March 1997, chapter 7';

function cycles(): OutsideCheck[] {
  const common = { kind: 'closed form', allowed: 1e-9, why: EXACT } as const;
  const ratios = (
    [
      [0.1, 11.1111],
      [0.25, 5.3333],
      [0.5, 4],
      [0.75, 5.3333],
      [0.9, 11.1111],
    ] as const
  ).map(
    ([share, printed]): OutsideCheck => ({
      what: `Cycle time × pump capacity / active volume at an inflow of ${share} of the capacity`,
      kind: 'closed form',
      source: HANDBOOK,
      printed,
      unit: '–',
      // 100 L/s and 6 m³: volume over capacity is one minute.
      ours: () => single(100, 6, share),
      allowed: halfDigit(4),
      why: 'four decimals worked by hand',
    }),
  );
  return [
    ...ratios,
    {
      ...common,
      what: 'Cycle of 500 gpm over 1250 US gallons, the V = T·q/4 of 10 min, at an inflow of 250 gpm',
      source: HANDBOOK,
      printed: 10,
      unit: 'min',
      ours: () => single(500 * GPM, 1250 * US_GALLON),
    },
    {
      ...common,
      what: 'The same at an inflow of 100 gpm: 12.5 min to fill and 3.125 min to empty',
      source: HANDBOOK,
      printed: 15.625,
      unit: 'min',
      ours: () => single(500 * GPM, 1250 * US_GALLON, 0.2),
    },
    {
      ...common,
      what: 'Shortest cycle of 45 L/s over 6.75 m³, V = T·q/4 of 10 min',
      source: `${ARMY}, V = T·q/4`,
      printed: 10,
      unit: 'min',
      ours: () => single(45, 6.75),
    },
    {
      ...common,
      what: 'Shortest cycle of a second pump that adds 40 to 60 L/s, over 6 m³, V = T·q/4 of the increment',
      source: `${ARMY}, q is the increment where a further pump starts; well of 10 m², 0.60 m, followed by hand`,
      printed: 10,
      unit: 'min',
      ours: () => cycleMinutes({ one: 60, two: 100, volumeM3: 6, inflow: 80 }),
    },
  ];
}

/** Most starts that a motor of a size may make, and those of a well that is sized by its least cycle, V = T·q/4. */
function startsLimits(): OutsideCheck[] {
  return (
    [
      ['under 15 kW, least cycle 10 min', 10, 6],
      ['15 to 75 kW, least cycle 15 min', 15, 4],
      ['75 to 185 kW, least cycle 20 min', 20, 3],
      ['75 to 185 kW, longest of the range 30 min', 30, 2],
    ] as const
  ).map(([what, minutes, printed]) => ({
    what: `Most starts an hour of a well sized for a motor of ${what}`,
    kind: 'published',
    source: `${ARMY}, table 7-1, starts as 60 min over the cycle`,
    printed,
    unit: '1/h',
    ours: () => 60 / single(80, (minutes * 60 * 0.08) / 4),
    allowed: 1e-9,
    why: EXACT,
  }));
}

/** Readings of the level [m] every so many seconds, and whether the pump runs from each to the next. */
function levelLog(levels: readonly number[], on: readonly number[], stepSeconds: number): Log {
  const start = Date.UTC(2025, 0, 1);
  return {
    startMs: Float64Array.from(levels, (_, i) => start + i * stepSeconds * 1000),
    seconds: new Float64Array(levels.length).fill(stepSeconds),
    flow: null,
    level: Float64Array.from(levels),
    staticHead: null,
    power: null,
    pumpsOn: null,
    pumps: [{ name: 'P1', on: Float64Array.from(on), speed: null, power: null }],
  };
}

const inflowOf = (log: Log, areaM2: number) =>
  inflowFromLevels({ log, volume: (level) => areaM2 * level, side: 'suction' });

/** Pumped flow [gpm] by the volumetric test: a minute at rest with the influent shut, then an even fall. */
function shutTest(areaM2: number, fallM: number, minutes: number): number {
  const levels = Array.from({ length: minutes + 2 }, (_, k) => 10 - (fallM * Math.max(0, k - 1)) / minutes);
  const on = levels.map((_, k) => (k === 0 ? 0 : 1));
  return drawdownTests(inflowOf(levelLog(levels, on, 60), areaM2))[0]!.pumpedM3s / US_GPM;
}

function drawdowns(): OutsideCheck[] {
  const tests = (
    [
      {
        what: 'a well 10 ft across, 6 in in 2 min',
        source: 'wastewater101.net, Time for math 33, August 2019',
        area: Math.PI * (5 * FOOT) ** 2,
        fall: 6 * INCH,
        minutes: 2,
        printed: 146.8,
        allowed: 0.15,
        why: 'the source takes 7.48 gal/ft³ and π = 3.14: 0.1 %',
      },
      {
        what: 'a well of 15 by 12 ft, 3 ft in 30 min',
        source: 'wastewater101.net, Time for math 33, August 2019',
        area: 15 * 12 * FOOT ** 2,
        fall: 3 * FOOT,
        minutes: 30,
        printed: 134.64,
        allowed: 0.0135,
        why: 'the source takes 7.48 gal/ft³: 0.01 %',
      },
      {
        what: 'a tank of 14.5 gal/in, 7.5 in in 3 min',
        source: 'onsiteinstaller.com, practice answers, March 2016',
        area: (14.5 * US_GALLON) / INCH,
        fall: 7.5 * INCH,
        minutes: 3,
        printed: 36.25,
        allowed: halfDigit(2),
        why: 'half of the last digit printed',
      },
      {
        what: 'a well of 10 by 9 ft, 2.2 ft in 5 min',
        source:
          'F. Spellman, handbook of wastewater treatment, example 11.1: inputs printed, 198 ft³ of 7.48 gal by hand',
        kind: 'closed form',
        area: 90 * FOOT ** 2,
        fall: 2.2 * FOOT,
        minutes: 5,
        printed: 296.2,
        allowed: halfDigit(1),
        why: 'half of the last digit worked out',
      },
    ] as const
  ).map(
    (test): OutsideCheck => ({
      kind: 'published',
      ...test,
      what: `Drawdown test with the influent shut: ${test.what}`,
      unit: 'gpm',
      ours: () => shutTest(test.area, test.fall, test.minutes),
    }),
  );

  // Up 0.60 m in 240 s, down 0.60 m in 120 s, and up again.
  const running = () =>
    inflowOf(levelLog([1, 1.15, 1.3, 1.45, 1.6, 1.3, 1, 1.15, 1.3], [0, 0, 0, 0, 1, 1, 0, 0, 0], 60), 4);
  const byHand = {
    kind: 'closed form',
    source:
      'inflow = area·rise/time; pumped = (area·fall + inflow·run)/run, worked by hand: 4 m², 0.60 m in 240 s and in 120 s',
    unit: 'L/s',
    allowed: 1e-9,
    why: EXACT,
  } as const;
  // 24.55 min in two readings, to the second.
  const fill = () => inflowOf(levelLog([0, 3 * FOOT, 6 * FOOT], [0, 0, 0], 737), Math.PI * (9 * FOOT) ** 2);
  return [
    ...tests,
    {
      what: 'Fill that takes 465 gpm 24.55 min: a well 18 ft across by 6 ft',
      kind: 'published',
      source: 'wastewater101.net, Collection system study time 11, November 2018',
      printed: 465,
      unit: 'gpm',
      ours: () => fill().log.flow![0]! / US_GPM,
      allowed: 0.5,
      why: 'the source takes 0.785·d² and 7.48 gal/ft³; minutes are printed to 0.01',
    },
    { ...byHand, what: 'Inflow from the fills of a cycle', printed: 10, ours: () => running().log.flow![0]! * 1000 },
    {
      ...byHand,
      what: 'Pumped flow of its run, with inflow running',
      printed: 30,
      ours: () => drawdownTests(running())[0]!.pumpedM3s * 1000,
    },
  ];
}

/** Cycles, starts and drawdown tests of a wet well. */
export const STORAGE: readonly OutsideCheck[] = [...cycles(), ...startsLimits(), ...drawdowns()];
