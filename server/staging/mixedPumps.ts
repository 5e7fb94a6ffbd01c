import type { Pump } from '../hydraulics/pump.ts';
import { root } from '../hydraulics/roots.ts';
import { systemHead } from '../hydraulics/systemCurve.ts';
import type { Station } from '../station/station.ts';
import type { OneTrimmed, StagedPumps, Trim } from './stagedPumps.ts';
import { type Action, held, type Running, State, shared } from './state.ts';

/** A pump that runs, with its place in the station's order and the speed it is set to. */
export interface Setting {
  readonly place: number;
  readonly speed: number;
  readonly onDrive: boolean;
}

/**
 * Duty pumps that differ: each is solved at the header head they share. Those of the first n that have a drive run at
 * one speed ratio, the others at rated speed. A pump that would be dead-headed behind its check valve is left out of the
 * set: it delivers nothing, and a state with it running is never chosen.
 */
export class MixedPumps implements StagedPumps {
  readonly station: Station;
  readonly duty: readonly Pump[];
  readonly most: number;
  readonly onDrives: boolean;
  readonly drivesFitted: boolean;
  staticHead: number;
  off: State;
  private kept = new Map<string, State>();
  private insideStates: (State | null | undefined)[] = [];
  private readonly trims: (Trim & { state: State | null })[];

  constructor(station: Station, duty: readonly Pump[]) {
    this.station = station;
    this.duty = duty;
    this.most = duty.length;
    this.onDrives = duty.some((pump) => pump.hasDrive);
    this.drivesFitted = duty.every((pump) => pump.driveFitted);
    this.staticHead = station.staticHead;
    this.off = new State(station, this.staticHead, 0, []);
    this.trims = Array.from({ length: this.most + 1 }, (_, count) => ({
      count,
      feasible: false,
      power: Number.NaN,
      speed: 1,
      overloaded: false,
      inside: true,
      rest: null,
      state: null,
    }));
  }

  at(staticHead: number): void {
    if (staticHead === this.staticHead) return;
    this.staticHead = staticHead;
    this.off = new State(this.station, staticHead, 0, []);
    this.kept = new Map();
    this.insideStates = [];
  }

  /** A state that depends on the static head alone: solved once until the head changes. */
  private keep(key: string, make: () => State): State {
    let state = this.kept.get(key);
    if (!state) {
      state = make();
      this.kept.set(key, state);
    }
    return state;
  }

  private system(flow: number): number {
    return systemHead(this.station.friction, this.staticHead, flow);
  }

  /** What some pumps send into a header at a head [m³/s]. */
  sent(settings: readonly Setting[], header: number): number {
    let sum = 0;
    for (const { place, speed } of settings) sum += this.duty[place]!.flowInto(header, speed);
    return sum;
  }

  /** The state of some pumps at a header head; those that cannot open their check valves are left out. */
  stateAt(settings: readonly Setting[], header: number): State {
    const running: Running[] = [];
    let set = 0;
    for (const { place, speed, onDrive } of settings) {
      const pump = this.duty[place]!;
      const flow = pump.flowInto(header, speed);
      if (flow <= 0) continue;
      running.push({ pump, count: 1, flow, speed, onDrive });
      set += 2 ** place;
    }
    return set === 0 ? this.off : new State(this.station, this.staticHead, set, running);
  }

  /** Where some pumps and the system meet. */
  pointOf(settings: readonly Setting[]): State {
    if (this.sent(settings, this.system(0)) <= 0) return this.off;
    const most = settings.reduce((sum, { place, speed }) => sum + this.duty[place]!.endFlow(speed), 0);
    const beyond = this.sent(settings, this.system(most)) >= most;
    const flow = beyond ? most : root((q) => this.sent(settings, this.system(q)) - q, 0, most);
    return this.stateAt(settings, this.system(flow));
  }

  /** Some pumps that give exactly Q against a valve, at a header head above the system's. */
  private valved(settings: readonly Setting[], flow: number): State {
    const low = this.system(flow);
    if (this.sent(settings, low) <= flow) return this.stateAt(settings, low);
    const high = Math.max(...settings.map(({ place, speed }) => this.duty[place]!.shutoffHead(speed)));
    const header = root((head) => this.sent(settings, head) - flow, low, high);
    const state = this.stateAt(settings, header);
    return Math.abs(state.flow - flow) <= 1e-9 * flow ? state : this.overFlatTop(settings, header, flow);
  }

  /**
   * Some pumps that give exactly Q at a header head at which a curve is held flat: there one head has many flows, and
   * what they send jumps past Q. Those on their flat top carry what the others leave.
   */
  private overFlatTop(settings: readonly Setting[], header: number, flow: number): State {
    const sentAt = (head: number) => settings.map(({ place, speed }) => this.duty[place]!.flowInto(head, speed));
    const least = sentAt(header * (1 + 1e-9));
    const most = sentAt(header * (1 - 1e-9));
    const sum = (flows: readonly number[]) => flows.reduce((all, q) => all + q, 0);
    const share = (flow - sum(least)) / (sum(most) - sum(least));
    const running: Running[] = [];
    let set = 0;
    settings.forEach(({ place, speed, onDrive }, i) => {
      const q = least[i]! + share * (most[i]! - least[i]!);
      if (q <= 0) return;
      running.push({ pump: this.duty[place]!, count: 1, flow: q, speed, onDrive });
      set += 2 ** place;
    });
    return new State(this.station, this.staticHead, set, running);
  }

  private onLine(count: number): Setting[] {
    return Array.from({ length: count }, (_, place) => ({ place, speed: 1, onDrive: false }));
  }

