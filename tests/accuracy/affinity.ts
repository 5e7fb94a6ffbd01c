import type { Pump } from '../../server/hydraulics/pump.ts';
import { FOOT, GRAVITY, HORSEPOWER } from '../../server/units.ts';
import { halfDigit, type OutsideCheck } from './check.ts';
import {
  against,
  CUBIC_METRES,
  GPM,
  headPoints,
  LOSSLESS,
  LOSSLESS_DRIVE,
  pumpsOf,
  stationOf,
  US,
} from './stations.ts';
import { HI_PUMP } from './systems.ts';

const PRINTED = 'half of the last digit printed';
const NOTEBOOK = 'Crane TP-410, problem 7.33, as C. Bell, fluids, works it (notebook 7.33, commit 091070e)';
const AS_DOUBLE = 'exact but for rounding';

/** 400 gpm at 126 ft and 17.5 hp at 3500 rpm, by its power; the points beside it are made up. */
const crane = stationOf(US, against(20), [
  {
    name: 'P',
    ratedSpeed: 3500,
    curve: {
      points: [
        { flow: 0, head: 150, power: 11 },
        { flow: 200, head: 142, power: 14 },
        { flow: 400, head: 126, power: 17.5 },
        { flow: 600, head: 100, power: 20 },
      ],
    },
    motor: LOSSLESS,
    drive: LOSSLESS_DRIVE,
  },
]).duty[0]!;
const slowed = 1700 / crane.ratedSpeed!;

const scaled: readonly OutsideCheck[] = [
  {
    what: 'Flow of 400 gpm at 3500 rpm, at 1700 rpm',
    kind: 'published',
    source: NOTEBOOK,
    printed: 194.28571428571428,
    unit: 'gpm',
    ours: () => crane.flowInto(slowed ** 2 * 126 * FOOT, slowed) / GPM,
    allowed: 1e-9,
    why: AS_DOUBLE,
  },
  {
    what: 'Head of 126 ft at 3500 rpm, at 1700 rpm',
    kind: 'published',
    source: NOTEBOOK,
    printed: 29.725714285714286,
    unit: 'ft',
    ours: () => crane.head(194.28571428571428 * GPM, slowed) / FOOT,
    allowed: 1e-9,
    why: AS_DOUBLE,
  },
  {
    what: 'Power of 17.5 hp at 3500 rpm, at 1700 rpm',
    kind: 'published',
    source: NOTEBOOK,
    printed: 2.0053061224489794,
    unit: 'hp',
    ours: () => crane.electric(194.28571428571428 * GPM, slowed, true) / HORSEPOWER,
    allowed: 1e-9,
    why: AS_DOUBLE,
  },
];

/** gpm and ft at 1740 rpm, gpm and ft printed for 1566 rpm; the heads at 1620 and 1980 gpm are misprints. */
const HI_TABLE = [
  [0, 213, 0, 173],
  [200, 206, 180, 167],
  [400, 198, 360, 160],
  [600, 190, 540, 154],
  [800, 183, 720, 148],
  [1000, 176, 900, 143],
  [1200, 168, 1080, 136],
  [1400, 159, 1260, 129],
  [1600, 147, 1440, 119],
  [1800, 135, 1620, null],
  [2000, 117, 1800, 95],
  [2200, 98, 1980, null],
] as const;
const hiPump = stationOf(US, against(50), [
  {
    name: 'P',
    ratedSpeed: 1740,
    curve: headPoints(HI_TABLE.map(([flow, head]) => [flow, head] as const)),
    motor: LOSSLESS,
    drive: LOSSLESS_DRIVE,
  },
]).duty[0]!;

const wholeCurve = HI_TABLE.flatMap(([full, head, gpm, feet]): OutsideCheck[] =>
  feet === null
    ? []
    : [
        {
          what: `Head at ${gpm} gpm and 1566 rpm of a pump that gives ${full} gpm at ${head} ft and 1740 rpm`,
          kind: 'published',
          source:
            'Hydraulic Institute, Engineering Data Library, I.B Pump Curves, worked example 1 (two misprints left out)',
          printed: feet,
          unit: 'ft',
          ours: () => hiPump.head(gpm * GPM, 1566 / 1740) / FOOT,
          allowed: halfDigit(0),
          why: PRINTED,
        },
      ],
);

