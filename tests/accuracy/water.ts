import { airPressure, vapourPressure, waterDensity, waterViscosity } from '../../server/hydraulics/water.ts';
import { npshRatio } from '../../server/staging/watch.ts';
import { FOOT } from '../../server/units.ts';
import { halfDigit, type OutsideCheck } from './check.ts';
import { against, LOSSLESS, POUND, PSI, stationOf, together, US } from './stations.ts';

const IAPWS = 'IAPWS-95 at 101.325 kPa, IF97 saturation pressure, R12-08 viscosity, worked out by a general library';

/** °C, kg/m³, Pa, µPa·s, mm²/s. */
const iapws = (
  [
    [0.01, 999.8438, 611.66, 1791.13, 1.79141],
    [5, 999.9666, 872.57, 1518.17, 1.51822],
    [10, 999.7025, 1228.18, 1305.9, 1.30629],
    [15, 999.1026, 1705.74, 1137.57, 1.13859],
    [20, 998.2072, 2339.21, 1001.6, 1.0034],
    [25, 997.0476, 3169.75, 890.02, 0.89266],
    [30, 995.6495, 4246.69, 797.22, 0.80071],
    [35, 994.0333, 5628.62, 719.13, 0.72344],
    [40, 992.2164, 7384.43, 652.73, 0.65785],
  ] as const
).flatMap(([celsius, density, vapour, viscosity, kinematic]): OutsideCheck[] => {
  const common = { kind: 'independent solver', source: IAPWS } as const;
  return [
    {
      ...common,
      what: `Density of water at ${celsius} °C`,
      printed: density,
      unit: 'kg/m³',
      ours: () => waterDensity(celsius),
      allowed: 0.0014,
      why: 'a shorter formula, within 0.0013 kg/m³ of it',
    },
    {
      ...common,
      what: `Vapour pressure of water at ${celsius} °C`,
      printed: vapour,
      unit: 'Pa',
      ours: () => vapourPressure(celsius),
      allowed: halfDigit(2),
      why: 'half of the last digit',
    },
    {
      ...common,
      what: `Viscosity of water at ${celsius} °C`,
      printed: viscosity,
      unit: 'µPa·s',
      ours: () => 1e6 * waterViscosity(celsius),
      allowed: 0.001 * viscosity,
      why: '0.1 %: a shorter formula',
    },
    {
      ...common,
      what: `Kinematic viscosity of water at ${celsius} °C`,
      printed: kinematic,
      unit: 'mm²/s',
      ours: () => (1e6 * waterViscosity(celsius)) / waterDensity(celsius),
      allowed: 0.001 * kinematic,
      why: '0.1 %: a shorter formula',
    },
  ];
});

const HANDBOOK = 'Hydraulic Institute, Engineering Data Library, II.A, table 2.A.2 (saturated liquid, from NIST)';

/** °C, bar, kg/m³, cP. */
const handbook = (
  [
    [0, 0.0061165, 999.79, 1.7912],
    [10, 0.01229, 999.65, 1.3056],
    [20, 0.023408, 998.16, 1.0014],
    [30, 0.042494, 995.6, 0.79719],
    [40, 0.073889, 992.17, 0.65285],
  ] as const
).flatMap(([celsius, bar, density, viscosity]): OutsideCheck[] => {
  const common = { kind: 'published', source: HANDBOOK } as const;
  return [
    {
      ...common,
      what: `Density at ${celsius} °C`,
      printed: density,
      unit: 'kg/m³',
      ours: () => waterDensity(celsius),
      allowed: 0.06,
      why: 'it is at its vapour pressure and ours at 1 atm, 0.05 kg/m³ denser',
    },
    {
      ...common,
      what: `Vapour pressure at ${celsius} °C`,
      printed: bar,
      unit: 'bar',
      ours: () => vapourPressure(celsius) / 1e5,
      allowed: 0.001 * bar,
      why: '0.1 %: it fits 0.01 °C more, as of a table that starts at 273.16 K',
    },
    {
      ...common,
      what: `Viscosity at ${celsius} °C`,
      printed: viscosity,
      unit: 'mPa·s',
      ours: () => 1e3 * waterViscosity(celsius),
      allowed: 0.001 * viscosity,
      why: '0.1 %: a shorter formula',
    },
  ];
});

