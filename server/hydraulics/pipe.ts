import { GRAVITY } from '../units.ts';
import type { Friction } from './systemCurve.ts';

/** Flow is laminar below the first Reynolds number and turbulent above the second. */
const LAMINAR_BELOW = 2000;
const TURBULENT_ABOVE = 4000;

/** Colebrook and White's formula is meant for pipes no rougher than this share of their diameter. */
export const MOST_RELATIVE_ROUGHNESS = 0.05;

/**
 * Darcy friction factor of turbulent flow, 1/√f = −2·log₁₀(ε/3.7 + 2.51/(Re·√f)), solved to rounding by Newton's method.
 *
 * @param reynolds   Reynolds number v·D/ν
 * @param roughness  ε, sand roughness as a share of the diameter; 0 is smooth
 * @see              C. F. Colebrook, "Turbulent flow in pipes, with particular reference to the transition region between
 *                   the smooth and rough pipe laws", J. Inst. Civ. Eng. 11 (1939) 133–156
 */
export function colebrookWhite(reynolds: number, roughness: number): number {
  return 1 / rootOfInverse(reynolds, roughness) ** 2;
}

const TWO_PER_LN10 = 2 / Math.LN10;

/** x = 1/√f. The function is concave and rising, so from any start Newton's method closes in; four steps are usual. */
function rootOfInverse(reynolds: number, roughness: number): number {
  const rough = roughness / 3.7;
  const smooth = 2.51 / reynolds;
  // Swamee and Jain (1976) as the start.
  let x = -TWO_PER_LN10 * Math.log(rough + 5.74 / reynolds ** 0.9);
  for (let i = 0; i < 20; i++) {
    const inside = rough + smooth * x;
    const step = (x + TWO_PER_LN10 * Math.log(inside)) / (1 + (TWO_PER_LN10 * smooth) / inside);
    x -= step;
    if (Math.abs(step) <= 1e-15 * x) break;
  }
  return x;
}

/**
 * Darcy friction factor at any flow: 64/Re below 2000, Colebrook–White above 4000. Between them nobody can tell, so the
 * two are mixed by w·f_turbulent + (1 − w)·64/Re with w = t²·(3 − 2t), t = (Re − 2000)/2000: no jump and no kink, and
 * the loss rises all the way since the turbulent factor is the higher there.
 */
export function frictionFactor(reynolds: number, roughness: number): number {
  if (reynolds <= LAMINAR_BELOW) return 64 / reynolds;
  const turbulent = colebrookWhite(reynolds, roughness);
  if (reynolds >= TURBULENT_ABOVE) return turbulent;
  const t = (reynolds - LAMINAR_BELOW) / (TURBULENT_ABOVE - LAMINAR_BELOW);
  const weight = t * t * (3 - 2 * t);
  return weight * turbulent + (1 - weight) * (64 / reynolds);
}

/** Head lost along a pipe [m] by Hazen and Williams, h = 10.667·L·Q^1.852/(C^1.852·D^4.871); m and m³/s. */
function hazenWilliamsLoss(pipe: { length: number; diameter: number; c: number }, flow: number): number {
  return (10.667 * pipe.length * flow ** 1.852) / (pipe.c ** 1.852 * pipe.diameter ** 4.871);
}

/** One pipe of several in series; lengths in m. */
export interface Pipe {
  readonly length: number;
  readonly diameter: number;
  /** Sand roughness [m] for Darcy–Weisbach, or the C of Hazen and Williams. */
  readonly wall: { readonly roughness: number } | { readonly hazenWilliamsC: number };
  /** Sum of K in K·v²/2g. */
  readonly minorLoss: number;
}

/** Cross-section [m²]. */
export function areaOf(pipe: { readonly diameter: number }): number {
  return (Math.PI / 4) * pipe.diameter ** 2;
}

interface DarcyPipe {
  /** h/(f·Q²) = L/D/(2g·A²), Re/Q, and ε. */
  readonly lossPerFactor: number;
  readonly reynoldsPerFlow: number;
  readonly roughness: number;
}

/** Width of a piece of the table in ln Q: a cubic is then within 1e-12 of the formula. */
const STEP = 1 / 128;

/** The table ends where the narrowest pipe would have this velocity [m/s]; no station gets there. */
const FASTEST = 50;

/**
 * Friction of pipes in series. A run asks for it some hundred thousand times, so the formulas are evaluated once, for
 * h/Q² over ln Q with its exact slope (cubic Hermite pieces, 1e-12 of the formula), from where the flow is turbulent in
 * every pipe; slower flows, and absurdly fast ones, go to the formulas themselves.
 */
