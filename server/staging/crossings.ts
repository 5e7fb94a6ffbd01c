import { root } from '../hydraulics/roots.ts';
import type { StagedPumps } from './stagedPumps.ts';

/** Where running one more pump begins or ceases to draw less power, at one static head. */
export interface Crossing {
  readonly from: number;
  readonly to: number;
  /** Total flow [m³/s] and mean power [W] at which both counts draw the same. */
  readonly flow: number;
  readonly power: number;
  /** true where the larger count is the cheaper one above this flow. */
  readonly rising: boolean;
}

const STEPS = 400;

/**
 * Mean power [W] of n pumps in use at a flow, standby not included; NaN where they cannot meet it. With drives: trimmed
 * to the flow, at equal speed. Without: direct on line, sharing with n − 1 (storage) or against a valve.
 */
export function powerOfCount(pumps: StagedPumps, count: number, flow: number): number {
  if (pumps.onDrives) {
    const trim = pumps.trim(count, flow);
    return trim.feasible ? trim.power : Number.NaN;
  }
  const state = pumps.fixed(count);
  if (state.flow < flow) return Number.NaN;
  if (pumps.station.surplus === 'throttle') return pumps.throttled(count, flow).power;
  const below = pumps.fixed(count - 1);
  if (flow < below.flow || state.flow <= below.flow) return Number.NaN;
  return below.power + ((flow - below.flow) / (state.flow - below.flow)) * (state.power - below.power);
}

/** Largest flow of n pumps [m³/s]: at full speed of the drives, or direct on line. */
export function capacityOf(pumps: StagedPumps, count: number): number {
  return (pumps.onDrives ? pumps.flatOut(count) : pumps.fixed(count)).flow;
}

/**
 * All flows at which n and n + 1 pumps draw the same mean power, lowest first. Found by a scan up to the capacity of n
 * and a bracketed root in each cell where the difference changes sign.
 */
export function crossingsBetween(pumps: StagedPumps, from: number): Crossing[] {
  const to = from + 1;
  const capacity = capacityOf(pumps, from);
  if (to > pumps.most || capacity <= 0) return [];
  const saving = (flow: number) => powerOfCount(pumps, from, flow) - powerOfCount(pumps, to, flow);
  const found: Crossing[] = [];
  const first = capacity / STEPS / 10;
  let before = saving(first);
  let beforeFlow = first;
  for (let i = 1; i <= STEPS; i++) {
    const flow = Math.min((capacity * i) / STEPS, capacity * (1 - 1e-12));
    const here = saving(flow);
    // Counts that rest alike (both shared with off at one power a volume) differ by rounding only: no crossing.
    const telling = Math.abs(here) > 1e-9 * powerOfCount(pumps, to, flow);
    if (Number.isNaN(before) || !telling) {
      if (Number.isNaN(before)) before = here;
      beforeFlow = telling ? flow : beforeFlow;
      continue;
    }
    if (before < 0 !== here < 0) {
      const at = root(saving, beforeFlow, flow);
      found.push({ from, to, flow: at, power: powerOfCount(pumps, to, at), rising: here > 0 });
    }
    before = here;
    beforeFlow = flow;
  }
  return found;
}

/** The crossings of every count with the next. */
export function allCrossings(pumps: StagedPumps): Crossing[] {
  const all: Crossing[] = [];
  for (let n = 1; n < pumps.most; n++) all.push(...crossingsBetween(pumps, n));
  return all;
}
