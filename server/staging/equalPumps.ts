import type { Pump } from '../hydraulics/pump.ts';
import { root } from '../hydraulics/roots.ts';
import { systemHead } from '../hydraulics/systemCurve.ts';
import type { Station } from '../station/station.ts';
import type { OneTrimmed, StagedPumps, Trim } from './stagedPumps.ts';
import { type Action, held, isInside, SLACK, State, shared } from './state.ts';

/**
 * What n equal pumps of a station can do at a static head. States that depend on the static head alone are kept until
 * it changes, so a record with a steady static head solves them once.
 */
export class EqualPumps implements StagedPumps {
  readonly most: number;
  readonly pump: Pump;
  readonly duty: readonly Pump[];
  readonly station: Station;
  readonly onDrives: boolean;
  readonly drivesFitted: boolean;
  staticHead: number;
  off: State;
  private fixedStates: (State | undefined)[] = [];
  private lowStates: (State | undefined)[] = [];
  private insideStates: (State | null | undefined)[] = [];
  private fullStates: (State | undefined)[] = [];
  private leastOfOne: (State | undefined)[] = [];
  private ratedOfOne: (State | undefined)[] = [];
  private readonly trims: Trim[] = [];
  /** The system's head at the flow last asked for, which is asked for once a count. */
  private askedFlow = Number.NaN;
  private askedHead = Number.NaN;

  constructor(station: Station, pumps: readonly Pump[]) {
    this.station = station;
    this.duty = pumps;
    this.pump = pumps[0]!;
    this.onDrives = this.pump.hasDrive;
    this.drivesFitted = this.pump.driveFitted;
    this.most = pumps.length;
    this.staticHead = station.staticHead;
    this.off = new State(station, this.staticHead, 0, []);
    for (let n = 0; n <= this.most; n++) {
      this.trims.push({ count: n, feasible: false, power: NaN, speed: 1, overloaded: false, inside: true, rest: null });
    }
  }

  /** Sets the static head [m] of what is asked next. */
  at(staticHead: number): void {
    if (staticHead === this.staticHead) return;
    this.staticHead = staticHead;
    this.off = new State(this.station, staticHead, 0, []);
    this.fixedStates = [];
    this.lowStates = [];
    this.insideStates = [];
    this.fullStates = [];
    this.leastOfOne = [];
    this.ratedOfOne = [];
    this.askedFlow = Number.NaN;
  }

  private systemHeadAt(flow: number): number {
    if (flow !== this.askedFlow) {
      this.askedFlow = flow;
      this.askedHead = systemHead(this.station.friction, this.staticHead, flow);
    }
    return this.askedHead;
  }

  private state(count: number, flow: number, speed: number, onDrive: boolean, power?: number): State {
    const running = [{ pump: this.pump, count, flow, speed, onDrive }];
    return new State(this.station, this.staticHead, setOf(count), running, power);
  }

  /** Flow of each of n pumps at one speed where pumps and system meet; 0 where they cannot lift the static head. */
  pointFlow(count: number, speed: number): number {
    const { pump, staticHead } = this;
    const { friction } = this.station;
    const end = pump.endFlow(speed);
    if (pump.parabola && friction.squareLaw !== null) {
      const { driven, fixed, shape } = pump.parabola;
      const spare = driven * speed * speed + fixed - staticHead;
      if (spare <= 0) return 0;
      return Math.min(Math.sqrt(spare / (shape + pump.branchLoss + friction.squareLaw * count * count)), end);
    }
    const excess = (q: number) =>
      pump.head(q, speed) - pump.branchLoss * q * q - systemHead(friction, staticHead, count * q);
    if (excess(0) <= 0) return 0;
    if (excess(end) >= 0) return end;
    return root(excess, 0, end);
  }

  /** n pumps direct on line at their operating point; off where they cannot lift the static head. */
  fixed(count: number): State {
    if (count === 0) return this.off;
    const known = this.fixedStates[count];
    if (known) return known;
    const flow = this.pointFlow(count, 1);
    const state = flow > 0 ? this.state(count, flow, 1, false) : this.off;
    this.fixedStates[count] = state;
    return state;
  }

