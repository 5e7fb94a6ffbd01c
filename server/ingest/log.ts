/** One measured channel: a value per interval; NaN where there is none. NaN never leaves as 0: a gap stays a gap. */
export type Channel = Float64Array;

/** What a log says of one pump; each channel may be absent. */
export interface PumpChannels {
  readonly name: string;
  /** Share of the interval the pump ran, 0 to 1. */
  readonly on: Channel | null;
  /** Share of rated speed. */
  readonly speed: Channel | null;
  /** Electric power [W]. */
  readonly power: Channel | null;
}

/**
 * A record, by columns, in SI. Interval i starts at `startMs[i]` (UTC, ascending) and lasts `seconds[i]`; values are
 * means over it. Time between the end of one interval and the start of the next is a gap.
 */
export interface Log {
  readonly startMs: Float64Array;
  readonly seconds: Float64Array;
  /** Mean flow [m³/s], or null where the record has none (then it has levels and run states). */
  readonly flow: Channel | null;
  /** Level [m] of the station's storage. */
  readonly level: Channel | null;
  /** Static head [m]. */
  readonly staticHead: Channel | null;
  /** Measured electric power of the station [W]. */
  readonly power: Channel | null;
  /** Number of pumps running. */
  readonly pumpsOn: Channel | null;
  readonly pumps: readonly PumpChannels[];
}

/** What the import did and what it doubts, for a person to read before trusting a figure. */
export interface QualityReport {
  /** First instant and end of the last interval, ISO 8601 UTC. */
  readonly from: string;
  readonly to: string;
  readonly intervals: number;
  /** Most frequent step [s]. */
  readonly stepSeconds: number;
  /** Hours with a flow (or level) value, and the rest of the span. */
  readonly hours: number;
  readonly gapHours: number;
  readonly gaps: readonly { readonly from: string; readonly to: string; readonly hours: number }[];
  readonly minFlowM3s: number | null;
  readonly maxFlowM3s: number | null;
  readonly meanFlowM3s: number | null;
  readonly volumeM3: number | null;
  readonly notes: readonly { readonly code: string; readonly text: string }[];
}
