import { GRAVITY } from '../units.ts';
import { Ascending } from './ascending.ts';
import type { CurvePoint } from './curveFit.ts';
import { Pchip } from './pchip.ts';

/**
 * One pump at rated speed on 0 ≤ q ≤ endFlow. Flows in m³/s, heads in m, powers in W, efficiencies in (0, 1].
 * At another speed the affinity laws hold: H(q, s) = s²·h(q/s), shaft power = s³·shaft(q/s).
 */
export interface PumpCurve {
  readonly shutoffHead: number;
  readonly endFlow: number;
  readonly bestFlow: number;
  readonly bestEfficiency: number;
  /** Whether the speed correction of Sârbu and Borza (1998) is asked for. */
  readonly speedCorrection: boolean;
  /** Set where h(q) = shutoffHead − shape·q²; then speeds and operating points have closed forms. */
  readonly shape: number | null;
  /** The points it was read from; null where it was given as a parabola. */
  readonly points: readonly CurvePoint[] | null;
  head(q: number): number;
  efficiency(q: number): number;
  /** Shaft power ρ·g·q·h/η; finite at q = 0, where η is 0 too. */
  shaft(q: number): number;
  /** Speed ratio s at which the pump lifts flow q by `head`, s²·h(q/s) = head; at least q/endFlow, its end. */
  speedFor(q: number, head: number): number;
}

/** η(q, s)/η(q/s) of Sârbu and Borza (1998), taken at the best-efficiency point: [1 − (1 − η_b)·s^−0.1]/η_b. */
export function speedCorrection(bestEfficiency: number, speed: number): number {
  return (1 - (1 - bestEfficiency) * speed ** -0.1) / bestEfficiency;
}

/** What a parabola is made from, at rated speed: heads [m], flows [m³/s], density [kg/m³]. */
export interface ParabolaShape {
  readonly shutoffHead: number;
  /** a in h = H0 − a·q² [m/(m³/s)²]. */
  readonly shape: number;
  readonly bestFlow: number;
  readonly bestEfficiency: number;
  readonly maxFlow: number | null;
  readonly speedCorrection: boolean;
  readonly density: number;
}

/**
 * h = H0 − a·q², η = η_b·(2x − x²) with x = q/q_b. It ends at the smallest of: the flow where h = 0, the flow
 * (1 + √½)·q_b where η has fallen to half its best, and `maxFlow`.
 */
export class ParabolaCurve implements PumpCurve {
  readonly shutoffHead: number;
  readonly shape: number;
  readonly bestFlow: number;
  readonly bestEfficiency: number;
  readonly endFlow: number;
  readonly speedCorrection: boolean;
  readonly points = null;
  private readonly density: number;

  constructor(p: ParabolaShape) {
    this.shutoffHead = p.shutoffHead;
    this.shape = p.shape;
    this.bestFlow = p.bestFlow;
    this.bestEfficiency = p.bestEfficiency;
    this.speedCorrection = p.speedCorrection;
    this.density = p.density;
    const zeroHeadFlow = p.shape > 0 ? Math.sqrt(p.shutoffHead / p.shape) : Infinity;
    this.endFlow = Math.min(zeroHeadFlow, (1 + Math.SQRT1_2) * p.bestFlow, p.maxFlow ?? Infinity);
  }

  head(q: number): number {
    return this.shutoffHead - this.shape * q * q;
  }

  efficiency(q: number): number {
    const x = q / this.bestFlow;
    return this.bestEfficiency * x * (2 - x);
  }

  shaft(q: number): number {
    // q/η = q_b/(η_b·(2 − x)): the flow cancels, so nothing is divided by zero at shut-off.
    return (this.density * GRAVITY * this.head(q) * this.bestFlow) / (this.bestEfficiency * (2 - q / this.bestFlow));
  }

  speedFor(q: number, head: number): number {
    return Math.max(Math.sqrt(Math.max(0, head + this.shape * q * q) / this.shutoffHead), q / this.endFlow);
  }
}

/** What a table is made from, at rated speed: heads [m], flows [m³/s], density [kg/m³]. */
export interface TableShape {
  /** Flows, strictly rising, four or more. */
  readonly flows: readonly number[];
  readonly heads: readonly number[];
  /** One of the two: efficiency at each flow, or shaft power [W]. */
  readonly efficiencies: readonly number[] | null;
  readonly powers: readonly number[] | null;
  readonly maxFlow: number | null;
  readonly speedCorrection: boolean;
  readonly density: number;
}

/** Points joined by a monotone cubic. Left of its highest point the head is held: see model.md §1. */
export class TableCurve implements PumpCurve {
  readonly shutoffHead: number;
  readonly endFlow: number;
  readonly bestFlow: number;
  readonly bestEfficiency: number;
  readonly speedCorrection: boolean;
  readonly shape = null;
  readonly points: readonly CurvePoint[];
  private readonly density: number;
  /** Head right of its highest point. */
  private readonly heads: Pchip;
  private readonly topFlow: number;
  /** x/√h(x) at each knot of the head, and at the end of the curve: a pump at any speed lifts q by H where it is q/√H. */
  private readonly reaches: Float64Array;
  private readonly byReach: Ascending;
  private readonly endReach: number;
  /** The flow last asked for and its shaft power: power, overload and losses of a state ask for the same. */
  private lastFlow = Number.NaN;
  private lastShaft = Number.NaN;
  private readonly efficiencies: Pchip | null;
  private readonly powers: Pchip | null;

