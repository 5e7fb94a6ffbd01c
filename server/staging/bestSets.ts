import type { Pump } from '../hydraulics/pump.ts';
import { systemHead } from '../hydraulics/systemCurve.ts';
import { allocate, allocateToAll, type Make, type Share } from './allocation.ts';
import { type Branch, type HullPiece, lowerHull, pieceAt } from './hull.ts';
import { LeastPower, type Leave, type Mode } from './leastPower.ts';
import type { MixedPumps, Setting } from './mixedPumps.ts';
import { type Action, held, meanPower, type Running, SLACK, State, shared } from './state.ts';

/** Which states may be used; the strictest choice that can meet a flow holds (model.md §4 and §5). */
const CHOICES: readonly Pick<Strictness, 'overload' | 'ranged'>[] = [
  { overload: false, ranged: true },
  { overload: false, ranged: false },
  { overload: true, ranged: true },
  { overload: true, ranged: false },
];

interface Strictness {
  readonly overload: boolean;
  readonly ranged: boolean;
}

/** Nodes over flow at which the best set and split are searched. */
const NODES = 240;

/** Static heads within this share of the total head use one table of sets; the split is still solved at the true head. */
const HEAD_STEP = 0.01;

/**
 * The best set of pumps that differ, and its split, over flow: an exact allocation at nodes says which sets matter; for
 * a flow between nodes those sets are solved at that very flow and static head, and the least power holds.
 */
export class BestSets {
  private readonly pumps: MixedPumps;
  private readonly tables = new Map<string, SetTable>();
  private readonly headStep: number;

  constructor(pumps: MixedPumps) {
    this.pumps = pumps;
    const { friction, staticHead } = pumps.station;
    const full = pumps.flatOut(pumps.most).flow;
    this.headStep = Math.max(1e-6, HEAD_STEP * systemHead(friction, staticHead, full));
  }

  /** The action of least mean power that meets Q > 0; null where no set does. */
  best(flow: number): Action | null {
    for (const choice of this.choices()) {
      const found = this.table(choice).at(flow);
      if (found) return found;
    }
    // The table may lose a state between two of its flows; below the capacity there is one to be found.
    return flow < this.pumps.flatOut(this.pumps.most).flow ? this.bestNow(flow) : null;
  }

  /** The same for a single flow, without a table: for advice about this moment. */
  bestNow(flow: number): Action | null {
    for (const choice of this.choices()) {
      const found = new SetTable(this.pumps, choice, { only: flow }).at(flow);
      if (found) return found;
    }
    return null;
  }

  /** Least mean power where any two of these states may share the time. */
  batch(flow: number): Action | null {
    for (const choice of this.choices()) {
      const found = this.table(choice).batch(flow);
      if (found) return found;
    }
    return null;
  }

  private choices(): readonly Strictness[] {
    const { allowable } = this.pumps.station;
    const rated = this.pumps.duty.some((pump) => pump.machines.some((m) => m.motor.ratedPower !== null));
    return CHOICES.filter((c) => (c.ranged ? allowable !== null : true) && (rated || c.overload));
  }

  private table(choice: Strictness): SetTable {
    const { pumps } = this;
    const bucket = Math.round(pumps.staticHead / this.headStep);
    const key = `${bucket} ${choice.overload} ${choice.ranged}`;
    let table = this.tables.get(key);
    if (!table) {
      table = new SetTable(pumps, choice);
      this.tables.set(key, table);
    }
    return table;
  }
}

/** A pump of an arrangement: its place, how it runs, and its share of what the driven pumps carry. */
interface Part {
  readonly place: number;
  readonly mode: Mode;
  readonly flow: number;
}

interface Node {
  readonly flow: number;
  readonly parts: readonly Part[];
  readonly key: string;
}

/** The best that a set can do at a flow, its pumps all running; for rules that look at more than one interval. */
export class FixedSet {
  /** Bits of the pumps, in the station's order. */
  readonly set: number;
  private readonly tables = new Map<number, readonly SetTable[]>();
  private readonly pumps: MixedPumps;
  private readonly places: readonly number[];

