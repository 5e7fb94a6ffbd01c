import type { Demo } from './demo.ts';
import { type LocalHour, localHours, recordCsv, season } from './localHours.ts';
import { type Random, randomFrom, wandering } from './random.ts';

const ZONE = 'Europe/London';

/**
 * Drinking water from a works in a valley to a service reservoir above it, through pumps that were bought one by one: a
 * jockey for the nights, a pump with a drive, a bigger one without, and two old pumps in series that together lift what
 * neither could alone. They are brought on in the order they came in, which is not the cheapest.
 */
export function highLift(seed: number): Demo {
  const random = randomFrom(seed);
  const hours = localHours(ZONE);
  const flows = draw(hours, random);
  return { station: STATION, tariff: TARIFF, caseFile: CASE, recordCsv: recordCsv(hours, (i) => flows[i], 1) };
}

/** Share of the mean draw in each hour of a day, workday and weekend; each adds up to 24. */
const WORKDAY = [
  0.52, 0.42, 0.36, 0.34, 0.4, 0.62, 1.1, 1.5, 1.48, 1.3, 1.16, 1.08, 1.06, 1.02, 0.98, 1.0, 1.08, 1.24, 1.4, 1.36,
  1.24, 1.08, 0.7, 0.56,
] as const;
const WEEKEND = [
  0.58, 0.46, 0.38, 0.34, 0.36, 0.44, 0.68, 1.06, 1.42, 1.58, 1.52, 1.36, 1.24, 1.14, 1.06, 1.02, 1.06, 1.16, 1.3, 1.3,
  1.2, 1.04, 0.74, 0.56,
] as const;

const MEAN = 190;
/** People drink and water gardens most around the end of July. */
const HOTTEST_DAY = 208;
const SUMMER_SWING = 0.17;
/** The dairy cleans its lines on two nights a week, for some hours at a stretch [m³/h]. */
const DAIRY = 55;
const LEAST = 40;
const MOST = 405;

/** Draw from the reservoir [m³/h], hour by hour. */
function draw(hours: readonly LocalHour[], random: Random): number[] {
  const household = wandering(random, 0.05, 0.7);
  const weather = wandering(random, 0.08, 0.985);
  return hours.map(({ day, hour, weekday }) => {
    const pattern = weekday < 5 ? WORKDAY : WEEKEND;
    const share = 1 + SUMMER_SWING * season(day, HOTTEST_DAY) + weather();
    const dairy = (weekday === 1 || weekday === 4) && hour >= 1 && hour < 5 ? DAIRY : 0;
    return Math.min(Math.max(LEAST, MEAN * share * pattern[hour]! * (1 + household()) + dairy), MOST);
  });
}

const STATION: Demo['station'] = {
  format: 'nth-pump/station/1',
  name: 'Larkrigg high-lift station',
  timeZone: ZONE,
  currency: 'GBP',
  units: { flow: 'm3/h', head: 'm', power: 'kW' },
  liquid: { temperature: 10 },
  surplus: 'storage',
  standbyPower: 0.5,
  preferred: { from: 0.7, to: 1.2 },
  system: { staticHead: 38, friction: { coefficient: 0.00019, exponent: 2 } },
  storage: { activeVolume: 180, side: 'discharge' },
  pumps: [
    {
      name: 'Jockey',
      role: 'duty',
      ratedSpeed: 2930,
      curve: { shutoffHead: 56, operatingPoint: { flow: 105, head: 42 }, bestFlow: 105, bestEfficiency: 0.74 },
      branchLoss: 0.00004,
      motor: { ratedPower: 22, serviceFactor: 1.0, efficiency: 'IE3' },
    },
    {
      name: 'Beck',
      role: 'duty',
      ratedSpeed: 1480,
      curve: { shutoffHead: 74, operatingPoint: { flow: 240, head: 53 }, bestFlow: 235, bestEfficiency: 0.82 },
      branchLoss: 0.00001,
      motor: { ratedPower: 55, serviceFactor: 1.0, efficiency: 'IE3' },
      drive: { fitted: true, minSpeed: 0.6, maxSpeed: 1.0, efficiency: 'typical' },
    },
    {
      name: 'Fell',
      role: 'duty',
      ratedSpeed: 1485,
      curve: {
        points: [
          { flow: 0, head: 84, efficiency: 0 },
          { flow: 80, head: 83, efficiency: 0.42 },
          { flow: 160, head: 79, efficiency: 0.67 },
          { flow: 240, head: 72, efficiency: 0.8 },
          { flow: 290, head: 66, efficiency: 0.81 },
          { flow: 340, head: 58, efficiency: 0.82 },
          { flow: 390, head: 48, efficiency: 0.76 },
          { flow: 430, head: 39, efficiency: 0.68 },
        ],
      },
      branchLoss: 0.00001,
      motor: { ratedPower: 75, serviceFactor: 1.0, efficiency: 'IE3' },
    },
    {
      name: 'Pair',
      role: 'duty',
      ratedSpeed: 1465,
      branchLoss: 0.00001,
      train: [
        {
          name: 'low',
          curve: { shutoffHead: 37, operatingPoint: { flow: 190, head: 28.5 }, bestFlow: 185, bestEfficiency: 0.74 },
          motor: { ratedPower: 30, serviceFactor: 1.0, efficiency: 0.905 },
        },
        {
          name: 'high',
          curve: { shutoffHead: 37.5, operatingPoint: { flow: 190, head: 29.5 }, bestFlow: 190, bestEfficiency: 0.75 },
          motor: { ratedPower: 30, serviceFactor: 1.0, efficiency: 0.905 },
        },
      ],
    },
  ],
  rules: {
    'flow-steps': { bringOn: [80, 240, 370], dropOff: [65, 200, 330] },
    steady: { minRunMinutes: 60, startPenaltyKwh: 0.5 },
  },
};

const TARIFF: Demo['tariff'] = {
  format: 'nth-pump/tariff/1',
  name: 'Red, amber and green',
  currency: 'GBP',
  timeZone: ZONE,
  energy: [
    { name: 'red', days: ['mon', 'tue', 'wed', 'thu', 'fri'], from: '16:00', to: '19:00', rate: 0.31 },
    { name: 'amber', days: ['mon', 'tue', 'wed', 'thu', 'fri'], from: '07:00', to: '22:00', rate: 0.21 },
    { name: 'green', rate: 0.15 },
  ],
  demand: [{ name: 'highest half hour', rate: 4.4 }],
  demandWindowMinutes: 30,
  fixedPerMonth: 62,
  taxPercent: 20,
  carbonKgPerKwh: 0.18,
};

const CASE: Demo['caseFile'] = {
  format: 'nth-pump/case/1',
  name: 'A controller that chooses the set',
  baseline: 'flow-steps',
  proposed: 'best-count',
  rates: 'real',
  capital: 14_000,
  maintenanceSavingPerYear: -300,
  years: 10,
  discountRate: 0.05,
  energyEscalation: 0.01,
  targetPaybackYears: 5,
};