  constructor(t: TableShape) {
    const top = highest(t.heads);
    this.heads = new Pchip(t.flows.slice(top), t.heads.slice(top));
    this.points = t.flows.map((flow, i) => ({ flow, head: t.heads[i]! }));
    this.topFlow = t.flows[top]!;
    this.shutoffHead = t.heads[top]!;
    this.density = t.density;
    this.speedCorrection = t.speedCorrection;
    this.endFlow = Math.min(t.flows[t.flows.length - 1]!, t.maxFlow ?? Infinity);
    this.reaches = reachesOf(this.heads);
    this.byReach = new Ascending(this.reaches);
    const endHead = this.heads.at(this.endFlow);
    this.endReach = endHead > 0 ? this.endFlow / Math.sqrt(endHead) : Infinity;
    if (t.efficiencies) {
      const withOrigin = t.flows[0]! > 0;
      const x = withOrigin ? [0, ...t.flows] : t.flows;
      const y = withOrigin ? [0, ...t.efficiencies] : [0, ...t.efficiencies.slice(1)];
      this.efficiencies = new Pchip(x, y);
      this.powers = null;
      const best = highest(t.efficiencies);
      this.bestFlow = t.flows[best]!;
      this.bestEfficiency = t.efficiencies[best]!;
    } else {
      this.efficiencies = null;
      this.powers = new Pchip(t.flows, t.powers!);
      const found = t.flows.map((q, i) => (t.density * GRAVITY * q * t.heads[i]!) / t.powers![i]!);
      const best = highest(found);
      this.bestFlow = t.flows[best]!;
      this.bestEfficiency = found[best]!;
    }
  }

  head(q: number): number {
    return q <= this.topFlow ? this.shutoffHead : this.heads.at(q);
  }

  efficiency(q: number): number {
    if (this.efficiencies) return this.efficiencies.at(q);
    return (this.density * GRAVITY * q * this.head(q)) / this.shaft(q);
  }

  shaft(q: number): number {
    if (q !== this.lastFlow) {
      this.lastFlow = q;
      this.lastShaft = this.shaftAt(q);
    }
    return this.lastShaft;
  }

  private shaftAt(q: number): number {
    if (this.powers) return this.powers.at(Math.max(q, this.powers.x[0]!));
    const flowOverEta = q > 0 ? q / this.efficiencies!.at(q) : 1 / this.efficiencies!.slope[0]!;
    return this.density * GRAVITY * this.head(q) * flowOverEta;
  }

  /**
   * With x = q/s the condition reads x/√h(x) = q/√head. Its left side rises strictly, so the segment is found first, a
   * straight line through its ends gives a start, and Newton's method, kept inside the bracket, does the rest.
   */
  speedFor(q: number, head: number): number {
    if (q <= 0) return Math.sqrt(Math.max(0, head) / this.shutoffHead);
    const reach = q / Math.sqrt(head);
    if (reach <= this.reaches[0]!) return Math.sqrt(head / this.shutoffHead);
    if (!(reach < this.endReach)) return q / this.endFlow;
    const i = this.byReach.segment(reach);
    const wanted = head / (q * q);
    let low = this.heads.x[i]!;
    let high = Math.min(this.heads.x[i + 1]!, this.endFlow);
    const reach0 = this.reaches[i]!;
    const share = (reach - reach0) / (this.reaches[i + 1]! - reach0);
    let x = Math.min(low + (this.heads.x[i + 1]! - low) * share, high);
    for (let round = 0; round < 60; round++) {
      const excess = this.heads.inSegment(i, x) - wanted * x * x;
      if (excess > 0) low = x;
      else high = x;
      let next = x - excess / (this.heads.slopeInSegment(i, x) - 2 * wanted * x);
      if (!(next >= low && next <= high)) next = (low + high) / 2;
      const step = Math.abs(next - x);
      x = next;
      // Newton squares its error: after a step this small nothing is left to gain.
      if (step <= 1e-9 * x) break;
    }
    return q / x;
  }
}

/** x/√h(x) at each knot; where the last head is 0 something larger than the one before, for it only starts a search. */
function reachesOf({ x, y }: Pchip): Float64Array {
  const last = x.length - 1;
  const reaches = x.map((q, i) => q / Math.sqrt(y[i]!));
  if (!(y[last]! > 0)) reaches[last] = Math.max(4 * reaches[last - 1]!, x[last]!);
  return reaches;
}

/** Index of the highest value; of equals the last, so that a flat top counts as one height. */
function highest(values: readonly number[]): number {
  let best = 0;
  for (let i = 1; i < values.length; i++) if (values[i]! >= values[best]!) best = i;
  return best;
}
