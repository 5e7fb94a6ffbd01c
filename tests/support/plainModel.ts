import type { StationFile } from '../../server/station/stationFile.ts';
import { scanLeast, scanRoot } from './scan.ts';

/**
 * The station worked out a second time, from the file alone: own conversions, own interpolation, own formulas of power.
 * It is slow and plain, and takes nothing of the program but the type of the file.
 */

const G = 9.80665;

/** As NIST SP 811 (2008), appendix B.8, prints them; horsepower of 550 ft·lbf/s to the digits that follow from it. */
const FLOW: Record<StationFile['units']['flow'], number> = {
  'm3/s': 1,
  'm3/h': 2.7777777777777778e-4,
  'L/s': 0.001,
  'ML/d': 0.011574074074074073,
  gpm: 3.785411784e-3 / 60,
  MGD: 3785.411784 / 86400,
};
const HEAD: Record<StationFile['units']['head'], number> = { m: 1, ft: 0.3048 };
const POWER: Record<StationFile['units']['power'], number> = { kW: 1000, hp: 745.6998715822702 };

type Entry = StationFile['pumps'][number];
type MachineEntry = Extract<Entry, { curve: unknown }> | Extract<Entry, { train: unknown }>['train'][number];
type Curve = MachineEntry['curve'];
type PartLoad = MachineEntry['motor']['efficiency'];

/** One machine at rated speed. */
interface PlainCurve {
  readonly end: number;
  readonly bestFlow: number;
  readonly bestEfficiency: number;
  readonly corrected: boolean;
  head(q: number): number;
  /** Shaft power [W], q > 0. */
  shaft(q: number): number;
}

interface PlainMachine {
  readonly curve: PlainCurve;
  readonly times: number;
  readonly rated: number | null;
  readonly limit: number;
  readonly motor: PartLoad;
  readonly drive: { readonly minSpeed: number; readonly maxSpeed: number; readonly efficiency: PartLoad } | null;
}

/** Hermite cubic in its textbook basis, with the slopes of Fritsch and Butland (1984) as their paper writes them. */
function monotoneCubic(x: readonly number[], y: readonly number[]): (v: number) => number {
  const n = x.length;
  const h = x.slice(1).map((v, i) => v - x[i]!);
  const d = y.slice(1).map((v, i) => (v - y[i]!) / h[i]!);
  const inner = (i: number) => {
    const s1 = d[i - 1]!;
    const s2 = d[i]!;
    if (s1 * s2 <= 0) return 0;
    // G(S1, S2, h1, h2) = S1·S2/(α·S2 + (1 − α)·S1), α = (1 + h2/(h1 + h2))/3
    const alpha = (1 + h[i]! / (h[i - 1]! + h[i]!)) / 3;
    return (s1 * s2) / (alpha * s2 + (1 - alpha) * s1);
  };
  const outer = (h1: number, h2: number, d1: number, d2: number) => {
    const slope = d1 + ((d1 - d2) * h1) / (h1 + h2);
    if (slope * d1 <= 0) return 0;
    return d1 * d2 < 0 && Math.abs(slope) > Math.abs(3 * d1) ? 3 * d1 : slope;
  };
  const m = x.map((_, i) => {
    if (n === 2) return d[0]!;
    if (i === 0) return outer(h[0]!, h[1]!, d[0]!, d[1]!);
    if (i === n - 1) return outer(h[n - 2]!, h[n - 3]!, d[n - 2]!, d[n - 3]!);
    return inner(i);
  });
  return (v) => {
    let i = 0;
    while (i < n - 2 && v > x[i + 1]!) i++;
    const t = (v - x[i]!) / h[i]!;
    const u = 1 - t;
    return (
      (1 + 2 * t) * u * u * y[i]! +
      t * u * u * h[i]! * m[i]! +
      t * t * (3 - 2 * t) * y[i + 1]! -
      t * t * u * h[i]! * m[i + 1]!
    );
  };
}

