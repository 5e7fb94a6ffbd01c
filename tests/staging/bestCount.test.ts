import { expect, it } from 'vitest';
import { stagedPumpsOf } from '../../server/staging/stagedPumpsOf.ts';
import { readStation } from '../../server/station/readStation.ts';
import { aStationFile } from '../support/aStation.ts';
import { flowLog } from '../support/comparing.ts';
import { run } from '../support/running.ts';

/** Where every efficiency is one number, so many pumps draw ρgQH/η whatever their count. */
it('of counts that draw alike best-count runs the fewest', () => {
  const [pump] = aStationFile().pumps as [Record<string, object>];
  const points = [10, 30, 50, 70, 90].map((flow) => ({ flow, head: 33 - 0.003 * flow ** 2, efficiency: 0.75 }));
  const station = readStation(aStationFile({ pumps: [{ ...pump, count: 3, curve: { points } }] }), 'station.json');
  const flows = [0.036, 0.041, 0.047, 0.053, 0.059];
  const pumps = stagedPumpsOf(station, station.duty);
  for (const flow of flows) {
    const alike = [1, 2, 3].map((count) => pumps.trim(count, flow).power);
    for (const power of alike) expect(Math.abs(power / alike[0]! - 1)).toBeLessThan(1e-13);
  }
  expect(Array.from(run(station, 'best-count', flowLog(flows)).highCount)).toEqual([1, 1, 1, 1, 1]);
});
