import { fitParabola } from '../../server/hydraulics/curveFit.ts';
import type { State } from '../../server/staging/state.ts';
import { NEAR_DEAD_HEAD } from '../../server/staging/state.ts';
import type { Station } from '../../server/station/station.ts';
import { energyKwh, FLOW_UNITS, FOOT, HORSEPOWER, US_GALLON } from '../../server/units.ts';
import { flowLog, resultFor, ruleIn } from '../support/comparing.ts';
import { aTariff } from '../support/tariffs.ts';
import { halfDigit, type OutsideCheck } from './check.ts';
import {
  against,
  CFS,
  CUBIC_METRES,
  EIGHT_AND_A_THIRD,
  GPM,
  headPoints,
  LOSSLESS,
  once,
  POUND,
  stationOf,
  together,
  US,
} from './stations.ts';

const PRINTED = 'half of the last digit printed';
const POWER_TABLE = 'Hydraulic Institute, Engineering Data Library, I.B Pump Curves, power table';

/** gpm, ft, % and shaft hp. */
const TABLE = [
  [100, 199, 25, 20.1],
  [200, 196, 40, 24.7],
  [300, 192, 50, 29.1],
  [400, 190, 58, 33.1],
  [500, 186, 65, 36.1],
  [600, 180, 71, 38.4],
  [700, 175, 75, 41.2],
  [800, 165, 77, 43.3],
  [900, 155, 78, 45.2],
  [1000, 140, 76, 46.5],
  [1100, 125, 72, 48.2],
  [1200, 100, 65, 46.6],
] as const;

/** The pump of the power table, as a file has it. */
export const TABLE_CURVE = {
  points: TABLE.map(([flow, head, percent]) => ({ flow, head, efficiency: percent / 100 })),
};

const tablePump = stationOf(US, against(100), [{ name: 'P', curve: TABLE_CURVE, motor: LOSSLESS }], {
  liquid: { density: EIGHT_AND_A_THIRD },
});

const powers: readonly OutsideCheck[] = TABLE.map(([gpm, feet, percent, hp]) => ({
  what: `Shaft power of ${gpm} gpm at ${feet} ft and ${percent} %`,
  kind: 'published',
  source: POWER_TABLE,
  printed: hp,
  unit: 'hp',
  ours: () => tablePump.duty[0]!.electric(gpm * GPM, 1, false) / HORSEPOWER,
  allowed: halfDigit(1),
  why: PRINTED,
}));

/** The best flow of a curve, and how far below and above it is preferred, in flow. */
const share = (gpm: number) => tablePump.duty[0]!.leastShareOfBest(gpm * GPM, 1, false);
const ranges: readonly OutsideCheck[] = [
  {
    what: 'Best-efficiency flow of the pump of the power table',
    kind: 'published',
    source: POWER_TABLE,
    printed: 900,
    unit: 'gpm',
    ours: () => 900 / share(900),
    allowed: 1e-9,
    why: 'a point of the table, exact but for rounding',
  },
  ...(
    [
      ['Least', 630, () => tablePump.preferred.from],
      ['Greatest', 1080, () => tablePump.preferred.to],
    ] as const
  ).map(
    ([word, printed, limit]): OutsideCheck => ({
      what: `${word} preferred flow of that pump, 70 to 120 % of its best`,
      kind: 'closed form',
      source: `0.7 and 1.2 of 900 gpm, the best of ${POWER_TABLE}`,
      printed,
      unit: 'gpm',
      ours: () => (limit() * 900) / share(900),
      allowed: 1e-9,
      why: 'exact but for rounding',
    }),
  ),
  {
    what: 'Least preferred share of best-efficiency flow where a file sets none',
    kind: 'published',
    source: 'ANSI/HI 9.6.3-2012, as Pumps & Systems quotes it (reading performance charts, part 1)',
    printed: 0.7,
    unit: '–',
    ours: () => tablePump.preferred.from,
    allowed: 1e-12,
    why: 'taken as printed',
  },
  {
    what: 'Greatest preferred share of best-efficiency flow where a file sets none',
    kind: 'published',
    source: 'ANSI/HI 9.6.3-2012, as Pumps & Systems quotes it (reading performance charts, part 1)',
    printed: 1.2,
    unit: '–',
    ours: () => tablePump.preferred.to,
    allowed: 1e-12,
    why: 'taken as printed',
  },
  {
    what: 'Least preferred flow of a pump whose best is 1000 gpm',
    kind: 'published',
    source: 'introtopumps.com, preferred operating region',
    printed: 700,
    unit: 'gpm',
    ours: () => 1000 * tablePump.preferred.from,
    allowed: 1e-9,
    why: 'exact but for rounding',
  },
  {
    what: 'Greatest preferred flow of a pump whose best is 1000 gpm',
    kind: 'published',
    source: 'introtopumps.com, preferred operating region',
    printed: 1200,
    unit: 'gpm',
    ours: () => 1000 * tablePump.preferred.to,
    allowed: 1e-9,
    why: 'exact but for rounding',
  },
  {
    what: 'Share of best-efficiency flow below which a pump counts as near dead-head',
    kind: 'common practice',
    source: 'about a quarter: US Army, TM 5-813-9 (1992), names 25 % for small pumps; the trade says 25 to 30 %',
    printed: 0.25,
    unit: '–',
    ours: () => NEAR_DEAD_HEAD,
    allowed: 0.05 + 1e-9,
    why: 'the careful end of the range',
  },
];

