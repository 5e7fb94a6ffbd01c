import { describe, expect, it } from 'vitest';
import { Contenders } from '../../server/staging/contenders.ts';
import { stagedPumpsOf } from '../../server/staging/stagedPumpsOf.ts';
import { readStation } from '../../server/station/readStation.ts';
import { dice, madeStation } from '../support/madeStations.ts';

describe('counts that may be the best at a flow', () => {
  it('have the count of least power among them, wherever any meets the flow', () => {
    let left = 0;
    for (let seed = 0; seed < 60; seed++) {
      const station = readStation(madeStation(seed), 'station.json');
      const pumps = stagedPumpsOf(station, station.duty);
      const contenders = new Contenders(pumps);
      const roll = dice(seed + 3);
      const most = pumps.flatOut(pumps.most).flow;
      for (let i = 0; i < 500; i++) {
        const flow = 1.03 * most * roll();
        let best = 0;
        let least = Infinity;
        for (let n = 1; n <= pumps.most; n++) {
          const { feasible, power } = pumps.trim(n, flow);
          if (!feasible || power >= least) continue;
          least = power;
          best = n;
        }
        const counts = contenders.at(flow);
        if (best > 0) expect(counts, `station ${seed} at ${flow} m³/s`).toContain(best);
        left += pumps.most - counts.length;
      }
    }
    // They are of use only where they leave counts out.
    expect(left).toBeGreaterThan(30_000);
  });
});
