import { typicalDrive } from '../../server/drive/driveTables.ts';
import { fullLoadEfficiency, type MotorName, motorTable, partLoadLoss } from '../../server/drive/motorTables.ts';
import { efficiencyAt, lossAt } from '../../server/drive/partLoad.ts';
import { readStation } from '../../server/station/readStation.ts';
import { energyKwh, FOOT, HORSEPOWER, US_GALLON } from '../../server/units.ts';
import { aStationFile } from '../support/aStation.ts';
import { flowLog, resultFor, ruleIn } from '../support/comparing.ts';
import { halfDigit, type OutsideCheck } from './check.ts';

const PRINTED = 'half of the last digit printed';

/** A whole table in one row: the largest difference between its cells and ours, which should be 0. */
function wholeTable(
  row: Pick<OutsideCheck, 'what' | 'kind' | 'source' | 'unit' | 'allowed' | 'why'>,
  cells: readonly (readonly [number, () => number])[],
): OutsideCheck {
  return {
    ...row,
    what: `${row.what}: largest difference of ${cells.length} cells`,
    printed: 0,
    ours: () => Math.max(...cells.map(([printed, ours]) => Math.abs(ours() - printed))),
  };
}

const driveAt = (hp: number, load: number): number => efficiencyAt(typicalDrive(hp * HORSEPOWER), load);

const LOADS = [0.016, 0.125, 0.25, 0.42, 0.5, 0.75, 1];
/** By size [hp]; the 81 at 200 hp and 12.5 % is a misprint and left out. */
const SHEET_11: readonly (readonly [number, readonly (number | null)[]])[] = [
  [5, [35, 80, 88, 91, 92, 94, 95]],
  [10, [41, 83, 90, 93, 94, 95, 96]],
  [20, [47, 86, 93, 94, 95, 96, 97]],
  [30, [50, 88, 93, 95, 95, 96, 97]],
  [50, [46, 86, 92, 95, 95, 96, 97]],
  [60, [51, 87, 92, 95, 95, 96, 97]],
  [75, [47, 86, 93, 95, 96, 97, 97]],
  [100, [55, 89, 94, 95, 96, 97, 97]],
  [200, [61, null, 95, 96, 96, 97, 97]],
];

function drives(): OutsideCheck[] {
  const sheet =
    'US Department of Energy, Motor Systems Tip Sheet #11, Adjustable Speed Drive Part-Load Efficiency, DOE/GO-102012-3730, November 2012';
  // 20 hp at full speed; half speed asks for an eighth. The sheet reads its column of 12.5 %, and its motor is 77.8 %.
  const fan = () => {
    const shaft = (0.746 * 20) / 8;
    const input = shaft + lossAt(0.778, shaft, shaft, 8 * shaft);
    return input + lossAt(driveAt(20, 0.125), input, shaft, 8 * shaft);
  };
  const fluids = 'C. Bell, fluids 1.3.1, VFD_efficiency';
  return [
    wholeTable(
      {
        what: 'Efficiency of a typical drive by size and load, its misprint of 81 for 91 left out',
        kind: 'published',
        source: `${sheet}, table 1`,
        unit: '%',
        allowed: 1e-9,
        why: 'the table is taken as printed',
      },
      SHEET_11.flatMap(([hp, row]) =>
        row.flatMap((printed, i) => (printed === null ? [] : [[printed, () => 100 * driveAt(hp, LOADS[i]!)] as const])),
      ),
    ),
    {
      what: 'Power of a fan of 20 hp at half speed',
      kind: 'published',
      source: `${sheet}, example`,
      printed: 2.8,
      unit: 'kW',
      ours: fan,
      allowed: halfDigit(1),
      why: PRINTED,
    },
    {
      what: 'Reduction of its power, from 16.4 kW',
      kind: 'published',
      source: `${sheet}, example`,
      printed: 82.9,
      unit: '%',
      ours: () => 100 * (1 - fan() / 16.4),
      allowed: 0.31,
      why: 'the sheet goes on from 2.8 kW, rounded to 0.05 of 16.4 kW',
    },
    ...(
      [
        ['published', 10, 1, 0.96],
        ['published', 100, 0.2, 0.92],
        ['published', 100, 0.5, 0.96],
        ['published', 8, 0.016, 0.386],
        ['independent solver', 25, 0.5, 0.95],
        ['independent solver', 40, 0.6, 0.954],
        ['independent solver', 15, 0.1875, 0.88],
        ['independent solver', 50, 0.75, 0.96],
        ['independent solver', 200, 0.125, 0.91],
      ] as const
    ).map(
      ([kind, hp, load, printed]): OutsideCheck => ({
        what: `Efficiency of a typical drive of ${hp} hp at a load of ${load}`,
        kind,
        source: kind === 'published' ? `${fluids}, docstring and tests` : `${fluids}, run`,
        printed,
        unit: '–',
        ours: () => driveAt(hp, load),
        allowed: halfDigit(4),
        why: 'it rounds to four decimals',
      }),
    ),
  ];
}