  constructor(pumps: MixedPumps, set: number) {
    this.pumps = pumps;
    this.set = set;
    this.places = pumps.duty.map((_, place) => place).filter((place) => Math.floor(set / 2 ** place) % 2 === 1);
  }

  /** Its action at Q > 0, and whether it keeps to ratings and range; null where it cannot meet the flow. */
  at(flow: number): { action: Action; overloaded: boolean; inside: boolean } | null {
    const bucket = Math.round(this.pumps.staticHead * 20);
    let tables = this.tables.get(bucket);
    if (!tables) {
      tables = [new SetTable(this.pumps, { overload: true, ranged: false }, { set: this.places })];
      this.tables.set(bucket, tables);
    }
    const action = tables[0]!.at(flow);
    if (!action || action.high.set !== this.set) return null;
    const { overloaded, outsideAllowable } = action.high.doubts;
    return { action, overloaded, inside: !outsideAllowable };
  }

  /** What decides of `at`, without the states. */
  figuresAt(flow: number): SetFigures | null {
    const found = this.at(flow);
    if (!found) return null;
    const { action, overloaded, inside } = found;
    return { power: meanPower(action), rest: action.share > 0 ? action.high : null, overloaded, inside };
  }

  /** These figures read off a curve through exactly solved points, for one static head and many flows. */
  curve(): SetCurve {
    return new SetCurve(this, this.pumps.pointOf(mostSettings(this.pumps, this.places)).flow);
  }
}

/**
 * Figures of a set over flow at one static head: a cubic through solved points, good to about 1e-9; where a stretch ends
 * (rest, a limit, the capacity) the flow itself is solved.
 */
export class SetCurve {
  /** What was read last. Mean power is without standby [W]; `rest` shares the time with off, null where nothing rests. */
  power = 0;
  overloaded = false;
  inside = true;
  rest: State | null = null;
  private readonly set: FixedSet;
  private readonly step: number;
  private readonly points: readonly (SetFigures | null)[];
  private readonly values: Float64Array;
  /** Whether the points around a cell, one beyond on either side, lie on one stretch. */
  private readonly smooth: Uint8Array;

  constructor(set: FixedSet, capacity: number) {
    this.set = set;
    this.step = capacity / READ_POINTS;
    this.points = Array.from({ length: READ_POINTS + 1 }, (_, i) => (i === 0 ? null : set.figuresAt(i * this.step)));
    this.values = Float64Array.from(this.points, (point) => point?.power ?? Number.NaN);
    this.smooth = Uint8Array.from(this.points, (here, i) => {
      const near = [this.points[i - 1], this.points[i + 1], this.points[i + 2]];
      return here && near.every((each) => each && alike(each, here)) ? 1 : 0;
    });
  }

  /** Reads the figures at a flow into the fields; false where the set cannot meet it. */
  read(flow: number): boolean {
    const x = flow / this.step;
    const i = Math.floor(x);
    if (this.smooth[i] !== 1) return this.take(this.set.figuresAt(flow));
    this.take(this.points[i]!);
    const { values } = this;
    const t = x - i;
    this.power =
      (-values[i - 1]! * t * (t - 1) * (t - 2)) / 6 +
      (values[i]! * (t + 1) * (t - 1) * (t - 2)) / 2 -
      (values[i + 1]! * (t + 1) * t * (t - 2)) / 2 +
      (values[i + 2]! * (t + 1) * t * (t - 1)) / 6;
    return true;
  }

  private take(found: SetFigures | null): boolean {
    if (!found) return false;
    this.power = found.power;
    this.overloaded = found.overloaded;
    this.inside = found.inside;
    this.rest = found.rest;
    return true;
  }
}

function alike(a: SetFigures, b: SetFigures): boolean {
  return (a.rest === null) === (b.rest === null) && a.overloaded === b.overloaded && a.inside === b.inside;
}

/** Points of a set's curve of power over flow. */
const READ_POINTS = 600;

export interface SetFigures {
  /** Mean electric power [W], standby not included. */
  readonly power: number;
  /** The state that shares the time with rest; null where nothing rests. */
  readonly rest: State | null;
  readonly overloaded: boolean;
  readonly inside: boolean;
}