/** One pump at fixed speed whose curve passes through a flow, head and efficiency, on a system that does too. */
interface Duty {
  readonly units: Station['units'];
  readonly flow: number;
  readonly head: number;
  readonly efficiency: number;
  readonly density: number;
  readonly motor?: number;
  readonly drive?: number;
}

function duty({ units, flow, head, efficiency, density, motor = 1, drive }: Duty): Station {
  const curve = {
    shutoffHead: 1.25 * head,
    operatingPoint: { flow, head },
    bestFlow: flow,
    bestEfficiency: efficiency,
  };
  const pump = { name: 'P', curve, motor: { efficiency: motor } };
  const driven = drive === undefined ? pump : { ...pump, drive: { minSpeed: 0.5, efficiency: drive } };
  return stationOf(units, against(head), [driven], { liquid: { density } });
}

/** Units of flow times head over those of power, as divisors have it. */
const divisor = (units: Station['units'], watts: number, density: number) => {
  const station = duty({ units, flow: 100, head: 50, efficiency: 0.8, density });
  return (100 * 50) / ((together(station).power / watts) * 0.8);
};

const divisors: readonly OutsideCheck[] = [
  {
    what: 'Divisor in P = Q·H/(divisor·η), US units',
    kind: 'published',
    source: 'Hydraulic Institute, Engineering Data Library, I.B Pump Curves',
    printed: 3960,
    unit: 'gpm · ft / hp',
    ours: () => divisor(US, HORSEPOWER, EIGHT_AND_A_THIRD),
    allowed: 0.5,
    why: 'rounded to a whole number; water of 8⅓ lb/gal',
  },
  {
    what: 'Divisor in P = Q·H/(divisor·η), metric',
    kind: 'published',
    source: 'Hydraulic Institute, Engineering Data Library, I.B Pump Curves',
    printed: 366.6,
    unit: 'm³/h · m / kW',
    ours: () => divisor(CUBIC_METRES, 1000, 1000),
    allowed: 0.75,
    why: '0.2 %: the source takes a heavier water than 1000 kg/m³, or a rounded g',
  },
];

/** Crane's pump: 700 gpm, 428 ft, 62.364 lb/ft³, pump 70.7 %, motor 95 %, drive 96 %. */
const CRANE_WATER = { units: US, flow: 700, head: 428, efficiency: 70.7 / 100, density: (62.364 * POUND) / FOOT ** 3 };
const craneShaft = duty(CRANE_WATER);
const crane = duty({ ...CRANE_WATER, motor: 0.95, drive: 0.96 });
const NOTEBOOK = 'Crane TP-410, problem 7.34, as C. Bell, fluids, works it (notebook 7.34, commit 091070e)';

/** 8000 h of it, on its drive, at 0.12 per kWh. */
const craneYear = once(() =>
  ruleIn(
    resultFor({
      station: crane,
      log: flowLog(new Array(1000).fill(700 * GPM), 8 * 3600),
      tariff: aTariff({ energy: [{ name: 'all day', rate: 0.12 }] }),
      rules: ['best-count'],
    }),
    'best-count',
  ),
);

