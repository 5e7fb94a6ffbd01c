import { systemHead } from '../hydraulics/systemCurve.ts';
import type { MixedPumps } from './mixedPumps.ts';
import { NODES, SetTable } from './setTable.ts';
import type { Action } from './state.ts';
import { choicesOf, type Strictness } from './strictness.ts';

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
  private readonly choices: readonly Strictness[];

  constructor(pumps: MixedPumps) {
    this.pumps = pumps;
    this.choices = choicesOf(pumps);
    const { friction, staticHead } = pumps.station;
    const full = pumps.flatOut(pumps.most).flow;
    this.headStep = Math.max(1e-6, HEAD_STEP * systemHead(friction, staticHead, full));
  }

  /** The action of least mean power that meets Q > 0; null where no set does. */
  best(flow: number): Action | null {
    for (const choice of this.choices) {
      const found = this.table(choice).at(flow);
      if (found) return found;
    }
    // The table may lose a state between two of its flows; below the capacity there is one to be found.
    return flow < this.pumps.flatOut(this.pumps.most).flow ? this.bestNow(flow) : null;
  }

  /** The same for a single flow, without a table: for advice about this moment. */
  bestNow(flow: number): Action | null {
    for (const choice of this.choices) {
      const found = new SetTable(this.pumps, choice, { only: flow }).at(flow);
      if (found) return found;
    }
    return null;
  }

  /** Least mean power where any two of these states may share the time. */
  batch(flow: number): Action | null {
    for (const choice of this.choices) {
      const found = this.table(choice).batch(flow);
      if (found) return found;
    }
    return null;
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
