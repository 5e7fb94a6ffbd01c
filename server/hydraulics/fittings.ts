/**
 * Loss coefficients K in K·v²/2g, v in the pipe the fitting belongs to.
 *
 * From the Hydraulic Institute's Engineering Data Library, section III.B (figures of the HI Engineering Data Book, 2nd
 * ed. 1990, Tables 32a to 32c). Its own spread (Table 3.B.1): flanged elbow ±35 %, flanged gate valve ±50 %, flanged
 * check valve +200/−80 %. Where the maker gives a K, use that as `minorLoss` instead.
 */
const FITTINGS = {
  /** Rounded inlet, Table 32a. */
  'bell-mouth-inlet': 0.05,
  /** Inlet flush with a wall, Table 32a. */
  'square-inlet': 0.5,
  /** Inlet that stands out from the wall, Table 32a. */
  'inward-inlet': 1.0,
  /** Into a tank or the open: all of v²/2g, section III.B. */
  exit: 1.0,
  /** Regular, flanged, 4 in; larger ones lose somewhat less. Used in the worked example of section I.A. */
  'elbow-90': 0.31,
  /** Wedge, flanged, fully open, 4 in. Used in the worked example of section I.A. */
  'gate-valve': 0.17,
  /** Swing, flanged, 1 to 20 in, fully open, which takes some 4.6 m/s; slower flow opens it less and loses more. */
  'swing-check-valve': 2.0,
  /** 0.8, read off the curve. */
  'foot-valve': 0.8,
} as const;

export type Fitting = keyof typeof FITTINGS;

export const FITTING_NAMES = Object.keys(FITTINGS) as Fitting[];

/** K of a fitting by name; null where the table does not have it. */
export function fittingLoss(name: string): number | null {
  return Object.hasOwn(FITTINGS, name) ? FITTINGS[name as Fitting] : null;
}
