/** What a figure of ours is held against. */
export type Kind =
  /** Printed by the source named. */
  | 'published'
  /** Printed by the source named, but quoted from memory. */
  | 'from memory'
  /** A rule of thumb of the trade. */
  | 'common practice'
  /** A formula worked by hand. */
  | 'closed form'
  /** Code that shares none with ours. */
  | 'independent solver';

/** One figure that others have worked out, and ours: a row of the accuracy table, and a test. */
export interface OutsideCheck {
  /** Of what the figure is: `Head of the system at 40 L/s`. */
  readonly what: string;
  readonly kind: Kind;
  /** Publisher or author, title, year, table or page. */
  readonly source: string;
  /** As printed, in the unit it is printed in; '–' for a number alone. */
  readonly printed: number;
  readonly unit: string;
  /** The same figure from the functions that a comparison calls. */
  readonly ours: () => number;
  /** Largest difference allowed, in the unit. */
  readonly allowed: number;
  /** Why that much: `half of the last digit printed`. */
  readonly why: string;
}

/** Half of the last digit of a figure printed with so many decimals; below 0 for figures rounded to tens and up. */
export const halfDigit = (decimals: number): number => 0.5 * 10 ** -decimals * (1 + 1e-9);
