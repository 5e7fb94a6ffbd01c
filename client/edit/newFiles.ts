import type { StationFile } from '../../server/station/stationFile.ts';
import type { TariffFile } from '../../server/tariff/tariffFile.ts';

/** Where a reader seems to be, as far as their browser tells. */
export interface Place {
  readonly timeZone: string;
  readonly us: boolean;
}

/** Zone and family of units as the browser has them, to start a new file with. */
export function placeOfReader(): Place {
  const { timeZone, locale } = new Intl.DateTimeFormat().resolvedOptions();
  return { timeZone, us: locale.endsWith('-US') };
}

/** A station to begin with: two equal pumps that meet a plain system, every number to be replaced. */
export function newStation({ timeZone, us }: Place): StationFile {
  return {
    format: 'nth-pump/station/1',
    name: 'New station',
    timeZone,
    currency: us ? 'USD' : 'EUR',
    units: us ? { flow: 'gpm', head: 'ft', power: 'hp' } : { flow: 'L/s', head: 'm', power: 'kW' },
    surplus: 'storage',
    system: { staticHead: us ? 40 : 12, friction: { coefficient: us ? 0.0000132 : 0.001, exponent: 2 } },
    pumps: [
      {
        name: 'P',
        role: 'duty',
        count: 2,
        ratedSpeed: us ? 1770 : 1475,
        curve: us
          ? { shutoffHead: 98, operatingPoint: { flow: 800, head: 72 }, bestFlow: 800, bestEfficiency: 0.78 }
          : { shutoffHead: 30, operatingPoint: { flow: 50, head: 22 }, bestFlow: 50, bestEfficiency: 0.78 },
        motor: { ratedPower: us ? 25 : 18.5, serviceFactor: us ? 1.15 : 1, efficiency: 0.92 },
        drive: { fitted: false, minSpeed: 0.5, maxSpeed: 1, efficiency: 0.97 },
      },
    ],
  };
}

/** A tariff to begin with: one price by day and one by night. */
export function newTariff({ timeZone }: Pick<Place, 'timeZone'>, currency: string): TariffFile {
  return {
    format: 'nth-pump/tariff/1',
    name: 'New tariff',
    currency,
    timeZone,
    energy: [
      { name: 'night', from: '23:00', to: '07:00', rate: 0.12 },
      { name: 'day', rate: 0.2 },
    ],
    fixedPerMonth: 0,
  };
}
