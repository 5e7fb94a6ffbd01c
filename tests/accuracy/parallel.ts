import { linearRegression } from 'simple-statistics';
import type { Station } from '../../server/station/station.ts';
import { energyKwh, type FileUnits, FLOW_UNITS, FOOT, US_GALLON } from '../../server/units.ts';
import { halfDigit, type OutsideCheck } from './check.ts';
import { against, CFS, firm, GPM, headPoints, LOSSLESS, stationOf, together, US } from './stations.ts';
import { hiStation } from './systems.ts';

const WORKED = 'half of the last digit worked out';
const SI: FileUnits = { flow: 'L/s', head: 'm', power: 'kW' };
const LITRE = 1e-3;

/** Head [m] of the first pump of a state. */
const headOf = (station: Station, count?: number) => {
  const { pump, flow } = together(station, count).running[0]!;
  return pump.head(flow, 1);
};

const TABLE_8_1 =
  'G. M. Fair, J. C. Geyer and D. A. Okun, Water and Wastewater Engineering, 3rd ed., Wiley, table 8.1, p. 275';

/** mgd and ft of three pumps alone; a parabola is laid through the three points of each. */
const ALONE: readonly (readonly (readonly [number, number])[])[] = [
  [
    [10, 81],
    [15, 66],
    [16.5, 62],
  ],
  [
    [21, 83],
    [25, 78],
    [28.5, 66],
  ],
  [
    [33.5, 88],
    [37, 84],
    [40.5, 73],
  ],
];
const fairPumps = ALONE.map((points, i) => {
  const { m, b } = linearRegression(points.map(([flow, head]) => [flow * flow, head]));
  const curve = { shutoffHead: b, shape: -m, bestFlow: points[1]![0], bestEfficiency: 0.89 };
  return { name: `No.${i + 1}`, curve, motor: LOSSLESS };
});

/** Pairs, head, the flow printed, and that of the parabolas; the four rows above the points of one pump are left out. */
const PAIRS = [
  ['1 and 2', [0, 1], 80, 34, 33.4],
  ['1 and 2', [0, 1], 73, 40, 39.17],
  ['1 and 3', [0, 2], 85, 43.5, 43.44],
  ['1 and 3', [0, 2], 79, 49.5, 49.09],
  ['2 and 3', [1, 2], 84, 56.5, 57.09],
] as const;

const pairFlow = (pair: readonly number[], head: number) => {
  const units: FileUnits = { flow: 'MGD', head: 'ft', power: 'hp' };
  return (
    together(
      stationOf(
        units,
        against(head),
        pair.map((i) => fairPumps[i]!),
      ),
    ).flow / FLOW_UNITS.MGD
  );
};

const different: readonly OutsideCheck[] = [
  ...PAIRS.map(
    ([names, pair, head, printed]): OutsideCheck => ({
      what: `Flow of pumps ${names} together at ${head} ft`,
      kind: 'published',
      source: TABLE_8_1,
      printed,
      unit: 'mgd',
      ours: () => pairFlow(pair, head),
      allowed: 0.021 * printed,
      why: '2.1 %: the table was read off drawn curves, ours are parabolas through its points',
    }),
  ),
  ...PAIRS.map(
    ([names, pair, head, , added]): OutsideCheck => ({
      what: `Flow of pumps ${names} together at ${head} ft, their parabolas added`,
      kind: 'closed form',
      source: `Σ√((H0 − H)/a) with parabolas through the points of ${TABLE_8_1}`,
      printed: added,
      unit: 'mgd',
      ours: () => pairFlow(pair, head),
      allowed: halfDigit(2),
      why: WORKED,
    }),
  ),
];

const HI = 'pumps H = 380 − 0.06·q − 0.0018·q² on system 265 + 7.75e-4·Q² (Hydraulic Institute, I.C), solved by hand';