  /** The first n: those with a drive at one speed, held within its limits; the others at rated speed. */
  private atSpeed(count: number, speed: number): Setting[] {
    return Array.from({ length: count }, (_, place) => {
      const pump = this.duty[place]!;
      if (!pump.hasDrive) return { place, speed: 1, onDrive: false };
      return { place, speed: Math.min(Math.max(speed, pump.minSpeed), pump.maxSpeed), onDrive: true };
    });
  }

  fixed(count: number): State {
    return count === 0 ? this.off : this.keep(`fixed ${count}`, () => this.pointOf(this.onLine(count)));
  }

  throttled(count: number, flow: number): State {
    return this.valved(this.onLine(count), flow);
  }

  flatOut(count: number): State {
    return this.keep(`most ${count}`, () => this.pointOf(this.atSpeed(count, Infinity)));
  }

  lowest(count: number): State {
    return this.keep(`least ${count}`, () => this.pointOf(this.atSpeed(count, 0)));
  }

  trim(count: number, flow: number): Trim {
    const trim = this.trims[count]!;
    const { allowable, surplus } = this.station;
    trim.rest = null;
    trim.state = null;
    trim.feasible = this.flatOut(count).flow >= flow * (1 - 1e-12);
    if (!trim.feasible) return trim;
    const lowest = this.lowest(count);
    let state: State;
    if (lowest.flow > flow) {
      if (surplus === 'storage') trim.rest = lowest;
      state = surplus === 'storage' ? lowest : this.valved(this.atSpeed(count, 0), flow);
    } else state = this.trimmedState(count, flow)!;
    if (surplus === 'storage' && allowable && state.leastShareOfBest < allowable.from) {
      const inside = this.lowestInside(count);
      if (inside && inside.flow > flow) {
        trim.rest = inside;
        state = inside;
      }
    }
    trim.state = state;
    trim.power = trim.rest ? (flow / state.flow) * state.power : state.power;
    trim.speed = state.speed;
    return trim;
  }

  judged(trim: Trim): Trim {
    const { doubts } = this.trims[trim.count]!.state!;
    trim.overloaded = doubts.overloaded;
    trim.inside = !doubts.outsideAllowable;
    return trim;
  }

  known(count: number): Trim {
    return this.trims[count]!;
  }

  action(trim: Trim, flow: number): Action {
    if (trim.rest) return shared(this.off, trim.rest, flow);
    return held(this.trims[trim.count]!.state!);
  }

  trimmedState(count: number, flow: number): State | null {
    if (flow > this.flatOut(count).flow * (1 + 1e-9) || flow < this.lowest(count).flow * (1 - 1e-9)) return null;
    const header = this.system(flow);
    const lacks = (speed: number) => this.sent(this.atSpeed(count, speed), header) - flow;
    const [low, high] = this.speedLimits(count);
    if (lacks(high) <= 0) return this.flatOut(count);
    if (lacks(low) >= 0) return this.lowest(count);
    return this.stateAt(this.atSpeed(count, root(lacks, low, high)), header);
  }

  private speedLimits(count: number): [number, number] {
    const driven = this.duty.slice(0, count).filter((pump) => pump.hasDrive);
    return [Math.min(...driven.map((pump) => pump.minSpeed)), Math.max(...driven.map((pump) => pump.maxSpeed))];
  }

  /** The lowest state of the first n that is inside the allowable range, not under minimum speed; null for none. */
  private lowestInside(count: number): State | null {
    const known = this.insideStates[count];
    if (known !== undefined) return known;
    const from = this.station.allowable!.from;
    const [low, high] = this.speedLimits(count);
    const at = (speed: number) => this.pointOf(this.atSpeed(count, speed));
    const lacks = (speed: number) => at(speed).leastShareOfBest - from;
    let state: State | null = null;
    if (this.lowest(count).leastShareOfBest >= from) state = this.lowest(count);
    else if (Number.isFinite(low) && lacks(high) >= 0) state = at(root(lacks, low, high, 1e-12));
    this.insideStates[count] = state;
    return state;
  }

  /** The last of the first n that has a drive is the one trimmed. */
  private trimmedPlace(count: number): number | null {
    for (let place = count - 1; place >= 0; place--) if (this.duty[place]!.hasDrive) return place;
    return null;
  }

  private oneSet(count: number, place: number, speed: number): Setting[] {
    return this.onLine(count).map((one) => (one.place === place ? { place, speed, onDrive: true } : one));
  }

  oneTrimmed(count: number, flow: number): OneTrimmed | null {
    const place = this.trimmedPlace(count);
    if (place === null) return null;
    const pump = this.duty[place]!;
    const header = this.system(flow);
    const others = this.onLine(count).filter((one) => one.place !== place);
    const q = flow - this.sent(others, header);
    // Where the others alone give more than is wanted, no speed is low enough.
    const speed = q > 0 ? pump.speedFor(q, header + pump.branchLoss * q * q) : 0;
    return { speed, minSpeed: pump.minSpeed, state: () => this.stateAt(this.oneSet(count, place, speed), header) };
  }

  oneThrottled(count: number, flow: number): State {
    const place = this.trimmedPlace(count)!;
    return this.valved(this.oneSet(count, place, this.duty[place]!.minSpeed), flow);
  }

  oneAt(count: number, speed: 'least' | 'rated'): State {
    const place = this.trimmedPlace(count);
    if (place === null) return this.fixed(count);
    const set = speed === 'least' ? this.duty[place]!.minSpeed : 1;
    return this.keep(`one ${speed} ${count}`, () => this.pointOf(this.oneSet(count, place, set)));
  }
}
