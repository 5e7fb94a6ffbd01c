import type { Note } from '../errors.ts';
import type { Pump } from '../hydraulics/pump.ts';
import { root } from '../hydraulics/roots.ts';
import { systemHead } from '../hydraulics/systemCurve.ts';
import type { Station } from '../station/station.ts';
import { GRAVITY, HEAD_UNITS } from '../units.ts';
import { type Crossing, capacityOf, crossingsBetween, powerOfCount } from './crossings.ts';
import { deadHeadedNotes, shutOutNotes } from './deadHeaded.ts';
import { lastWithin } from './lastWithin.ts';
import { MixedPumps } from './mixedPumps.ts';
import { type SetStep, setLadder } from './setLadder.ts';
import type { StagedPumps } from './stagedPumps.ts';
import { stagedPumpsOf } from './stagedPumpsOf.ts';
import { NEAR_DEAD_HEAD, type State } from './state.ts';

/** Staying on n may cost this share more than n + 1 before the next pump is brought on, and the other way round. */
export const DEFAULT_BAND = 0.01;

/** Why a step stands where it does. */
export type StepReason =
  | 'crossing'
  /** n pumps draw less up to their capacity: the next is for flow, not for economy. */
  | 'cheaper-to-capacity'
  /** n + 1 pumps draw less at every flow they may run at. */
  | 'always-cheaper'
  /** Moved to where n + 1 pumps are inside their allowable range, or clear of dead-head. */
  | 'least-flow'
  /** Moved to where n pumps leave their allowable range or overload their motors. */
  | 'most-flow'
  /** Direct on line: a pump is added when those that run cannot meet the flow. */
  | 'no-drives';

/** One rung of the card: when the next pump comes on and goes off. Flows in m³/s, heads in m. */
export interface CardStep {
  readonly from: number;
  readonly to: number;
  /** Q*, where both counts draw the same; where there is none, the flow the step is made at. */
  readonly flow: number;
  readonly bringOn: number;
  readonly dropOff: number;
  /** Share of rated speed of n, and of n + 1, at `flow`; the same at bringOn and at dropOff. */
  readonly speedBefore: number;
  readonly speedAfter: number;
  readonly atBringOn: { readonly speedBefore: number; readonly speedAfter: number; readonly headerHead: number };
  readonly atDropOff: { readonly speedBefore: number; readonly speedAfter: number; readonly headerHead: number };
  readonly reason: StepReason;
  readonly text: string;
  /** Every flow at which the two counts draw the same. */
  readonly crossings: readonly number[];
}

/** The card in SI: static head [m], band as a share. */
export interface OperatorCard {
  readonly staticHead: number;
  readonly band: number;
  /** With drives that are there, with drives that are proposed, or direct on line. */
  readonly basis: 'drives' | 'proposed-drives' | 'direct-on-line';
  readonly steps: readonly CardStep[];
  /** For pumps that differ: the best set as flow rises; empty where a count says who runs. */
  readonly sets: readonly SetStep[];
  /** Largest flow of each count, from one pump up [m³/s]. */
  readonly capacities: readonly number[];
  /** null where unknown, or where the pumps differ in it. */
  readonly ratedSpeedRpm: number | null;
  /** Start and stop levels of each duty place, where the station file has them [m]. */
  readonly levels: readonly { readonly start: number; readonly stop: number }[];
  /** The same crossings at the lowest and the highest static head; null where no range is known. */
  readonly moves: {
    readonly low: { readonly staticHead: number; readonly flows: readonly (number | null)[] };
    readonly high: { readonly staticHead: number; readonly flows: readonly (number | null)[] };
  } | null;
  readonly notes: readonly Note[];
}

/**
 * The operator's card (how many pumps at which flow), at one static head.
 *
 * Q* is the flow at which the mean power of n pumps equals that of n + 1 (of several, the highest above which n + 1 is
 * the cheaper). bringOn is the largest flow at or above Q* where staying on n costs at most the band more; dropOff the
 * smallest at or below Q* where staying on n + 1 does. Both are clipped to what n and n + 1 may do: capacity, motor
 * rating, allowable range, or 0.3 of best-efficiency flow where no range is given. Powers are without standby.
 */
