import { lossAt, type PartLoad } from '../drive/partLoad.ts';
import { GRAVITY } from '../units.ts';
import type { NpshCurve } from './npsh.ts';
import { type PumpCurve, speedCorrection } from './pumpCurve.ts';
import { root } from './roots.ts';

/** A motor; its efficiency goes by load, as a share of the rating. */
export interface Motor {
  /** Rating [W], or null where unknown: then no overload can be told. */
  readonly ratedPower: number | null;
  readonly serviceFactor: number;
  readonly efficiency: PartLoad;
}

/** A variable speed drive between supply and motor; its efficiency goes by load, as the motor's does. */
export interface Drive {
  /** false: a proposal, so that rules that need drives show a retrofit. */
  readonly fitted: boolean;
  /** Shares of rated speed. */
  readonly minSpeed: number;
  readonly maxSpeed: number;
  readonly efficiency: PartLoad;
}

/** One make of machine in a train, `inSeries` times; each has its own motor and drive. */
export interface Machine {
  readonly curve: PumpCurve;
  readonly inSeries: number;
  readonly motor: Motor;
  readonly drive: Drive | null;
  /** NPSH required over flow at rated speed, where the maker's curve is known. */
  readonly npshr?: NpshCurve | null;
}

/** What pump, motor and drive lose [W]; the water gets ρ·g·q·H. */
export interface Losses {
  pump: number;
  motor: number;
  drive: number;
}

/**
 * A pump, or a train of machines in series that acts as one: one flow, heads and powers add. Those of its machines that
 * have a drive share one speed ratio; the others stay at rated speed. Flows in m³/s, heads in m, speeds as share of rated.
 */
export class Pump {
  readonly name: string;
  /** Pumps of one make (one entry of a station file, or entries alike in every field) can stand in for each other. */
  readonly make: string;
  readonly ratedSpeed: number | null;
  readonly machines: readonly Machine[];
  /** k_b in branch loss = k_b·q² [m/(m³/s)²]. */
  readonly branchLoss: number;
  readonly density: number;
  /** Whether a drive is there, fitted or proposed; whether every such drive is fitted. */
  readonly hasDrive: boolean;
  readonly driveFitted: boolean;
  readonly minSpeed: number;
  readonly maxSpeed: number;
  /** Where every curve is a parabola: H = A·s² + B − a·q². */
  readonly parabola: { readonly driven: number; readonly fixed: number; readonly shape: number } | null;
  private readonly single: Machine | null;

  constructor(p: {
    name: string;
    make: string;
    ratedSpeed: number | null;
    machines: readonly Machine[];
    branchLoss: number;
    density: number;
  }) {
    this.name = p.name;
    this.make = p.make;
    this.ratedSpeed = p.ratedSpeed;
    this.machines = p.machines;
    this.branchLoss = p.branchLoss;
    this.density = p.density;
    const drives = p.machines.flatMap((m) => (m.drive ? [m.drive] : []));
    this.hasDrive = drives.length > 0;
    this.driveFitted = this.hasDrive && drives.every((d) => d.fitted);
    this.minSpeed = this.hasDrive ? Math.max(...drives.map((d) => d.minSpeed)) : 1;
    this.maxSpeed = this.hasDrive ? Math.min(...drives.map((d) => d.maxSpeed)) : 1;
    this.single = p.machines.length === 1 && p.machines[0]!.inSeries === 1 ? p.machines[0]! : null;
    if (p.machines.every((m) => m.curve.shape !== null)) {
      let driven = 0;
      let fixed = 0;
      let shape = 0;
      for (const m of p.machines) {
        if (m.drive) driven += m.inSeries * m.curve.shutoffHead;
        else fixed += m.inSeries * m.curve.shutoffHead;
        shape += m.inSeries * m.curve.shape!;
      }
      this.parabola = { driven, fixed, shape };
    } else this.parabola = null;
  }

