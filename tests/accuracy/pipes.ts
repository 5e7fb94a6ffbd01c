import { colebrookWhite, frictionFactor, PipeFriction } from '../../server/hydraulics/pipe.ts';
import { waterDensity, waterViscosity } from '../../server/hydraulics/water.ts';
import { type FileUnits, FOOT, GRAVITY, INCH } from '../../server/units.ts';
import { halfDigit, type OutsideCheck } from './check.ts';
import { CFS, GPM, LOSSLESS, mainVelocity, stationOf, together, US } from './stations.ts';

const PRINTED = 'half of the last digit printed';
const SI: FileUnits = { flow: 'm3/s', head: 'm', power: 'kW' };
const anyPump = (units: FileUnits) => ({
  name: 'P',
  curve: { shutoffHead: 100, shape: 0, bestFlow: units.flow === 'gpm' ? 500 : 0.1, bestEfficiency: 0.8 },
  motor: LOSSLESS,
});
/** A station on a pipe as a file has it, and the friction of that. */
const onPipe = (units: FileUnits, pipe: object) =>
  stationOf(units, { staticHead: 10, friction: { pipes: [pipe] } }, [anyPump(units)]);
const frictionOf = (units: FileUnits, pipe: object) => onPipe(units, pipe).friction;

const FLUIDS = 'C. Bell, fluids, friction.py, docstrings (Reynolds number 1e5, relative roughness 1e-4)';

const factors: readonly OutsideCheck[] = [
  {
    what: 'Friction factor by Colebrook and White',
    kind: 'published',
    source: FLUIDS,
    printed: 0.018513866077471,
    unit: '–',
    ours: () => colebrookWhite(1e5, 1e-4),
    allowed: 2 * halfDigit(15),
    why: 'cut off after its last digit, not rounded',
  },
  ...(
    [
      ['Swamee and Jain', 0.018452424431901808, 0.01],
      ['Haaland', 0.018265053014793857, 0.02],
      ['Churchill', 0.018462624566280075, 0.01],
    ] as const
  ).map(
    ([name, printed, share]): OutsideCheck => ({
      what: `Friction factor, against the explicit formula of ${name}`,
      kind: 'published',
      source: FLUIDS,
      printed,
      unit: '–',
      ours: () => colebrookWhite(1e5, 1e-4),
      allowed: share * printed,
      why: `${100 * share} %: what that formula is off from the equation it stands for`,
    }),
  ),
  {
    what: 'Friction factor of laminar flow at a Reynolds number of 128',
    kind: 'published',
    source: 'C. Bell, fluids, friction.py, docstring of friction_laminar',
    printed: 0.5,
    unit: '–',
    ours: () => frictionFactor(128, 1e-4),
    allowed: 1e-12,
    why: 'exact but for rounding',
  },
];

/** Crane 7.1: 200 L/min of water at 30 °C in smooth pipe of 50 mm nominal size, taken as 2 in schedule 40, 52.5 mm. */
const craneViscosity = () => waterViscosity(30) / waterDensity(30);
const craneReynolds = () => (4 * 0.2) / 60 / (Math.PI * 0.0525 * craneViscosity());
const CRANE = 'Crane TP-410, problem 7.1, as C. Bell, fluids, quotes it: 200 L/min at 30 °C in smooth 50 mm pipe';

const smooth: readonly OutsideCheck[] = [
  {
    what: 'Reynolds number',
    kind: 'published',
    source: CRANE,
    printed: 100_600,
    unit: '–',
    ours: craneReynolds,
    allowed: 503,
    why: '0.5 %: its bore is not quoted, 52.5 mm is taken, and its viscosity is read off a chart',
  },
  {
    what: 'Friction factor',
    kind: 'published',
    source: CRANE,
    printed: 0.0179,
    unit: '–',
    ours: () => colebrookWhite(craneReynolds(), 0),
    allowed: 0.01 * 0.0179,
    why: '1 %: read off a chart',
  },
];

const MAURER =
  'E. Maurer, Hydraulics and Water Resources: Examples Using R, ch. 4: 0.416 m³/s in 100 m of 0.5 m, 0.046 mm';
/** That book's viscosity is 2 % above that of water at 20 °C, so it is given as it is. */
const maurer = () =>
  new PipeFriction([{ length: 100, diameter: 0.5, wall: { roughness: 0.046e-3 }, minorLoss: 0 }], 1.023053e-6);