const equal = (
  [
    [2, 294.39, 332.17, 147.2],
    [3, 333.33, 351.11, 111.11],
  ] as const
).flatMap(([count, gpm, feet, each]): OutsideCheck[] => {
  const common = {
    kind: 'closed form',
    source: HI,
    allowed: 0.011,
    why: `${WORKED}, and as much for the cubics`,
  } as const;
  return [
    {
      ...common,
      what: `Flow of ${count} pumps together`,
      printed: gpm,
      unit: 'gpm',
      ours: () => together(hiStation(count)).flow / GPM,
    },
    {
      ...common,
      what: `Head of ${count} pumps together`,
      printed: feet,
      unit: 'ft',
      ours: () => headOf(hiStation(count)) / FOOT,
    },
    {
      ...common,
      what: `Flow of each of ${count} pumps together`,
      printed: each,
      unit: 'gpm',
      ours: () => together(hiStation(count)).running[0]!.flow / GPM,
    },
  ];
});

/** A curve of five points, gpm and ft. */
export const PUMPWORLD = headPoints([
  [100, 130],
  [190, 120],
  [280, 110],
  [360, 100],
  [470, 85],
]);
const pumpworld = (count: number, head: number) =>
  together(stationOf(US, against(head), [{ name: 'P', count, curve: PUMPWORLD, motor: LOSSLESS }])).flow / GPM;

const graph: readonly OutsideCheck[] = [
  {
    what: 'Flow of one pump at 85 ft',
    kind: 'published',
    source: 'pumpworld.com, parallel pumping of identical pumps',
    printed: 470,
    unit: 'gpm',
    ours: () => pumpworld(1, 85),
    allowed: 1e-6,
    why: 'a point of its curve, exact but for rounding',
  },
  {
    what: 'Flow of two at 105 ft',
    kind: 'published',
    source: 'pumpworld.com, parallel pumping of identical pumps',
    printed: 660,
    unit: 'gpm',
    ours: () => pumpworld(2, 105),
    allowed: 22,
    why: '3.3 %: read off a graph, and above twice the flow that its own points give',
  },
];

const WHITE =
  'F. M. White, Fluid Mechanics, examples 11.6 to 11.8: 490 − 0.26·Q² (1000 gpm, ft), 120 ft of lift, 1500 ft of 16 in, f 0.030';
const TEXTBOOK =
  'textbook problem (assignmentexpert.com, question 59885): 365 − 20·Q² (cfs, ft), 290 ft of lift, 90 ft of 10 in with f 0.022 and 4900 ft of 8 in with f 0.028';
const BY_HAND = 'worked by hand';
const G_ROUNDED = 'g of 32.2 ft/s²: 0.08 %';

/** Loss [m] at a flow [m³/s] of pipes by length [ft], bore [in] and a fixed friction factor, as losses of K. */
const fixedFactor = (flow: number, ...pipes: readonly (readonly [number, number, number])[]) => {
  const asK = pipes.map(([length, diameter, f]) => ({
    length: 0,
    diameter,
    roughness: 0,
    minorLoss: (f * length) / (diameter / 12),
  }));
  const pump = { name: 'P', curve: { shutoffHead: 1000, shape: 0, bestFlow: 1, bestEfficiency: 1 }, motor: LOSSLESS };
  return stationOf(US, { staticHead: 1, friction: { pipes: asK } }, [pump]).friction.at(flow);
};

/** Equal pumps and a system, in units of flow of so many gpm. */
const bank = (unit: number, p: { shutoffHead: number; shape: number; staticHead: number; k: number }) => {
  const { shutoffHead } = p;
  const bestFlow = 0.7 * unit * Math.sqrt(shutoffHead / p.shape);
  const curve = { shutoffHead, shape: p.shape / unit ** 2, bestFlow, bestEfficiency: 0.8 };
  const system = { staticHead: p.staticHead, friction: { coefficient: p.k / unit ** 2 } };
  return (count: number, inSeries: number) =>
    stationOf(US, system, [{ name: 'P', count, inSeries, curve, motor: LOSSLESS }]);
};
const white = bank(1000, { shutoffHead: 490, shape: 0.26, staticHead: 120, k: 1.3344 });
const textbook = bank(CFS / GPM, { shutoffHead: 365, shape: 20, staticHead: 290, k: 26.351 });
const thousands = (count: number, inSeries: number) => together(white(count, inSeries)).flow / GPM / 1000;

