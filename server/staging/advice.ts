import type { Note } from '../errors.ts';
import type { Pump } from '../hydraulics/pump.ts';
import { systemHead } from '../hydraulics/systemCurve.ts';
import type { Station } from '../station/station.ts';
import { energyKwh } from '../units.ts';
import { BestSets } from './bestSets.ts';
import { deadHeadedNotes } from './deadHeaded.ts';
import { MixedPumps } from './mixedPumps.ts';
import { fixedSpeed } from './rules/fixedSpeed.ts';
import type { StagedPumps } from './stagedPumps.ts';
import { stagedPumpsOf } from './stagedPumpsOf.ts';
import { type Action, held, meanPower, NEAR_DEAD_HEAD, SLACK, type State } from './state.ts';

/** One way to meet a flow now. */
export interface Way {
  /** What runs: the state held, or the upper of the two that share the time. */
  readonly state: State;
  /** The state it shares the time with, and the time share of `state`; null where nothing is shared. */
  readonly restsIn: State | null;
  readonly share: number;
  /** Mean electric power, standby included [W]. */
  readonly power: number;
  readonly kwhPerM3: number | null;
}

/** What to run at one flow; SI throughout. */
export interface Advice {
  /** null where nothing should run: no flow, or no pump lifts the static head. */
  readonly best: Way | null;
  /** The best of the other sets, and what it would cost more [W]. */
  readonly nextBest: (Way & { readonly extraPower: number }) | null;
  /** Flow that the pumps cannot meet [m³/s]. */
  readonly shortfall: number;
  readonly headerHead: number;
  readonly notes: readonly Note[];
}

/**
 * Which pumps to run now, at a flow [m³/s] and a static head [m]. Counts of equal pumps, and sets of different ones, are
 * weighed by mean power; a state near dead-head, or outside the allowable range, is proposed only where there is no other.
 */
export function adviceNow(station: Station, duty: readonly Pump[], flow: number, staticHead: number): Advice {
  const pumps = stagedPumpsOf(station, duty);
  pumps.at(staticHead);
  const headerHead = systemHead(station.friction, staticHead, flow);
  if (flow <= 0) return { best: null, nextBest: null, shortfall: 0, headerHead, notes: [] };
  const ways = waysToMeet(pumps, flow);
  const sound = ways.filter((action) => isSound(action.high, station));
  const ranked = (sound.length > 0 ? sound : ways).sort((a, b) => meanPower(a) - meanPower(b));
  const first = ranked[0];
  const shut = (total: number) => deadHeadedNotes(station, duty, systemHead(station.friction, staticHead, total));
  if (!first) {
    const full = pumps.onDrives ? pumps.flatOut(pumps.most) : pumps.fixed(pumps.most);
    const best = full.count === 0 ? null : wayOf(station, held(full), full.flow);
    return {
      best,
      nextBest: null,
      shortfall: flow - full.flow,
      headerHead,
      notes: [...capacityNotes(full), ...(best ? shut(full.flow) : [])],
    };
  }
  const other = ranked.find((action) => action.high.set !== first.high.set);
  const best = wayOf(station, first, flow);
  const next = other ? wayOf(station, other, flow) : null;
  return {
    best,
    nextBest: next && { ...next, extraPower: next.power - best.power },
    shortfall: 0,
    headerHead,
    notes: [...stateNotes(first.high), ...shut(first.high.flow)],
  };
}

function waysToMeet(pumps: StagedPumps, flow: number): Action[] {
  if (!pumps.onDrives) {
    const decide = fixedSpeed.start(pumps, NO_RECORD);
    const action = decide(flow);
    const ways = action.shortfall > 0 ? [] : [action];
    if (pumps.station.surplus === 'throttle') {
      for (let n = action.high.count + 1; n <= pumps.most; n++) ways.push(held(pumps.throttled(n, flow)));
    }
    return ways;
  }
  const ways: Action[] = [];
  for (let n = 1; n <= pumps.most; n++) {
    const trim = pumps.trim(n, flow);
    if (trim.feasible) ways.push(pumps.action(trim, flow));
  }
  if (pumps instanceof MixedPumps) {
    const best = new BestSets(pumps).bestNow(flow);
    if (best) ways.push(best);
  }
  return ways;
}

/** fixed-speed looks at no record; it is asked for one flow. */
const NO_RECORD = {
  startMs: new Float64Array(0),
  seconds: new Float64Array(0),
  flow: new Float64Array(0),
  staticHead: 0,
  suctionLevel: null,
  fromMs: 0,
  toMs: 0,
  coveredSeconds: 0,
  gapSeconds: 0,
  volume: 0,
  notes: [],
};

function isSound(state: State, station: Station): boolean {
  const { overloaded, nearDeadHead, outsideAllowable } = state.doubts;
  return !overloaded && (station.allowable ? !outsideAllowable : !nearDeadHead);
}

function wayOf(station: Station, action: Action, flow: number): Way {
  const power = meanPower(action) + station.standbyPower;
  const resting = action.share > 0 && action.share < 1;
  return {
    state: action.high,
    restsIn: resting ? action.low : null,
    share: resting ? action.share : 1,
    power,
    kwhPerM3: flow > 0 ? energyKwh(power, 1 / flow) : null,
  };
}

function capacityNotes(full: State): Note[] {
  if (full.count === 0)
    return [{ code: 'cannot-lift', text: 'The pumps cannot lift the static head: none should run.' }];
  return [{ code: 'shortfall', text: 'The flow is above the capacity of the duty pumps: they run flat out.' }];
}

function stateNotes(state: State): Note[] {
  const notes: Note[] = [];
  const { overloaded, nearDeadHead, outsideAllowable, atEndOfCurve } = state.doubts;
  if (overloaded)
    notes.push({ code: 'motor-overload', text: 'A motor would carry more than rating × service factor.' });
  if (atEndOfCurve)
    notes.push({ code: 'end-of-curve', text: 'A pump would run off the end of its curve; check NPSH.' });
  if (outsideAllowable)
    notes.push({ code: 'outside-allowable', text: 'A pump would run outside its allowable range.' });
  if (nearDeadHead && state.leastShareOfBest < NEAR_DEAD_HEAD * (1 - SLACK)) {
    notes.push({ code: 'near-dead-head', text: 'A pump would run below 0.3 of its best-efficiency flow.' });
  }
  return notes;
}
