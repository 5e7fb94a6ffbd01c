import type { Fault, Note } from '../errors.ts';

/** Everything a reader of one part of the file needs: its units as factors, where faults and notes go. */
export interface Reading {
  readonly flow: number;
  readonly head: number;
  readonly power: number;
  readonly density: number;
  /** Temperature of the liquid [°C]; null where only its density is given. */
  readonly temperature: number | null;
  readonly notes: Note[];
  fault(code: Fault['code'], at: string, found: string, wanted: string): void;
}

/** Two fields that say the same by different numbers are told apart from one that is rounded. */
export const DIFFERS = 0.05;

/** A value of the file in SI; null where the file has none. */
export function scaled(value: number | undefined, unit: number): number | null {
  return value === undefined ? null : value * unit;
}