  /** n pumps direct on line that give exactly Q, the excess head burnt in a valve. */
  throttled(count: number, flow: number): State {
    return this.state(count, flow / count, 1, false);
  }

  /** n pumps at one speed on their drives, at their operating point; off where they cannot lift the static head. */
  private atSpeed(count: number, speed: number): State {
    const flow = this.pointFlow(count, speed);
    return flow > 0 ? this.state(count, flow, speed, true) : this.off;
  }

  /** n pumps at their least speed. */
  lowest(count: number): State {
    this.lowStates[count] ??= this.atSpeed(count, this.pump.minSpeed);
    return this.lowStates[count]!;
  }

  /** n pumps flat out on their drives. */
  flatOut(count: number): State {
    this.fullStates[count] ??= this.atSpeed(count, this.pump.maxSpeed);
    return this.fullStates[count]!;
  }

  /**
   * The lowest state of n pumps on the system curve, not under minimum speed, that is inside the allowable range; null
   * where they are below it even at maximum speed.
   */
  private lowestInside(count: number): State | null {
    const known = this.insideStates[count];
    if (known !== undefined) return known;
    const state = this.findLowestInside(count);
    this.insideStates[count] = state;
    return state;
  }

  private findLowestInside(count: number): State | null {
    const from = this.station.allowable!.from;
    const { pump } = this;
    const lacks = (speed: number) => pump.leastShareOfBest(this.pointFlow(count, speed), speed, true) - from;
    if (lacks(pump.minSpeed) >= 0) return this.lowest(count);
    if (lacks(pump.maxSpeed) < 0) return null;
    let speed = root(lacks, pump.minSpeed, pump.maxSpeed);
    // The root may lie a rounding below the edge; the state meant is the first one inside.
    if (lacks(speed) < 0) speed = Math.min(speed * (1 + 1e-13), pump.maxSpeed);
    return this.atSpeed(count, speed);
  }

  /**
   * n pumps at equal speed, trimmed to the flow Q > 0 (model.md §3 to §5): what it takes, without making a state.
   * The object returned is used again at the next call for the same count.
   */
  trim(count: number, flow: number): Trim {
    const trim = this.trims[count]!;
    const { pump } = this;
    trim.rest = null;
    trim.feasible = flow <= this.flatOut(count).flow * (1 + 1e-9);
    if (!trim.feasible) return trim;
    const q = flow / count;
    const needed = pump.speedFor(q, this.systemHeadAt(flow) + pump.branchLoss * q * q);
    trim.feasible = needed <= pump.maxSpeed * (1 + 1e-12);
    if (!trim.feasible) return trim;
    const speed = Math.min(Math.max(needed, pump.minSpeed), pump.maxSpeed);
    trim.speed = speed;
    const { allowable } = this.station;
    if (this.station.surplus === 'storage') {
      let rest: State | null = null;
      if (allowable && pump.leastShareOfBest(q, speed, true) < allowable.from) {
        const inside = this.lowestInside(count);
        if (inside && inside.flow > flow) rest = inside;
      }
      if (rest === null && needed < pump.minSpeed) rest = this.lowest(count);
      if (rest !== null && rest.flow > flow) {
        trim.rest = rest;
        trim.speed = rest.speed;
        trim.power = (flow / rest.flow) * rest.power;
        return trim;
      }
    }
    trim.power = count * pump.electric(q, speed, true);
    return trim;
  }

  judged(trim: Trim, flow: number): Trim {
    const { pump } = this;
    const { allowable } = this.station;
    if (trim.rest) {
      trim.overloaded = trim.rest.doubts.overloaded;
      trim.inside = !trim.rest.doubts.outsideAllowable;
      return trim;
    }
    const q = flow / trim.count;
    trim.overloaded = pump.overload(q, trim.speed, true) > 1 + SLACK;
    trim.inside =
      allowable === null ||
      isInside(allowable, pump.leastShareOfBest(q, trim.speed, true), pump.greatestShareOfBest(q, trim.speed, true));
    return trim;
  }