function mostSettings(pumps: MixedPumps, places: readonly number[]): Setting[] {
  return places.map((place) => {
    const { hasDrive, maxSpeed } = pumps.duty[place]!;
    return { place, speed: hasDrive ? maxSpeed : 1, onDrive: hasDrive };
  });
}

const known = new WeakMap<MixedPumps, BestSets>();

/** The best sets of some pumps; rules that run over the same pumps share what was searched. */
export function bestSetsOf(pumps: MixedPumps): BestSets {
  let sets = known.get(pumps);
  if (!sets) {
    sets = new BestSets(pumps);
    known.set(pumps, sets);
  }
  return sets;
}

/** Sets that are the best at some flow, at the static head that is set: by bits, in the order met. */
export function setsInUse(pumps: MixedPumps): number[] {
  const sets = bestSetsOf(pumps);
  const capacity = pumps.flatOut(pumps.most).flow;
  const found = new Set<number>();
  for (let i = 1; i <= NODES; i++) {
    const action = sets.best((capacity * (i - 0.5)) / NODES);
    if (action && action.high.set > 0) found.add(action.high.set);
  }
  return [...found];
}

class SetTable {
  private readonly pumps: MixedPumps;
  private readonly choice: Strictness;
  private readonly valve: boolean;
  private readonly step: number;
  private readonly nodes: readonly (Node | null)[];
  /** Sets at their lowest, told by their settings, with the flow and the power per flow found when the table was made. */
  private readonly rests: readonly { settings: readonly Setting[]; flow: number; perFlow: number }[];
  private hull: readonly HullPiece[] | null = null;
  private readonly set: readonly number[] | null;

  /**
   * @param only  a single flow to search, where no more will be asked
   * @param set   places of the pumps that all have to run, where the set is given
   */
  constructor(pumps: MixedPumps, choice: Strictness, { only, set }: { only?: number; set?: readonly number[] } = {}) {
    this.pumps = pumps;
    this.choice = choice;
    this.set = set ?? null;
    this.valve = pumps.station.surplus === 'throttle';
    const capacity = pumps.flatOut(pumps.most).flow;
    this.step = only ?? capacity / NODES;
    const nodes = only === undefined ? NODES : 1;
    this.nodes = Array.from({ length: nodes }, (_, i) => this.search((i + 1) * this.step));
    this.rests = this.valve ? [] : this.findRests(only ?? 0);
  }

  /** Exact search at one flow. Without a valve, pumps direct on line give what they give; the driven ones the rest. */
  private search(flow: number): Node | null {
    const { pumps, choice, valve } = this;
    const header = systemHead(pumps.station.friction, pumps.staticHead, flow);
    const leave = (modes: readonly Mode[]): Leave => ({
      modes,
      valve,
      overload: choice.overload,
      range: choice.ranged ? pumps.station.allowable : null,
    });
    const places = this.set ?? pumps.duty.map((_, place) => place);
    const carry = this.set ? allocateToAll : allocate;
    const driven = places.filter((place) => pumps.duty[place]!.hasDrive);
    const line = places.filter((place) => !pumps.duty[place]!.hasDrive);
    if (valve) {
      const makes = makesOf([...driven, ...line], pumps.duty, (pump) => leave([pump.hasDrive ? 'drive' : 'line']));
      const { power, shares } = allocate(
        makes.map((m) => m.make),
        flow,
        header,
      );
      return power === Infinity ? null : nodeOf(flow, partsOf(shares, makes));
    }
    const drivenMakes = makesOf(driven, pumps.duty, () => leave(['drive']));
    const lineLeast = line.map((place) => new LeastPower(pumps.duty[place]!, leave(['line'])));
    let best: { power: number; parts: Part[] } | null = null;
    for (let set = this.set ? 2 ** line.length - 1 : 0; set < 2 ** line.length; set++) {
      const parts: Part[] = [];
      let power = 0;
      let left = flow;
      line.forEach((place, i) => {
        if (Math.floor(set / 2 ** i) % 2 === 0) return;
        const q = pumps.duty[place]!.flowInto(header, 1);
        if (q <= 0) power = Infinity;
        else power += lineLeast[i]!.inMode('line', q, header);
        left -= q;
        parts.push({ place, mode: 'line', flow: q });
      });
      if (power === Infinity || left < -1e-12 * flow || (best && power >= best.power)) continue;
      if (left > 1e-12 * flow) {
        if (driven.length === 0) continue;
        const found = carry(
          drivenMakes.map((m) => m.make),
          left,
          header,
        );
        power += found.power;
        parts.push(...partsOf(found.shares, drivenMakes));
      } else if (this.set && driven.length > 0) continue;
      if (power < (best?.power ?? Infinity)) best = { power, parts };
    }
    return best && nodeOf(flow, best.parts);
  }