export class PipeFriction implements Friction {
  readonly squareLaw = null;
  private readonly minor: number;
  private readonly hazen: number;
  private readonly darcy: readonly DarcyPipe[];
  private readonly from: number = Infinity;
  private readonly to: number = Infinity;
  private readonly start: number = 0;
  private readonly table: Float64Array = new Float64Array(0);

  /** @param viscosity  kinematic viscosity ν [m²/s] */
  constructor(pipes: readonly Pipe[], viscosity: number) {
    let minor = 0;
    let hazen = 0;
    const darcy: DarcyPipe[] = [];
    for (const pipe of pipes) {
      const area = areaOf(pipe);
      minor += pipe.minorLoss / (2 * GRAVITY * area * area);
      if ('hazenWilliamsC' in pipe.wall) {
        hazen += hazenWilliamsLoss({ ...pipe, c: pipe.wall.hazenWilliamsC }, 1);
      } else {
        darcy.push({
          lossPerFactor: pipe.length / pipe.diameter / (2 * GRAVITY * area * area),
          reynoldsPerFlow: pipe.diameter / (area * viscosity),
          roughness: pipe.wall.roughness / pipe.diameter,
        });
      }
    }
    this.minor = minor;
    this.hazen = hazen;
    this.darcy = darcy;
    if (darcy.length === 0) return;
    const turbulent = Math.max(...darcy.map((pipe) => TURBULENT_ABOVE / pipe.reynoldsPerFlow));
    const fastest = FASTEST * Math.min(...pipes.map(areaOf));
    const pieces = Math.ceil(Math.log(fastest / turbulent) / STEP);
    if (pieces < 1) return;
    this.from = turbulent;
    this.start = Math.log(turbulent);
    this.to = Math.exp(this.start + (pieces - 0.5) * STEP);
    this.table = this.tabulate(pieces);
  }

  /** Four coefficients a piece, lowest power first, in the share of the piece that is passed. */
  private tabulate(pieces: number): Float64Array {
    const table = new Float64Array(4 * pieces);
    let low = this.turbulentRatio(this.start);
    for (let i = 0; i < pieces; i++) {
      const high = this.turbulentRatio(this.start + (i + 1) * STEP);
      const rise = high.value - low.value;
      const a = low.slope * STEP;
      const b = high.slope * STEP;
      table.set([low.value, a, 3 * rise - 2 * a - b, a + b - 2 * rise], 4 * i);
      low = high;
    }
    return table;
  }

  /** h/Q² where all flow is turbulent, and its slope over ln Q. */
  private turbulentRatio(lnFlow: number): { value: number; slope: number } {
    const flow = Math.exp(lnFlow);
    const hazen = this.hazen * flow ** -0.148;
    let value = this.minor + hazen;
    let slope = -0.148 * hazen;
    for (const { lossPerFactor, reynoldsPerFlow, roughness } of this.darcy) {
      const reynolds = reynoldsPerFlow * flow;
      const x = rootOfInverse(reynolds, roughness);
      // From the formula differentiated: dx/d ln Re = c·u·x/(1 + c·u), u = (2.51/Re)/(ε/3.7 + 2.51·x/Re), c = 2/ln 10.
      const smooth = 2.51 / reynolds;
      const u = (TWO_PER_LN10 * smooth) / (roughness / 3.7 + smooth * x);
      value += lossPerFactor / (x * x);
      slope -= (2 * lossPerFactor * u) / ((1 + u) * x * x);
    }
    return { value, slope };
  }

  at(flow: number): number {
    if (!(flow >= this.from && flow < this.to)) return this.formulas(flow);
    const place = (Math.log(flow) - this.start) / STEP;
    const piece = place | 0;
    const t = place - piece;
    const { table } = this;
    const i = 4 * piece;
    return flow * flow * (table[i]! + t * (table[i + 1]! + t * (table[i + 2]! + t * table[i + 3]!)));
  }

  /** The same by the formulas themselves: slower, and right at every flow. */
  formulas(flow: number): number {
    if (flow <= 0) return 0;
    let head = this.minor * flow * flow;
    if (this.hazen > 0) head += this.hazen * flow ** 1.852;
    for (const { lossPerFactor, reynoldsPerFlow, roughness } of this.darcy) {
      head += lossPerFactor * frictionFactor(reynoldsPerFlow * flow, roughness) * flow * flow;
    }
    return head;
  }
}
