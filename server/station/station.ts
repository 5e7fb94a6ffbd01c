import type { Pump } from '../hydraulics/pump.ts';
import type { Friction } from '../hydraulics/systemCurve.ts';
import type { FileUnits } from '../units.ts';
import type { Storage } from './storage.ts';

/** From and to, as shares of the best-efficiency flow at the speed the pump runs at. */
export interface FlowRange {
  readonly from: number;
  readonly to: number;
}

/** What the velocity in the pipes is judged by. */
export interface Main {
  /** Cross-sections [m²] of the widest pipe, where flow is slowest, and of the narrowest. */
  readonly widestArea: number;
  readonly narrowestArea: number;
  /** Usual limits [m/s]: below the first solids settle, above the second friction and surge grow. */
  readonly leastVelocity: number;
  readonly mostVelocity: number;
}

/** What the suction of the pumps is judged by; heads and levels in m. */
export interface Suction {
  /** Head of the air's pressure less that of the vapour, (p_air − p_vapour)/(ρ·g). */
  readonly airHead: number;
  /** Level of the impellers, over the datum of the suction level. */
  readonly pumpLevel: number;
  /** k in the loss k·q² of each pump's own suction pipe [m/(m³/s)²]. */
  readonly loss: number;
  /** Least NPSH available as a multiple of NPSH required. */
  readonly margin: number;
  /** Level where a record says nothing else; null where unknown. */
  readonly level: number | null;
}

/** A pump station, read and checked; all in SI. Pumps that stand for several in the file are here one by one. */
export interface Station {
  readonly name: string;
  readonly timeZone: string;
  readonly currency: string;
  /** Units of the file it came from, in which it is shown to its reader. */
  readonly units: FileUnits;
  /** Density of the liquid [kg/m³], and its temperature [°C] where that is known. */
  readonly density: number;
  readonly temperature: number | null;
  /** What takes up the difference when pumps cannot be turned down to the flow. */
  readonly surplus: 'storage' | 'throttle';
  /** Drawn at all times [W]. */
  readonly standbyPower: number;
  readonly allowable: FlowRange | null;
  /** Only for counting hours. */
  readonly preferred: FlowRange;
  /** Static head [m] where a record says nothing else. */
  readonly staticHead: number;
  readonly dischargeLevel: number | null;
  readonly suctionLevel: number | null;
  readonly friction: Friction;
  /** The pipes as the velocity sees them; null where the file has none. */
  readonly main: Main | null;
  /** null where what is needed for NPSH is not all known. */
  readonly suction: Suction | null;
  readonly storage: Storage;
  /** Duty pumps in the order in which they are brought on. */
  readonly duty: readonly Pump[];
  readonly standby: readonly Pump[];
  /** Flows of the operator's own step table [m³/s]; null where the file has none. */
  readonly flowSteps: { readonly bringOn: readonly number[]; readonly dropOff: readonly number[] } | null;
  /** For the rule `steady`: least time between changes [s], and what a start counts for [J]. */
  readonly steady: { readonly minRun: number; readonly startPenalty: number };
  /** What was assumed or doubted while the file was read. */
  readonly notes: readonly { readonly code: string; readonly text: string }[];
}

/** Whether all duty pumps are alike, so that a count says which set runs. */
export function dutyPumpsAreEqual(duty: readonly Pump[]): boolean {
  const first = duty[0];
  return first !== undefined && duty.every((pump) => pump.make === first.make);
}

/** Pumps of one make together, in the order in which the makes first appear. */
export function pumpsByMake(pumps: readonly Pump[]): Pump[][] {
  const makes = new Map<string, Pump[]>();
  for (const pump of pumps) {
    const alike = makes.get(pump.make);
    if (alike) alike.push(pump);
    else makes.set(pump.make, [pump]);
  }
  return [...makes.values()];
}