const IF97 = 'IAPWS R7-97 (IF97), region 4, verification values, as public test suites quote them';

const saturation: readonly OutsideCheck[] = [
  ...(
    [
      [300, 0.353658941e-2, 11],
      [500, 2.63889776, 8],
      [600, 12.3443146, 7],
    ] as const
  ).map(
    ([kelvin, printed, decimals]): OutsideCheck => ({
      what: `Vapour pressure at ${kelvin} K`,
      kind: 'published',
      source: IF97,
      printed,
      unit: 'MPa',
      ours: () => vapourPressure(kelvin - 273.15) / 1e6,
      allowed: halfDigit(decimals),
      why: 'half of the last digit printed',
    }),
  ),
  ...(
    [
      [372.755919, 0.1],
      [453.035632, 1],
      [584.149488, 10],
    ] as const
  ).map(
    ([kelvin, printed]): OutsideCheck => ({
      what: `Vapour pressure at ${kelvin} K, where water boils at ${printed} MPa`,
      kind: 'published',
      source: IF97,
      printed,
      unit: 'MPa',
      ours: () => vapourPressure(kelvin - 273.15) / 1e6,
      allowed: 2e-8 * printed,
      why: 'half of the last digit of its temperature: 2e-8 of the pressure',
    }),
  ),
];

const viscosity: OutsideCheck = {
  what: 'Viscosity at 298.15 K',
  kind: 'published',
  source: 'IAPWS R12-08, verification value at 998 kg/m³, as a public test suite quotes it',
  printed: 889.7351,
  unit: 'µPa·s',
  ours: () => 1e6 * waterViscosity(25),
  allowed: 0.89,
  why: '0.1 %: a shorter formula, and water at 1 atm is 0.1 % lighter',
};

const air = (
  [
    [0, 101_325],
    [1000, 89_874.6],
    [2000, 79_495.2],
  ] as const
).map(
  ([altitude, printed]): OutsideCheck => ({
    what: `Pressure of the air at ${altitude} m`,
    kind: 'from memory',
    source: 'ISO 2533:1975, standard atmosphere',
    printed,
    unit: 'Pa',
    ours: () => airPressure(altitude),
    allowed: 0.051,
    why: 'half of the last digit, and an exponent of six figures',
  }),
);

/** Crane 7.32: a tank at 5 psig, which is a level so much higher, lift 25 ft, loss 6 ft, 60 °F, 62.364 lb/ft³. */
const CRANE = 'Crane TP-410, problem 7.32, as C. Bell, fluids, works it (notebook 7.32, commit 091070e)';
const craneDensity = (62.364 * POUND) / FOOT ** 3;
const crane = () =>
  stationOf(
    US,
    { ...against(100), pumpLevel: 25, suctionLoss: { flow: 500, head: 6 } },
    [
      {
        name: 'P',
        curve: {
          shutoffHead: 120,
          operatingPoint: { flow: 500, head: 100 },
          bestFlow: 500,
          bestEfficiency: 0.8,
          npshr: [
            { flow: 0, npshr: 20 },
            { flow: 600, npshr: 20 },
          ],
        },
        motor: LOSSLESS,
      },
    ],
    { liquid: { density: craneDensity, temperature: (60 - 32) / 1.8 } },
  );
const craneLevel = (5 * PSI) / (craneDensity * 9.80665);
const craneRatio = () => npshRatio(crane(), together(crane()), craneLevel)!;

const suction: readonly OutsideCheck[] = [
  {
    what: 'NPSH available',
    kind: 'published',
    source: CRANE,
    printed: 13.887316780096477,
    unit: 'ft',
    ours: () => 20 * craneRatio(),
    allowed: halfDigit(3) * 2.31,
    why: 'its vapour pressure of 0.256 psi is rounded to 0.0005 psi, 0.0012 ft',
  },
  {
    what: 'Least NPSH available for 20 ft required, with the margin of a file that sets none',
    kind: 'published',
    source: CRANE,
    printed: 26,
    unit: 'ft',
    ours: () => 20 * crane().suction!.margin,
    allowed: 1e-9,
    why: 'taken as printed; only rounding is allowed',
  },
];

/** What the station's liquid and air are taken to be, and what is left at a pump's inlet. */
export const WATER: readonly OutsideCheck[] = [...iapws, ...handbook, ...saturation, viscosity, ...air, ...suction];
