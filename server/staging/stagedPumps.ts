import type { Pump } from '../hydraulics/pump.ts';
import type { Station } from '../station/station.ts';
import type { Action, State } from './state.ts';

/** A count of pumps trimmed to a flow: the figures that decide, before an action is made of it. */
export interface Trim {
  count: number;
  /** Whether these pumps can meet the flow at their highest speed. */
  feasible: boolean;
  /** Mean electric power of the interval [W]. */
  power: number;
  speed: number;
  /** Whether a motor is overloaded: known once it was judged. */
  overloaded: boolean;
  /** Whether the state, or the upper of the two shared, is inside the allowable range: known once it was judged. */
  inside: boolean;
  /** The state shared with off where the pumps cannot be turned down to the flow; null where nothing is shared. */
  rest: State | null;
}

/** One pump trimmed beside others direct on line: the speed it takes, and the least it may run at. */
export interface OneTrimmed {
  readonly speed: number;
  readonly minSpeed: number;
  state(): State;
}

/**
 * What the duty pumps of a station can do at a static head. "n pumps" are the first n in the station's order. Equal
 * pumps have closed forms; others are solved pump by pump. Both answer the same questions, so the rules are written once.
 */
export interface StagedPumps {
  readonly station: Station;
  readonly duty: readonly Pump[];
  /** How many duty pumps there are. */
  readonly most: number;
  readonly staticHead: number;
  readonly off: State;
  /** Whether any pump has a drive, fitted or proposed; whether every pump has one that is fitted. */
  readonly onDrives: boolean;
  readonly drivesFitted: boolean;
  /** Sets the static head [m] of what is asked next. */
  at(staticHead: number): void;
  /** n pumps direct on line at their operating point; off where they cannot lift the static head. */
  fixed(count: number): State;
  /** n pumps direct on line that give exactly Q, the excess head burnt in a valve. */
  throttled(count: number, flow: number): State;
  /** n pumps at one speed on their drives, trimmed to Q > 0; the object is used again at the next call for the count. */
  trim(count: number, flow: number): Trim;
  /** What the last call of `trim` found for a count. */
  known(count: number): Trim;
  /** The same trim with what speaks against it. */
  judged(trim: Trim, flow: number): Trim;
  /** The action that a feasible trim stands for. */
  action(trim: Trim, flow: number): Action;
  /** n pumps flat out on their drives, and at their least speed, at their operating point. */
  flatOut(count: number): State;
  lowest(count: number): State;
  /** n pumps at one speed that give exactly Q on the system curve; null where their speed limits do not allow it. */
  trimmedState(count: number, flow: number): State | null;
  /** One of n pumps trimmed, the others direct on line; null where none of the n has a drive. */
  oneTrimmed(count: number, flow: number): OneTrimmed | null;
  oneThrottled(count: number, flow: number): State;
  /** One of n pumps at its least speed (`low`) or at rated speed, the others direct on line, at their operating point. */
  oneAt(count: number, speed: 'least' | 'rated'): State;
}