function plainCurve(entry: Curve, units: { flow: number; head: number; power: number }, rho: number): PlainCurve {
  const most = entry.maxFlow === undefined ? Infinity : entry.maxFlow * units.flow;
  const corrected = entry.speedCorrection ?? false;
  if ('points' in entry) {
    const q = entry.points.map((p) => p.flow * units.flow);
    const heads = entry.points.map((p) => p.head * units.head);
    const peak = Math.max(...heads);
    const top = heads.lastIndexOf(peak);
    const fall = monotoneCubic(q.slice(top), heads.slice(top));
    const head = (v: number) => (v <= q[top]! ? peak : fall(v));
    const end = Math.min(q[q.length - 1]!, most);
    let shaft: (v: number) => number;
    let etas: number[];
    if (entry.points[0]!.power !== undefined) {
      const powers = entry.points.map((p) => p.power! * units.power);
      shaft = monotoneCubic(q, powers);
      etas = q.map((v, i) => (rho * G * v * heads[i]!) / powers[i]!);
    } else {
      etas = entry.points.map((p) => p.efficiency!);
      const eta = q[0] === 0 ? monotoneCubic(q, [0, ...etas.slice(1)]) : monotoneCubic([0, ...q], [0, ...etas]);
      shaft = (v) => (rho * G * v * head(v)) / eta(v);
    }
    const bestEfficiency = Math.max(...etas);
    return { end, bestFlow: q[etas.lastIndexOf(bestEfficiency)]!, bestEfficiency, corrected, head, shaft };
  }
  const h0 = entry.shutoffHead * units.head;
  const a =
    'operatingPoint' in entry
      ? (h0 - entry.operatingPoint.head * units.head) / (entry.operatingPoint.flow * units.flow) ** 2
      : (entry.shape * units.head) / units.flow ** 2;
  const qb = entry.bestFlow * units.flow;
  const head = (v: number) => h0 - a * v * v;
  const eta = (v: number) => entry.bestEfficiency * ((2 * v) / qb - (v / qb) ** 2);
  return {
    end: Math.min(a > 0 ? Math.sqrt(h0 / a) : Infinity, qb * (1 + Math.sqrt(0.5)), most),
    bestFlow: qb,
    bestEfficiency: entry.bestEfficiency,
    corrected,
    head,
    shaft: (v) => (rho * G * v * head(v)) / eta(v),
  };
}

function etaAt(part: PartLoad, load: number): number {
  if (typeof part === 'number') return part;
  if (typeof part === 'string') throw new Error(`the plain model knows no table named ${part}`);
  const first = part[0]!;
  const last = part[part.length - 1]!;
  if (load <= first.load) return load / (load + first.load * (1 / first.efficiency - 1));
  if (load >= last.load) return last.efficiency;
  const i = part.findIndex((p) => p.load >= load);
  const [from, to] = [part[i - 1]!, part[i]!];
  return from.efficiency + ((load - from.load) / (to.load - from.load)) * (to.efficiency - from.efficiency);
}

export class PlainPump {
  readonly name: string;
  readonly branch: number;
  readonly driven: boolean;
  readonly minSpeed: number;
  readonly maxSpeed: number;
  private readonly machines: readonly PlainMachine[];

  constructor(name: string, branch: number, machines: readonly PlainMachine[]) {
    this.name = name;
    this.branch = branch;
    this.machines = machines;
    const drives = machines.flatMap((m) => (m.drive ? [m.drive] : []));
    this.driven = drives.length > 0;
    this.minSpeed = drives.reduce((most, d) => Math.max(most, d.minSpeed), this.driven ? 0 : 1);
    this.maxSpeed = drives.reduce((least, d) => Math.min(least, d.maxSpeed), this.driven ? Infinity : 1);
  }

  private each<T>(s: number, onDrive: boolean, tell: (machine: PlainMachine, speed: number) => T): T[] {
    return this.machines.map((m) => tell(m, m.drive && onDrive ? s : 1));
  }

  end(s: number): number {
    return Math.min(...this.each(s, true, (m, v) => v * m.curve.end));
  }

  head(q: number, s: number): number {
    return this.each(s, true, (m, v) => m.times * v * v * m.curve.head(q / v)).reduce((sum, part) => sum + part, 0);
  }

  private shaft(m: PlainMachine, q: number, v: number): number {
    const { curve } = m;
    const plain = v ** 3 * curve.shaft(q / v);
    // η(q, s) = η(q/s)·[1 − (1 − η_b)·s^−0.1]/η_b
    return curve.corrected ? (plain * curve.bestEfficiency) / (1 - (1 - curve.bestEfficiency) * v ** -0.1) : plain;
  }

  /** Electric power [W] at q > 0. */
  electric(q: number, s: number, onDrive: boolean): number {
    return this.each(s, onDrive, (m, v) => {
      const shaft = this.shaft(m, q, v);
      const load = shaft / (m.rated ?? shaft);
      const drive = m.drive && onDrive ? etaAt(m.drive.efficiency, load) : 1;
      return (m.times * shaft) / (etaAt(m.motor, load) * drive);
    }).reduce((sum, part) => sum + part, 0);
  }

  overloaded(q: number, s: number, onDrive: boolean): boolean {
    return this.each(s, onDrive, (m, v) => this.shaft(m, q, v) > m.limit * (1 + 1e-9)).includes(true);
  }

  /** Shares of best-efficiency flow at its speed, least and greatest among its machines. */
  shares(q: number, s: number): { least: number; most: number } {
    const all = this.each(s, true, (m, v) => q / (v * m.curve.bestFlow));
    return { least: Math.min(...all), most: Math.max(...all) };
  }

  /** Flow sent into a header: s²·h(q/s) − k_b·q² = H; the end of the curve where it still lies above; 0 below. */
  into(header: number, s: number): number {
    const end = this.end(s);
    const spare = (q: number) => this.head(q, s) - this.branch * q * q - header;
    if (spare(0) <= 0) return 0;
    return spare(end) >= 0 ? end : scanRoot(spare, 0, end)!;
  }

