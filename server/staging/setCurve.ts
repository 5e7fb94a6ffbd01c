import type { State } from './state.ts';

/** What decides of a set at a flow. */
export interface SetFigures {
  /** Mean electric power [W], standby not included. */
  readonly power: number;
  /** The state that shares the time with rest; null where nothing rests. */
  readonly rest: State | null;
  readonly overloaded: boolean;
  readonly inside: boolean;
}

/** Exact figures of a set at Q > 0 [m³/s]; null where it cannot meet the flow. */
type FiguresAt = (flow: number) => SetFigures | null;

/** Points of a set's curve of power over flow. */
const READ_POINTS = 300;

/**
 * Figures of a set over flow at one static head: a cubic through solved points, good to about 1e-8; where a stretch ends
 * (rest, a limit, the capacity) the flow itself is solved.
 */
export class SetCurve {
  /** What was read last. Mean power is without standby [W]; `rest` shares the time with off, null where nothing rests. */
  power = 0;
  overloaded = false;
  inside = true;
  rest: State | null = null;
  private readonly figuresAt: FiguresAt;
  private readonly step: number;
  private readonly points: readonly (SetFigures | null)[];
  private readonly values: Float64Array;
  /** Whether the points around a cell, one beyond on either side, lie on one stretch. */
  private readonly smooth: Uint8Array;

  constructor(figuresAt: FiguresAt, capacity: number) {
    this.figuresAt = figuresAt;
    this.step = capacity / READ_POINTS;
    this.points = Array.from({ length: READ_POINTS + 1 }, (_, i) => (i === 0 ? null : figuresAt(i * this.step)));
    this.values = Float64Array.from(this.points, (point) => point?.power ?? Number.NaN);
    this.smooth = Uint8Array.from(this.points, (here, i) => {
      const near = [this.points[i - 1], this.points[i + 1], this.points[i + 2]];
      return here && near.every((each) => each && alike(each, here)) ? 1 : 0;
    });
  }

  /** Reads the figures at a flow into the fields; false where the set cannot meet it. */
  read(flow: number): boolean {
    const x = flow / this.step;
    const i = Math.floor(x);
    if (this.smooth[i] !== 1) return this.take(this.figuresAt(flow));
    this.take(this.points[i]!);
    const { values } = this;
    const t = x - i;
    this.power =
      (-values[i - 1]! * t * (t - 1) * (t - 2)) / 6 +
      (values[i]! * (t + 1) * (t - 1) * (t - 2)) / 2 -
      (values[i + 1]! * (t + 1) * t * (t - 2)) / 2 +
      (values[i + 2]! * (t + 1) * t * (t - 1)) / 6;
    return true;
  }

  private take(found: SetFigures | null): boolean {
    if (!found) return false;
    this.power = found.power;
    this.overloaded = found.overloaded;
    this.inside = found.inside;
    this.rest = found.rest;
    return true;
  }
}

function alike(a: SetFigures, b: SetFigures): boolean {
  return (a.rest === null) === (b.rest === null) && a.overloaded === b.overloaded && a.inside === b.inside;
}
