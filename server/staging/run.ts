import type { PowerSeries, SharedIntervals } from '../tariff/tariff.ts';
import { energyKwh } from '../units.ts';
import type { DemandRecord } from './demandRecord.ts';
import type { LedgerKwh } from './result.ts';
import type { Rule } from './rule.ts';
import type { StagedPumps } from './stagedPumps.ts';
import type { Action, Parts, State } from './state.ts';
import { Watch, type Watched } from './watch.ts';

/** What a rule did in each interval, by columns, and what that adds up to. */
export interface Run {
  readonly rule: Rule;
  readonly series: PowerSeries;
  /** Counts of the lower and the upper state, the time share of the upper, and the speed of its trimmed pumps. */
  readonly lowCount: Uint8Array;
  readonly highCount: Uint8Array;
  readonly share: Float32Array;
  readonly speed: Float32Array;
  readonly totals: Totals;
}

/** What a rule comes to over a record. */
export interface Totals {
  readonly energyKwh: number;
  readonly ledgerKwh: LedgerKwh;
  readonly deliveredM3: number;
  readonly shortfallM3: number;
  readonly shortfallHours: number;
  readonly peakW: number;
  readonly peakStateW: number;
  /** Seconds by pumps running, and by set of pumps (bits in the station's order). */
  readonly secondsByCount: readonly number[];
  readonly secondsBySet: ReadonlyMap<number, number>;
  readonly outsidePreferredHours: number;
  readonly outsideAllowableHours: number | null;
  readonly nearDeadHeadHours: number;
  readonly overloadHours: number;
  readonly endOfCurveHours: number;
  /** null where pumps cycle and the volume between start and stop is unknown. */
  readonly starts: number | null;
  readonly watched: Watched;
}

/** Called for each interval with what the rule did in it, for those who want more than the sums. */
export type OnAction = (interval: number, action: Action) => void;

/**
 * A rule over a record, interval by interval.
 *
 * @param pumps  what the station can do; its static head is set for each interval
 */
export function runRule(rule: Rule, pumps: StagedPumps, record: DemandRecord, onAction?: OnAction): Run {
  const { station } = pumps;
  const standby = station.standbyPower;
  const n = record.flow.length;
  const mean = new Float64Array(n);
  const delivered = new Float64Array(n);
  const shared = new SharedColumns();
  const lowCount = new Uint8Array(n);
  const highCount = new Uint8Array(n);
  const share = new Float32Array(n);
  const speed = new Float32Array(n);
  const tally = new Tally(pumps, record.suctionLevel !== null);
  const decide = rule.start(pumps, record);
  const steady = typeof record.staticHead === 'number';
  if (steady) pumps.at(record.staticHead as number);
  let end = Number.NaN;
  for (let i = 0; i < n; i++) {
    if (!steady) pumps.at((record.staticHead as Float64Array)[i]!);
    const flow = record.flow[i]!;
    const seconds = record.seconds[i]!;
    const action = decide(flow);
    const { low, high } = action;
    const start = record.startMs[i]!;
    // Half a second of slack: starts are whole milliseconds, lengths seconds.
    tally.suctionLevel = suctionLevelAt(record, i);
    tally.add(action, flow, seconds, Math.abs(start - end) < 500);
    end = start + seconds * 1000;
    const rising = action.share;
    mean[i] = low.power + rising * (high.power - low.power) + standby;
    delivered[i] = low === high ? low.flow : flow;
    lowCount[i] = low.count;
    highCount[i] = high.count;
    share[i] = rising;
    speed[i] = high.speed;
    if (low !== high) shared.push(i, low, high, standby);
    onAction?.(i, action);
  }
  const series = {
    startMs: record.startMs,
    seconds: record.seconds,
    mean,
    flow: delivered,
    shared: shared.columns(),
    activeVolume: station.storage.activeVolume,
  };
  return { rule, series, lowCount, highCount, share, speed, totals: tally.totals() };
}

function suctionLevelAt({ suctionLevel }: DemandRecord, i: number): number {
  if (suctionLevel === null) return Number.NaN;
  return typeof suctionLevel === 'number' ? suctionLevel : suctionLevel[i]!;
}

/** The two states of the intervals that are shared: of some rules nearly all, of others a few. */
class SharedColumns {
  private length = 0;
  private interval = new Uint32Array(64);
  private low = new Float64Array(64);
  private high = new Float64Array(64);
  private lowFlow = new Float64Array(64);
  private highFlow = new Float64Array(64);

  push(interval: number, low: State, high: State, standby: number): void {
    if (this.length === this.interval.length) this.grow();
    const k = this.length++;
    this.interval[k] = interval;
    this.low[k] = low.power + standby;
    this.high[k] = high.power + standby;
    this.lowFlow[k] = low.flow;
    this.highFlow[k] = high.flow;
  }

  private grow(): void {
    const longer = <Column extends Uint32Array | Float64Array>(to: Column, from: Column): Column => {
      to.set(from);
      return to;
    };
    const size = 2 * this.length;
    this.interval = longer(new Uint32Array(size), this.interval);
    this.low = longer(new Float64Array(size), this.low);
    this.high = longer(new Float64Array(size), this.high);
    this.lowFlow = longer(new Float64Array(size), this.lowFlow);
    this.highFlow = longer(new Float64Array(size), this.highFlow);
  }

  columns(): SharedIntervals {
    const { length } = this;
    return {
      interval: this.interval.slice(0, length),
      low: this.low.slice(0, length),
      high: this.high.slice(0, length),
      lowFlow: this.lowFlow.slice(0, length),
      highFlow: this.highFlow.slice(0, length),
    };
  }
}