/** 6 m³/h (100 L/min) at 10 bar, a bar being 10 m here; shut-off at 12 bar (any below 12.2 gives the same). */
const spitzer = (staticHead: number) =>
  stationOf(CUBIC_METRES, against(staticHead), [
    {
      name: 'P',
      curve: { shutoffHead: 120, operatingPoint: { flow: 6, head: 100 }, bestFlow: 6, bestEfficiency: 0.6 },
      motor: LOSSLESS,
      drive: { minSpeed: 0.7, efficiency: 1 },
    },
  ]);
const quizPump = spitzer(0).duty[0]!;
const FULL = 6 / 3600;
const SPITZER = 'D. W. Spitzer, Flow Control, Quiz Corner: affinity laws for centrifugal pump loads';

const quiz: readonly OutsideCheck[] = [
  {
    what: 'Flow of 100 L/min at 10 bar, slowed to 70 %',
    kind: 'published',
    source: SPITZER,
    printed: 70,
    unit: 'L/min',
    ours: () => quizPump.flowInto(49, 0.7) * 60_000,
    allowed: 1e-9,
    why: AS_DOUBLE,
  },
  {
    what: 'Its head',
    kind: 'published',
    source: SPITZER,
    printed: 5,
    unit: 'bar',
    ours: () => quizPump.head(0.7 * FULL, 0.7) / 10,
    allowed: halfDigit(0),
    why: PRINTED,
  },
  {
    what: 'Its power, as a share of that at full speed',
    kind: 'published',
    source: SPITZER,
    printed: 34,
    unit: '%',
    ours: () => (100 * quizPump.electric(0.7 * FULL, 0.7, true)) / quizPump.electric(FULL, 1, true),
    allowed: halfDigit(0),
    why: PRINTED,
  },
  {
    what: 'Its flow where the system asks for 6 bar of static pressure',
    kind: 'published',
    source: SPITZER,
    printed: 0,
    unit: 'L/min',
    ours: () => pumpsOf(spitzer(60)).lowest(1).flow * 60_000,
    allowed: 1e-12,
    why: 'no flow is exactly that',
  },
  {
    what: 'Power of a pump of 15 kW at 67 % speed without static head',
    kind: 'published',
    source: 'University of Connecticut, energy assessment training, Pump.md (commit bcb7eef)',
    printed: 4.5,
    unit: 'kW',
    ours: () => (15 * quizPump.electric(0.67 * FULL, 0.67, true)) / quizPump.electric(FULL, 1, true),
    allowed: halfDigit(1),
    why: PRINTED,
  },
  {
    what: 'Cut in power from a speed cut of 20 % without static head',
    kind: 'published',
    source: 'US Department of Energy, Motor Systems Tip Sheet #11, DOE/GO-102012-3730, November 2012',
    printed: 50,
    unit: '%',
    ours: () => 100 * (1 - quizPump.electric(0.8 * FULL, 0.8, true) / quizPump.electric(FULL, 1, true)),
    allowed: 2,
    why: 'printed as about',
  },
];

/** The pump and system of the Hydraulic Institute's section I.C at a least speed, where it then runs. */
const atSpeed = (speed: number) => {
  const station = stationOf(US, { staticHead: 265, friction: { coefficient: 7.75e-4 } }, [
    { name: 'P', curve: HI_PUMP, motor: LOSSLESS, drive: { minSpeed: speed, efficiency: 1 } },
  ]);
  return { flow: pumpsOf(station).lowest(1).flow, pump: station.duty[0]! as Pump };
};
const headOf = ({ flow, pump }: ReturnType<typeof atSpeed>, speed: number) => pump.head(flow, speed);
const AGAINST_STATIC =
  'pump H = 380·r² − 0.06·r·Q − 0.0018·Q² on system 265 + 7.75e-4·Q² (Hydraulic Institute, I.C), solved by hand at speed r';
const BY_HAND = 'half of the last digit worked out';