  /** @param least  flow that a set must at least give to be of use */
  private findRests(least: number): SetTable['rests'] {
    const { pumps, choice } = this;
    const { allowable } = pumps.station;
    const header = systemHead(pumps.station.friction, pumps.staticHead, least);
    const found: { settings: Setting[]; flow: number; perFlow: number }[] = [];
    const seen = new Set<string>();
    const all = this.set ? this.set.reduce((sum, place) => sum + 2 ** place, 0) : 2 ** pumps.most - 1;
    for (let set = this.set ? all : 1; set <= all; set++) {
      const places = pumps.duty.map((_, place) => place).filter((place) => Math.floor(set / 2 ** place) % 2 === 1);
      const alike = places
        .map((place) => pumps.duty[place]!.make)
        .sort()
        .join('|');
      if (seen.has(alike)) continue;
      seen.add(alike);
      const settings = lowestSettings(pumps, places, choice.ranged ? allowable : null);
      if (settings === null || pumps.sent(settings, header) < least) continue;
      const state = pumps.pointOf(settings);
      if (state.count < places.length) continue; // a pump that would be dead-headed
      if (!choice.overload && state.doubts.overloaded) continue;
      if (choice.ranged && state.doubts.outsideAllowable) continue;
      found.push({ settings, flow: state.flow, perFlow: state.power / state.flow });
    }
    // Of two sets that reach as far, only the cheaper per volume can ever be the best.
    found.sort((a, b) => b.flow - a.flow || a.perFlow - b.perFlow);
    const kept: typeof found = [];
    let cheapest = Infinity;
    for (const rest of found) {
      if (rest.perFlow >= cheapest) continue;
      cheapest = rest.perFlow;
      kept.push(rest);
    }
    return kept.reverse();
  }

  at(flow: number): Action | null {
    const x = flow / this.step - 1;
    const i = Math.floor(x);
    const near = [this.nodes[i], this.nodes[i + 1], this.nodes[i + 2], this.nodes[i - 1]];
    let best: Action | null = null;
    const consider = (action: Action | null) => {
      if (action && (best === null || meanPower(action) < meanPower(best) * (1 - 1e-12))) best = action;
    };
    const left = near[0];
    const right = near[1];
    if (left && right && left.key === right.key) consider(this.between(left, right, flow));
    else {
      const tried = new Set<string>();
      for (const node of near) {
        if (!node || tried.has(node.key)) continue;
        tried.add(node.key);
        consider(this.between(node, node, flow));
      }
    }
    // The cheapest set per volume that reaches the flow, resting for part of the time.
    for (const { settings, flow: reach } of this.rests) {
      if (reach < flow * 0.98) continue;
      const state = this.pumps.pointOf(settings);
      if (state.flow < flow || state.count < settings.length) continue;
      consider(shared(this.pumps.off, state, flow));
      break;
    }
    return best;
  }

  /** An arrangement at a flow, its split taken between two nodes; null where it cannot carry the flow. */
  private between(a: Node, b: Node, flow: number): Action | null {
    const state = this.arranged(a, b, flow);
    return state && held(state);
  }

