import { dutyPumpsAreEqual } from '../station/station.ts';
import type { Comparison } from './compare.ts';
import { capacityOf } from './crossings.ts';
import { fixedSpeed } from './rules/fixedSpeed.ts';
import { bestCount } from './rules/trimmedCounts.ts';
import { placesOf } from './setLadder.ts';
import { stagedPumpsOf } from './stagedPumpsOf.ts';

/** Which count of pumps is best over flow and static head, and the hours the record spends in each cell. */
export interface BestCountMap {
  /** Middle of each column [m³/s] and of each row [m]. */
  readonly flowM3s: readonly number[];
  readonly staticHeadM: readonly number[];
  /** By row, then column: the best count (0 where none can), the pumps running at most where states share the time. */
  readonly count: readonly (readonly number[])[];
  /** For pumps that differ: the sets met, by names of their pumps, and by row, then column, which of them is best. */
  readonly sets: readonly (readonly string[])[];
  readonly set: readonly (readonly (number | null)[])[];
  /** By row, then column: hours of the record. */
  readonly hours: readonly (readonly number[])[];
}

const COLUMNS = 60;
const ROWS = 24;

/** Where the record's static head does not vary, the map spans ±25 % of it, so that one sees where the steps would move. */
export function bestCountMap(comparison: Comparison): BestCountMap {
  const { station, duty, record } = comparison;
  const pumps = stagedPumpsOf(station, duty);
  const { low, high } = headSpan(comparison);
  const top = record.flow.reduce((most, flow) => Math.max(most, flow), capacityOf(pumps, pumps.most)) * 1.001;
  const flowM3s = Array.from({ length: COLUMNS }, (_, i) => (top * (i + 0.5)) / COLUMNS);
  const staticHeadM = Array.from({ length: ROWS }, (_, i) => low + ((high - low) * (i + 0.5)) / ROWS);
  const decide = (pumps.onDrives ? bestCount : fixedSpeed).start(pumps, record);
  const bits = staticHeadM.map((head) => {
    pumps.at(head);
    return flowM3s.map((flow) => {
      const { high: state, shortfall } = decide(flow);
      return shortfall > 0 ? 0 : state.set;
    });
  });
  const met = dutyPumpsAreEqual(duty) ? [] : setsByFlow(bits);
  const names = (set: number) => placesOf(set).map((place) => duty[place]!.name);
  const hours = staticHeadM.map(() => new Array<number>(COLUMNS).fill(0));
  for (let i = 0; i < record.flow.length; i++) {
    const head = typeof record.staticHead === 'number' ? record.staticHead : record.staticHead[i]!;
    const row = Math.min(ROWS - 1, Math.max(0, Math.floor(((head - low) / (high - low)) * ROWS)));
    const column = Math.min(COLUMNS - 1, Math.floor((record.flow[i]! / top) * COLUMNS));
    hours[row]![column]! += record.seconds[i]! / 3600;
  }
  return {
    flowM3s,
    staticHeadM,
    count: bits.map((row) => row.map((set) => placesOf(set).length)),
    sets: met.map(names),
    set: met.length === 0 ? [] : bits.map((row) => row.map((set) => (set === 0 ? null : met.indexOf(set)))),
    hours,
  };
}

/** The sets of a map, those for small flows first. */
function setsByFlow(bits: readonly (readonly number[])[]): number[] {
  const met = new Map<number, { columns: number; cells: number }>();
  for (const row of bits) {
    for (const [column, set] of row.entries()) {
      const { columns, cells } = met.get(set) ?? { columns: 0, cells: 0 };
      if (set > 0) met.set(set, { columns: columns + column, cells: cells + 1 });
    }
  }
  const middle = (set: number) => met.get(set)!.columns / met.get(set)!.cells;
  return [...met.keys()].sort((a, b) => middle(a) - middle(b));
}

/** Lowest and highest static head of a record [m]; the station's number, a quarter either way, where it is one. */
export function headSpan({ record }: Comparison): { low: number; high: number; varies: boolean } {
  if (typeof record.staticHead !== 'number') {
    let low = Infinity;
    let high = -Infinity;
    for (const head of record.staticHead) {
      if (head < low) low = head;
      if (head > high) high = head;
    }
    if (high > low) return { low, high, varies: true };
    return { low: low * 0.75, high: Math.max(low * 1.25, low + 1), varies: false };
  }
  const head = record.staticHead;
  return { low: head * 0.75, high: Math.max(head * 1.25, head + 1), varies: false };
}