/** kW, IE1, IE2, IE3, IE4. */
const IEC = [
  [0.75, 72.1, 79.6, 82.5, 85.7],
  [1.1, 75.0, 81.4, 84.1, 87.2],
  [1.5, 77.2, 82.8, 85.3, 88.2],
  [2.2, 79.7, 84.3, 86.7, 89.5],
  [3, 81.5, 85.5, 87.7, 90.4],
  [4, 83.1, 86.6, 88.6, 91.1],
  [5.5, 84.7, 87.7, 89.6, 91.9],
  [7.5, 86.0, 88.7, 90.4, 92.6],
  [11, 87.6, 89.8, 91.4, 93.3],
  [15, 88.7, 90.6, 92.1, 93.9],
  [18.5, 89.3, 91.2, 92.6, 94.2],
  [22, 89.9, 91.6, 93.0, 94.5],
  [30, 90.7, 92.3, 93.6, 94.9],
  [37, 91.2, 92.7, 93.9, 95.2],
  [45, 91.7, 93.1, 94.2, 95.4],
  [55, 92.1, 93.5, 94.6, 95.7],
  [75, 92.7, 94.0, 95.0, 96.0],
  [90, 93.0, 94.2, 95.2, 96.1],
  [110, 93.3, 94.5, 95.4, 96.3],
  [132, 93.5, 94.7, 95.6, 96.4],
  [160, 93.8, 94.9, 95.8, 96.6],
  [200, 94.0, 95.1, 96.0, 96.7],
  [250, 94.0, 95.1, 96.0, 96.7],
  [315, 94.0, 95.1, 96.0, 96.7],
] as const;

/** hp and nominal full-load %, enclosed. */
const NEMA_PREMIUM = [
  [1, 85.5],
  [1.5, 86.5],
  [2, 86.5],
  [3, 89.5],
  [5, 89.5],
  [7.5, 91.7],
  [10, 91.7],
  [15, 92.4],
  [20, 93.0],
  [25, 93.6],
  [30, 93.6],
  [40, 94.1],
  [50, 94.5],
  [60, 95.0],
  [75, 95.4],
  [100, 95.4],
  [125, 95.4],
  [150, 95.8],
  [200, 96.2],
] as const;

const motor = (name: MotorName, watts: number): number => 100 * fullLoadEfficiency(name, watts);

function motors(): OutsideCheck[] {
  const taken = { unit: '%', allowed: 1e-9, why: 'the table is taken as printed' } as const;
  const cfr = '10 CFR 431.25(a), table 1, 4 poles, enclosed';
  const iec = 'IEC 60034-30-1:2014, 4 poles, 50 Hz, as two code tables quote it';
  const names = ['IE1', 'IE2', 'IE3', 'IE4'] as const;
  return [
    wholeTable(
      { ...taken, what: 'Full-load efficiency of motors IE1 to IE4, 0.75 to 315 kW', kind: 'published', source: iec },
      IEC.flatMap(([kw, ...row]) => row.map((printed, i) => [printed, () => motor(names[i]!, kw * 1000)] as const)),
    ),
    wholeTable(
      {
        what: 'The same by the formula for sizes in between, 0.01 % beside each listed size up to 200 kW',
        kind: 'from memory',
        source: `${iec}; coefficients of its formula from memory`,
        unit: '%',
        allowed: 0.051,
        why: PRINTED,
      },
      IEC.filter(([kw]) => kw <= 200).flatMap(([kw, ...row]) =>
        // The smallest size has no smaller one beside it.
        row.map((printed, i) => [printed, () => motor(names[i]!, kw * (kw === 200 ? 999.9 : 1000.1))] as const),
      ),
    ),
    wholeTable(
      { ...taken, what: 'Full-load efficiency of NEMA premium motors, 1 to 200 hp', kind: 'published', source: cfr },
      NEMA_PREMIUM.map(([hp, printed]) => [printed, () => motor('NEMA premium', hp * HORSEPOWER)] as const),
    ),
    wholeTable(
      {
        ...taken,
        what: 'Full-load efficiency of motors IE1 to IE4 of 355 and 375 kW, as 200 kW',
        kind: 'from memory',
        source: 'IEC 60034-30-1:2014, 4 poles, 50 Hz',
      },
      [355, 375].flatMap((kw) =>
        [94.0, 95.1, 96.0, 96.7].map((printed, i) => [printed, () => motor(names[i]!, kw * 1000)] as const),
      ),
    ),
    wholeTable(
      {
        ...taken,
        what: 'Full-load efficiency of NEMA premium motors, 250 to 500 hp',
        kind: 'from memory',
        source: cfr,
      },
      [250, 300, 350, 400, 450, 500].map((hp) => [96.2, () => motor('NEMA premium', hp * HORSEPOWER)] as const),
    ),
    ...(
      [
        [62, 'as 60 hp', 95.0],
        [67.5, 'as 75 hp', 95.4],
      ] as const
    ).map(
      ([hp, as, printed]): OutsideCheck => ({
        ...taken,
        what: `Full-load efficiency of a NEMA premium motor of ${hp} hp, ${as}`,
        kind: 'published',
        source: '10 CFR 431.25, rule for ratings between two listed ones',
        printed,
        ours: () => motor('NEMA premium', hp * HORSEPOWER),
      }),
    ),
  ];
}