  private arranged(a: Node, b: Node, flow: number): State | null {
    const { pumps, valve, choice } = this;
    const { station, staticHead, duty } = pumps;
    const header = systemHead(station.friction, staticHead, flow);
    const weight = b.flow > a.flow ? (flow - a.flow) / (b.flow - a.flow) : 0;
    const flows = a.parts.map((part, k) => part.flow + weight * (b.parts[k]!.flow - part.flow));
    let fixed = 0;
    let free = 0;
    a.parts.forEach(({ place, mode }, k) => {
      if (mode === 'line' && !valve) {
        flows[k] = duty[place]!.flowInto(header, 1);
        fixed += flows[k]!;
      } else free += flows[k]!;
    });
    const left = flow - fixed;
    if (free === 0) {
      if (Math.abs(left) > 1e-9 * flow) return null;
    } else if (!(left > 0)) return null;
    // What the free pumps carry is stretched to the flow; a pump at its most passes on what it cannot carry, and one at
    // its least speed, which gives a little more or less than between the nodes, what it cannot be turned down to.
    const tops = a.parts.map(({ place, mode }) => {
      const pump = duty[place]!;
      return pump.flowInto(header, mode === 'drive' ? pump.maxSpeed : 1);
    });
    const lows = a.parts.map(({ place, mode }) =>
      mode === 'drive' && !valve ? duty[place]!.flowInto(header, duty[place]!.minSpeed) : 0,
    );
    if (free > 0) stretch(a.parts, flows, { lows, tops, sum: left, valve });
    const running: Running[] = [];
    let set = 0;
    for (let k = 0; k < a.parts.length; k++) {
      const { place, mode } = a.parts[k]!;
      const pump = duty[place]!;
      const q = flows[k]!;
      if (!(q > 0) || q > tops[k]! * (1 + 1e-9)) return null;
      let speed = 1;
      if (mode === 'drive') {
        const needed = pump.speedFor(q, header + pump.branchLoss * q * q);
        if (needed > pump.maxSpeed * (1 + 1e-9) || (!valve && needed < pump.minSpeed * (1 - 1e-9))) return null;
        speed = Math.min(Math.max(needed, pump.minSpeed), pump.maxSpeed);
      }
      running.push({ pump, count: 1, flow: q, speed, onDrive: mode === 'drive' });
      set += 2 ** place;
    }
    const order = (r: Running) => duty.indexOf(r.pump);
    running.sort((one, two) => order(one) - order(two));
    const state = new State(station, staticHead, set, running);
    if (Math.abs(state.flow - flow) > 1e-9 * flow) return null;
    if (!choice.overload && state.doubts.overloaded) return null;
    if (choice.ranged && state.greatestShareOfBest > station.allowable!.to * (1 + SLACK)) return null;
    return state;
  }

  /** Lower convex envelope of these states and of rest, at the static head the table was made for. */
  batch(flow: number): Action | null {
    this.hull ??= lowerHull(this.branches());
    const piece = pieceAt(this.hull, flow);
    if (!piece) return this.at(flow);
    const { off } = this.pumps;
    const stateAt = (point: HullPiece['from']): State | null =>
      point.branch === null ? off : this.stateOf(point.flow);
    const plain = this.at(flow);
    if (!piece.chord) return plain;
    const low = stateAt(piece.from);
    const high = stateAt(piece.to);
    if (!low || !high || !(low.flow <= flow && flow <= high.flow)) return plain;
    const chord = shared(low, high, flow);
    return plain && meanPower(plain) < meanPower(chord) ? plain : chord;
  }

  private stateOf(flow: number): State | null {
    const action = this.at(flow);
    if (!action) return null;
    return action.share === 0 ? action.low : action.high;
  }

  /** Runs of nodes with a state, and each resting set's own point, as branches of power over flow. */
  private branches(): Branch[] {
    const power = (flow: number) => {
      const action = this.at(flow);
      return action ? meanPower(action) : Number.NaN;
    };
    const branches: Branch[] = [];
    let from: number | null = null;
    this.nodes.forEach((node, i) => {
      const flow = (i + 1) * this.step;
      if (node && from === null) from = flow;
      const ends = from !== null && (!node || i === this.nodes.length - 1);
      if (ends) {
        branches.push({ from: from!, to: node ? flow : flow - this.step, power });
        from = null;
      }
    });
    for (const { settings } of this.rests) {
      const state = this.pumps.pointOf(settings);
      branches.push({ from: state.flow, to: state.flow, power: () => state.power });
    }
    return branches;
  }
}

