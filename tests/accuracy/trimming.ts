import type { State } from '../../server/staging/state.ts';
import { energyKwh, type FileUnits, HORSEPOWER, US_GALLON } from '../../server/units.ts';
import { flowLog, resultFor, ruleIn } from '../support/comparing.ts';
import { halfDigit, type OutsideCheck } from './check.ts';
import { PUMPWORLD } from './parallel.ts';
import { TABLE_CURVE } from './pumps.ts';
import { GPM, LOSSLESS, once, pumpsOf, stationOf, together, trimmed, US } from './stations.ts';

/**
 * Static head, speed and power together. No published example was found that has all three, so closed forms and a solver
 * that shares no code stand in.
 */

const LITRES: FileUnits = { flow: 'L/s', head: 'm', power: 'kW' };
const perVolume = ({ power, flow }: State): number => energyKwh(power, 1) / flow;

/**
 * h = 30 − 0.003·q², η = 0.78·(2x − x²) with x = q/50, branch loss 0.0002·q², friction 0.001·Q² (L/s, m), motor 0.92,
 * drive 0.97, 998.2 kg/m³.
 */
const parabolas = (staticHead: number, more: Readonly<Record<string, unknown>> = {}) =>
  stationOf(
    LITRES,
    { staticHead, friction: { coefficient: 0.001 } },
    [
      {
        name: 'P',
        count: 3,
        curve: { shutoffHead: 30, shape: 0.003, bestFlow: 50, bestEfficiency: 0.78 },
        branchLoss: 0.0002,
        motor: { efficiency: 0.92 },
        drive: { minSpeed: 0.3, efficiency: 0.97 },
      },
    ],
    { liquid: { density: 998.2 }, ...more },
  );

const FORMULA =
  's = √((H_st + k·Q² + (a + k_b)·q²)/H0), P = ρ·g·Q·(H_st + k·Q² + k_b·q²)/(η(q/s)·η_motor·η_drive) with H0 30, a 0.003, k 0.001, k_b 0.0002 (m, L/s), η = 0.78·(2x − x²), x = q/(50·s), 0.92, 0.97; worked outside this project';

const closedForms = (
  [
    [0, 1, 45, 0.53244718, 2.93770116, 0.01813396],
    [0, 2, 70, 0.54221767, 5.53341809, 0.02195801],
    [6, 1, 45, 0.69534164, 5.84086098, 0.0360547],
    [6, 2, 70, 0.70285134, 10.97158412, 0.04353803],
    [12, 1, 45, 0.82674059, 9.20421011, 0.05681611],
    [12, 2, 70, 0.83306662, 17.31984531, 0.06872954],
    [18, 1, 45, 0.93994681, 12.95239482, 0.07995305],
    [18, 2, 70, 0.94551573, 24.43180458, 0.09695161],
  ] as const
).flatMap(([staticHead, count, flow, speed, kw, kwh]): OutsideCheck[] => {
  const at = () => trimmed(parabolas(staticHead), count, flow * 1e-3);
  const where = `of ${count === 1 ? 'one pump' : `${count} pumps`} at ${flow} L/s against ${staticHead} m of static head`;
  const common = {
    kind: 'closed form',
    source: FORMULA,
    allowed: halfDigit(8),
    why: 'half of the last digit worked out',
  } as const;
  return [
    { ...common, what: `Speed ratio ${where}`, printed: speed, unit: '–', ours: () => at().speed },
    { ...common, what: `Electric power ${where}`, printed: kw, unit: 'kW', ours: () => at().power / 1000 },
    { ...common, what: `Energy per volume ${where}`, printed: kwh, unit: 'kWh/m³', ours: () => perVolume(at()) },
  ];
});

const oneSlowed = (
  [
    [6, 100, 0.80969087, 24.93814776],
    [12, 85, 0.84760555, 24.63446358],
    [18, 70, 0.90512583, 24.84978783],
  ] as const
).flatMap(([staticHead, flow, speed, kw]): OutsideCheck[] => {
  const one = () => pumpsOf(parabolas(staticHead)).oneTrimmed(2, flow * 1e-3)!;
  const where = `of two pumps at ${flow} L/s against ${staticHead} m of static head, one at full speed`;
  const common = {
    kind: 'closed form',
    source:
      'the same pumps: the one at full speed gives q1 = √((H0 − H)/(a + k_b)) into the header at H = H_st + k·Q², the other q2 = Q − q1 at s = √((H + (a + k_b)·q2²)/H0); worked outside this project',
    allowed: halfDigit(8),
    why: 'half of the last digit worked out',
  } as const;
  return [
    { ...common, what: `Speed ratio of the other ${where}`, printed: speed, unit: '–', ours: () => one().speed },
    { ...common, what: `Electric power ${where}`, printed: kw, unit: 'kW', ours: () => one().state().power / 1000 },
  ];
});

/** Two pumps at full speed that a valve holds to 80 L/s against 12 m for an hour. */
const throttled = once(() => {
  const station = parabolas(12, { surplus: 'throttle', storage: {} });
  return ruleIn(resultFor({ station, log: flowLog([0.08]), tariff: null, rules: ['fixed-speed'] }), 'fixed-speed');
});

