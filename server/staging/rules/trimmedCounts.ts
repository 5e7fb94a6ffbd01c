import { bestSetsOf } from '../bestSets.ts';
import { Contenders } from '../contenders.ts';
import type { DemandRecord } from '../demandRecord.ts';
import { MixedPumps } from '../mixedPumps.ts';
import type { Decide, Rule } from '../rule.ts';
import type { StagedPumps, Trim } from '../stagedPumps.ts';
import { type Action, held } from '../state.ts';

/**
 * Counts a rule may choose from (model.md §4 and §5): those that meet the flow; of these, those that overload no motor
 * where there are any; of these, those inside the allowable range where there are any. Calls `consider` for each, from
 * few pumps to many.
 */
export function eachCandidate(pumps: StagedPumps, flow: number, consider: (trim: Trim) => void): void {
  const { most } = pumps;
  let sound = false;
  let soundInside = false;
  let inside = false;
  for (let n = 1; n <= most; n++) {
    const trim = pumps.trim(n, flow);
    if (!trim.feasible) continue;
    pumps.judged(trim, flow);
    if (!trim.overloaded) sound = true;
    if (trim.inside) inside = true;
    if (!trim.overloaded && trim.inside) soundInside = true;
  }
  const wantInside = sound ? soundInside : inside;
  for (let n = 1; n <= most; n++) {
    const trim = pumps.known(n);
    if (!trim.feasible || (sound && trim.overloaded) || (wantInside && !trim.inside)) continue;
    consider(trim);
  }
}

/** The first in line of the candidates: where nothing speaks against the first of all counts, it is the one. */
function chosen(pumps: StagedPumps, flow: number, first: Trim | null, beats: (a: Trim, b: Trim) => boolean): Action {
  if (first === null) return flatOut(pumps, flow);
  const { overloaded, inside } = pumps.judged(first, flow);
  if (!overloaded && inside) return pumps.action(first, flow);
  let best: Trim | null = null;
  eachCandidate(pumps, flow, (trim) => {
    if (best === null || beats(trim, best)) best = trim;
  });
  return pumps.action(best!, flow);
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
      let fewest: Trim | null = null;
      for (let n = 1; n <= pumps.most && fewest === null; n++) {
        const trim = pumps.trim(n, flow);
        if (trim.feasible) fewest = trim;
      }
      return chosen(pumps, flow, fewest, () => false);
    };
  },
};

/** Counts to work out at a flow: all of them, unless a long record of one static head makes a table worth its while. */
function contendersOver(pumps: StagedPumps, { flow, staticHead }: DemandRecord): (flow: number) => readonly number[] {
  if (typeof staticHead !== 'number' || flow.length < WORTH_A_TABLE) {
    const all = Array.from({ length: pumps.most }, (_, i) => i + 1);
    return () => all;
  }
  pumps.at(staticHead);
  const contenders = new Contenders(pumps);
  return (asked) => contenders.at(asked);
}

const WORTH_A_TABLE = 5000;

/** Whether a takes less than b; the margin keeps a rounding from deciding a tie. */
const takesLess = (a: Trim, b: Trim): boolean => a.power < b.power * (1 - 1e-12);

/**
 * Trimmed to the flow, the set of least mean power for this interval. Equal pumps run at equal speed and the set is a
 * count, ties going to fewer; of pumps that differ the set and the split are searched.
 */
export const bestCount: Rule = {
  id: 'best-count',
  drives: 'all',
  start(pumps, record): Decide {
    if (pumps instanceof MixedPumps) {
      const sets = bestSetsOf(pumps);
      return (flow) => (flow === 0 ? held(pumps.off) : (sets.best(flow) ?? flatOut(pumps, flow)));
    }
    const contenders = contendersOver(pumps, record);
    return (flow) => {
      if (flow === 0) return held(pumps.off);
      let least: Trim | null = null;
      for (const count of contenders(flow)) {
        const trim = pumps.trim(count, flow);
        if (trim.feasible && (least === null || takesLess(trim, least))) least = trim;
      }
      return chosen(pumps, flow, least, takesLess);
    };
  },
};
