import type { DemandRecord } from '../demandRecord.ts';
import { type Decide, type Rule, staticHeadAt } from '../rule.ts';
import type { StagedPumps, Trim } from '../stagedPumps.ts';
import { type Action, held } from '../state.ts';
import { eachCandidate, flatOut } from './trimmedCounts.ts';

/**
 * As best-count, but over the whole record: least energy + start penalty × starts, where a count may change only after
 * the minimum run, except where it cannot meet the flow. Exact, by dynamic programming; each gap begins afresh.
 */
export const steady: Rule = {
  id: 'steady',
  drives: 'all',
  start(pumps, record): Decide {
    const counts = bestCounts(pumps, record);
    let i = 0;
    return (flow) => actionOf(pumps, counts[i++]!, flow);
  },
};

function actionOf(pumps: StagedPumps, count: number, flow: number): Action {
  if (count === 0) return held(pumps.off);
  const trim = pumps.trim(count, flow);
  return trim.feasible ? pumps.action(trim, flow) : flatOut(pumps, flow);
}

/** What each count costs in one interval, and whether it may run there. */
class IntervalCosts {
  readonly cost: Float64Array;
  /** Pumps that keep running through the interval: none where the count rests for part of it. */
  readonly base: Uint8Array;
  readonly may: Uint8Array;
  private readonly pumps: StagedPumps;
  private readonly penalty: number;

  constructor(pumps: StagedPumps) {
    this.pumps = pumps;
    this.penalty = pumps.station.steady.startPenalty;
    this.cost = new Float64Array(pumps.most + 1);
    this.base = new Uint8Array(pumps.most + 1);
    this.may = new Uint8Array(pumps.most + 1);
  }

  fill(flow: number, seconds: number): void {
    const { pumps, cost, base, may } = this;
    may.fill(0);
    if (flow === 0) {
      may[0] = 1;
      cost[0] = 0;
      base[0] = 0;
      return;
    }
    let any = false;
    eachCandidate(pumps, flow, (trim) => {
      any = true;
      const n = trim.count;
      may[n] = 1;
      base[n] = trim.rest ? 0 : n;
      cost[n] = trim.power * seconds + this.penalty * this.cycleStarts(trim, flow, seconds);
      return false;
    });
    if (any) return;
    const n = pumps.most;
    may[n] = 1;
    base[n] = n;
    cost[n] = pumps.flatOut(n).power * seconds;
  }

  /** Starts within the interval of a count that shares it with rest; 0 where the volume is unknown. */
  private cycleStarts(trim: Trim, flow: number, seconds: number): number {
    const volume = this.pumps.station.storage.activeVolume;
    if (!trim.rest || volume === null) return 0;
    return (seconds / (volume / flow + volume / (trim.rest.flow - flow))) * trim.count;
  }
}

/** Entries into a count that have not yet run their least time, oldest first. */
interface Waiting {
  entry: number[];
  value: number[];
  head: number;
}

/**
 * The count in each interval. For each count the cheapest way to be in it and free to leave is carried along, and the
 * ways in that must still wait; a way's cost since its entry is the same for all of them, so it is kept once, as a sum.
 */
function bestCounts(pumps: StagedPumps, record: DemandRecord): Uint8Array {
  const { minRun, startPenalty } = pumps.station.steady;
  const n = record.flow.length;
  const sets = pumps.most + 1;
  const fromCount = new Uint8Array(n * sets);
  const fromEntry = new Int32Array(n * sets).fill(-1);
  const free = new Float64Array(sets).fill(Infinity);
  const freeEntry = new Int32Array(sets).fill(-1);
  const since = new Float64Array(sets);
  const waiting: Waiting[] = Array.from({ length: sets }, () => ({ entry: [], value: [], head: 0 }));
  const leave = new Float64Array(sets);
  const leaveEntry = new Int32Array(sets);
  const enter = new Float64Array(sets);
  const now = new IntervalCosts(pumps);
  const baseBefore = new Uint8Array(sets);
  const chosen = new Uint8Array(n);
  let stretch = 0;

  const start = (i: number) => record.startMs[i]! / 1000;
  const rise = (from: number, to: number) => (to > from ? to - from : 0);

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
      // A count that cannot meet the flow may go at once, however short it has run.
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
        const cost = leave[from]! + startPenalty * rise(baseBefore[from]!, now.base[to]!);
        if (cost >= enter[to]!) continue;
        enter[to] = cost;
        best = from;
      }
      if (best < 0) continue;
      fromCount[i * sets + to] = best;
      fromEntry[i * sets + to] = leaveEntry[best]!;
    }
    for (let s = 0; s < sets; s++) {
      if (now.may[s]) {
        const stay = now.cost[s]! + startPenalty * rise(baseBefore[s]!, now.base[s]!);
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

  /** Ways into a count that have run their least time become free. */
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
      set = fromCount[at]!;
      entry = fromEntry[at]!;
    }
  }
}
