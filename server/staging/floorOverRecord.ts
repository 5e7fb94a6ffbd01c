import type { Pump } from '../hydraulics/pump.ts';
import type { Station } from '../station/station.ts';
import type { DemandRecord } from './demandRecord.ts';
import { Floor, type FloorTable } from './floor.ts';

/** So many different static heads are solved one by one; more are read off between nodes. */
const MOST_EXACT = 24;

/** Floor power at any flow and static head of a record [W], standby not included. */
export type FloorPower = (flow: number, staticHead: number) => number;

/**
 * Floor power for the static heads that a record has. A few different heads are solved each; many are interpolated
 * (cubic) between evenly spaced ones, good to about 1e-5 away from the flows where the best arrangement changes.
 */
export function floorPower(station: Station, duty: readonly Pump[], record: DemandRecord): FloorPower {
  const floor = new Floor(station, duty);
  if (typeof record.staticHead === 'number') {
    const table = floor.table(record.staticHead);
    return (flow) => table.at(flow);
  }
  const heads = new Set<number>();
  for (const head of record.staticHead) {
    heads.add(head);
    if (heads.size > MOST_EXACT) break;
  }
  if (heads.size <= MOST_EXACT) return (flow, head) => floor.table(head).at(flow);
  let least = Infinity;
  let most = -Infinity;
  for (const head of record.staticHead) {
    if (head < least) least = head;
    if (head > most) most = head;
  }
  const step = (most - least) / (MOST_EXACT - 1);
  const tables = Array.from({ length: MOST_EXACT }, (_, i) => floor.table(least + i * step));
  return (flow, head) => between(tables, (head - least) / step, flow);
}

function between(tables: readonly FloorTable[], x: number, flow: number): number {
  const first = Math.min(Math.max(Math.floor(x) - 1, 0), tables.length - 4);
  let sum = 0;
  for (let j = first; j < first + 4; j++) {
    let weight = tables[j]!.at(flow);
    for (let k = first; k < first + 4; k++) if (k !== j) weight *= (x - k) / (j - k);
    sum += weight;
  }
  return sum;
}
