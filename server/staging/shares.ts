import type { LeastPower, Mode } from './leastPower.ts';

/** Some pumps of one make in one mode, each at the same flow. */
export interface Share {
  readonly least: LeastPower;
  readonly mode: Mode;
  readonly count: number;
  /** Of each of them [m³/s]. */
  readonly flow: number;
}

/** Pumps of one make: what they can do, and how many there are. */
export interface Make {
  readonly least: LeastPower;
  readonly count: number;
}

/** What these pumps draw at a header head [W]. */
export function powerOf(shares: readonly Share[], header: number): number {
  let sum = 0;
  for (const { least, mode, count, flow } of shares) sum += count * least.inMode(mode, flow, header);
  return sum;
}