const craneChecks: readonly OutsideCheck[] = [
  {
    what: 'Shaft power',
    kind: 'published',
    source: NOTEBOOK,
    printed: 107.05591309,
    unit: 'hp',
    ours: () => craneShaft.duty[0]!.electric(700 * GPM, 1, false) / HORSEPOWER,
    allowed: halfDigit(8),
    why: PRINTED,
  },
  {
    what: 'Electric power, motor and drive included',
    kind: 'published',
    source: NOTEBOOK,
    printed: 117.38586962,
    unit: 'hp',
    ours: () => crane.duty[0]!.electric(700 * GPM, 1, true) / HORSEPOWER,
    allowed: halfDigit(8),
    why: PRINTED,
  },
  {
    what: 'Cost of a year of 8000 h at 0.12 per kWh',
    kind: 'published',
    source: NOTEBOOK,
    printed: 84033.24,
    unit: 'USD',
    ours: () => craneYear().energyCost!,
    allowed: halfDigit(2),
    why: PRINTED,
  },
  {
    what: 'The same as the book itself has it',
    kind: 'published',
    source: 'Crane TP-410, problem 7.34, as C. Bell, fluids, quotes it',
    printed: 83970,
    unit: 'USD',
    ours: () => craneYear().energyCost!,
    allowed: 84,
    why: '0.1 %: the book goes on from a rounded divisor',
  },
  {
    what: 'Wire-to-water efficiency of the same pump',
    kind: 'closed form',
    source: '0.707 · 0.95 · 0.96',
    printed: 64.4784,
    unit: '%',
    ours: () => craneYear().wireToWaterPercent!,
    allowed: halfDigit(4),
    why: 'half of the last digit',
  },
  {
    what: 'Energy per million US gallons of the same pump',
    kind: 'closed form',
    source: 'ρ·g·H over the same efficiency, worked outside this project',
    printed: 2084.158,
    unit: 'kWh',
    ours: () => craneYear().kwhPerM3! * 1e6 * US_GALLON,
    allowed: halfDigit(3),
    why: 'half of the last digit',
  },
  {
    what: 'Shaft power of 100 gpm at 421 ft and 70 %',
    kind: 'published',
    source: 'Crane TP-410, problem 7.15, as C. Bell, fluids, quotes it',
    printed: 15.2,
    unit: 'hp',
    ours: () => together(duty({ units: US, flow: 100, head: 421, efficiency: 0.7, density: 998.9 })).power / HORSEPOWER,
    allowed: halfDigit(1),
    why: PRINTED,
  },
];

/** 500 gpm at 46 ft and 70 % from a motor of 7.5 hp with a service factor of 1.15. */
const quiz = stationOf(
  US,
  against(46),
  [
    {
      name: 'P',
      curve: { shutoffHead: 68, operatingPoint: { flow: 500, head: 46 }, bestFlow: 500, bestEfficiency: 0.7 },
      motor: { ratedPower: 7.5, serviceFactor: 1.15, efficiency: 1 },
    },
  ],
  { liquid: { density: EIGHT_AND_A_THIRD } },
);
const QUIZ =
  'sludgeschool.com, practice questions on pumping: 500 gpm, 46 ft, 70 %, 7.5 hp with a service factor of 1.15';

const quizChecks: readonly OutsideCheck[] = [
  {
    what: 'Shaft power of the question',
    kind: 'closed form',
    source: `${QUIZ}; answer by hand`,
    printed: 8.297,
    unit: 'hp',
    ours: () => together(quiz).power / HORSEPOWER,
    allowed: halfDigit(3),
    why: 'half of the last digit',
  },
  {
    what: 'Share of what its motor may carry, 8.297 of 8.625 hp',
    kind: 'closed form',
    source: `${QUIZ}; answer by hand`,
    printed: 0.96197,
    unit: '–',
    ours: () => quiz.duty[0]!.overload(500 * GPM, 1, false),
    allowed: 1e-4,
    why: 'four figures of 8.297',
  },
];

const perVolume = (state: State): number => energyKwh(state.power, 1) / state.flow;
const SOWBY =
  'R. B. Sowby and S. Krieger, derivation and use of the pump energy intensity equation (publication summary)';
const ideal = (units: Station['units']) => duty({ units, flow: 100, head: 50, efficiency: 1, density: 1000 });

const constants: readonly OutsideCheck[] = [
  {
    what: 'Least energy to lift a cubic metre by a metre',
    kind: 'published',
    source: SOWBY,
    printed: 0.00272,
    unit: 'kWh',
    ours: () => perVolume(together(ideal(CUBIC_METRES))) / 50,
    allowed: halfDigit(5),
    why: PRINTED,
  },
  {
    what: 'Least energy to lift a million US gallons by a foot',
    kind: 'published',
    source: SOWBY,
    printed: 3.14,
    unit: 'kWh',
    ours: () => (perVolume(together(ideal(US))) * 1e6 * US_GALLON) / 50,
    allowed: halfDigit(2),
    why: PRINTED,
  },
];

const onePoint: OutsideCheck = {
  what: 'Head at half of it, of a pump of 32 m at no flow and 24 m at 40 L/s',
  kind: 'closed form',
  source: 'h = H0 − a·q² with a = (H0 − H*)/q*²: 32 − 8/4',
  printed: 30,
  unit: 'm',
  ours: () =>
    stationOf({ flow: 'L/s', head: 'm', power: 'kW' }, against(10), [
      {
        name: 'P',
        curve: { shutoffHead: 32, operatingPoint: { flow: 40, head: 24 }, bestFlow: 40, bestEfficiency: 0.8 },
        motor: LOSSLESS,
      },
    ]).duty[0]!.head(0.02, 1),
  allowed: 1e-12,
  why: 'exact but for rounding',
};