const whiteChecks: readonly OutsideCheck[] = [
  ...(
    [
      ['one pump', 1, 1, 15.2],
      ['two in parallel', 2, 1, 16.3],
    ] as const
  ).map(
    ([what, count, inSeries, printed]): OutsideCheck => ({
      what: `Flow of ${what}`,
      kind: 'from memory',
      source: WHITE,
      printed,
      unit: '1000 gpm',
      ours: () => thousands(count, inSeries),
      allowed: 0.01 * printed,
      why: '1 %: remembered as about',
    }),
  ),
  {
    what: 'Friction of the pipe',
    kind: 'closed form',
    source: `${WHITE}; ${BY_HAND}`,
    printed: 1.3344,
    unit: 'ft/(1000 gpm)²',
    ours: () => fixedFactor(1000 * GPM, [1500, 16, 0.03]) / FOOT,
    allowed: 0.0012,
    why: G_ROUNDED,
  },
  ...(
    [
      ['one pump', 1, 1, 15.234],
      ['two in parallel', 2, 1, 16.26],
      ['two in series', 1, 2, 21.535],
    ] as const
  ).map(
    ([what, count, inSeries, printed]): OutsideCheck => ({
      what: `Flow of ${what}, with that friction`,
      kind: 'closed form',
      source: `${WHITE}; ${BY_HAND}`,
      printed,
      unit: '1000 gpm',
      ours: () => thousands(count, inSeries),
      allowed: halfDigit(3),
      why: WORKED,
    }),
  ),
];

const textbookChecks: readonly OutsideCheck[] = [
  {
    what: 'Friction of the two pipes in series',
    kind: 'closed form',
    source: `${TEXTBOOK}; ${BY_HAND}`,
    printed: 26.351,
    unit: 'ft/cfs²',
    ours: () => fixedFactor(CFS, [90, 10, 0.022], [4900, 8, 0.028]) / FOOT,
    allowed: 0.0225,
    why: G_ROUNDED,
  },
  ...(
    [
      ['one pump', 1, 1, 1.272, 332.64],
      ['two in series', 1, 2, 2.5752, 464.74],
      ['two in parallel', 2, 1, 1.5467, 353.04],
    ] as const
  ).flatMap(([what, count, inSeries, cfs, feet]): OutsideCheck[] => [
    {
      what: `Flow of ${what}, with that friction`,
      kind: 'closed form',
      source: `${TEXTBOOK}; ${BY_HAND}`,
      printed: cfs,
      unit: 'cfs',
      ours: () => together(textbook(count, inSeries)).flow / CFS,
      allowed: halfDigit(4),
      why: WORKED,
    },
    {
      what: `Head of ${what}, with that friction`,
      kind: 'closed form',
      source: `${TEXTBOOK}; ${BY_HAND}`,
      printed: feet,
      unit: 'ft',
      ours: () => headOf(textbook(count, inSeries)) / FOOT,
      allowed: halfDigit(2),
      why: WORKED,
    },
  ]),
];

const CHIN = 'D. A. Chin, Water-Resources Engineering, example 2.13: pumps of 12 − 0.10·Q²; the curves by algebra';
const chin = (staticHead: number, pump: object) =>
  stationOf({ flow: 'm3/s', head: 'm', power: 'kW' }, against(staticHead), [
    { name: 'P', curve: { shutoffHead: 12, shape: 0.1, bestFlow: 6, bestEfficiency: 0.8 }, motor: LOSSLESS, ...pump },
  ]);

const chinChecks: readonly OutsideCheck[] = [
  {
    what: 'Head of three in series at 5 m³/s, by 36 − 0.30·Q²',
    kind: 'closed form',
    source: CHIN,
    printed: 28.5,
    unit: 'm',
    ours: () => chin(1, { inSeries: 3 }).duty[0]!.head(5, 1),
    allowed: 1e-9,
    why: 'exact but for rounding',
  },
  {
    what: 'Flow of three in parallel at 9 m, by 12 − 0.0111·Q²',
    kind: 'closed form',
    source: CHIN,
    printed: 16.44,
    unit: 'm³/s',
    ours: () => together(chin(9, { count: 3 })).flow,
    allowed: 0.015,
    why: 'half of the last digit of 0.0111 (0.1/9), and of the flow',
  },
];