  /** Speed at which it lifts q to a head H_r, at least that at which q is the end of its curve; null above 4. */
  speed(q: number, lift: number): number | null {
    const least = this.machines.reduce((most, m) => (m.drive ? Math.max(most, q / m.curve.end) : most), 1e-6);
    const lacks = (s: number) => this.head(q, s) - lift;
    return lacks(least) >= 0 ? least : scanRoot(lacks, least, 4);
  }

  /** Electric power at q > 0 into a header, direct on line, a valve taking what head is left; Infinity where it cannot. */
  linePower(q: number, header: number): number {
    const lift = header + this.branch * q * q;
    const can = q <= this.end(1) * (1 + 1e-12) && this.head(q, 1) >= lift - 1e-11 * (1 + lift);
    return can ? this.electric(q, 1, false) : Infinity;
  }

  /**
   * The same on its drive: at the one speed that lifts just enough, or with a valve at the best of those that lift
   * enough.
   */
  drivePower(q: number, header: number, valve: boolean): number {
    if (!this.driven) return Infinity;
    const from = this.speed(q, header + this.branch * q * q);
    if (from === null || from > this.maxSpeed * (1 + 1e-11)) return Infinity;
    if (!valve) return from < this.minSpeed * (1 - 1e-9) ? Infinity : this.electric(q, from, true);
    const low = Math.min(Math.max(from, this.minSpeed), this.maxSpeed);
    return scanLeast((s) => this.electric(q, s, true), low, this.maxSpeed, 12).value;
  }
}

export class PlainStation {
  readonly pumps: readonly PlainPump[];
  readonly staticHead: number;
  readonly standby: number;
  readonly storage: boolean;
  readonly allowable: StationFile['allowable'] | null;
  private readonly k: number;
  private readonly exponent: number;

  constructor(file: StationFile) {
    const units = { flow: FLOW[file.units.flow], head: HEAD[file.units.head], power: POWER[file.units.power] };
    const rho = file.liquid?.density;
    if (rho === undefined) throw new Error('the plain model wants a density');
    const machine = (entry: MachineEntry): PlainMachine => {
      const rated = entry.motor.ratedPower === undefined ? null : entry.motor.ratedPower * units.power;
      return {
        curve: plainCurve(entry.curve, units, rho),
        times: entry.inSeries ?? 1,
        rated,
        limit: rated === null ? Infinity : rated * (entry.motor.serviceFactor ?? 1),
        motor: entry.motor.efficiency,
        drive: entry.drive ? { ...entry.drive, maxSpeed: entry.drive.maxSpeed ?? 1 } : null,
      };
    };
    this.pumps = file.pumps.flatMap((entry) =>
      Array.from(
        { length: entry.count ?? 1 },
        (_, i) =>
          new PlainPump(
            (entry.count ?? 1) > 1 ? `${entry.name}-${i + 1}` : entry.name,
            ((entry.branchLoss ?? 0) * units.head) / units.flow ** 2,
            'train' in entry ? entry.train.map(machine) : [machine(entry)],
          ),
      ),
    );
    this.staticHead = file.system.staticHead * units.head;
    this.standby = (file.standbyPower ?? 0) * units.power;
    this.storage = file.surplus === 'storage';
    this.allowable = file.allowable ?? null;
    const { friction } = file.system;
    if ('pipes' in friction) throw new Error('the plain model knows no pipes');
    this.exponent = friction.exponent ?? 2;
    if ('coefficient' in friction) this.k = (friction.coefficient * units.head) / units.flow ** this.exponent;
    else {
      // Least squares of H − H_st on Q^m: where the sum of squares over k is flat.
      const points = friction.points.map((p) => ({
        f: (p.flow * units.flow) ** this.exponent,
        h: p.head * units.head,
      }));
      const slope = (k: number) => points.reduce((sum, p) => sum + p.f * (k * p.f - (p.h - this.staticHead)), 0);
      const most = Math.max(...points.map((p) => (p.h - this.staticHead) / p.f)) * 2 + 1e-9;
      this.k = scanRoot(slope, 0, most) ?? 0;
    }
  }

  system(flow: number): number {
    return this.staticHead + this.k * flow ** this.exponent;
  }

  /** Total flow and each pump's of a running set where pumps and system meet. */
  point(running: readonly { pump: PlainPump; speed: number }[]): { flow: number; each: number[] } {
    const sent = (flow: number) => running.map(({ pump, speed }) => pump.into(this.system(flow), speed));
    const total = (flows: readonly number[]) => flows.reduce((sum, q) => sum + q, 0);
    const most = total(running.map(({ pump, speed }) => pump.end(speed)));
    if (total(sent(0)) <= 0) return { flow: 0, each: running.map(() => 0) };
    const flow = total(sent(most)) >= most ? most : scanRoot((q) => total(sent(q)) - q, 0, most)!;
    return { flow, each: sent(flow) };
  }
}
