import { systemHead } from '../../server/hydraulics/systemCurve.ts';
import { FLOW_UNITS, FOOT } from '../../server/units.ts';
import { halfDigit, type OutsideCheck } from './check.ts';
import { CUBIC_METRES, GPM, headPoints, LOSSLESS, mainVelocity, stationOf, together, US } from './stations.ts';

const SOURCE_A = 'Hydraulic Institute, Engineering Data Library, I.A System Curves, worked example (US units)';
const SOURCE_C = 'Hydraulic Institute, Engineering Data Library, I.C Pump and System Curves, worked example';

/** The example's friction factor is fixed at 0.02, so that its pipe is a loss f·L/D of velocity heads like a fitting. */
const BORE_IN = 4.026;
const WALL = (0.02 * 1255) / (BORE_IN / 12);
const PIPE = {
  length: 0,
  diameter: BORE_IN,
  roughness: 0,
  minorLoss: WALL,
  fittings: [{ type: 'elbow-90', count: 2 }, { type: 'swing-check-valve' }, { type: 'gate-valve' }, { type: 'exit' }],
};

const pump = {
  name: 'P',
  curve: { shutoffHead: 380, shape: 0.0021, bestFlow: 200, bestEfficiency: 0.7 },
  motor: LOSSLESS,
};
const asPipes = stationOf(US, { staticHead: 289 - 24, friction: { pipes: [PIPE] } }, [pump]);
const asCoefficient = stationOf(US, { staticHead: 265, friction: { coefficient: 7.75e-4 } }, [pump]);

const head = (station: typeof asPipes, gpm: number) =>
  systemHead(station.friction, station.staticHead, gpm * GPM) / FOOT;
const velocity = (flow: number) => mainVelocity(asPipes, flow);
/** Friction per v² in m/(m/s)². */
const perVelocitySquared = asPipes.friction.at(GPM) / velocity(GPM) ** 2;

/** gpm, ft/s and ft as printed. */
const CURVE = [
  [0, 0, 265],
  [20, 0.504, 265],
  [40, 1.008, 266],
  [60, 1.512, 268],
  [80, 2.016, 270],
  [100, 2.52, 273],
  [120, 3.024, 276],
  [140, 3.528, 280],
  [160, 4.032, 285],
  [180, 4.536, 290],
  [200, 5.04, 296],
  [220, 5.545, 303],
  [240, 6.049, 310],
  [260, 6.553, 317],
  [280, 7.057, 326],
  [300, 7.561, 335],
] as const;

/** The example takes g = 32.2 ft/s² and the program 32.174, so its friction is 0.08 % lower. */
const G_ROUNDED = 32.2 / (9.80665 / FOOT) - 1;
const WHY_G = 'half of the last digit printed, and 0.08 % for its g of 32.2 ft/s²';
const published = { kind: 'published' } as const;

const friction: readonly OutsideCheck[] = [
  {
    ...published,
    what: 'Sum of K: two elbows, swing check valve, gate valve, exit',
    source: SOURCE_A,
    printed: 3.79,
    unit: '–',
    ours: () => perVelocitySquared * 2 * 9.80665 - WALL,
    allowed: 1e-9,
    why: 'a sum of printed figures, exact but for rounding',
  },
  {
    ...published,
    what: 'Friction of 1255 ft of 4 in pipe with its fittings, per v²',
    source: SOURCE_A,
    printed: 1.22,
    unit: 'ft/(ft/s)²',
    ours: () => perVelocitySquared * FOOT,
    allowed: halfDigit(2) + 1.22 * G_ROUNDED,
    why: WHY_G,
  },
  {
    ...published,
    what: 'The same per Q²',
    source: SOURCE_A,
    printed: 7.75e-4,
    unit: 'ft/gpm²',
    ours: () => asPipes.friction.at(GPM) / FOOT,
    allowed: halfDigit(6) + 7.75e-4 * G_ROUNDED,
    why: WHY_G,
  },
  {
    ...published,
    what: 'The same per v², metric',
    source: SOURCE_A,
    printed: 4.01,
    unit: 'm/(m/s)²',
    ours: () => perVelocitySquared,
    allowed: halfDigit(2) + 4.01 * G_ROUNDED,
    why: WHY_G,
  },
  {
    ...published,
    what: 'The same per Q², metric',
    source: SOURCE_A,
    printed: 4.59e-3,
    unit: 'm/(m³/h)²',
    ours: () => asPipes.friction.at(FLOW_UNITS['m3/h']),
    allowed: halfDigit(5) + 4.59e-3 * G_ROUNDED,
    why: WHY_G,
  },
  {
    ...published,
    what: 'Static head from its two elevations, metric',
    source: SOURCE_A,
    printed: 80.77,
    unit: 'm',
    ours: () => systemHead(asPipes.friction, asPipes.staticHead, 0),
    allowed: halfDigit(2),
    why: 'half of the last digit printed',
  },
];

const heads = CURVE.map(
  ([gpm, , feet]): OutsideCheck => ({
    ...published,
    what: `Head of the system at ${gpm} gpm`,
    source: SOURCE_A,
    printed: feet,
    unit: 'ft',
    ours: () => head(asPipes, gpm),
    allowed: halfDigit(0),
    why: 'half of the last digit printed',
  }),
);