/** Section 0 of any textbook: h = 30 − 0.003·q² on 12 + 0.001·Q², L/s and m. */
const plain = (count: number, inSeries: number, staticHead = 12) =>
  stationOf(SI, { staticHead, friction: { coefficient: 0.001 } }, [
    {
      name: 'P',
      count,
      inSeries,
      curve: { shutoffHead: 30, shape: 0.003, bestFlow: 60, bestEfficiency: 0.8 },
      motor: LOSSLESS,
    },
  ]);

/** A train of two makes. */
const train = () => {
  const machine = (shutoffHead: number, shape: number) => ({
    curve: { shutoffHead, shape, bestFlow: 60, bestEfficiency: 0.8 },
    motor: LOSSLESS,
  });
  const system = { staticHead: 25, friction: { coefficient: 0.001 } };
  return stationOf(SI, system, [{ name: 'T', train: [machine(30, 0.003), machine(20, 0.002)] }]);
};

const closedForms: readonly OutsideCheck[] = [
  ...[1, 2, 3, 5].map(
    (n): OutsideCheck => ({
      what: `Flow of n equal pumps in parallel, n = ${n}`,
      kind: 'closed form',
      source: 'Q = √((H0 − H_st)/(k + a/n²)) with H0 = 30, a = 0.003, H_st = 12, k = 0.001 (L/s, m)',
      printed: Math.sqrt(18 / (0.001 + 0.003 / n ** 2)),
      unit: 'L/s',
      ours: () => together(plain(n, 1)).flow / LITRE,
      allowed: 1e-9,
      why: 'exact but for rounding',
    }),
  ),
  ...[2, 3].map(
    (n): OutsideCheck => ({
      what: `Flow of n equal pumps in series, n = ${n}`,
      kind: 'closed form',
      source: 'Q = √((n·H0 − H_st)/(k + n·a)) with H0 = 30, a = 0.003, H_st = 45, k = 0.001 (L/s, m)',
      printed: Math.sqrt((30 * n - 45) / (0.001 + 0.003 * n)),
      unit: 'L/s',
      ours: () => together(plain(1, n, 45)).flow / LITRE,
      allowed: 1e-9,
      why: 'exact but for rounding',
    }),
  ),
  {
    what: 'Flow of two different pumps in series',
    kind: 'closed form',
    source:
      'Q = √((H1 + H2 − H_st)/(k + a1 + a2)) with H1 = 30, a1 = 0.003, H2 = 20, a2 = 0.002, H_st = 25, k = 0.001 (L/s, m)',
    printed: Math.sqrt((30 + 20 - 25) / (0.001 + 0.003 + 0.002)),
    unit: 'L/s',
    ours: () => together(train()).flow / LITRE,
    allowed: 1e-9,
    why: 'exact but for rounding',
  },
  {
    what: 'Firm capacity of three equal pumps',
    kind: 'closed form',
    source: 'flow of two of them, Q = √((H0 − H_st)/(k + a/4)), same figures',
    printed: Math.sqrt(18 / (0.001 + 0.003 / 4)),
    unit: 'L/s',
    ours: () => firm(plain(3, 1)) / LITRE,
    allowed: 1e-9,
    why: 'exact but for rounding',
  },
];

/** Three pumps of which two carry 100 and one alone 60: with r = k/a, (r + 1)/(r + 1/4) = (100/60)². */
const military = () => {
  const r = (1 - (100 / 60) ** 2 / 4) / ((100 / 60) ** 2 - 1);
  const shape = (30 - 12) / 60 ** 2 / (1 + r);
  return stationOf(SI, { staticHead: 12, friction: { coefficient: r * shape } }, [
    { name: 'P', count: 3, curve: { shutoffHead: 30, shape, bestFlow: 60, bestEfficiency: 0.8 }, motor: LOSSLESS },
  ]);
};

const firmChecks: readonly OutsideCheck[] = [
  {
    what: 'Firm capacity of three pumps on a system where one alone gives 60 % of the peak',
    kind: 'published',
    source: 'US Army, TM 5-813-9 (1992), three-pump station: any two carry 100 %, one alone 60 %',
    printed: 100,
    unit: '%',
    ours: () => (60 * firm(military())) / together(military(), 1).flow,
    allowed: 1e-9,
    why: 'friction chosen to give the 60 %; then exact but for rounding',
  },
];

