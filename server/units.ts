/**
 * Constants and conversions. Inside the program every quantity is SI: m³/s, m, W, J, s, kg/m³; file units exist only at
 * the edges and pass through here once, on the way in and on the way out.
 */

/** Standard acceleration of gravity [m/s²], exact (3rd CGPM, 1901). */
export const GRAVITY = 9.80665;

/** International foot [m], exact (1959 yard and pound agreement). */
export const FOOT = 0.3048;

/** International inch [m], exact. */
export const INCH = 0.0254;

/** US liquid gallon [m³], exact (231 cubic inches). */
export const US_GALLON = 231 * INCH ** 3;

/** Mechanical horsepower [W]: 550 ft·lbf/s with the international pound-force. */
export const HORSEPOWER = 550 * FOOT * 0.45359237 * GRAVITY;

/** Joules in one kilowatt-hour, exact. */
export const JOULES_PER_KWH = 3.6e6;

/** m³/s in one unit of each flow unit that a file may use; `gpm` and `MGD` are US. */
export const FLOW_UNITS = {
  'm3/s': 1,
  'm3/h': 1 / 3600,
  'L/s': 1e-3,
  'ML/d': 1000 / 86_400,
  gpm: US_GALLON / 60,
  MGD: (1e6 * US_GALLON) / 86_400,
} as const;

/** Metres in one unit of head (and of level). */
export const HEAD_UNITS = { m: 1, ft: FOOT } as const;

/** Watts in one unit of power. */
export const POWER_UNITS = { kW: 1000, hp: HORSEPOWER } as const;

export type FlowUnit = keyof typeof FLOW_UNITS;
export type HeadUnit = keyof typeof HEAD_UNITS;
export type PowerUnit = keyof typeof POWER_UNITS;

/** Pascals in one pound-force per square inch: 0.45359237 kg · 9.80665 m/s² / (0.0254 m)². */
export const PSI = (0.45359237 * GRAVITY) / 0.0254 ** 2;

/** The units a station file is written in. */
export interface FileUnits {
  readonly flow: FlowUnit;
  readonly head: HeadUnit;
  readonly power: PowerUnit;
}

/** Whether a flow unit belongs to the US customary family; volumes beside it are then US gallons. */
export function isUsFlow(unit: FlowUnit): boolean {
  return unit === 'gpm' || unit === 'MGD';
}

/**
 * Frequency of the mains [Hz], at which a drive turns a pump at rated speed: 60 where flows are in US units or money in a
 * currency of North America, 50 elsewhere. A guess: a reader can say.
 */
export function usualMainsHz({ units, currency }: { readonly units: FileUnits; readonly currency: string }): 50 | 60 {
  return isUsFlow(units.flow) || ['USD', 'CAD', 'MXN'].includes(currency) ? 60 : 50;
}

/** m³ in the volume unit that goes with a flow unit: m³ with metric flow, US gallons with `gpm` or `MGD`. */
export function volumeUnit(unit: FlowUnit): number {
  return isUsFlow(unit) ? US_GALLON : 1;
}

/** Energy [kWh] of a mean power [W] held for a time [s]. */
export function energyKwh(watts: number, seconds: number): number {
  return (watts * seconds) / JOULES_PER_KWH;
}
