import type { Demo } from './demo.ts';
import { type LocalHour, localHours, recordCsv, season } from './localHours.ts';
import { type Random, randomFrom, wandering } from './random.ts';

const ZONE = 'Europe/Dublin';

/**
 * A wastewater lift station: sewage that follows the day, ground water that follows the season, and storms that run off
 * fast and drain slowly. One pump carries most dry days, but its operators bring the second on early, and two pumps
 * then push against the friction of both while the well empties in bursts.
 */
export function liftStation(seed: number): Demo {
  const random = randomFrom(seed);
  const hours = localHours(ZONE);
  const flows = inflow(hours, random);
  return { station: STATION, tariff: TARIFF, caseFile: CASE, recordCsv: recordCsv(hours, (i) => flows[i], 2) };
}

/** Share of the mean sewage flow in each hour of a day, workday and weekend; each adds up to 24. */
const WORKDAY = [
  0.62, 0.47, 0.38, 0.34, 0.36, 0.52, 0.98, 1.45, 1.52, 1.36, 1.22, 1.14, 1.12, 1.08, 1.0, 0.98, 1.04, 1.16, 1.3, 1.38,
  1.34, 1.2, 1.06, 0.98,
] as const;
const WEEKEND = [
  0.72, 0.55, 0.43, 0.37, 0.36, 0.41, 0.58, 0.88, 1.24, 1.48, 1.54, 1.46, 1.34, 1.24, 1.14, 1.06, 1.06, 1.14, 1.24, 1.3,
  1.26, 1.18, 1.06, 0.96,
] as const;

const SEWAGE_MEAN = 26;
const GROUND_WATER_MEAN = 8;
const GROUND_WATER_SWING = 4.5;
/** Ground water is highest around the middle of February. */
const WETTEST_DAY = 46;
/** Storms a day, at their most frequent and at their rarest. */
const STORMS = { winter: 0.26, summer: 0.11 };
/** What drains out of the fast and the slow store in an hour. */
const RUNOFF = { fast: 1 / 5, slow: 1 / 44 };
/** Pumps and sewers upstream pass on no more than this [L/s]. */
const SEWER_LIMIT = 104;

/** Inflow [L/s] of each hour; the logger's two outages are a gap in the rows and a gap in the cells. */
function inflow(hours: readonly LocalHour[], random: Random): (number | undefined)[] {
  const household = wandering(random, 0.05, 0.6);
  const wetness = wandering(random, 0.8, 0.999);
  let rainLeft = 0;
  let rainRate = 0;
  let fast = 0;
  let slow = 0;
  return hours.map(({ day, hour, weekday }, i) => {
    const wet = season(day, WETTEST_DAY);
    if (rainLeft <= 0) {
      const perDay = STORMS.summer + ((1 + wet) / 2) * (STORMS.winter - STORMS.summer);
      if (random.uniform() < perDay / 24) {
        // Summer storms are short and hard, winter rain is long and soft.
        rainLeft = Math.ceil((6 + 4 * wet) * (0.4 + random.exponential()));
        rainRate = (5 - 2 * wet) * (0.25 + random.exponential());
      }
    }
    const rain = rainLeft > 0 ? rainRate * (0.6 + 0.8 * random.uniform()) : 0;
    rainLeft -= 1;
    fast += 0.75 * rain * 5 - fast * RUNOFF.fast;
    slow += 0.25 * rain * 12 - slow * RUNOFF.slow;
    const pattern = weekday < 5 ? WORKDAY : WEEKEND;
    const sewage = SEWAGE_MEAN * pattern[hour]! * (1 + household());
    const ground = GROUND_WATER_MEAN + GROUND_WATER_SWING * wet + wetness();
    const flow = Math.min(sewage + ground + fast * RUNOFF.fast + slow * RUNOFF.slow, SEWER_LIMIT);
    if (i >= 2_531 && i < 2_540) return undefined;
    if (i >= 6_104 && i < 6_108) return Number.NaN;
    return flow;
  });
}

const STATION: Demo['station'] = {
  format: 'nth-pump/station/1',
  name: 'Withy Bank lift station',
  timeZone: ZONE,
  currency: 'EUR',
  units: { flow: 'L/s', head: 'm', power: 'kW' },
  liquid: { density: 1000 },
  surplus: 'storage',
  standbyPower: 0.25,
  preferred: { from: 0.6, to: 1.3 },
  system: { staticHead: 10.5, friction: { coefficient: 0.00085, exponent: 2 }, dischargeLevel: 11.75 },
  storage: {
    activeVolume: 24,
    levels: [
      { start: 1.6, stop: 0.9 },
      { start: 1.8, stop: 1.0 },
      { start: 2.0, stop: 1.1 },
    ],
  },
  pumps: [
    {
      name: 'W',
      role: 'duty',
      count: 3,
      ratedSpeed: 1475,
      curve: { shutoffHead: 25, shape: 0.0038, bestFlow: 43, bestEfficiency: 0.77 },
      branchLoss: 0.0001,
      motor: {
        ratedPower: 15,
        serviceFactor: 1.0,
        efficiency: [
          { load: 0.25, efficiency: 0.885 },
          { load: 0.5, efficiency: 0.92 },
          { load: 0.75, efficiency: 0.927 },
          { load: 1.0, efficiency: 0.926 },
        ],
      },
      drive: { fitted: false, minSpeed: 0.6, maxSpeed: 1.0, efficiency: 0.965 },
    },
  ],
  rules: {
    'flow-steps': { bringOn: [27, 66], dropOff: [21, 55] },
    steady: { minRunMinutes: 60, startPenaltyKwh: 0.5 },
  },
};

const TARIFF: Demo['tariff'] = {
  format: 'nth-pump/tariff/1',
  name: 'Winter peak, night and day',
  currency: 'EUR',
  timeZone: ZONE,
  seasons: [
    { name: 'winter', from: '11-01', to: '02-28' },
    { name: 'rest of the year', from: '03-01', to: '10-31' },
  ],
  holidays: {
    dates: [
      '2025-01-01',
      '2025-02-03',
      '2025-03-17',
      '2025-04-21',
      '2025-05-05',
      '2025-06-02',
      '2025-08-04',
      '2025-10-27',
      '2025-12-25',
      '2025-12-26',
    ],
    as: 'sun',
  },
  energy: [
    {
      name: 'winter peak',
      season: 'winter',
      days: ['mon', 'tue', 'wed', 'thu', 'fri'],
      from: '17:00',
      to: '19:00',
      rate: 0.33,
    },
    { name: 'night', from: '23:00', to: '08:00', rate: 0.13 },
    { name: 'day, winter', season: 'winter', rate: 0.22 },
    { name: 'day', rate: 0.2 },
  ],
  demand: [{ name: 'highest half hour', rate: 5.2 }],
  demandWindowMinutes: 30,
  fixedPerMonth: 38,
  taxPercent: 9,
  carbonKgPerKwh: 0.25,
};

const CASE: Demo['caseFile'] = {
  format: 'nth-pump/case/1',
  name: 'A drive on each of the three pumps',
  baseline: 'flow-steps',
  proposed: 'best-count',
  rates: 'real',
  capital: 36_000,
  maintenanceSavingPerYear: -350,
  years: 15,
  discountRate: 0.05,
  energyEscalation: 0.01,
  targetPaybackYears: 7,
};