const maurerVelocity = 0.416 / ((Math.PI / 4) * 0.5 ** 2);
/** f from the loss, h = f·L/D·v²/2g. */
const maurerFactor = () => (maurer().at(0.416) * 2 * GRAVITY) / (200 * maurerVelocity ** 2);
/** Where a pump that lifts 0.6 m at every flow meets that pipe: the flow of that loss. */
const flowOfLoss = () =>
  together(
    {
      ...stationOf(SI, { staticHead: 0, friction: { coefficient: 1 } }, [
        { name: 'P', curve: { shutoffHead: 0.6, shape: 0, bestFlow: 0.4, bestEfficiency: 0.8 }, motor: LOSSLESS },
      ]),
      friction: maurer(),
    },
    1,
  ).flow;

const darcy: readonly OutsideCheck[] = [
  {
    what: 'Velocity',
    kind: 'published',
    source: MAURER,
    printed: 2.12,
    unit: 'm/s',
    ours: () => mainVelocity(onPipe(SI, { length: 100, diameter: 500, roughness: 0.046 }), 0.416),
    allowed: halfDigit(2),
    why: PRINTED,
  },
  {
    what: 'Friction factor, from the loss',
    kind: 'published',
    source: MAURER,
    printed: 0.0133,
    unit: '–',
    ours: maurerFactor,
    allowed: halfDigit(4),
    why: PRINTED,
  },
  {
    what: 'Flow that loses 0.6 m',
    kind: 'published',
    source: MAURER,
    printed: 0.413,
    unit: 'm³/s',
    ours: flowOfLoss,
    allowed: halfDigit(3),
    why: PRINTED,
  },
  {
    what: 'Loss (its printed 0.061 m is a slip of the decimal point and left out)',
    kind: 'independent solver',
    source: `${MAURER}; Colebrook's equation solved by scipy 1.17`,
    printed: 0.608028,
    unit: 'm',
    ours: () => maurer().at(0.416),
    allowed: halfDigit(6),
    why: 'half of the last digit worked out',
  },
  {
    what: 'Flow that loses 0.6 m, worked out',
    kind: 'independent solver',
    source: `${MAURER}; Colebrook's equation solved by scipy 1.17`,
    printed: 0.413118,
    unit: 'm³/s',
    ours: flowOfLoss,
    allowed: halfDigit(6),
    why: 'half of the last digit worked out',
  },
  {
    what: 'Loss of 3884 ft of 20 in, 0.0005 ft rough, at 1 cfs, viscosity 1.23e-5 ft²/s',
    kind: 'independent solver',
    source: 'E. Maurer, Hydraulics and Water Resources: Examples Using R, ch. 7: code printed, its result worked out',
    printed: 0.16021,
    unit: 'ft',
    ours: () =>
      new PipeFriction(
        [{ length: 3884 * FOOT, diameter: 20 * INCH, wall: { roughness: 0.0005 * FOOT }, minorLoss: 0 }],
        1.23e-5 * FOOT ** 2,
      ).at(CFS) / FOOT,
    allowed: 0.001 * 0.16021,
    why: '0.1 %: g of 32.2 ft/s²',
  },
];

const TOOLBOX = 'engineeringtoolbox.com, Hazen–Williams (d_797): 200 gpm in 30 ft of 3.048 in, C 140';
const hazen = (length: number, inches: number, c: number, gpm: number) =>
  frictionOf(US, { length, diameter: inches, hazenWilliamsC: c }).at(gpm * GPM) / FOOT;

/** Where a pump of 10 m at every flow meets 1000 m of 0.3 m, C 130. */
const hazenFlow = () =>
  together(
    stationOf(SI, { staticHead: 0, friction: { pipes: [{ length: 1000, diameter: 300, hazenWilliamsC: 130 }] } }, [
      { name: 'P', curve: { shutoffHead: 10, shape: 0, bestFlow: 0.12, bestEfficiency: 0.8 }, motor: LOSSLESS },
    ]),
    1,
  ).flow;