  /** Speed of one machine when the train is set to s. */
  private speedOf(machine: Machine, speed: number): number {
    return machine.drive ? speed : 1;
  }

  /** Largest flow at speed s: the first of its machines to reach the end of its curve. */
  endFlow(speed: number): number {
    if (this.single) return this.speedOf(this.single, speed) * this.single.curve.endFlow;
    let end = Infinity;
    for (const m of this.machines) end = Math.min(end, this.speedOf(m, speed) * m.curve.endFlow);
    return end;
  }

  /** Head at flow q and speed s, H(q, s) = Σ s²·h(q/s). */
  head(q: number, speed: number): number {
    if (this.parabola) return this.parabola.driven * speed * speed + this.parabola.fixed - this.parabola.shape * q * q;
    let sum = 0;
    for (const m of this.machines) {
      const s = this.speedOf(m, speed);
      sum += m.inSeries * s * s * m.curve.head(q / s);
    }
    return sum;
  }

  /**
   * Speed at which the pump lifts flow q by `head`. Where the end of the curve would be passed, the speed s = q/endFlow(1)
   * at which q is just its end: the head made is then higher, and a valve takes the excess. Infinity where no speed does it.
   */
  speedFor(q: number, head: number): number {
    if (this.single?.drive) return this.single.curve.speedFor(q, head);
    let least = 0;
    for (const m of this.machines) {
      if (m.drive) least = Math.max(least, q / m.curve.endFlow);
      else if (q > m.curve.endFlow) return Infinity;
    }
    if (this.parabola) {
      const { driven, fixed, shape } = this.parabola;
      if (driven === 0) return head <= fixed - shape * q * q ? 1 : Infinity;
      return Math.max(Math.sqrt(Math.max(0, head + shape * q * q - fixed) / driven), least);
    }
    const lacks = (s: number) => this.head(q, s) - head;
    let low = Math.max(least, 1e-9);
    if (lacks(low) >= 0) return low;
    let high = Math.max(2 * low, 1);
    while (lacks(high) < 0) {
      low = high;
      high *= 2;
      if (high > 1e6) return Infinity;
    }
    return root(lacks, low, high);
  }

  /**
   * Flow that the pump sends into a header at head H: s²·h(q/s) − k_b·q² = H. 0 where it cannot open its check valve;
   * s·q_end, with the excess head lost in a valve, where its curve still lies above.
   */
  flowInto(header: number, speed: number): number {
    const k = this.branchLoss;
    const end = this.endFlow(speed);
    if (this.parabola) {
      const { driven, fixed, shape } = this.parabola;
      const spare = driven * speed * speed + fixed - header;
      if (spare <= 0) return 0;
      const fall = shape + k;
      return fall > 0 ? Math.min(Math.sqrt(spare / fall), end) : end;
    }
    const excess = (q: number) => this.head(q, speed) - k * q * q - header;
    if (excess(0) <= 0) return 0;
    if (excess(end) >= 0) return end;
    return root(excess, 0, end);
  }

  /** Head at no flow and speed s. */
  shutoffHead(speed: number): number {
    return this.head(0, speed);
  }

  /**
   * Electric power [W] at flow q and speed s.
   *
   * @param onDrive  whether its drives are in circuit; direct on line it runs at rated speed and has no drive loss
   */
  electric(q: number, speed: number, onDrive: boolean): number {
    if (this.single) return electricOf(this.single, q, speed, onDrive);
    let sum = 0;
    for (const m of this.machines) sum += m.inSeries * electricOf(m, q, speed, onDrive);
    return sum;
  }