  /** What the last call of `trim` found for a count. */
  known(count: number): Trim {
    return this.trims[count]!;
  }

  /** The action that a feasible trim stands for. */
  action(trim: Trim, flow: number): Action {
    if (trim.rest) return shared(this.off, trim.rest, flow);
    return held(this.state(trim.count, flow / trim.count, trim.speed, true, trim.power));
  }

  /** n pumps at equal speed that give exactly Q on the system curve; null where their speed limits do not allow it. */
  trimmedState(count: number, flow: number): State | null {
    const { pump } = this;
    const q = flow / count;
    const needed = pump.speedFor(q, this.systemHeadAt(flow) + pump.branchLoss * q * q);
    if (needed > pump.maxSpeed * (1 + 1e-9) || needed < pump.minSpeed * (1 - 1e-9)) return null;
    return this.state(count, q, Math.min(Math.max(needed, pump.minSpeed), pump.maxSpeed), true);
  }

  /** n − 1 pumps direct on line and one on its drive at a speed, at their operating point. */
  oneAt(count: number, at: 'least' | 'rated'): State {
    const known = at === 'least' ? this.leastOfOne : this.ratedOfOne;
    known[count] ??= this.findOneAt(count, at === 'least' ? this.pump.minSpeed : 1);
    return known[count]!;
  }

  private findOneAt(count: number, speed: number): State {
    if (count === 1) return this.atSpeed(1, speed);
    const { pump, station, staticHead } = this;
    const sent = (header: number) => (count - 1) * pump.flowInto(header, 1) + pump.flowInto(header, speed);
    const header = (flow: number) => systemHead(station.friction, staticHead, flow);
    const most = (count - 1) * pump.endFlow(1) + pump.endFlow(speed);
    // The header head follows from the total flow, and what the pumps send falls as it rises: one root.
    const flow = sent(header(most)) >= most ? most : root((q) => sent(header(q)) - q, 0, most);
    return this.oneDriven(count, speed, header(flow));
  }

  /** n − 1 direct on line and one at its least speed that give exactly Q against a valve. */
  oneThrottled(count: number, flow: number): State {
    const { pump } = this;
    const low = pump.minSpeed;
    if (count === 1) return this.state(1, flow, low, true);
    const least = this.systemHeadAt(flow);
    const header = root(
      (h) => (count - 1) * pump.flowInto(h, 1) + pump.flowInto(h, low) - flow,
      least,
      pump.shutoffHead(1),
    );
    // What the others leave, not what its curve says: where a drooping curve is held flat, one head has many flows.
    const fixedFlow = pump.flowInto(header, 1);
    return this.mixed(count, fixedFlow, flow - (count - 1) * fixedFlow, low);
  }

  /** n − 1 direct on line and one trimmed to the rest of Q; its speed may be outside its limits: the rule looks. */
  oneTrimmed(count: number, flow: number): OneTrimmed {
    const { pump } = this;
    const header = this.systemHeadAt(flow);
    const fixedFlow = count === 1 ? 0 : pump.flowInto(header, 1);
    const q = flow - (count - 1) * fixedFlow;
    const speed = pump.speedFor(q, header + pump.branchLoss * q * q);
    return { speed, minSpeed: pump.minSpeed, state: () => this.mixed(count, fixedFlow, q, speed) };
  }

  private oneDriven(count: number, speed: number, header: number): State {
    return this.mixed(count, this.pump.flowInto(header, 1), this.pump.flowInto(header, speed), speed);
  }

  private mixed(count: number, fixedFlow: number, trimmedFlow: number, speed: number): State {
    const { pump } = this;
    const trimmed = { pump, count: 1, flow: trimmedFlow, speed, onDrive: true };
    const running =
      count === 1 ? [trimmed] : [{ pump, count: count - 1, flow: fixedFlow, speed: 1, onDrive: false }, trimmed];
    return new State(this.station, this.staticHead, setOf(count), running);
  }
}

const FIRST = Array.from({ length: 33 }, (_, count) => 2 ** count - 1);

/** The first n pumps, as bits. */
export function setOf(count: number): number {
  return FIRST[count]!;
}