const hazenWilliams: readonly OutsideCheck[] = [
  {
    what: 'Loss',
    kind: 'published',
    source: TOOLBOX,
    printed: 2.7,
    unit: 'ft',
    ours: () => hazen(30, 3.048, 140, 200),
    allowed: halfDigit(1),
    why: PRINTED,
  },
  {
    what: 'Loss of 100 ft of it',
    kind: 'published',
    source: TOOLBOX,
    printed: 9,
    unit: 'ft',
    ours: () => hazen(100, 3.048, 140, 200),
    allowed: halfDigit(0),
    why: PRINTED,
  },
  ...(
    [
      ['0.2083·(100/C)^1.852·q^1.852/d^4.8655 (gpm, in, ft per 100 ft)', 2.7022, 0.016],
      ['10.67·L·Q^1.852/(C^1.852·D^4.8704) (SI)', 2.6635, 0.002],
      ['4.727·L·Q^1.852/(C^1.852·D^4.871) (cfs, ft)', 2.6668, 0.0005],
    ] as const
  ).map(
    ([form, printed, share]): OutsideCheck => ({
      what: `Loss by the form ${form}`,
      kind: 'closed form',
      source: `${TOOLBOX}; worked by hand`,
      printed,
      unit: 'ft',
      ours: () => hazen(30, 3.048, 140, 200),
      allowed: share * printed,
      why: `${100 * share} %: the published forms differ by up to 1.5 %; ours is 10.667·L·Q^1.852/(C^1.852·D^4.871)`,
    }),
  ),
  {
    what: 'Loss of 700 gpm in 8500 ft of 8 in, C 150',
    kind: 'closed form',
    source: 'hydrauliclearning.com, p. 24376 (its answer was not seen; worked by hand)',
    printed: 61.53,
    unit: 'ft',
    ours: () => hazen(8500, 8, 150, 700),
    allowed: 0.002 * 61.53,
    why: '0.2 %: another of the published forms',
  },
  {
    what: 'Velocity of 700 gpm in 8 in',
    kind: 'closed form',
    source: 'hydrauliclearning.com, p. 24376 (its answer was not seen; worked by hand)',
    printed: 4.468,
    unit: 'ft/s',
    ours: () => mainVelocity(onPipe(US, { length: 8500, diameter: 8, hazenWilliamsC: 150 }), 700 * GPM) / FOOT,
    allowed: halfDigit(3),
    why: 'half of the last digit worked out',
  },
  {
    what: 'Flow that loses 10 m in 1000 m of 0.3 m, C 130',
    kind: 'closed form',
    source: 'exercise of mathix.co, worked by hand with D^4.87',
    printed: 0.12703,
    unit: 'm³/s',
    ours: hazenFlow,
    allowed: 0.001 * 0.12703,
    why: '0.1 %: another of the published forms',
  },
];

const HI_III =
  'Hydraulic Institute, Engineering Data Library, III.B (Engineering Data Book, 2nd ed. 1990, tables 32a to 32c)';
const HI_I = 'Hydraulic Institute, Engineering Data Library, I.A System Curves, worked example';
/** K of one fitting in a pipe without length, from the loss, K·v²/2g. */
const lossOf = (type: string) => {
  const friction = frictionOf(SI, { length: 0, diameter: 100, roughness: 0, fittings: [{ type }] });
  const area = (Math.PI / 4) * 0.1 ** 2;
  return friction.at(0.01) * 2 * GRAVITY * (area / 0.01) ** 2;
};

const fittings = (
  [
    ['bell-mouth-inlet', 'a bell-mouth inlet', 0.05, HI_III],
    ['square-inlet', 'a square-edged inlet', 0.5, HI_III],
    ['inward-inlet', 'an inward-projecting inlet', 1, HI_III],
    ['exit', 'an exit into a tank', 1, HI_III],
    ['swing-check-valve', 'a flanged swing check valve', 2, HI_III],
    ['foot-valve', 'a foot valve', 0.8, HI_III],
    ['elbow-90', 'a regular flanged elbow of 4 in', 0.31, HI_I],
    ['gate-valve', 'a wedge gate valve of 4 in', 0.17, HI_I],
    ['exit', 'an exit normal to the wall', 1, 'C. Bell, fluids, fittings.py, exit_normal'],
  ] as const
).map(
  ([type, what, printed, source]): OutsideCheck => ({
    what: `K of ${what}`,
    kind: 'published',
    source,
    printed,
    unit: '–',
    ours: () => lossOf(type),
    allowed: 1e-9,
    why: 'taken as printed; only rounding is allowed',
  }),
);

const ARMY = 'US Army, EI 11C201, 1 March 1997, section 7-1';
const main = () => onPipe(SI, { length: 100, diameter: 100, roughness: 0.05 }).main!;

const velocities: readonly OutsideCheck[] = [
  {
    what: 'Least velocity in a main where a file sets none',
    kind: 'published',
    source: ARMY,
    printed: 0.6,
    unit: 'm/s',
    ours: () => main().leastVelocity,
    allowed: 1e-12,
    why: 'taken as printed',
  },
  {
    what: 'Greatest velocity in a main where a file sets none',
    kind: 'published',
    source: ARMY,
    printed: 3,
    unit: 'm/s',
    ours: () => main().mostVelocity,
    allowed: 1e-12,
    why: 'taken as printed',
  },
];

/** Losses along pipes and in fittings. */
export const PIPES: readonly OutsideCheck[] = [
  ...factors,
  ...smooth,
  ...darcy,
  ...hazenWilliams,
  ...fittings,
  ...velocities,
];