const MAURER =
  'E. Maurer, Hydraulics and Water Resources: Examples Using R, ch. 7: code printed, its result worked out';
const maurer = () =>
  fitParabola([
    { flow: 0, head: 81 },
    { flow: (5000 * GPM) / CFS, head: 60 },
    { flow: (7850 * GPM) / CFS, head: 20 },
  ]);

/** Its pump and its pipe of 20 in and 3884 ft, the friction held at that of 1 cfs, 30 ft of lift. */
const maurerStation = () => {
  const { shutoffHead, shape } = maurer();
  return stationOf(
    { flow: 'm3/s', head: 'ft', power: 'hp' },
    { staticHead: 30, friction: { coefficient: 0.16021 / CFS ** 2 } },
    [
      {
        name: 'P',
        curve: { shutoffHead, shape: shape / CFS ** 2, bestFlow: 11 * CFS, bestEfficiency: 0.8 },
        motor: LOSSLESS,
      },
    ],
  );
};

const fits: readonly OutsideCheck[] = [
  {
    what: 'Shut-off head of the parabola through (0, 81), (5000 gpm, 60), (7850, 20)',
    kind: 'independent solver',
    source: MAURER,
    printed: 82.467,
    unit: 'ft',
    ours: () => maurer().shutoffHead,
    allowed: halfDigit(3),
    why: 'half of the last digit',
  },
  {
    what: 'Its fall',
    kind: 'independent solver',
    source: MAURER,
    printed: 0.20094,
    unit: 'ft/cfs²',
    ours: () => maurer().shape,
    allowed: halfDigit(5),
    why: 'half of the last digit',
  },
  {
    what: 'Flow where this pump meets its pipe',
    kind: 'independent solver',
    source: MAURER,
    printed: 12.053,
    unit: 'cfs',
    ours: () => together(maurerStation()).flow / CFS,
    allowed: halfDigit(3),
    why: 'half of the last digit',
  },
  {
    what: 'Head where this pump meets its pipe',
    kind: 'independent solver',
    source: MAURER,
    printed: 53.28,
    unit: 'ft',
    ours: () => 30 + maurerStation().friction.at(together(maurerStation()).flow) / FOOT,
    allowed: halfDigit(2),
    why: 'half of the last digit',
  },
];

/** Texas Tech's canal pump: a table of eleven points on 1000 ft of 10 in, f 0.02, K 1.38, lift 10 ft, g 32.2. */
const texas = () => {
  const area = (Math.PI / 4) * (10 / 12) ** 2;
  const perCfs = ((0.02 * 1000) / (10 / 12) + 1.38) / (64.4 * area ** 2);
  const curve = headPoints([
    [0, 76],
    [500, 75],
    [1000, 74],
    [1500, 73],
    [2000, 72],
    [2500, 70],
    [3000, 67],
    [3500, 59],
    [4000, 50],
    [4500, 22],
    [4900, 0],
  ]);
  const system = { staticHead: 10, friction: { coefficient: perCfs * (FLOW_UNITS.gpm / CFS) ** 2 } };
  return stationOf(US, system, [{ name: 'P', curve, motor: LOSSLESS }]);
};
const TEXAS = 'Texas Tech University, CE 3305 notes, lesson 27, example 1';

const lecture: readonly OutsideCheck[] = [
  {
    what: 'Flow of a pump of eleven points on 1000 ft of 10 in pipe',
    kind: 'published',
    source: TEXAS,
    printed: 3000,
    unit: 'gpm',
    ours: () => together(texas()).flow / GPM,
    allowed: 60,
    why: '2 %: read off a graph, printed as about',
  },
  {
    what: 'Its head',
    kind: 'published',
    source: TEXAS,
    printed: 70,
    unit: 'ft',
    ours: () => 10 + texas().friction.at(together(texas()).flow) / FOOT,
    allowed: 2.8,
    why: '4 %: read off a graph, printed as about; head goes with the square of the flow',
  },
  {
    what: 'Its flow with straight lines between the points',
    kind: 'independent solver',
    source: `${TEXAS}, worked out`,
    printed: 2951.4,
    unit: 'gpm',
    ours: () => together(texas()).flow / GPM,
    allowed: 5.9,
    why: '0.2 %: between its points ours is a cubic',
  },
];

/** Power, energy and curves of single pumps. */
export const PUMPS: readonly OutsideCheck[] = [
  ...powers,
  ...divisors,
  ...craneChecks,
  ...quizChecks,
  ...constants,
  ...ranges,
  onePoint,
  ...fits,
  ...lecture,
];
