import type { MixedPumps, Setting } from './mixedPumps.ts';
import { SetCurve, type SetFigures } from './setCurve.ts';
import { SetTable } from './setTable.ts';
import { type Action, meanPower } from './state.ts';

/** Static heads within so much use one table of a set [m]; the split is still solved at the true head. */
const HEAD_STEP = 0.05;

/** The best that a set can do at a flow, its pumps all running; for rules that look at more than one interval. */
export class FixedSet {
  /** Bits of the pumps, in the station's order. */
  readonly set: number;
  private readonly tables = new Map<number, SetTable>();
  private readonly pumps: MixedPumps;
  private readonly places: readonly number[];

  constructor(pumps: MixedPumps, set: number) {
    this.pumps = pumps;
    this.set = set;
    this.places = pumps.duty.map((_, place) => place).filter((place) => Math.floor(set / 2 ** place) % 2 === 1);
  }

  /** Its action at Q > 0, and whether it keeps to ratings and range; null where it cannot meet the flow. */
  at(flow: number): { action: Action; overloaded: boolean; inside: boolean } | null {
    const bucket = Math.round(this.pumps.staticHead / HEAD_STEP);
    let table = this.tables.get(bucket);
    if (!table) {
      table = new SetTable(this.pumps, { overload: true, ranged: false }, { set: this.places });
      this.tables.set(bucket, table);
    }
    const action = table.at(flow);
    if (!action || action.high.set !== this.set) return null;
    const { overloaded, outsideAllowable } = action.high.doubts;
    return { action, overloaded, inside: !outsideAllowable };
  }

  /** What decides of `at`, without the states. */
  figuresAt(flow: number): SetFigures | null {
    const found = this.at(flow);
    if (!found) return null;
    const { action, overloaded, inside } = found;
    return { power: meanPower(action), rest: action.share > 0 ? action.high : null, overloaded, inside };
  }

  /** These figures read off a curve through exactly solved points, for one static head and many flows. */
  curve(): SetCurve {
    return new SetCurve((flow) => this.figuresAt(flow), this.pumps.pointOf(mostSettings(this.pumps, this.places)).flow);
  }
}

/** Each pump flat out: at its highest speed, or direct on line. */
function mostSettings(pumps: MixedPumps, places: readonly number[]): Setting[] {
  return places.map((place) => {
    const { hasDrive, maxSpeed } = pumps.duty[place]!;
    return { place, speed: hasDrive ? maxSpeed : 1, onDrive: hasDrive };
  });
}
