import type { StationFile } from '../../server/station/stationFile.ts';

/** Made-up stations of every kind, from a seed, so that a failing one can be made again. */

/** Numbers in [0, 1) from a seed: G. Marsaglia's xorshift of 32 bits (2003). */
export function dice(seed: number): () => number {
  let state = (Math.imul(seed + 1, 0x9e3779b1) ^ 0x5bd1e995) >>> 0 || 1;
  const next = () => {
    state ^= state << 13;
    state ^= state >>> 17;
    state ^= state << 5;
    state >>>= 0;
    return state / 2 ** 32;
  };
  for (let i = 0; i < 12; i++) next();
  return next;
}

const UNITS: readonly { units: StationFile['units']; flow: number; head: number; power: number }[] = [
  { units: { flow: 'L/s', head: 'm', power: 'kW' }, flow: 0.001, head: 1, power: 1000 },
  { units: { flow: 'gpm', head: 'ft', power: 'hp' }, flow: 6.309e-5, head: 0.3048, power: 745.7 },
  { units: { flow: 'm3/h', head: 'm', power: 'kW' }, flow: 1 / 3600, head: 1, power: 1000 },
  { units: { flow: 'MGD', head: 'ft', power: 'hp' }, flow: 0.04381, head: 0.3048, power: 745.7 },
  { units: { flow: 'ML/d', head: 'm', power: 'kW' }, flow: 0.011574, head: 1, power: 1000 },
  { units: { flow: 'm3/s', head: 'm', power: 'kW' }, flow: 1, head: 1, power: 1000 },
];

type Single = Extract<StationFile['pumps'][number], { curve: unknown }>;
type Scale = (typeof UNITS)[number];

/** Sizes that a pump is made to [SI]. */
interface Size {
  readonly shutoff: number;
  readonly best: number;
}

function aCurve(roll: () => number, { shutoff, best }: Size, scale: Scale): Single['curve'] {
  const eta = 0.6 + 0.25 * roll();
  const atBest = shutoff * (0.62 + 0.2 * roll());
  const speedCorrection = roll() < 0.25;
  const flow = (q: number) => q / scale.flow;
  const head = (h: number) => h / scale.head;
  const kind = roll();
  const parabola = { shutoffHead: head(shutoff), bestFlow: flow(best), bestEfficiency: eta, speedCorrection };
  if (kind < 0.3) {
    return { ...parabola, shape: ((shutoff - atBest) / best ** 2 / scale.head) * scale.flow ** 2 };
  }
  if (kind < 0.5) {
    const operatingPoint = { flow: flow(best * 1.1), head: head(atBest) };
    return { ...parabola, operatingPoint, ...(roll() < 0.3 && { maxFlow: flow(1.3 * best) }) };
  }
  const power = 1.6 + roll();
  const shares = [0, 0.3, 0.55, 0.8, 1, 1.2, 1.45].map((x, i) => (i === 0 ? 0 : x * (0.97 + 0.06 * roll())));
  const droops = roll() < 0.2;
  const firstAbove = roll() < 0.2;
  const inPower = !firstAbove && roll() < 0.4;
  const points = shares.map((x, i) => {
    const h = droops && i === 0 ? shutoff * 0.97 : shutoff - (shutoff - atBest) * x ** power;
    const e = eta * Math.max(0, 1 - Math.abs(1 - x) ** 2.2);
    if (!inPower) return { flow: flow(x * best), head: head(h), efficiency: e };
    const shaft = (9800 * best * atBest * (0.45 + 0.5 * x + 0.05 * x * x)) / eta;
    return { flow: flow(x * best), head: head(h), power: shaft / scale.power };
  });
  return { points: firstAbove ? points.slice(1) : points, speedCorrection };
}

function aMotor(roll: () => number, { shutoff, best }: Size, scale: Scale): Single['motor'] {
  const typical = (9800 * best * shutoff * 0.75) / 0.72;
  const table = [
    { load: 0.25, efficiency: 0.86 },
    { load: 0.5, efficiency: 0.92 },
    { load: 0.75, efficiency: 0.935 },
    { load: 1, efficiency: 0.93 },
  ];
  const byLoad = roll() < 0.5;
  return {
    ratedPower: (typical * (0.9 + 0.6 * roll())) / scale.power,
    ...(roll() < 0.3 && { serviceFactor: 1.15 }),
    efficiency: byLoad ? table : 0.88 + 0.07 * roll(),
  };
}

