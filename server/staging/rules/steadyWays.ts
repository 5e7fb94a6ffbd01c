import { setsInUse } from '../bestSets.ts';
import type { DemandRecord } from '../demandRecord.ts';
import { setOf } from '../equalPumps.ts';
import { FixedSet } from '../fixedSet.ts';
import { MixedPumps } from '../mixedPumps.ts';
import { staticHeadAt } from '../rule.ts';
import type { SetCurve } from '../setCurve.ts';
import type { StagedPumps } from '../stagedPumps.ts';
import { type Action, held, type State } from '../state.ts';
import { eachCandidate, flatOut } from './trimmedCounts.ts';

/** The running sets to choose from, by number; 0 is off. What each costs in an interval, and whether it may run there. */
export interface Ways {
  readonly size: number;
  /** Energy and cycling starts of the interval [J]. */
  readonly cost: Float64Array;
  /** Pumps that keep running through the interval, as bits: none where the set rests for part of it. */
  readonly base: Uint32Array;
  /** 1 where it may run. */
  readonly may: Uint8Array;
  /** Works these out for an interval of flow [m³/s] and length [s]. */
  fill(flow: number, seconds: number): void;
  action(way: number, flow: number): Action;
}

/** Counts where pumps are equal, sets where they differ. */
export function waysOf(pumps: StagedPumps, record: DemandRecord): Ways {
  return pumps instanceof MixedPumps ? new SetWays(pumps, record) : new CountWays(pumps);
}

/** Counts of equal pumps: way n is n pumps. */
class CountWays implements Ways {
  readonly size: number;
  readonly cost: Float64Array;
  readonly base: Uint32Array;
  readonly may: Uint8Array;
  private readonly pumps: StagedPumps;

  constructor(pumps: StagedPumps) {
    this.pumps = pumps;
    this.size = pumps.most + 1;
    this.cost = new Float64Array(this.size);
    this.base = new Uint32Array(this.size);
    this.may = new Uint8Array(this.size);
  }

  fill(flow: number, seconds: number): void {
    const { pumps, cost, base, may } = this;
    may.fill(0);
    if (flow === 0) {
      may[0] = 1;
      return;
    }
    let any = false;
    eachCandidate(pumps, flow, (trim) => {
      any = true;
      const n = trim.count;
      may[n] = 1;
      base[n] = trim.rest ? 0 : setOf(n);
      cost[n] = trim.power * seconds + cyclePenalty(pumps, trim.rest, flow, seconds);
    });
    if (any) return;
    const n = pumps.most;
    may[n] = 1;
    base[n] = setOf(n);
    cost[n] = pumps.flatOut(n).power * seconds;
  }

  action(way: number, flow: number): Action {
    if (way === 0) return held(this.pumps.off);
    const trim = this.pumps.trim(way, flow);
    return trim.feasible ? this.pumps.action(trim, flow) : flatOut(this.pumps, flow);
  }
}

/** With more pumps than this only some of all sets are looked at: their number doubles with each. */
const MOST_ALL_SETS = 4;

/** What speaks against a set at a flow, as bits. */
const OVERLOADED = 1;
const OUTSIDE = 2;
const CANNOT = 4;

/** Sets of pumps that differ. */
class SetWays implements Ways {
  readonly size: number;
  readonly cost: Float64Array;
  readonly base: Uint32Array;
  readonly may: Uint8Array;
  private readonly pumps: MixedPumps;
  private readonly sets: readonly FixedSet[];
  /** Where the whole record has one static head, its figures are read off curves. */
  private readonly curves: readonly SetCurve[] | null;
  private readonly rests: (State | null)[];
  private readonly doubts: Uint8Array;

  constructor(pumps: MixedPumps, record: DemandRecord) {
    this.pumps = pumps;
    if (record.flow.length > 0) pumps.at(staticHeadAt(record, 0));
    const full = setOf(pumps.most);
    const bits = new Set<number>();
    if (pumps.most <= MOST_ALL_SETS) for (let set = 1; set <= full; set++) bits.add(set);
    else {
      for (const set of setsInUse(pumps)) bits.add(set);
      for (let n = 1; n <= pumps.most; n++) bits.add(setOf(n));
    }
    this.sets = [...bits].sort((a, b) => a - b).map((set) => new FixedSet(pumps, set));
    this.curves = typeof record.staticHead === 'number' ? this.sets.map((set) => set.curve()) : null;
    this.size = this.sets.length + 1;
    this.cost = new Float64Array(this.size);
    this.base = new Uint32Array(this.size);
    this.may = new Uint8Array(this.size);
    this.rests = new Array(this.size).fill(null);
    this.doubts = new Uint8Array(this.size);
  }

  fill(flow: number, seconds: number): void {
    const { pumps, cost, base, may } = this;
    may.fill(0);
    if (flow === 0) {
      may[0] = 1;
      return;
    }
    const { doubts, rests, sets, curves } = this;
    // As for counts: those that overload no motor where there are any, of these those inside the range.
    let sound = false;
    let inside = false;
    let soundInside = false;
    for (let i = 0; i < sets.length; i++) {
      const read = curves ? (curves[i]!.read(flow) ? curves[i]! : null) : sets[i]!.figuresAt(flow);
      doubts[i] = CANNOT;
      if (!read) continue;
      doubts[i] = (read.overloaded ? OVERLOADED : 0) + (read.inside ? 0 : OUTSIDE);
      if (!read.overloaded) sound = true;
      if (read.inside) inside = true;
      if (doubts[i] === 0) soundInside = true;
      rests[i] = read.rest;
      cost[i + 1] = read.power * seconds;
    }
    const forbidden = (sound ? OVERLOADED : 0) + ((sound ? soundInside : inside) ? OUTSIDE : 0) + CANNOT;
    let any = false;
    for (let i = 0; i < sets.length; i++) {
      if ((doubts[i]! & forbidden) !== 0) continue;
      any = true;
      may[i + 1] = 1;
      const rest = rests[i]!;
      base[i + 1] = rest ? 0 : sets[i]!.set;
      if (rest) cost[i + 1]! += cyclePenalty(pumps, rest, flow, seconds);
    }
    if (any) return;
    const last = this.size - 1;
    const state = pumps.flatOut(pumps.most);
    may[last] = 1;
    base[last] = state.set;
    cost[last] = state.power * seconds;
  }

  action(way: number, flow: number): Action {
    if (way === 0) return held(this.pumps.off);
    return this.sets[way - 1]!.at(flow)?.action ?? flatOut(this.pumps, flow);
  }
}

/** What the starts within an interval count for [J], where a set shares it with rest; 0 where the volume is unknown. */
function cyclePenalty({ station }: StagedPumps, rest: State | null, flow: number, seconds: number): number {
  const volume = station.storage.activeVolume;
  if (!rest || volume === null) return 0;
  return (station.steady.startPenalty * rest.count * seconds) / (volume / flow + volume / (rest.flow - flow));
}