const ledger = (
  [
    ['Electric power', 28.64673337, () => throttled().energyKwh],
    ['Power that lifts the water', 9.39743811, () => throttled().ledgerKwh.lift],
    ['Power lost in the common pipe', 5.01196699, () => throttled().ledgerKwh.pipeFriction],
    ['Power lost in the branches', 0.25059835, () => throttled().ledgerKwh.branch],
    ['Power burnt in the valve', 5.07461658, () => throttled().ledgerKwh.valve],
  ] as const
).map(
  ([what, printed, ours]): OutsideCheck => ({
    kind: 'closed form',
    source:
      'the same pumps throttled at full speed: P = ρ·g·Q·h(q)/(η(q)·η_motor), ρ·g·Q·H_st, ρ·g·k·Q³, 2·ρ·g·k_b·q³, ρ·g·Q·(h(q) − k_b·q² − H_st − k·Q²); worked outside this project',
    what: `${what} of two pumps throttled to 80 L/s against 12 m`,
    printed,
    unit: 'kW',
    ours,
    allowed: halfDigit(8),
    why: 'half of the last digit worked out',
  }),
);

const SOLVER =
  'twelve points of the Hydraulic Institute, I.B, on 100 ft + 12 ft·(Q/1000 gpm)^1.852, motor 0.94, drive 0.965, 998.2 kg/m³; scipy 1.17, PchipInterpolator and brentq';

const tables = stationOf(
  US,
  { staticHead: 100, friction: { coefficient: 12 / 1000 ** 1.852, exponent: 1.852 } },
  [
    {
      name: 'P',
      count: 3,
      curve: TABLE_CURVE,
      motor: { efficiency: 0.94 },
      drive: { minSpeed: 0.5, efficiency: 0.965 },
    },
  ],
  { liquid: { density: 998.2 } },
);

const solver = { kind: 'independent solver', source: SOLVER, why: 'half of the last digit worked out' } as const;

const fullSpeed = (
  [
    [1, 1144.0341, 115.39608, 51.126517],
    [2, 1971.551, 142.18574, 98.549985],
    [3, 2453.7303, 163.26165, 139.2708],
  ] as const
).flatMap(([count, gpm, feet, hp]): OutsideCheck[] => {
  const at = () => together(tables, count);
  const where = `of ${count === 1 ? 'one pump' : `${count} pumps`} at full speed`;
  return [
    { ...solver, what: `Flow ${where}`, printed: gpm, unit: 'gpm', ours: () => at().flow / GPM, allowed: halfDigit(4) },
    {
      ...solver,
      what: `Head ${where}`,
      printed: feet,
      unit: 'ft',
      ours: () => at().running[0]!.pump.head(at().running[0]!.flow, 1) / 0.3048,
      allowed: halfDigit(5),
    },
    {
      ...solver,
      what: `Electric power ${where}`,
      printed: hp,
      unit: 'hp',
      ours: () => at().power / HORSEPOWER,
      allowed: halfDigit(4),
    },
  ];
});

const trims = (
  [
    [1, 600, 0.78685464, 22.871403, 473.75561],
    [1, 900, 0.89074717, 36.349343, 501.95741],
    [2, 1200, 0.82277854, 51.519107, 533.58044],
    [2, 1800, 0.95427706, 87.685756, 605.43756],
    [3, 2400, 0.98946316, 139.19866, 720.83627],
  ] as const
).flatMap(([count, gpm, speed, hp, kwh]): OutsideCheck[] => {
  const at = () => trimmed(tables, count, gpm * GPM);
  const where = `of ${count === 1 ? 'one pump' : `${count} pumps`} trimmed to ${gpm} gpm`;
  return [
    {
      ...solver,
      what: `Speed ratio ${where}`,
      printed: speed,
      unit: '–',
      ours: () => at().speed,
      allowed: halfDigit(8),
    },
    {
      ...solver,
      what: `Electric power ${where}`,
      printed: hp,
      unit: 'hp',
      ours: () => at().power / HORSEPOWER,
      allowed: halfDigit(5),
    },
    {
      ...solver,
      what: `Energy per million US gallons ${where}`,
      printed: kwh,
      unit: 'kWh',
      ours: () => perVolume(at()) * 1e6 * US_GALLON,
      allowed: halfDigit(5),
    },
  ];
});

const twoMakes = stationOf(US, { staticHead: 95, friction: { coefficient: 1e-5 } }, [
  { name: 'A', curve: TABLE_CURVE, motor: LOSSLESS },
  { name: 'B', curve: PUMPWORLD, motor: LOSSLESS },
]);

const different = (
  [
    ['both', 1390.1665, () => together(twoMakes).flow],
    ['the first of them', 1148.337, () => together(twoMakes).running.find(({ pump }) => pump.name === 'A')!.flow],
    ['the second of them', 241.8295, () => together(twoMakes).running.find(({ pump }) => pump.name === 'B')!.flow],
  ] as const
).map(
  ([what, printed, ours]): OutsideCheck => ({
    kind: 'independent solver',
    source:
      'the same pump beside that of pumpworld.com (five points) on 95 ft + 10 ft·(Q/1000 gpm)²; scipy 1.17, PchipInterpolator and brentq',
    what: `Flow of ${what}, two makes together`,
    printed,
    unit: 'gpm',
    ours: () => ours() / GPM,
    allowed: halfDigit(4),
    why: 'half of the last digit worked out',
  }),
);

/** Speed and power where static head counts. */
export const TRIMMING: readonly OutsideCheck[] = [
  ...closedForms,
  ...oneSlowed,
  ...ledger,
  ...fullSpeed,
  ...trims,
  ...different,
];