  /** What is lost of that power, each by its own formula; adds it `weight` times. */
  addLosses(into: Losses, weight: number, q: number, speed: number, onDrive: boolean): void {
    for (const m of this.machines) {
      const driven = onDrive && m.drive !== null;
      const s = driven ? speed : 1;
      const n = weight * m.inSeries;
      const x = q / s;
      const head = s * s * m.curve.head(x);
      const water = this.density * GRAVITY * q * head;
      const shaft = shaftOf(m, q, s);
      const correction = m.curve.speedCorrection ? speedCorrection(m.curve.bestEfficiency, s) : 1;
      const eta = m.curve.efficiency(x) * correction;
      const rated = m.motor.ratedPower ?? shaft;
      const motorLoss = lossAt(m.motor.efficiency, shaft, shaft, rated);
      into.pump += n * (q > 0 && head > 0 ? water * (1 / eta - 1) : shaft);
      into.motor += n * motorLoss;
      if (driven) into.drive += n * lossAt(m.drive!.efficiency, shaft + motorLoss, shaft, rated);
    }
  }

  /** Largest shaft power as a share of rating × service factor; 0 where no rating is known. */
  overload(q: number, speed: number, onDrive: boolean): number {
    if (this.single) return overloadOf(this.single, q, speed, onDrive);
    let worst = 0;
    for (const m of this.machines) worst = Math.max(worst, overloadOf(m, q, speed, onDrive));
    return worst;
  }

  /** Least and greatest q/(s·q_b) among its machines: how far from their best-efficiency flow they run. */
  leastShareOfBest(q: number, speed: number, onDrive: boolean): number {
    if (this.single) return shareOfBest(this.single, q, speed, onDrive);
    let least = Infinity;
    for (const m of this.machines) least = Math.min(least, shareOfBest(m, q, speed, onDrive));
    return least;
  }

  greatestShareOfBest(q: number, speed: number, onDrive: boolean): number {
    if (this.single) return shareOfBest(this.single, q, speed, onDrive);
    let most = 0;
    for (const m of this.machines) most = Math.max(most, shareOfBest(m, q, speed, onDrive));
    return most;
  }

  /**
   * NPSH that the pump needs at its inlet [m]; of a train, what its first machine needs. null where its curve is unknown.
   */
  npshRequired(q: number, speed: number, onDrive: boolean): number | null {
    const { npshr, drive } = this.machines[0]!;
    if (!npshr) return null;
    const s = onDrive && drive ? speed : 1;
    return s * s * npshr.at(q / s);
  }

  /** Whether flow q is the end of the curve at speed s, to the rounding of the arithmetic. */
  atEnd(q: number, speed: number, onDrive: boolean): boolean {
    return q >= this.endFlow(onDrive ? speed : 1) * (1 - 1e-12);
  }
}

/** Electric power of one machine [W]. */
function electricOf(m: Machine, q: number, speed: number, onDrive: boolean): number {
  const driven = onDrive && m.drive !== null;
  const shaft = shaftOf(m, q, driven ? speed : 1);
  const motor = m.motor.efficiency;
  const drive = driven ? m.drive!.efficiency : 1;
  if (typeof motor === 'number' && typeof drive === 'number') return shaft / (motor * drive);
  const rated = m.motor.ratedPower ?? shaft;
  const input = shaft + lossAt(motor, shaft, shaft, rated);
  return input + lossAt(drive, input, shaft, rated);
}

/** Shaft power of one machine [W]. */
function shaftOf({ curve }: Machine, q: number, s: number): number {
  const shaft = s * s * s * curve.shaft(q / s);
  return curve.speedCorrection ? shaft / speedCorrection(curve.bestEfficiency, s) : shaft;
}

/** Shaft power as a share of rating × service factor; 0 where no rating is known. */
function overloadOf(m: Machine, q: number, speed: number, onDrive: boolean): number {
  const { ratedPower, serviceFactor } = m.motor;
  return ratedPower === null ? 0 : shaftOf(m, q, onDrive && m.drive ? speed : 1) / (ratedPower * serviceFactor);
}

/** q/(s·q_b). */
function shareOfBest(m: Machine, q: number, speed: number, onDrive: boolean): number {
  return q / ((onDrive && m.drive ? speed : 1) * m.curve.bestFlow);
}