function partLoad(): OutsideCheck[] {
  const appendix =
    '10 CFR 431 subpart Y appendix A, motor loss curve (coefficients as code quotes them), worked by hand';
  const sheet = 'US Department of Energy, Motor Systems Tip Sheet #2, DOE/GO-102012-3734, November 2012, table 1';
  const losses = (
    [
      [0, 0.641],
      [0.25, 0.6039],
      [0.5, 0.6796],
      [0.75, 0.8257],
      [1, 1],
    ] as const
  ).map(
    ([load, printed]): OutsideCheck => ({
      what: `Loss of a motor at a load of ${load}, as a share of that at full load`,
      kind: 'closed form',
      source: appendix,
      printed,
      unit: '–',
      ours: () => partLoadLoss(load),
      allowed: halfDigit(4),
      why: 'four decimals worked by hand',
    }),
  );
  const efficiencies = (
    [
      [95.4, [89.57, 93.85, 94.96, 95.4]],
      [91.7, [82.06, 89.05, 90.94, 91.7]],
    ] as const
  ).flatMap(([full, row]) =>
    [0.25, 0.5, 0.75, 1].map(
      (load, i): OutsideCheck => ({
        what: `Efficiency at a load of ${load} of a motor of ${full} % at full load`,
        kind: 'closed form',
        source: appendix,
        printed: row[i]!,
        unit: '%',
        ours: () => 100 * efficiencyAt(motorTable(full / 100), load),
        allowed: halfDigit(2),
        why: 'two decimals worked by hand',
      }),
    ),
  );
  const better = [
    { hp: 10, percent: 92.2, kwh: 520, dollars: 40 },
    { hp: 25, percent: 93.8, kwh: 1_260, dollars: 100 },
    { hp: 50, percent: 95.0, kwh: 2_455, dollars: 195 },
    { hp: 100, percent: 95.3, kwh: 4_875, dollars: 390 },
    { hp: 200, percent: 96.2, kwh: 9_575, dollars: 765 },
  ].map(({ hp, percent, ...printed }) => {
    const rated = 746 * hp;
    const shaft = 0.75 * rated;
    const lost = (efficiency: number) => lossAt(efficiency / 100, shaft, shaft, rated);
    const saved = () => energyKwh(lost(percent) - lost(percent + 1), 8_000 * 3_600);
    return { what: `Saving of one point of efficiency, ${hp} hp at 75 % load for 8 000 h`, saved, ...printed };
  });
  const common = { kind: 'published', source: sheet } as const;
  return [
    ...losses,
    ...efficiencies,
    ...better.map(
      ({ what, saved, kwh }): OutsideCheck => ({
        ...common,
        what,
        printed: kwh,
        unit: 'kWh',
        ours: saved,
        allowed: 3,
        why: 'the sheet rounds to 5 kWh',
      }),
    ),
    ...better.map(
      ({ what, saved, dollars }): OutsideCheck => ({
        ...common,
        what: `${what}, at 0.08 per kWh`,
        printed: dollars,
        unit: 'USD',
        ours: () => 0.08 * saved(),
        allowed: 2.5,
        why: 'the sheet rounds to 5 dollars',
      }),
    ),
  ];
}

/** One pump at fixed speed that just meets its flow, against static head alone. */
interface Pumping {
  readonly flowM3s: number;
  readonly headM: number;
  readonly density: number;
  readonly pump: number;
  readonly motor: number;
}

