import type { Demo } from './demo.ts';
import { type LocalHour, localHours, recordCsv, season } from './localHours.ts';
import { type Random, randomFrom, wandering } from './random.ts';

const ZONE = 'America/Denver';

/**
 * A booster station into a pressure zone without a tank: a valve takes whatever head the zone does not need. Households
 * drink morning and evening, gardens drink through summer nights.
 */
export function boosterStation(seed: number): Demo {
  const random = randomFrom(seed);
  const hours = localHours(ZONE);
  const flows = demand(hours, random);
  return { station: STATION, tariff: TARIFF, caseFile: CASE, recordCsv: recordCsv(hours, (i) => flows[i], 0) };
}

/** Share of the mean indoor use in each hour of a day, workday and weekend; each adds up to 24. */
const WORKDAY = [
  0.5, 0.42, 0.38, 0.38, 0.48, 0.82, 1.4, 1.78, 1.52, 1.18, 1.0, 0.92, 0.9, 0.86, 0.84, 0.88, 1.0, 1.24, 1.46, 1.5,
  1.36, 1.2, 1.08, 0.9,
] as const;
const WEEKEND = [
  0.58, 0.46, 0.4, 0.38, 0.4, 0.52, 0.78, 1.14, 1.5, 1.66, 1.56, 1.4, 1.26, 1.14, 1.04, 1.0, 1.04, 1.18, 1.32, 1.36,
  1.24, 1.08, 0.88, 0.68,
] as const;
/** Share of a day's watering in each hour: timers are set for the hours before sunrise, hoses for the evening. */
const WATERING = [
  0.7, 0.8, 1.1, 1.7, 2.4, 2.8, 2.4, 1.6, 0.9, 0.5, 0.35, 0.3, 0.3, 0.3, 0.3, 0.35, 0.5, 0.75, 1.05, 1.3, 1.2, 0.95,
  0.75, 0.7,
] as const;

const INDOOR_MEAN = 860;
const WATERING_MEAN = 800;
/** Gardens need most around the middle of July, and nothing from the end of October to April. */
const HOTTEST_DAY = 198;
/** Main breaks and the like aside, the zone never takes less than its leaks [gpm], nor more than its mains bring. */
const LEAKS = 180;
const MOST = 3200;

/** Demand of the zone [gpm] in each hour. */
function demand(hours: readonly LocalHour[], random: Random): number[] {
  const household = wandering(random, 0.06, 0.5);
  const weather = wandering(random, 0.3, 0.7);
  let today = -1;
  let thirst = 0;
  return hours.map(({ day, hour, weekday }) => {
    if (day !== today) {
      today = day;
      // A day's weather: hot spells raise the watering, rain stops most of it.
      const growth = Math.max(0, 0.15 + season(day, HOTTEST_DAY)) / 1.15;
      thirst = growth * Math.max(0.1, 1 + weather());
    }
    const pattern = weekday < 5 ? WORKDAY : WEEKEND;
    const indoor = (INDOOR_MEAN - LEAKS) * pattern[hour]! * (1 + household());
    return Math.min(LEAKS + indoor + WATERING_MEAN * thirst * WATERING[hour]!, MOST);
  });
}

const STATION: Demo['station'] = {
  format: 'nth-pump/station/1',
  name: 'Juniper Bench booster station',
  timeZone: ZONE,
  currency: 'USD',
  units: { flow: 'gpm', head: 'ft', power: 'hp' },
  liquid: { temperature: 12 },
  surplus: 'throttle',
  standbyPower: 0.8,
  preferred: { from: 0.7, to: 1.2 },
  system: { staticHead: 112, friction: { coefficient: 7.2e-6, exponent: 2 } },
  pumps: [
    {
      name: 'B',
      role: 'duty',
      count: 4,
      ratedSpeed: 1770,
      curve: {
        points: [
          { flow: 0, head: 252, efficiency: 0 },
          { flow: 200, head: 250, efficiency: 0.36 },
          { flow: 400, head: 243, efficiency: 0.59 },
          { flow: 600, head: 230, efficiency: 0.73 },
          { flow: 800, head: 212, efficiency: 0.8 },
          { flow: 900, head: 200, efficiency: 0.81 },
          { flow: 1000, head: 186, efficiency: 0.8 },
          { flow: 1200, head: 152, efficiency: 0.73 },
          { flow: 1350, head: 120, efficiency: 0.63 },
        ],
      },
      branchLoss: 4e-6,
      motor: { ratedPower: 60, serviceFactor: 1.15, efficiency: 0.945 },
      drive: { fitted: false, minSpeed: 0.5, maxSpeed: 1.0, efficiency: 0.965 },
    },
  ],
  rules: { 'flow-steps': { bringOn: [1140, 2040, 2700], dropOff: [1020, 1860, 2480] } },
};

const TARIFF: Demo['tariff'] = {
  format: 'nth-pump/tariff/1',
  name: 'Summer afternoons and demand',
  currency: 'USD',
  timeZone: ZONE,
  seasons: [
    { name: 'summer', from: '06-01', to: '09-30' },
    { name: 'winter', from: '10-01', to: '05-31' },
  ],
  holidays: { dates: ['2025-01-01', '2025-05-26', '2025-07-04', '2025-09-01', '2025-11-27', '2025-12-25'], as: 'sun' },
  energy: [
    {
      name: 'summer peak',
      season: 'summer',
      days: ['mon', 'tue', 'wed', 'thu', 'fri'],
      from: '14:00',
      to: '20:00',
      rate: 0.158,
    },
    {
      name: 'winter peak',
      season: 'winter',
      days: ['mon', 'tue', 'wed', 'thu', 'fri'],
      from: '06:00',
      to: '10:00',
      rate: 0.112,
    },
    { name: 'off-peak', rate: 0.074 },
  ],
  demand: [
    { name: 'any time', rate: 6.4 },
    {
      name: 'summer peak demand',
      season: 'summer',
      days: ['mon', 'tue', 'wed', 'thu', 'fri'],
      from: '14:00',
      to: '20:00',
      rate: 9.1,
    },
  ],
  demandWindowMinutes: 15,
  fixedPerMonth: 96,
  taxPercent: 4,
  carbonKgPerKwh: 0.48,
};

const CASE: Demo['caseFile'] = {
  format: 'nth-pump/case/1',
  name: 'A drive on each of the four pumps',
  baseline: 'flow-steps',
  proposed: 'best-count',
  rates: 'real',
  capital: 92_000,
  incentive: 8_000,
  maintenanceSavingPerYear: -900,
  years: 15,
  discountRate: 0.045,
  energyEscalation: 0.01,
  targetPaybackYears: 7,
};