const staticHead = (
  [
    [1, 200, 296, 1],
    [0.95, 163.27, 285.66, 0.7878],
    [0.9, 118.86, 275.95, 0.5541],
    [0.87, 84.14, 270.49, 0.3844],
    [0.85, 51.8, 267.08, 0.2337],
  ] as const
).flatMap(([speed, gpm, feet, water]): OutsideCheck[] => [
  {
    what: `Flow against static head at ${100 * speed} % speed`,
    kind: 'closed form',
    source: AGAINST_STATIC,
    printed: gpm,
    unit: 'gpm',
    ours: () => atSpeed(speed).flow / GPM,
    allowed: 0.011,
    why: 'half of the last digit worked out, and as much for the cubics between its 31 points',
  },
  {
    what: `Head against static head at ${100 * speed} % speed`,
    kind: 'closed form',
    source: AGAINST_STATIC,
    printed: feet,
    unit: 'ft',
    ours: () => headOf(atSpeed(speed), speed) / FOOT,
    allowed: halfDigit(2),
    why: BY_HAND,
  },
  {
    what: `Power of the water against static head at ${100 * speed} % speed, over that at full speed`,
    kind: 'closed form',
    source: AGAINST_STATIC,
    printed: water,
    unit: '–',
    ours: () => {
      const slow = atSpeed(speed);
      const full = atSpeed(1);
      return (slow.flow * headOf(slow, speed)) / (full.flow * headOf(full, 1));
    },
    allowed: 1e-4,
    why: 'half of the last digit worked out, and as much for the cubics between its 31 points',
  },
]);

const standstill: readonly OutsideCheck[] = [
  {
    what: 'Least speed that lifts the static head at all, √(265/380)',
    kind: 'closed form',
    source: AGAINST_STATIC,
    printed: 0.835086,
    unit: '–',
    ours: () => atSpeed(0.8).pump.speedFor(0, 265 * FOOT),
    allowed: halfDigit(6),
    why: BY_HAND,
  },
  {
    what: 'Flow just below that speed, at 83.5 %',
    kind: 'closed form',
    source: AGAINST_STATIC,
    printed: 0,
    unit: 'gpm',
    ours: () => atSpeed(0.835).flow / GPM,
    allowed: 1e-12,
    why: 'no flow is exactly that',
  },
];

/** Efficiency of water over shaft power at speed ratio s, where the pump of best efficiency η1 runs at s·q_b. */
const corrected = (best: number, speed: number) => {
  const station = stationOf(CUBIC_METRES, against(0), [
    {
      name: 'P',
      curve: { shutoffHead: 30, shape: 0.001, bestFlow: 100, bestEfficiency: best, speedCorrection: true },
      motor: LOSSLESS,
      drive: LOSSLESS_DRIVE,
    },
  ]);
  const pump = station.duty[0]!;
  const flow = (speed * 100) / 3600;
  return (station.density * GRAVITY * flow * pump.head(flow, speed)) / pump.electric(flow, speed, true);
};

const slowEfficiency = (
  [
    [0.6, [0.59576, 0.59097, 0.58548, 0.57904, 0.57129]],
    [0.7, [0.69682, 0.69323, 0.68911, 0.68428, 0.67847]],
    [0.8, [0.79788, 0.79549, 0.79274, 0.78952, 0.78565]],
    [0.85, [0.84841, 0.84662, 0.84455, 0.84214, 0.83923]],
  ] as const
).flatMap(([best, row]) =>
  [0.9, 0.8, 0.7, 0.6, 0.5].map(
    (speed, i): OutsideCheck => ({
      what: `Best efficiency of a pump of ${100 * best} %, at ${100 * speed} % speed, with the speed correction`,
      kind: 'closed form',
      source:
        'I. Sârbu and I. Borza, Periodica Polytechnica Mech. Eng. 42(2) (1998), 141–152: η2 = 1 − (1 − η1)·(n1/n2)^0.1, formula from memory',
      printed: row[i]!,
      unit: '–',
      ours: () => corrected(best, speed),
      allowed: halfDigit(5),
      why: BY_HAND,
    }),
  ),
);

/** One pump at other speeds: the affinity laws, and what static head makes of them. */
export const AFFINITY: readonly OutsideCheck[] = [
  ...scaled,
  ...wholeCurve,
  ...quiz,
  ...staticHead,
  ...standstill,
  ...slowEfficiency,
];