const fromFormula = CURVE.map(
  ([gpm, , feet]): OutsideCheck => ({
    ...published,
    what: `The same from its formula 265 + 7.75e-4·Q², at ${gpm} gpm`,
    source: SOURCE_A,
    printed: feet,
    unit: 'ft',
    ours: () => head(asCoefficient, gpm),
    allowed: halfDigit(0),
    why: 'half of the last digit printed',
  }),
);

const velocities = CURVE.slice(1).map(
  ([gpm, feetPerSecond]): OutsideCheck => ({
    ...published,
    what: `Velocity in the pipe at ${gpm} gpm`,
    source: SOURCE_A,
    printed: feetPerSecond,
    unit: 'ft/s',
    ours: () => velocity(gpm * GPM) / FOOT,
    allowed: halfDigit(3),
    why: 'half of the last digit printed',
  }),
);

const FOUR_POINTS = [
  [0, 380],
  [150, 330.5],
  [200, 296],
  [300, 200],
] as const;

/** The parabola that the example lays through its four points. */
const fitted = (gpm: number) => 380 - 0.06 * gpm - 0.0018 * gpm ** 2;

/** A pump of the fitted curve, entered as 31 points, since a station file has no parabola with a linear term. */
export const HI_PUMP = headPoints(Array.from({ length: 31 }, (_, i) => [10 * i, fitted(10 * i)] as const));

/** The example's pumps on its system. */
export function hiStation(count: number, staticHead = 265, curve: object = HI_PUMP) {
  const system = { staticHead, friction: { coefficient: 7.75e-4 } };
  return stationOf(US, system, [{ name: 'P', count, curve, motor: LOSSLESS }]);
}

const point = (staticHead: number, curve: object) => together(hiStation(1, staticHead, curve), 1);
const headAt = (staticHead: number, curve: object) => {
  const { running, flow } = point(staticHead, curve);
  return running[0]!.pump.head(flow, 1) / FOOT;
};
const four = headPoints(FOUR_POINTS);

const operatingPoints: readonly OutsideCheck[] = [
  ...FOUR_POINTS.map(
    ([gpm, feet]): OutsideCheck => ({
      ...published,
      what: `Head of the pump at ${gpm} gpm`,
      source: SOURCE_C,
      printed: feet,
      unit: 'ft',
      ours: () => hiStation(1).duty[0]!.head(gpm * GPM, 1) / FOOT,
      allowed: 1e-9,
      why: 'a point of the curve, exact but for rounding',
    }),
  ),
  {
    ...published,
    what: 'Flow where pump and system meet, from its four points',
    source: SOURCE_C,
    printed: 200,
    unit: 'gpm',
    ours: () => point(265, four).flow / GPM,
    allowed: 1e-6,
    why: 'a point of both curves, exact but for rounding',
  },
  {
    ...published,
    what: 'Head where pump and system meet, from its four points',
    source: SOURCE_C,
    printed: 296,
    unit: 'ft',
    ours: () => headAt(265, four),
    allowed: 1e-6,
    why: 'a point of both curves, exact but for rounding',
  },
  {
    ...published,
    what: 'Flow with 10 ft more static head, from its fitted curve',
    source: SOURCE_C,
    printed: 190.6,
    unit: 'gpm',
    ours: () => point(275, HI_PUMP).flow / GPM,
    allowed: halfDigit(1),
    why: 'half of the last digit printed',
  },
  {
    ...published,
    what: 'Flow with 10 ft more static head, from its four points',
    source: SOURCE_C,
    printed: 190.6,
    unit: 'gpm',
    ours: () => point(275, four).flow / GPM,
    allowed: 190.6 * 0.002,
    why: '0.2 %: between four points a cubic runs, not its parabola',
  },
  {
    kind: 'closed form',
    what: 'Head with 10 ft more static head, from its fitted curve',
    source: 'the two parabolas of the example above set equal',
    printed: 303.16,
    unit: 'ft',
    ours: () => headAt(275, HI_PUMP),
    allowed: halfDigit(2),
    why: 'half of the last digit',
  },
];

const fromOnePoint = stationOf(
  CUBIC_METRES,
  { staticHead: 80.77, friction: { points: [{ flow: 45.425, head: 80.77 + 4.59e-3 * 45.425 ** 2 }] } },
  [{ name: 'P', curve: { shutoffHead: 120, shape: 0.005, bestFlow: 45, bestEfficiency: 0.7 }, motor: LOSSLESS }],
);

const knownPoint: OutsideCheck = {
  kind: 'closed form',
  what: 'Coefficient from one known point of the system, k = (H* − H_st)/Q*²',
  source: 'algebra, with the figures of the example above',
  printed: 4.59e-3,
  unit: 'm/(m³/h)²',
  ours: () => fromOnePoint.friction.at(FLOW_UNITS['m3/h']),
  allowed: 1e-12,
  why: 'exact but for rounding',
};

/** Systems and the points at which one pump meets them. */
export const SYSTEMS: readonly OutsideCheck[] = [
  ...friction,
  ...heads,
  ...fromFormula,
  ...velocities,
  ...operatingPoints,
  knownPoint,
];
