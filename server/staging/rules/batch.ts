import { bestSetsOf } from '../bestSets.ts';
import { type Branch, type HullPiece, lowerHull, pieceAt } from '../hull.ts';
import { MixedPumps } from '../mixedPumps.ts';
import type { Decide, Rule } from '../rule.ts';
import type { StagedPumps } from '../stagedPumps.ts';
import { type Action, held, type State, shared } from '../state.ts';
import { flatOut } from './trimmedCounts.ts';

/**
 * Run at the best point and rest: any two states of equal-speed pumps, off included, may share the time, so the power is
 * the lower convex envelope of power over flow. States that overload a motor, and states outside the allowable range,
 * are used only for flows that cannot be met without them.
 */
export const batch: Rule = {
  id: 'batch',
  drives: 'all',
  storageOnly: true,
  start(pumps): Decide {
    if (pumps instanceof MixedPumps) {
      const sets = bestSetsOf(pumps);
      return (flow) => (flow === 0 ? held(pumps.off) : (sets.batch(flow) ?? sets.best(flow) ?? flatOut(pumps, flow)));
    }
    const envelopes = new Envelopes(pumps);
    return (flow) => (flow === 0 ? held(pumps.off) : envelopes.action(flow));
  },
};

/** One count of pumps, as a branch of power over flow. */
interface CountBranch extends Branch {
  readonly count: number;
}

/** What states may be used: the strictest choice that reaches a flow holds. */
const CHOICES = ['sound and inside', 'sound', 'inside', 'any'] as const;
type Choice = (typeof CHOICES)[number];

/** Envelopes at one static head, built when first needed; heads that differ by less than a millimetre share theirs. */
class Envelopes {
  private readonly pumps: StagedPumps;
  private readonly known = new Map<number, readonly HullPiece[]>();

  constructor(pumps: StagedPumps) {
    this.pumps = pumps;
  }

  action(flow: number): Action {
    for (let choice = 0; choice < CHOICES.length; choice++) {
      const piece = pieceAt(this.envelope(choice), flow);
      if (piece) return this.within(piece, flow);
    }
    return flatOut(this.pumps, flow);
  }

  /** @param choice  its place in CHOICES */
  private envelope(choice: number): readonly HullPiece[] {
    const { pumps } = this;
    const key = CHOICES.length * Math.round(pumps.staticHead * HEADS_PER_METRE) + choice;
    let pieces = this.known.get(key);
    if (!pieces) {
      pieces = lowerHull(Array.from({ length: pumps.most }, (_, i) => branches(pumps, i + 1, CHOICES[choice]!)).flat());
      this.known.set(key, pieces);
    }
    return pieces;
  }

  private within(piece: HullPiece, flow: number): Action {
    const { pumps } = this;
    const { from, to, chord } = piece;
    // An envelope of a head half a millimetre away may end a hair beyond what the pumps do at this one.
    const stateAt = (count: number, at: number): State =>
      at >= pumps.flatOut(count).flow
        ? pumps.flatOut(count)
        : at <= pumps.lowest(count).flow
          ? pumps.lowest(count)
          : pumps.trimmedState(count, at)!;
    if (!chord) return held(stateAt((from.branch as CountBranch).count, flow));
    const low = from.branch ? stateAt((from.branch as CountBranch).count, from.flow) : pumps.off;
    return shared(low, stateAt((to.branch as CountBranch).count, to.flow), flow);
  }
}

const HEADS_PER_METRE = 1000;

/** The stretches of flow on which n pumps at equal speed may run under a choice, ends found by bisection. */
function branches(pumps: StagedPumps, count: number, choice: Choice): CountBranch[] {
  const from = pumps.lowest(count).flow;
  const to = pumps.flatOut(count).flow;
  if (!(to > from)) return [];
  const may = (flow: number): boolean => {
    const state = pumps.trimmedState(count, flow);
    if (!state) return false;
    const { overloaded, outsideAllowable } = state.doubts;
    if (overloaded && (choice === 'sound' || choice === 'sound and inside')) return false;
    return !(outsideAllowable && (choice === 'inside' || choice === 'sound and inside'));
  };
  const power = (flow: number) => pumps.trimmedState(count, flow)?.power ?? Number.NaN;
  if (choice === 'any') return [{ count, from, to, power }];
  const steps = 64;
  const found: CountBranch[] = [];
  let open: number | null = may(from) ? from : null;
  let before = from;
  for (let i = 1; i <= steps; i++) {
    const flow = from + ((to - from) * i) / steps;
    const allowed = may(flow);
    if (allowed && open === null) open = edge(may, flow, before);
    if (!allowed && open !== null) {
      found.push({ count, from: open, to: edge(may, before, flow), power });
      open = null;
    }
    before = flow;
  }
  if (open !== null) found.push({ count, from: open, to, power });
  return found;
}

/** The last flow that may be used, between one that may and one that may not. */
function edge(may: (flow: number) => boolean, good: number, bad: number): number {
  let inside = good;
  let outside = bad;
  for (let i = 0; i < 48; i++) {
    const middle = (inside + outside) / 2;
    if (may(middle)) inside = middle;
    else outside = middle;
  }
  return inside;
}