export function operatorCard(
  station: Station,
  duty: readonly Pump[],
  {
    staticHead = station.staticHead,
    band = DEFAULT_BAND,
    range = levelRange(station),
  }: { staticHead?: number; band?: number; range?: { readonly low: number; readonly high: number } | null } = {},
): OperatorCard {
  const pumps = stagedPumpsOf(station, duty);
  pumps.at(staticHead);
  const steps: CardStep[] = [];
  for (let n = 1; n < pumps.most; n++) {
    const step = cardStep(pumps, n, band);
    if (step) steps.push(step);
  }
  const capacities = Array.from({ length: pumps.most }, (_, i) => capacityOf(pumps, i + 1));
  const flowsAt = (head: number) => {
    const moved = stagedPumpsOf(station, duty);
    moved.at(head);
    return {
      staticHead: head,
      flows: Array.from(
        { length: pumps.most - 1 },
        (_, i) => mainCrossing(crossingsBetween(moved, i + 1))?.flow ?? null,
      ),
    };
  };
  return {
    staticHead,
    band,
    basis: !pumps.onDrives
      ? 'direct-on-line'
      : duty.some((pump) => pump.hasDrive && !pump.driveFitted)
        ? 'proposed-drives'
        : 'drives',
    steps,
    sets: setLadder(pumps, band),
    capacities,
    ratedSpeedRpm: duty.every((pump) => pump.ratedSpeed === duty[0]!.ratedSpeed) ? duty[0]!.ratedSpeed : null,
    levels: station.storage.levels,
    moves: range && range.high > range.low ? { low: flowsAt(range.low), high: flowsAt(range.high) } : null,
    notes: cardNotes(station, duty, { capacities, staticHead }),
  };
}

/** Static heads between the lowest stop and the highest start level, where the station knows the other side. */
function levelRange(station: Station): { low: number; high: number } | null {
  const { levels, side } = station.storage;
  const other = side === 'suction' ? station.dischargeLevel : station.suctionLevel;
  if (other === null || levels.length === 0) return null;
  const all = levels.flatMap(({ start, stop }) => [start, stop]);
  const heads = all.map((level) => Math.abs(other - level));
  return { low: Math.min(...heads), high: Math.max(...heads) };
}

function cardNotes(
  station: Station,
  duty: readonly Pump[],
  { capacities, staticHead }: { readonly capacities: readonly number[]; readonly staticHead: number },
): Note[] {
  const capacity = Math.max(...capacities);
  if (capacity > 0) {
    return [...deadHeadedNotes(station, duty, staticHead), ...shutOutNotes(station, duty, { staticHead, capacity })];
  }
  const unit = station.units.head;
  const head = Number((staticHead / HEAD_UNITS[unit]).toPrecision(4));
  return [{ code: 'cannot-lift', text: `The pumps cannot lift the static head of ${head} ${unit}: none runs.` }];
}

/** Of several crossings the highest at which n + 1 becomes the cheaper. */
function mainCrossing(crossings: readonly Crossing[]): Crossing | null {
  return crossings.filter((crossing) => crossing.rising).at(-1) ?? null;
}

function cardStep(pumps: StagedPumps, from: number, band: number): CardStep | null {
  const to = from + 1;
  const capacity = capacityOf(pumps, from);
  if (capacity <= 0) return null;
  const crossings = crossingsBetween(pumps, from);
  const before = (flow: number) => powerOfCount(pumps, from, flow);
  const after = (flow: number) => powerOfCount(pumps, to, flow);
  const least = leastFlow(pumps, to);
  const most = Math.min(capacity, mostFlow(pumps, from));
  const main = mainCrossing(crossings);
  const near = capacity * (1 - 1e-9);
  let reason: StepReason;
  let flow: number;
  let bringOn: number;
  let dropOff: number;
  if (!pumps.onDrives) {
    reason = 'no-drives';
    flow = capacity;
    bringOn = capacity;
    dropOff = capacity * (1 - band);
  } else if (main) {
    reason = 'crossing';
    flow = main.flow;
    bringOn = lastWithin(flow, near, (q) => before(q) <= (1 + band) * after(q));
    dropOff = lastWithin(flow, Math.max(least, flow * 1e-3), (q) => after(q) <= (1 + band) * before(q));
  } else if (before(near) > after(near)) {
    reason = 'always-cheaper';
    flow = least;
    bringOn = least;
    dropOff = least;
  } else {
    reason = 'cheaper-to-capacity';
    flow = capacity;
    bringOn = capacity;
    dropOff = lastWithin(capacity, Math.max(least, capacity * 1e-3), (q) => after(q) <= (1 + band) * before(q));
  }
  if (bringOn < least && least <= most) {
    bringOn = least;
    if (reason === 'crossing') reason = 'least-flow';
  }
  if (bringOn > most) {
    bringOn = most;
    if (most < capacity) reason = 'most-flow';
  }
  // A dead band of no width would hunt: the two flows keep at least the band apart.
  dropOff = Math.min(Math.max(dropOff, Math.min(least, most)), bringOn * (1 - band));
  const at = (q: number) => ({
    speedBefore: speedOf(pumps, from, q),
    speedAfter: speedOf(pumps, to, q),
    headerHead: systemHead(pumps.station.friction, pumps.staticHead, q),
  });
  return {
    from,
    to,
    flow,
    bringOn,
    dropOff,
    speedBefore: speedOf(pumps, from, Math.min(flow, near)),
    speedAfter: speedOf(pumps, to, flow),
    atBringOn: at(Math.min(bringOn, near)),
    atDropOff: at(dropOff),
    reason,
    text: reasonText(reason, pumps, from),
    crossings: crossings.map((crossing) => crossing.flow),
  };
}