/** Sums over a record; every sum is of its own quantity, none is found as a remainder. */
class Tally {
  /** At the suction, of the interval that comes next [m]; NaN where unknown. */
  suctionLevel = Number.NaN;
  private readonly pumps: StagedPumps;
  private readonly watch: Watch;
  private readonly standby: number;
  private readonly volume: number | null;
  private energy = 0;
  private readonly parts: Parts = { lift: 0, pipeFriction: 0, branch: 0, valve: 0, pump: 0, motor: 0, drive: 0 };
  private seconds = 0;
  private delivered = 0;
  private shortfall = 0;
  private shortfallSeconds = 0;
  private peak = 0;
  private peakState = 0;
  private outsidePreferred = 0;
  private outsideAllowable = 0;
  private nearDeadHead = 0;
  private overload = 0;
  private endOfCurve = 0;
  private starts = 0;
  private startsKnown = true;
  private before = -1;
  private readonly byCount: number[];
  private readonly bySet = new Map<number, number>();
  /** The set that ran last and its seconds, until another runs: sets change seldom, maps are slow. */
  private lastSet = 0;
  private lastSetSeconds = 0;

  constructor(pumps: StagedPumps, suctionKnown: boolean) {
    this.pumps = pumps;
    this.watch = new Watch(pumps.station, pumps.duty, suctionKnown);
    this.standby = pumps.station.standbyPower;
    this.volume = pumps.station.storage.activeVolume;
    this.byCount = new Array(pumps.most + 1).fill(0);
  }

  add(action: Action, flow: number, seconds: number, adjacent: boolean): void {
    const { low, high, share } = action;
    const mean = low.power + share * (high.power - low.power) + this.standby;
    this.seconds += seconds;
    this.energy += mean * seconds;
    if (mean > this.peak) this.peak = mean;
    this.delivered += (low.flow + share * (high.flow - low.flow)) * seconds;
    if (action.shortfall > 1e-12 * flow) {
      this.shortfall += action.shortfall * seconds;
      this.shortfallSeconds += seconds;
    }
    if (share < 1) this.addState(low, (1 - share) * seconds);
    if (share > 0) this.addState(high, share * seconds);
    this.addStarts(action, flow, seconds, adjacent);
  }

  private addState(state: State, seconds: number): void {
    const { station } = this.pumps;
    this.byCount[state.count]! += seconds;
    if (state.set !== this.lastSet) this.closeSet(state.set);
    this.lastSetSeconds += seconds;
    const power = state.power + this.standby;
    if (power > this.peakState) this.peakState = power;
    if (state.count === 0) return;
    this.watch.add(state, seconds, this.suctionLevel);
    state.addParts(this.parts, seconds);
    const { doubts } = state;
    if (doubts.overloaded) this.overload += seconds;
    if (doubts.atEndOfCurve) this.endOfCurve += seconds;
    if (doubts.outsidePreferred) this.outsidePreferred += seconds;
    if (station.allowable) {
      if (doubts.outsideAllowable) this.outsideAllowable += seconds;
    } else if (doubts.nearDeadHead) this.nearDeadHead += seconds;
  }

  private closeSet(next: number): void {
    const seconds = this.lastSetSeconds;
    if (seconds > 0) this.bySet.set(this.lastSet, (this.bySet.get(this.lastSet) ?? 0) + seconds);
    this.lastSet = next;
    this.lastSetSeconds = 0;
  }

  /**
   * Starts: pumps that keep running and did not before (of the lower state, where two share), and one start per cycle for
   * each pump of the higher state that the lower one rests. The first interval and the first after a gap start free.
   */
  private addStarts(action: Action, flow: number, seconds: number, adjacent: boolean): void {
    const { low, high, share } = action;
    const base = share >= 1 ? high.set : low.set;
    if (adjacent && this.before >= 0) this.starts += pumpsRisen(this.before, base);
    this.before = base;
    if (share <= 0 || share >= 1 || high.set === low.set) return;
    if (this.volume === null) {
      this.startsKnown = false;
      return;
    }
    const cycle = this.volume / (flow - low.flow) + this.volume / (high.flow - flow);
    this.starts += (seconds / cycle) * pumpsRisen(low.set, high.set);
  }

  totals(): Totals {
    const kwh = (joules: number) => energyKwh(joules, 1);
    const { station } = this.pumps;
    this.closeSet(0);
    return {
      energyKwh: kwh(this.energy),
      ledgerKwh: {
        lift: kwh(this.parts.lift),
        pipeFriction: kwh(this.parts.pipeFriction),
        branch: kwh(this.parts.branch),
        valve: kwh(this.parts.valve),
        pump: kwh(this.parts.pump),
        motor: kwh(this.parts.motor),
        drive: kwh(this.parts.drive),
        standby: kwh(this.standby * this.seconds),
      },
      deliveredM3: this.delivered,
      shortfallM3: this.shortfall,
      shortfallHours: this.shortfallSeconds / 3600,
      peakW: this.peak,
      peakStateW: this.peakState,
      secondsByCount: this.byCount,
      secondsBySet: this.bySet,
      outsidePreferredHours: this.outsidePreferred / 3600,
      outsideAllowableHours: station.allowable ? this.outsideAllowable / 3600 : null,
      nearDeadHeadHours: this.nearDeadHead / 3600,
      overloadHours: this.overload / 3600,
      endOfCurveHours: this.endOfCurve / 3600,
      starts: this.startsKnown ? this.starts : null,
      watched: this.watch.watched(),
    };
  }
}

/** Pumps of one set that are not in another, told by bits. */
function pumpsRisen(from: number, to: number): number {
  let count = 0;
  for (let rising = to & ~from; rising !== 0; rising &= rising - 1) count++;
  return count;
}
