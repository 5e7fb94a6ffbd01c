import type { Pump } from '../hydraulics/pump.ts';
import { systemHead } from '../hydraulics/systemCurve.ts';
import type { Station } from '../station/station.ts';
import { type Allocation, allocate, arrangementOf } from './allocation.ts';
import { combinedFlow } from './firmCapacity.ts';
import { type Branch, type HullPiece, hullPower, lowerHull, pieceAt } from './hull.ts';
import { LeastPower } from './leastPower.ts';
import type { Make } from './shares.ts';

/** Nodes of F over flow at one static head; between them it is interpolated, kinks and jumps respected. */
const NODES = 360;

/** Up to so many sets direct on line, F is cut at the operating point of each. */
const MOST_BREAKS = 24;

/** F at a flow, and the arrangement that gives it. */
type Solve = (flow: number) => { readonly power: number; readonly kind: string };

/**
 * The power no rule can beat (model.md §5): F(Q) is the least electric power of any subset of the pumps at any split of
 * Q, each direct on line or on its drive; with storage its lower convex envelope with rest. Standby is not included.
 */
export class Floor {
  private readonly station: Station;
  private readonly makes: readonly Make[];
  private readonly duty: readonly Pump[];
  private readonly tables = new Map<number, FloorTable>();

  constructor(station: Station, duty: readonly Pump[]) {
    this.station = station;
    this.duty = duty;
    const makes = new Map<string, { least: LeastPower; count: number }>();
    for (const pump of duty) {
      const known = makes.get(pump.make);
      if (known) known.count++;
      else makes.set(pump.make, { least: new LeastPower(pump), count: 1 });
    }
    this.makes = [...makes.values()];
  }

  /** The least-power allocation itself, exact, at one flow and static head. */
  allocation(flow: number, staticHead: number): Allocation {
    return allocate(this.makes, flow, systemHead(this.station.friction, staticHead, flow));
  }

  /** Floor over flow at one static head. */
  table(staticHead: number): FloorTable {
    let table = this.tables.get(staticHead);
    if (!table) {
      const solve = (flow: number) => {
        const found = this.allocation(flow, staticHead);
        const header = systemHead(this.station.friction, staticHead, flow);
        return { power: found.power, kind: arrangementOf(found, header) };
      };
      table = new FloorTable(this.station, this.duty, solve, staticHead);
      this.tables.set(staticHead, table);
    }
    return table;
  }
}

/** Floor power over flow at one static head, solved at nodes once and then read off in nanoseconds. */
export class FloorTable {
  /** Largest flow that has a state [m³/s]. */
  readonly capacity: number;
  private readonly segments: readonly Segment[];
  private readonly hull: readonly HullPiece[] | null;
  private readonly last: number;

  constructor(station: Station, duty: readonly Pump[], solve: Solve, staticHead: number) {
    const ends = breakFlows(station, duty, staticHead);
    this.capacity = ends[ends.length - 1] ?? 0;
    // Many different pumps have many arrangements, each good for a short stretch: there a coarser eye sees as much.
    const many = setsByMake(duty).length > MOST_BREAKS;
    const nodes = many ? NODES / 2 : NODES;
    const narrow = many ? 1e-3 : 1e-6;
    const segments: Segment[] = [];
    let from = 0;
    for (const to of ends) {
      if (to <= from * (1 + 1e-9)) continue;
      const cells = Math.max(6, Math.ceil((nodes * (to - from)) / this.capacity));
      segments.push(new Segment(from, to, cells, narrow * this.capacity, solve));
      from = to;
    }
    this.segments = segments;
    this.hull =
      station.surplus === 'storage'
        ? lowerHull(many ? [...segments, ...directPoints(station, duty, staticHead)] : segments)
        : null;
    this.last = segments.length === 0 ? 0 : this.within(this.capacity);
  }

  /** Least mean power [W] at a mean flow; above the capacity it keeps its last value. */
  at(flow: number): number {
    if (flow <= 0 || this.segments.length === 0) return 0;
    return flow >= this.capacity ? this.last : this.within(flow);
  }

  private within(flow: number): number {
    if (this.hull) {
      const piece = pieceAt(this.hull, flow) ?? this.hull[this.hull.length - 1];
      return piece ? hullPower(piece, Math.min(flow, piece.to.flow)) : 0;
    }
    let low = 0;
    let high = this.segments.length - 1;
    while (low < high) {
      const middle = (low + high) >> 1;
      if (this.segments[middle]!.to < flow) low = middle + 1;
      else high = middle;
    }
    return this.segments[low]!.power(flow);
  }
}

/**
 * Flows at which F may jump: where a set of pumps direct on line reaches its operating point and beyond it another way
 * must be found; and the capacity, with every pump at its most. Ascending.
 */
