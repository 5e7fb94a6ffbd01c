import { BestSets } from '../bestSets.ts';
import { MixedPumps } from '../mixedPumps.ts';
import type { Decide, Rule } from '../rule.ts';
import type { StagedPumps, Trim } from '../stagedPumps.ts';
import { type Action, held } from '../state.ts';

/**
 * Which counts a rule may choose from (model.md §4 and §5): those that meet the flow; of these, those that overload no
 * motor where there are any; of these, those inside the allowable range where there are any. Calls `consider` for each,
 * from few pumps to many, until it returns true.
 */
export function eachCandidate(pumps: StagedPumps, flow: number, consider: (trim: Trim) => boolean): void {
  const { most } = pumps;
  let sound = false;
  let soundInside = false;
  let inside = false;
  for (let n = 1; n <= most; n++) {
    const trim = pumps.trim(n, flow);
    if (!trim.feasible) continue;
    if (!trim.overloaded) sound = true;
    if (trim.inside) inside = true;
    if (!trim.overloaded && trim.inside) soundInside = true;
  }
  const wantInside = sound ? soundInside : inside;
  for (let n = 1; n <= most; n++) {
    const trim = pumps.known(n);
    if (!trim.feasible || (sound && trim.overloaded) || (wantInside && !trim.inside)) continue;
    if (consider(trim)) return;
  }
}

/** What happens where no count meets the flow: all pumps flat out, the rest being shortfall. */
export function flatOut(pumps: StagedPumps, flow: number): Action {
  const full = pumps.flatOut(pumps.most);
  return held(full, flow - full.flow);
}

/** Equal speed, the smallest count that meets the flow: the habit of adding a pump only when all are flat out. */
export const lateStaging: Rule = {
  id: 'late-staging',
  drives: 'all',
  start(pumps): Decide {
    return (flow) => {
      if (flow === 0) return held(pumps.off);
      let chosen: Trim | null = null;
      eachCandidate(pumps, flow, (trim) => {
        chosen = trim;
        return true;
      });
      return chosen === null ? flatOut(pumps, flow) : pumps.action(chosen, flow);
    };
  },
};

/**
 * Trimmed to the flow, the set of least mean power for this interval. Equal pumps run at equal speed and the set is a
 * count, ties going to fewer; of pumps that differ the set and the split are searched.
 */
export const bestCount: Rule = {
  id: 'best-count',
  drives: 'all',
  start(pumps): Decide {
    if (pumps instanceof MixedPumps) {
      const sets = new BestSets(pumps);
      return (flow) => (flow === 0 ? held(pumps.off) : (sets.best(flow) ?? flatOut(pumps, flow)));
    }
    return (flow) => {
      if (flow === 0) return held(pumps.off);
      let chosen: Trim | null = null;
      let least = Infinity;
      eachCandidate(pumps, flow, (trim) => {
        // The margin keeps a rounding from deciding a tie.
        if (trim.power < least * (1 - 1e-12)) {
          least = trim.power;
          chosen = trim;
        }
        return false;
      });
      return chosen === null ? flatOut(pumps, flow) : pumps.action(chosen, flow);
    };
  },
};