function aDrive(roll: () => number, fitted: boolean): NonNullable<Single['drive']> {
  const table = [
    { load: 0.1, efficiency: 0.85 },
    { load: 0.4, efficiency: 0.94 },
    { load: 1, efficiency: 0.97 },
  ];
  return {
    fitted,
    minSpeed: 0.4 + 0.35 * roll(),
    ...(roll() < 0.3 && { maxSpeed: 1.08 }),
    efficiency: roll() < 0.4 ? table : 0.96,
  };
}

export interface Wanted {
  /** Pumps that are all alike, or each of its own make. */
  readonly mixed?: boolean;
  readonly most?: number;
  readonly surplus?: StationFile['surplus'];
}

/** Station number `seed`. With `mixed` some pumps have no drive, and one may be a train or two in series. */
export function madeStation(seed: number, { mixed = false, most = 5, surplus }: Wanted = {}): StationFile {
  const roll = dice(seed);
  const scale = UNITS[seed % UNITS.length]!;
  const count = mixed ? 2 + Math.floor(roll() * (most - 1)) : 1 + Math.floor(roll() * most);
  const shutoff = 15 + 60 * roll();
  const best = 10 ** (-2.3 + 1.8 * roll());
  const exponent = roll() < 0.5 ? 2 : 1.852;
  const staticHead = [0, 0.25, 0.6][Math.floor(roll() * 3)]! * shutoff * 0.9;
  const k = ((0.72 * shutoff - staticHead) / (count * best * (0.6 + 0.7 * roll())) ** exponent) * 0.9;
  const branchLoss = roll() < 0.5 ? ((0.03 * shutoff) / best ** 2 / scale.head) * scale.flow ** 2 : undefined;
  const friction =
    roll() < 0.3
      ? {
          points: [0.6, 1.1].map((x) => ({
            flow: (x * count * best) / scale.flow,
            head: (staticHead + k * (x * count * best) ** exponent * (0.95 + 0.1 * roll())) / scale.head,
          })),
          exponent,
        }
      : { coefficient: (k / scale.head) * scale.flow ** exponent, exponent };
  const single = (name: string, size: Size, driven: boolean): Single => ({
    name,
    role: 'duty',
    curve: aCurve(roll, size, scale),
    motor: aMotor(roll, size, scale),
    ...(branchLoss !== undefined && { branchLoss }),
    ...(driven && { drive: aDrive(roll, roll() < 0.5) }),
  });
  const pumps: StationFile['pumps'] = mixed
    ? Array.from({ length: count }, (_, i) => {
        const size = { shutoff: shutoff * (0.9 + 0.2 * roll()), best: best * (0.4 + 0.9 * roll()) };
        const name = 'ABCDEFGH'[i]!;
        const driven = i === 0 || roll() < 0.6;
        if (roll() < 0.2) {
          const half = { ...size, shutoff: size.shutoff / 2 };
          return { ...single(name, half, driven), inSeries: 2 };
        }
        if (roll() < 0.15) {
          const [one, two] = [0.6, 0.4].map((x) => single(name, { ...size, shutoff: size.shutoff * x }, false));
          const part = ({ curve, motor }: Single) => ({ curve, motor });
          return {
            name,
            role: 'duty' as const,
            train: [{ ...part(one!), drive: driven ? aDrive(roll, true) : null }, part(two!)],
          };
        }
        return single(name, size, driven);
      })
    : [{ ...single('P', { shutoff, best }, true), count }];
  const ranged = roll() < 0.35;
  return {
    format: 'nth-pump/station/1',
    name: `made ${seed}`,
    timeZone: 'UTC',
    currency: 'EUR',
    units: scale.units,
    liquid: { density: 985 + 30 * roll() },
    surplus: surplus ?? (roll() < 0.5 ? 'storage' : 'throttle'),
    standbyPower: roll() < 0.5 ? 0.4 : 0,
    ...(ranged && { allowable: { from: 0.45, to: 1.25 } }),
    system: { staticHead: staticHead / scale.head, friction },
    pumps,
  };
}

/** How many stations a proof takes: a sample in the suite, all of them in the endurance run. */
export const ENDURE = process.env.NTH_PUMP_ENDURE === '1';

/** `few` seeds, or `all` where the run is the long one. */
export function seeds(few: number, all: number): number[] {
  return Array.from({ length: ENDURE ? all : few }, (_, i) => i);
}