function breakFlows(station: Station, duty: readonly Pump[], staticHead: number): number[] {
  const flows = new Set<number>();
  // Of many sets most never are the best: the bisection between nodes finds the jumps that matter.
  const sets = setsByMake(duty);
  for (const set of sets.length <= MOST_BREAKS ? sets : []) {
    flows.add(
      combinedFlow(
        station,
        staticHead,
        set.map((pump) => ({ pump, speed: 1 })),
      ),
    );
  }
  flows.add(
    combinedFlow(
      station,
      staticHead,
      duty.map((pump) => ({ pump, speed: Math.max(pump.maxSpeed, 1) })),
    ),
  );
  return [...flows].filter((flow) => flow > 0).sort((a, b) => a - b);
}

/** Operating points of sets direct on line, for the hull: points at which F may dip between nodes. */
function directPoints(station: Station, duty: readonly Pump[], staticHead: number): Branch[] {
  return setsByMake(duty).flatMap((set): Branch[] => {
    const flow = combinedFlow(
      station,
      staticHead,
      set.map((pump) => ({ pump, speed: 1 })),
    );
    const header = systemHead(station.friction, staticHead, flow);
    const flows = set.map((pump) => pump.flowInto(header, 1));
    if (flow <= 0 || flows.some((q) => q <= 0)) return [];
    const power = set.reduce((sum, pump, i) => sum + pump.electric(flows[i]!, 1, false), 0);
    return [{ from: flow, to: flow, power: () => power }];
  });
}

/** Every different choice of pumps: equal pumps count by number, not by name. */
function setsByMake(duty: readonly Pump[]): Pump[][] {
  const groups: Pump[][] = [];
  for (const pump of duty) {
    const group = groups.find(([first]) => first!.make === pump.make);
    if (group) group.push(pump);
    else groups.push([pump]);
  }
  let sets: Pump[][] = [[]];
  for (const group of groups) {
    sets = sets.flatMap((set) => Array.from({ length: group.length + 1 }, (_, n) => [...set, ...group.slice(0, n)]));
  }
  return sets.filter((set) => set.length > 0);
}

interface Node {
  readonly flow: number;
  readonly power: number;
  readonly kind: string;
}

/**
 * F between two flows at which it may jump. It is solved at even nodes; where the arrangement changes between two of
 * them, the place is bisected down to `narrow`, so that each stretch between changes is smooth.
 */
class Segment implements Branch {
  readonly from: number;
  readonly to: number;
  private readonly flows: Float64Array;
  private readonly values: Float64Array;
  /** Arrangements by number: nodes of one number in a row lie on one smooth stretch. */
  private readonly kinds: Uint16Array;

  readonly exact: (flow: number) => number;

  constructor(from: number, to: number, cells: number, narrow: number, solve: Solve) {
    // The left end belongs to the segment before it (what runs there may not reach further), or is rest.
    const start = from + (to - from) * 1e-6;
    const nodeAt = (flow: number): Node => ({ flow, ...solve(flow) });
    const nodes: Node[] = [];
    for (let i = 0; i <= cells; i++) {
      const node = nodeAt(i === cells ? to : start + ((to - start) * i) / cells);
      const before = nodes[nodes.length - 1];
      if (before) nodes.push(...changesBetween(before, node, narrow, nodeAt));
      nodes.push(node);
    }
    // A node that closes one bracket may open the next.
    const apart = [...new Set(nodes)];
    this.from = start;
    this.to = to;
    // A curve of motor or pump may kink between nodes, just where the power per flow is least.
    this.exact = (flow) => solve(flow).power;
    this.flows = Float64Array.from(apart, (node) => node.flow);
    this.values = Float64Array.from(apart, (node) => node.power);
    const names = [...new Set(apart.map((node) => node.kind))];
    this.kinds = Uint16Array.from(apart, (node) => names.indexOf(node.kind));
  }

  /** Power at a flow: a cubic through the nearest nodes of the same arrangement. */
  power(flow: number): number {
    const { flows, values, kinds } = this;
    const last = flows.length - 1;
    let low = 0;
    let high = last;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if (flows[middle]! <= flow) low = middle;
      else high = middle;
    }
    const kind = kinds[low];
    // A cell in which the arrangement changes is so narrow that a straight line through it will do.
    if (kind !== kinds[high]) {
      const share = (flow - flows[low]!) / (flows[high]! - flows[low]!);
      return values[low]! + share * (values[high]! - values[low]!);
    }
    if (high < last && kinds[high + 1] === kind) high++;
    while (high - low < 3 && low > 0 && kinds[low - 1] === kind) low--;
    while (high - low < 3 && high < last && kinds[high + 1] === kind) high++;
    let sum = 0;
    for (let j = low; j <= high; j++) {
      let weight = values[j]!;
      for (let k = low; k <= high; k++) if (k !== j) weight *= (flow - flows[k]!) / (flows[j]! - flows[k]!);
      sum += weight;
    }
    return sum;
  }
}

/** Pairs of nodes on either side of each change of arrangement between two nodes. */
function changesBetween(a: Node, b: Node, narrow: number, nodeAt: (flow: number) => Node): Node[] {
  if (a.kind === b.kind) return [];
  if (b.flow - a.flow <= narrow) return [a, b];
  const middle = nodeAt((a.flow + b.flow) / 2);
  return [...changesBetween(a, middle, narrow, nodeAt), ...changesBetween(middle, b, narrow, nodeAt)];
}
