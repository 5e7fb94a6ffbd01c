import type { Losses, Pump } from '../hydraulics/pump.ts';
import { systemHead } from '../hydraulics/systemCurve.ts';
import type { FlowRange, Station } from '../station/station.ts';
import { GRAVITY } from '../units.ts';

/** Some equal pumps that run alike. Flow in m³/s and head in m, of each. */
export interface Running {
  readonly pump: Pump;
  readonly count: number;
  readonly flow: number;
  /** Share of rated speed; 1 direct on line. */
  readonly speed: number;
  readonly onDrive: boolean;
}

/** Where the power goes [W], each part by its own formula (model.md §6). */
export interface Parts extends Losses {
  lift: number;
  pipeFriction: number;
  branch: number;
  valve: number;
}

/** Below this share of best-efficiency flow a pump counts as near dead-head (common practice: 25 to 30 %). */
export const NEAR_DEAD_HEAD = 0.3;

/** A state found at the very edge of a limit counts as inside it: rounding decides nothing. */
export const SLACK = 1e-9;

/** What an engineer would doubt about a state; each counts where any running pump is so. */
export interface Doubts {
  /** A motor carries more than its rating × service factor. */
  readonly overloaded: boolean;
  /** A pump is held at the end of its curve. */
  readonly atEndOfCurve: boolean;
  readonly nearDeadHead: boolean;
  readonly outsidePreferred: boolean;
  readonly outsideAllowable: boolean;
}

/** Whether shares of best-efficiency flow, least to most, lie within a range. */
export function isInside(range: FlowRange, least: number, most: number): boolean {
  return least >= range.from * (1 - SLACK) && most <= range.to * (1 + SLACK);
}

/** What a running set does at one static head: its total flow [m³/s] and electric power [W], standby not included. */
export class State {
  readonly running: readonly Running[];
  readonly flow: number;
  readonly power: number;
  readonly staticHead: number;
  /** Pumps that run, and which: bit i stands for duty pump i in the station's order. */
  readonly count: number;
  readonly set: number;
  private readonly station: Station;
  private parts: Parts | null = null;
  private asked = false;
  private doubted: Doubts | null = null;

  /** @param power  electric power of all that runs [W], where it is known already */
  constructor(
    station: Station,
    staticHead: number,
    set: number,
    running: readonly Running[],
    power: number = powerOf(running),
  ) {
    this.station = station;
    this.staticHead = staticHead;
    this.set = set;
    this.running = running;
    let count = 0;
    let flow = 0;
    for (const r of running) {
      count += r.count;
      flow += r.count * r.flow;
    }
    this.count = count;
    this.flow = flow;
    this.power = power;
  }

  /** Speed of the pumps on drives, 1 where none is. */
  get speed(): number {
    for (const r of this.running) if (r.onDrive) return r.speed;
    return 1;
  }

  /** Adds where the power goes, times some seconds: [J]. A state asked again keeps its parts. */
  addParts(into: Parts, seconds: number): void {
    if (this.parts === null && this.asked) {
      this.parts = { lift: 0, pipeFriction: 0, branch: 0, valve: 0, pump: 0, motor: 0, drive: 0 };
      this.addFound(this.parts, 1);
    }
    this.asked = true;
    const { parts } = this;
    if (parts === null) this.addFound(into, seconds);
    else {
      into.lift += parts.lift * seconds;
      into.pipeFriction += parts.pipeFriction * seconds;
      into.branch += parts.branch * seconds;
      into.valve += parts.valve * seconds;
      into.pump += parts.pump * seconds;
      into.motor += parts.motor * seconds;
      into.drive += parts.drive * seconds;
    }
  }

  private addFound(into: Parts, seconds: number): void {
    const { friction, density } = this.station;
    const system = systemHead(friction, this.staticHead, this.flow);
    const weight = seconds * density * GRAVITY;
    for (const r of this.running) {
      const branchHead = r.pump.branchLoss * r.flow * r.flow;
      const head = r.pump.head(r.flow, r.onDrive ? r.speed : 1);
      into.branch += r.count * weight * r.flow * branchHead;
      into.valve += r.count * weight * r.flow * (head - branchHead - system);
      r.pump.addLosses(into, seconds * r.count, r.flow, r.speed, r.onDrive);
    }
    into.lift += weight * this.flow * this.staticHead;
    into.pipeFriction += weight * this.flow * friction.at(this.flow);
  }

  /** Least and greatest share of best-efficiency flow at their speeds among the pumps that run. */
  get leastShareOfBest(): number {
    let least = Infinity;
    for (const { pump, flow, speed, onDrive } of this.running) {
      least = Math.min(least, pump.leastShareOfBest(flow, speed, onDrive));
    }
    return least;
  }

  get greatestShareOfBest(): number {
    let most = 0;
    for (const { pump, flow, speed, onDrive } of this.running) {
      most = Math.max(most, pump.greatestShareOfBest(flow, speed, onDrive));
    }
    return most;
  }

  /** What an engineer would doubt about the state. */
  get doubts(): Doubts {
    this.doubted ??= this.findDoubts();
    return this.doubted;
  }

  private findDoubts(): Doubts {
    const { preferred, allowable } = this.station;
    let overloaded = false;
    let atEndOfCurve = false;
    let least = Infinity;
    let most = 0;
    for (const { pump, flow, speed, onDrive } of this.running) {
      if (pump.overload(flow, speed, onDrive) > 1 + SLACK) overloaded = true;
      if (pump.atEnd(flow, speed, onDrive)) atEndOfCurve = true;
      least = Math.min(least, pump.leastShareOfBest(flow, speed, onDrive));
      most = Math.max(most, pump.greatestShareOfBest(flow, speed, onDrive));
    }
    return {
      overloaded,
      atEndOfCurve,
      nearDeadHead: least < NEAR_DEAD_HEAD * (1 - SLACK),
      outsidePreferred: !isInside(preferred, least, most),
      outsideAllowable: allowable !== null && !isInside(allowable, least, most),
    };
  }
}

function powerOf(running: readonly Running[]): number {
  let power = 0;
  for (const r of running) power += r.count * r.pump.electric(r.flow, r.speed, r.onDrive);
  return power;
}

/** What a rule does in one interval: two states that share it by time (the same twice where nothing is shared). */
export interface Action {
  readonly low: State;
  readonly high: State;
  /** Time share of `high`. */
  readonly share: number;
  /** Flow that the pumps cannot meet [m³/s]. */
  readonly shortfall: number;
}

/** A state held for the whole interval. */
export function held(state: State, shortfall = 0): Action {
  return { low: state, high: state, share: 0, shortfall };
}

/** Two states shared so that their mean flow is Q, low.flow ≤ Q ≤ high.flow. */
export function shared(low: State, high: State, flow: number): Action {
  if (high.flow <= low.flow) return held(low);
  return { low, high, share: (flow - low.flow) / (high.flow - low.flow), shortfall: 0 };
}

/** Mean electric power of an action [W], standby not included. */
export function meanPower(action: Action): number {
  return action.low.power + action.share * (action.high.power - action.low.power);
}
