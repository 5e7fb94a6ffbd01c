import { describe, expect, it } from 'vitest';
import { BestSets } from '../../server/staging/bestSets.ts';
import { MixedPumps } from '../../server/staging/mixedPumps.ts';
import { meanPower } from '../../server/staging/state.ts';
import { readStation } from '../../server/station/readStation.ts';
import { aStationFile } from '../support/aStation.ts';

/** A pump beside a train of which one machine stays at full speed, so that at least speed it still carries a good deal. */
const drive = { minSpeed: 0.6, efficiency: 0.97 };
const station = readStation(
  aStationFile({
    system: { staticHead: 14, friction: { coefficient: 0.00024 } },
    pumps: [
      {
        name: 'A',
        curve: { shutoffHead: 32, shape: 0.0021, bestFlow: 55, bestEfficiency: 0.79 },
        motor: { ratedPower: 30, efficiency: 0.93 },
        drive,
      },
      {
        name: 'T',
        train: [
          {
            curve: { shutoffHead: 14, shape: 0.0022, bestFlow: 40, bestEfficiency: 0.74 },
            motor: { efficiency: 0.91 },
            drive: null,
          },
          {
            curve: { shutoffHead: 18, shape: 0.003, bestFlow: 42, bestEfficiency: 0.76 },
            motor: { efficiency: 0.92 },
            drive,
          },
        ],
      },
    ],
  }),
  'station.json',
);

describe('a set in which one pump stays at its least speed', () => {
  it('is found between the flows of the table as it is by search at the flow itself', () => {
    const sets = new BestSets(new MixedPumps(station, station.duty));
    for (let flow = 0.03; flow < 0.12; flow += 0.00035) {
      const searched = sets.bestNow(flow)!;
      const tabled = sets.best(flow)!;
      expect(tabled, String(flow)).not.toBeNull();
      expect(meanPower(tabled) / meanPower(searched) - 1, String(flow)).toBeLessThan(1e-5); // a table of flows
    }
  });
});
