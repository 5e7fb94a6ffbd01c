/** What can be wrong with what a person gives us. Every code is described in DEVELOPERS.md. */
export type FaultCode =
  // any file
  | 'not_json'
  | 'not_csv'
  | 'unknown_format'
  | 'missing_field'
  | 'unknown_field'
  | 'wrong_type'
  | 'out_of_range'
  | 'unknown_unit'
  | 'unknown_zone'
  | 'unknown_name'
  | 'duplicate_name'
  // station
  | 'rising_curve'
  | 'efficiency_out_of_range'
  | 'static_head_negative'
  | 'steps_fall'
  | 'levels_contradict'
  | 'no_duty_pump'
  // record
  | 'missing_column'
  | 'empty_record'
  | 'not_a_time'
  | 'ambiguous_time'
  | 'not_a_number'
  | 'ambiguous_number'
  | 'negative_flow'
  | 'conflicting_rows'
  | 'step_out_of_range'
  | 'ragged_row'
  // tariff
  | 'uncovered_hours'
  | 'unknown_season'
  | 'unknown_holidays'
  | 'currency_mismatch'
  // request and case
  | 'unknown_rule'
  | 'rule_cannot_run'
  | 'not_found'
  | 'conflict'
  | 'too_large'
  | 'bad_option';

/** One thing to mend, said so that it can be mended: where, what was found, what was wanted. */
export interface Fault {
  readonly code: FaultCode;
  /** The file's name, or the part of the request, e.g. `station.json`. */
  readonly file: string;
  /** Line of a text file, counted from 1, or a field path such as `pumps[0].curve.points[2].head`. */
  readonly at: string;
  readonly found: string;
  readonly wanted: string;
}

/** `flow.csv line 214: found flow '1,2O4'; wanted a number` */
export function faultLine(fault: Fault): string {
  const place = fault.at === '' ? fault.file : `${fault.file} ${fault.at}`;
  return `${place}: found ${fault.found}; wanted ${fault.wanted}`;
}

/** A person's mistake, with every fault found in one reading. Anything else that is thrown is a bug of ours. */
export class InputError extends Error {
  readonly faults: readonly Fault[];

  constructor(faults: readonly Fault[]) {
    super(faults.map(faultLine).join('\n'));
    this.name = 'InputError';
    this.faults = faults;
  }
}

/** Throws an {@link InputError} with a single fault. */
export function refuse(fault: Fault): never {
  throw new InputError([fault]);
}

/** A fact worth telling beside a result: a doubt, an assumption, a caution. Never a failure. */
export interface Note {
  readonly code: string;
  readonly text: string;
}
