import type { Demo } from './demo.ts';
import { type LocalHour, localHours, recordCsv, season } from './localHours.ts';
import { type Random, randomFrom, wandering } from './random.ts';

const ZONE = 'Australia/Hobart';

/**
 * Raw water to a reservoir on a hilltop: nearly all head is lift, the flow hardly changes, and two pumps at rated speed
 * run at their best point. A drive has next to nothing to save there and loses a little all the time.
 */
export function hilltopLift(seed: number): Demo {
  const random = randomFrom(seed);
  const hours = localHours(ZONE);
  const flows = transfer(hours, random);
  return { station: STATION, tariff: TARIFF, caseFile: CASE, recordCsv: recordCsv(hours, (i) => flows[i], 3) };
}

const MEAN = 9.85;
/** The works drink a little more in the southern summer. */
const HOTTEST_DAY = 20;
const SUMMER_SWING = 0.2;
const WEEKEND_LESS = 0.12;
/** A filter out of service now and then halves the works' share for a shift. */
const BACKWASHES_PER_DAY = 0.05;

/** Flow that the works ask for [ML/d], hour by hour. */
function transfer(hours: readonly LocalHour[], random: Random): number[] {
  const drift = wandering(random, 0.06, 0.97);
  let shiftLeft = 0;
  return hours.map(({ day, weekday, hour }) => {
    if (shiftLeft <= 0 && random.uniform() < BACKWASHES_PER_DAY / 24) shiftLeft = 4 + Math.floor(5 * random.uniform());
    const less = shiftLeft > 0 ? 1.1 : 0;
    shiftLeft -= 1;
    const evening = hour >= 17 && hour < 22 ? 0.06 : 0;
    const steady = MEAN + SUMMER_SWING * season(day, HOTTEST_DAY) - (weekday < 5 ? 0 : WEEKEND_LESS);
    return Math.min(steady + evening - less + drift(), 10.4);
  });
}

const STATION: Demo['station'] = {
  format: 'nth-pump/station/1',
  name: 'Quoll Ridge raw-water lift',
  timeZone: ZONE,
  currency: 'AUD',
  units: { flow: 'ML/d', head: 'm', power: 'kW' },
  liquid: { temperature: 11 },
  surplus: 'storage',
  standbyPower: 0.6,
  preferred: { from: 0.7, to: 1.2 },
  system: { staticHead: 96, friction: { coefficient: 0.105, exponent: 1.852 } },
  storage: { activeVolume: 450, side: 'discharge' },
  pumps: [
    {
      name: 'Q',
      role: 'duty',
      count: 3,
      ratedSpeed: 2970,
      curve: { shutoffHead: 140, operatingPoint: { flow: 5.2, head: 105 }, bestFlow: 5.2, bestEfficiency: 0.82 },
      motor: { ratedPower: 90, serviceFactor: 1.0, efficiency: 0.95 },
      drive: { fitted: false, minSpeed: 0.5, maxSpeed: 1.0, efficiency: 0.97 },
    },
  ],
  rules: { 'flow-steps': { bringOn: [5.5, 10.5], dropOff: [4.8, 9.0] } },
};

const TARIFF: Demo['tariff'] = {
  format: 'nth-pump/tariff/1',
  name: 'Day, shoulder and night',
  currency: 'AUD',
  timeZone: ZONE,
  energy: [
    { name: 'morning peak', days: ['mon', 'tue', 'wed', 'thu', 'fri'], from: '07:00', to: '10:00', rate: 0.24 },
    { name: 'evening peak', days: ['mon', 'tue', 'wed', 'thu', 'fri'], from: '16:00', to: '21:00', rate: 0.24 },
    { name: 'night', from: '22:00', to: '06:00', rate: 0.11 },
    { name: 'shoulder', rate: 0.16 },
  ],
  demand: [{ name: 'highest half hour', rate: 7.5 }],
  demandWindowMinutes: 30,
  fixedPerMonth: 120,
  taxPercent: 10,
  carbonKgPerKwh: 0.15,
};

const CASE: Demo['caseFile'] = {
  format: 'nth-pump/case/1',
  name: 'A drive on each of the three pumps',
  baseline: 'fixed-speed',
  proposed: 'best-count',
  rates: 'real',
  capital: 145_000,
  maintenanceSavingPerYear: -1_200,
  years: 15,
  discountRate: 0.06,
  energyEscalation: 0.01,
  targetPaybackYears: 7,
};