function reasonText(reason: StepReason, pumps: StagedPumps, n: number): string {
  const these = whoRuns(pumps, n);
  const more = whoRuns(pumps, n + 1);
  switch (reason) {
    case 'crossing':
      return `Above this flow ${more} draw less than ${these}.`;
    case 'cheaper-to-capacity':
      return `Up to its capacity ${these} draw${n === 1 ? 's' : ''} less: the next pump is for flow, not for economy.`;
    case 'always-cheaper':
      return `At every flow they may run at, ${more} draw less than ${these}.`;
    case 'least-flow':
      return `${more} would pay earlier, but run too far below their best-efficiency flow there.`;
    case 'most-flow':
      return `Beyond this flow ${these} would leave the allowable range or overload a motor.`;
    case 'no-drives':
      return `Direct on line a pump is added when ${these} cannot meet the flow.`;
  }
}

/** The first n pumps in a sentence: by their count where they are equal, else by name. */
function whoRuns(pumps: StagedPumps, n: number): string {
  if (!(pumps instanceof MixedPumps)) return n === 1 ? 'one pump' : `${n} pumps`;
  const names = pumps.duty.slice(0, n).map((pump) => pump.name);
  return n === 1 ? names[0]! : `${names.slice(0, -1).join(', ')} and ${names[n - 1]}`;
}

function speedOf(pumps: StagedPumps, count: number, flow: number): number {
  if (!pumps.onDrives) return 1;
  const trim = pumps.trim(count, flow);
  return trim.feasible ? trim.speed : pumps.flatOut(count).speed;
}

/** What n pumps are in when they give Q: their own state, or the one that shares the time with rest. */
function stateOf(pumps: StagedPumps, count: number, flow: number): State {
  const trim = pumps.trim(count, flow);
  return trim.feasible ? pumps.action(trim, flow).high : pumps.flatOut(count);
}

/** Least flow at which n pumps hold without rest inside the allowable range, or at 0.3 of best where none is given. */
function leastFlow(pumps: StagedPumps, count: number): number {
  if (!pumps.onDrives) return 0;
  const { allowable } = pumps.station;
  const limit = allowable?.from ?? NEAR_DEAD_HEAD;
  const capacity = capacityOf(pumps, count);
  const low = capacity * 1e-6;
  const rest = pumps.trim(count, low).rest;
  if (allowable && rest) return Math.min(rest.flow, capacity);
  const lacks = (flow: number) => stateOf(pumps, count, flow).leastShareOfBest - limit;
  if (lacks(low) >= 0) return 0;
  if (lacks(capacity) < 0) return capacity;
  return root(lacks, low, capacity, 1e-12);
}

/** Largest flow at which n pumps are inside the allowable range and overload no motor. */
function mostFlow(pumps: StagedPumps, count: number): number {
  if (!pumps.onDrives) return Infinity;
  const to = pumps.station.allowable?.to ?? Infinity;
  const capacity = capacityOf(pumps, count) * (1 - 1e-9);
  const fits = (flow: number) => {
    const state = stateOf(pumps, count, flow);
    return state.greatestShareOfBest <= to && !state.doubts.overloaded;
  };
  return fits(capacity) ? Infinity : lastWithin(capacity * 1e-3, capacity, fits);
}

/** Pressure in the header [Pa] of a head of the station's liquid. */
export function headerPressure(station: Station, head: number): number {
  return station.density * GRAVITY * head;
}
