import type { DemandRecord } from '../demandRecord.ts';
import { type Decide, type Rule, staticHeadAt } from '../rule.ts';
import type { StagedPumps } from '../stagedPumps.ts';
import { type Ways, waysOf } from './steadyWays.ts';

/**
 * As best-count, but over the whole record: least energy + start penalty × starts, where the running set may change only
 * after the minimum run, except where it cannot meet the flow. Exact, by dynamic programming; each gap begins afresh. Of
 * equal pumps the sets are the counts; of up to four that differ, all sets; of more, those that are the best at some flow
 * and those of the station's own order.
 */
export const steady: Rule = {
  id: 'steady',
  drives: 'all',
  start(pumps, record): Decide {
    const ways = waysOf(pumps, record);
    const chosen = bestSequence(pumps, ways, record);
    let i = 0;
    return (flow) => ways.action(chosen[i++]!, flow);
  },
};

/** Pumps of `to` that are not in `from`: so many start. */
function startsBetween(from: number, to: number): number {
  let rising = to & ~from;
  let count = 0;
  for (; rising !== 0; rising &= rising - 1) count++;
  return count;
}

/** Entries into a set that have not yet run their least time, oldest first. */
interface Waiting {
  entry: number[];
  value: number[];
  head: number;
}

/**
 * The way taken in each interval. For each the cheapest path that is in it and free to leave is carried along, and the
 * paths that must still wait; what a path costs since its entry is the same for all of them, so it is kept once, as a sum.
 */
function bestSequence(pumps: StagedPumps, now: Ways, record: DemandRecord): Uint16Array {
  const { minRun, startPenalty } = pumps.station.steady;
  const n = record.flow.length;
  const sets = now.size;
  const fromWay = new Uint16Array(n * sets);
  const fromEntry = new Int32Array(n * sets).fill(-1);
  const free = new Float64Array(sets).fill(Infinity);
  const freeEntry = new Int32Array(sets).fill(-1);
  const since = new Float64Array(sets);
  const waiting: Waiting[] = Array.from({ length: sets }, () => ({ entry: [], value: [], head: 0 }));
  const leave = new Float64Array(sets);
  const leaveEntry = new Int32Array(sets);
  const enter = new Float64Array(sets);
  const baseBefore = new Uint32Array(sets);
  const chosen = new Uint16Array(n);
  let stretch = 0;

  const start = (i: number) => record.startMs[i]! / 1000;

  for (let i = 0; i < n; i++) {
    pumps.at(staticHeadAt(record, i));
    now.fill(record.flow[i]!, record.seconds[i]!);
    const fresh = i === 0 || Math.abs(start(i) - start(i - 1) - record.seconds[i - 1]!) > 0.5;
    if (fresh) {
      if (i > 0) decode(stretch, i - 1);
      stretch = i;
      free.fill(Infinity);
      since.fill(0);
      for (const wait of waiting) Object.assign(wait, { entry: [], value: [], head: 0 });
      for (let s = 0; s < sets; s++) if (now.may[s]) push(s, i, now.cost[s]!);
    } else step(i);
    baseBefore.set(now.base);
  }
  if (n > 0) decode(stretch, n - 1);
  return chosen;

  function push(s: number, i: number, value: number): void {
    waiting[s]!.entry.push(i);
    waiting[s]!.value.push(value - since[s]!);
  }

  function step(i: number): void {
    for (let s = 0; s < sets; s++) {
      release(s, i);
      leave[s] = free[s]!;
      leaveEntry[s] = freeEntry[s]!;
      if (now.may[s]) continue;
      // A set that cannot meet the flow may go at once, however short it has run.
      const { entry, value, head } = waiting[s]!;
      for (let k = head; k < entry.length; k++) {
        if (value[k]! + since[s]! >= leave[s]!) continue;
        leave[s] = value[k]! + since[s]!;
        leaveEntry[s] = entry[k]!;
      }
    }
    for (let to = 0; to < sets; to++) {
      enter[to] = Infinity;
      if (!now.may[to]) continue;
      let best = -1;
      for (let from = 0; from < sets; from++) {
        if (from === to || leave[from] === Infinity) continue;
        const cost = leave[from]! + startPenalty * startsBetween(baseBefore[from]!, now.base[to]!);
        if (cost >= enter[to]!) continue;
        enter[to] = cost;
        best = from;
      }
      if (best < 0) continue;
      fromWay[i * sets + to] = best;
      fromEntry[i * sets + to] = leaveEntry[best]!;
    }
    for (let s = 0; s < sets; s++) {
      if (now.may[s]) {
        const stay = now.cost[s]! + startPenalty * startsBetween(baseBefore[s]!, now.base[s]!);
        since[s]! += stay;
        free[s]! += stay;
        if (enter[s]! < Infinity) push(s, i, enter[s]! + now.cost[s]!);
      } else {
        free[s] = Infinity;
        since[s] = 0;
        Object.assign(waiting[s]!, { entry: [], value: [], head: 0 });
      }
    }
  }

  /** Paths into a set that have run their least time become free. */
  function release(s: number, i: number): void {
    const wait = waiting[s]!;
    while (wait.head < wait.entry.length && start(i) - start(wait.entry[wait.head]!) >= minRun - 1e-6) {
      const value = wait.value[wait.head]! + since[s]!;
      if (value < free[s]!) {
        free[s] = value;
        freeEntry[s] = wait.entry[wait.head]!;
      }
      wait.head++;
    }
    if (wait.head > 4096) {
      wait.entry.splice(0, wait.head);
      wait.value.splice(0, wait.head);
      wait.head = 0;
    }
  }

  /** Follows the cheapest way back from the end of a stretch without gaps. */
  function decode(first: number, last: number): void {
    let set = 0;
    let entry = -1;
    let least = Infinity;
    for (let s = 0; s < sets; s++) {
      if (free[s]! < least) {
        least = free[s]!;
        set = s;
        entry = freeEntry[s]!;
      }
      const wait = waiting[s]!;
      for (let k = wait.head; k < wait.entry.length; k++) {
        const value = wait.value[k]! + since[s]!;
        if (value >= least) continue;
        least = value;
        set = s;
        entry = wait.entry[k]!;
      }
    }
    let end = last;
    while (end >= first) {
      chosen.fill(set, entry, end + 1);
      if (entry <= first) break;
      const at = entry * sets + set;
      end = entry - 1;
      set = fromWay[at]!;
      entry = fromEntry[at]!;
    }
  }
}
