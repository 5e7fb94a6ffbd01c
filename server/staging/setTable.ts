import { systemHead } from '../hydraulics/systemCurve.ts';
import { allocate, allocateToAll } from './allocation.ts';
import { type Arrangement, arrangement, makesOf, type Part, partsOf, stretch } from './arrangement.ts';
import { type Branch, type HullPiece, lowerHull, pieceAt } from './hull.ts';
import { LeastPower, type Leave, type Mode } from './leastPower.ts';
import type { MixedPumps } from './mixedPumps.ts';
import { type RestingSet, restingSets } from './restingSets.ts';
import { type Action, held, meanPower, type Running, SLACK, State, shared } from './state.ts';
import type { Strictness } from './strictness.ts';

/** Nodes over flow at which the best set and split are searched. */
export const NODES = 240;

/** Smaller steps between two nodes with different arrangements. */
const PARTS = 4;

/**
 * The best set, or the best split of a given set, over flow at one static head and strictness: nodes are searched
 * exactly, and a flow between two nodes is solved for the arrangements on either side.
 */
export class SetTable {
  private readonly pumps: MixedPumps;
  private readonly choice: Strictness;
  private readonly valve: boolean;
  private readonly step: number;
  private readonly nodes: readonly (Arrangement | null)[];
  private readonly inner = new Map<number, readonly (Arrangement | null)[]>();
  /** Sets at their lowest, told by their settings, with the flow and the power per flow found when the table was made. */
  private readonly rests: readonly RestingSet[];
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
    // A given set has few arrangements, each over a long stretch: fewer nodes see as much.
    const nodes = only !== undefined ? 1 : set ? NODES / 4 : NODES;
    this.step = only ?? capacity / nodes;
    this.nodes = Array.from({ length: nodes }, (_, i) => this.search((i + 1) * this.step));
    this.rests = this.valve ? [] : restingSets(pumps, choice, { least: only ?? 0, only: this.set });
  }

  /** Exact search at one flow. Without a valve, pumps direct on line give what they give; the driven ones the rest. */
  private search(flow: number): Arrangement | null {
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
      return power === Infinity ? null : arrangement(flow, partsOf(shares, makes));
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
    return best && arrangement(flow, best.parts);
  }

  /** Nodes about a flow that lies a share of the way from node i to the next: the two beside it first. */
  private nodesAbout(i: number, share: number): readonly (Arrangement | null | undefined)[] {
    const { nodes } = this;
    const around = [nodes[i], nodes[i + 1], nodes[i + 2], nodes[i - 1]];
    if (i < 0 || i + 1 >= nodes.length || nodes[i]?.key === nodes[i + 1]?.key) return around;
    const inner = this.innerNodes(i);
    const k = Math.min(Math.floor(share * PARTS), PARTS - 1);
    return [inner[k], inner[k + 1], inner[k + 2], inner[k - 1], ...around];
  }

  /** From node i to the next by smaller steps, searched when first asked for: between them the arrangement changes. */
  private innerNodes(i: number): readonly (Arrangement | null)[] {
    let inner = this.inner.get(i);
    if (!inner) {
      const between = Array.from({ length: PARTS - 1 }, (_, k) => this.search((i + 1 + (k + 1) / PARTS) * this.step));
      inner = [this.nodes[i]!, ...between, this.nodes[i + 1]!];
      this.inner.set(i, inner);
    }
    return inner;
  }

  /** The action of least mean power at Q > 0; null where none is known. */
  at(flow: number): Action | null {
    const x = flow / this.step - 1;
    const i = Math.floor(x);
    const near = this.nodesAbout(i, x - i);
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
  private between(a: Arrangement, b: Arrangement, flow: number): Action | null {
    const state = this.arranged(a, b, flow);
    return state && held(state);
  }

  private arranged(a: Arrangement, b: Arrangement, flow: number): State | null {
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