/** What the parts of an arrangement may carry, least and most, and what they have to in all [m³/s]. */
interface Room {
  readonly lows: readonly number[];
  readonly tops: readonly number[];
  readonly sum: number;
  readonly valve: boolean;
}

/** Scales free flows to a sum; what lies above a pump's most, or is missing at its least, goes to the others. */
function stretch(parts: readonly Part[], flows: number[], { lows, tops, sum, valve }: Room): void {
  const capped = new Set<number>();
  for (let round = 0; round <= parts.length; round++) {
    let room = sum;
    let free = 0;
    parts.forEach(({ mode }, k) => {
      if (mode === 'line' && !valve) return;
      if (capped.has(k)) room -= flows[k]!;
      else free += flows[k]!;
    });
    if (free <= 0) return;
    const scale = room / free;
    let more = false;
    parts.forEach(({ mode }, k) => {
      if ((mode === 'line' && !valve) || capped.has(k)) return;
      flows[k]! *= scale;
      const held = Math.min(Math.max(flows[k]!, lows[k]!), tops[k]!);
      if (held === flows[k]) return;
      flows[k] = held;
      capped.add(k);
      more = true;
    });
    if (!more) return;
  }
}

function nodeOf(flow: number, parts: readonly Part[]): Node {
  const sorted = [...parts].sort((a, b) => a.place - b.place);
  return { flow, parts: sorted, key: sorted.map(({ place, mode }) => `${place}${mode}`).join('+') };
}

interface PlacedMake {
  readonly make: Make;
  readonly places: readonly number[];
}

function makesOf(places: readonly number[], duty: readonly Pump[], leave: (pump: Pump) => Leave): PlacedMake[] {
  const found = new Map<string, { least: LeastPower; places: number[] }>();
  for (const place of places) {
    const pump = duty[place]!;
    const known = found.get(pump.make);
    if (known) known.places.push(place);
    else found.set(pump.make, { least: new LeastPower(pump, leave(pump)), places: [place] });
  }
  return [...found.values()].map(({ least, places: all }) => ({ make: { least, count: all.length }, places: all }));
}

/** Shares by make, told to pumps: of equal ones the first in order run. */
function partsOf(shares: readonly Share[], makes: readonly PlacedMake[]): Part[] {
  const used = new Map<LeastPower, number>();
  const parts: Part[] = [];
  for (const { least, mode, count, flow } of shares) {
    const { places } = makes.find((each) => each.make.least === least)!;
    for (let k = 0; k < count; k++) {
      const next = used.get(least) ?? 0;
      used.set(least, next + 1);
      parts.push({ place: places[next]!, mode, flow });
    }
  }
  return parts;
}

/** A set at its lowest: driven pumps at least speed, raised until inside a range where one is given; null for never. */
function lowestSettings(
  pumps: MixedPumps,
  places: readonly number[],
  range: { readonly from: number; readonly to: number } | null,
): Setting[] | null {
  const at = (raise: number): Setting[] =>
    places.map((place) => {
      const pump = pumps.duty[place]!;
      if (!pump.hasDrive) return { place, speed: 1, onDrive: false };
      return { place, speed: pump.minSpeed + raise * (pump.maxSpeed - pump.minSpeed), onDrive: true };
    });
  const inside = (raise: number) => {
    const state = pumps.pointOf(at(raise));
    return state.count === places.length && (range === null || state.leastShareOfBest >= range.from * (1 - SLACK));
  };
  if (inside(0)) return at(0);
  // Pumps that cannot open their valves at least speed can be slowed down to no flow: nothing is shared with rest.
  if (range === null || !inside(1)) return null;
  let bad = 0;
  let good = 1;
  for (let i = 0; i < 40; i++) {
    const middle = (bad + good) / 2;
    if (inside(middle)) good = middle;
    else bad = middle;
  }
  return at(good);
}