const TIP_SHEET_8 =
  'US Department of Energy, Pumping Systems Tip Sheet #8, Optimize Parallel Pumping Systems, October 2006';

/** Its pump through the two points remembered, on a system of 100 ft of lift through the first of them. */
const tipSheet = (() => {
  const points = [
    { flow: 0, head: 172.46, efficiency: 0 },
    { flow: 1250, head: 159, efficiency: 0.8 },
    { flow: 2000, head: 138, efficiency: 0.9 },
    { flow: 2300, head: 126.9, efficiency: 0.87 },
  ];
  const system = { staticHead: 100, friction: { points: [{ flow: 2000, head: 138 }] } };
  return stationOf(US, system, [{ name: 'P', count: 2, curve: { points }, motor: { efficiency: 0.94 } }], {
    liquid: { density: 998.2 },
  });
})();
const kwhPerMillionGallons = (count: number) => {
  const { power, flow } = together(tipSheet, count);
  return (energyKwh(power, 1) / flow) * 1e6 * US_GALLON;
};

const tipSheetChecks = (
  [
    ['Flow of one pump', 2000, 'gpm', () => together(tipSheet, 1).flow / GPM],
    ['Head of one pump', 138, 'ft', () => headOf(tipSheet, 1) / FOOT],
    ['Electric power of one pump', 61.4, 'kW', () => together(tipSheet, 1).power / 1000],
    ['Energy per million US gallons of one pump', 512, 'kWh', () => kwhPerMillionGallons(1)],
    ['Flow of two pumps', 2500, 'gpm', () => together(tipSheet, 2).flow / GPM],
    ['Head of two pumps', 159, 'ft', () => headOf(tipSheet, 2) / FOOT],
    ['Electric power of two pumps', 99.6, 'kW', () => together(tipSheet, 2).power / 1000],
    ['Energy per million US gallons of two pumps', 664, 'kWh', () => kwhPerMillionGallons(2)],
    [
      'Power of two pumps over that of one',
      1.622,
      '–',
      () => together(tipSheet, 2).power / together(tipSheet, 1).power,
    ],
  ] as const
).map(
  ([what, printed, unit, ours]): OutsideCheck => ({
    what,
    kind: 'from memory',
    source: TIP_SHEET_8,
    printed,
    unit,
    ours,
    allowed: 0.005 * printed,
    why: '0.5 %: three figures are printed, and the curve beyond its two points is not',
  }),
);

const munson = stationOf(
  US,
  {
    staticHead: 10,
    friction: { pipes: [{ length: 0, diameter: 6, roughness: 0, minorLoss: (0.02 * 200) / 0.5 + 0.5 + 1.5 + 1 }] },
  },
  [
    {
      name: 'P',
      curve: { shutoffHead: 90, operatingPoint: { flow: 1600, head: 66.5 }, bestFlow: 1600, bestEfficiency: 0.84 },
      motor: LOSSLESS,
    },
  ],
  { liquid: { density: 998.2 } },
);
const MUNSON =
  'B. R. Munson, D. F. Young and T. H. Okiishi, Fundamentals of Fluid Mechanics, example 12.4 (inputs read)';

const munsonChecks = (
  [
    ['Flow of its pump of 66.5 ft at 1600 gpm on 200 ft of 6 in', 1600, 'gpm', () => together(munson).flow / GPM, 8],
    ['Head there', 66.5, 'ft', () => headOf(munson) / FOOT, 0.33],
    ['Shaft power there, at 84 %', 32, 'hp', () => together(munson).power / 745.7, 0.5],
  ] as const
).map(
  ([what, printed, unit, ours, allowed]): OutsideCheck => ({
    what,
    kind: 'from memory',
    source: MUNSON,
    printed,
    unit,
    ours,
    allowed,
    why: '0.5 %: read off a graph; the power half of its last digit',
  }),
);

/** Several pumps at once: in parallel, equal and different, and in series. */
export const PARALLEL: readonly OutsideCheck[] = [
  ...different,
  ...equal,
  ...graph,
  ...whiteChecks,
  ...textbookChecks,
  ...chinChecks,
  ...tipSheetChecks,
  ...munsonChecks,
  ...closedForms,
  ...firmChecks,
];