/** Mean electric power [kW], and kWh per m³, of an hour of it. */
function pumping({ flowM3s, headM, density, pump, motor }: Pumping): { kw: number; kwhPerM3: number; percent: number } {
  const station = readStation(
    aStationFile({
      units: { flow: 'm3/s', head: 'm', power: 'kW' },
      liquid: { density },
      surplus: 'throttle',
      storage: {},
      system: { staticHead: headM, friction: { coefficient: 0 } },
      pumps: [
        {
          name: 'P',
          curve: {
            shutoffHead: 1.5 * headM,
            operatingPoint: { flow: flowM3s, head: headM },
            bestFlow: flowM3s,
            bestEfficiency: pump,
          },
          motor: { efficiency: motor },
        },
      ],
    }),
    'station.json',
  );
  const result = ruleIn(
    resultFor({ station, log: flowLog([flowM3s]), tariff: null, rules: ['fixed-speed'] }),
    'fixed-speed',
  );
  return { kw: result.energyKwh, kwhPerM3: result.kwhPerM3!, percent: result.wireToWaterPercent! };
}

function wireToWater(): OutsideCheck[] {
  const ideal = { flowM3s: 0.05, headM: 30, density: 1000, pump: 1, motor: 1 };
  const perMillionGallonsAndFoot = () => (pumping(ideal).kwhPerM3 * 1e6 * US_GALLON) / (30 / FOOT);
  const acreFoot = 43_560 * FOOT ** 3;
  // 100 to 300 kPa at 1000 kg/m³.
  const book = { flowM3s: 0.05, headM: 200_000 / (1000 * 9.80665), density: 1000, pump: 0.741, motor: 0.9 };
  const cengel = 'Çengel and Cimbala, Fluid Mechanics, example 5-12';
  return [
    {
      what: 'Electric power of 50 L/s from 100 to 300 kPa, pump 74.1 %, motor 90 %',
      kind: 'from memory',
      source: `${cengel}: inputs read, its 74.1 % from memory`,
      printed: 15,
      unit: 'kW',
      ours: () => pumping(book).kw,
      allowed: 0.0101,
      why: '74.1 % is rounded: 0.07 %',
    },
    {
      what: 'Wire-to-water efficiency of the same',
      kind: 'closed form',
      source: `${cengel}, 10 kW over 15 kW`,
      printed: 66.67,
      unit: '%',
      ours: () => pumping(book).percent,
      allowed: 0.045,
      why: '74.1 % is rounded: 0.07 %',
    },
    {
      what: 'Efficiency that 300 gpm at 60 ft asks of 5 hp at the shaft',
      kind: 'published',
      source: 'University of Connecticut, energy assessment training, Pump.md (commit bcb7eef)',
      printed: 0.909,
      unit: '–',
      ours: () =>
        pumping({ flowM3s: (300 * US_GALLON) / 60, headM: 60 * FOOT, density: 998.2, pump: 1, motor: 1 }).kw /
        ((5 * HORSEPOWER) / 1000),
      allowed: halfDigit(3),
      why: 'half of the last digit printed; its divisor 3960 is water of about 20 °C',
    },
    {
      what: 'Energy that lifts an acre-foot by a foot at 100 %',
      kind: 'common practice',
      source: '1.0241 kWh, as the trade quotes it (water of 62.4 lb/ft³)',
      printed: 1.0241,
      unit: 'kWh',
      ours: () => pumping(ideal).kwhPerM3 * acreFoot * (FOOT / 30),
      allowed: 0.0005,
      why: 'its density is not given',
    },
    {
      what: 'Energy that lifts a million US gallons by a foot at 100 %',
      kind: 'published',
      source: 'J. Evans, Pumps & Systems, cost of pumping, equation 1: 0.189/60 per 1000 gallons',
      printed: 3.15,
      unit: 'kWh',
      ours: perMillionGallonsAndFoot,
      allowed: 0.009,
      why: 'its 0.189 has three figures: 0.3 %',
    },
    ...(
      [
        [1000, 1.024155, 3.143014, 2.724069],
        [999.552, 1.023697, 3.141606, 2.722849],
        [998.2, 1.022312, 3.137356, 2.719166],
      ] as const
    ).map(([density, ...wanted]) =>
      wholeTable(
        {
          what: `Energy at 100 % per acre-foot and foot, per million gallons and foot, per ML and metre, at ${density} kg/m³`,
          kind: 'closed form',
          source: 'ρ·g·H with g = 9.80665 m/s², worked outside this project to six decimals',
          unit: 'kWh',
          allowed: halfDigit(6) + 1e-6,
          why: 'six decimals; an acre is that of the international foot',
        },
        [acreFoot * FOOT, 1e6 * US_GALLON * FOOT, 1000].map(
          (per, i) => [wanted[i]!, () => (pumping({ ...ideal, density }).kwhPerM3 * per) / 30] as const,
        ),
      ),
    ),
  ];
}

/** Motors and drives, and the whole way from wire to water. */
export const MACHINES: readonly OutsideCheck[] = [...drives(), ...motors(), ...partLoad(), ...wireToWater()];
