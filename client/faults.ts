import { type Fault, InputError } from '../server/errors.ts';

/** What a reader of the server's own kind says of a value, in the browser: its faults by field path. */
export type FaultsByPath = ReadonlyMap<string, string>;

/**
 * The faults that `read` finds, by field path, each in a line without the path: `found -3; wanted more than 0`.
 *
 * Anything it throws that is no person's mistake goes on.
 */
export function faultsOf(read: () => unknown): FaultsByPath {
  try {
    read();
    return new Map();
  } catch (error) {
    if (!(error instanceof InputError)) throw error;
    return byPath(error.faults);
  }
}

function byPath(faults: readonly Fault[]): FaultsByPath {
  const found = new Map<string, string>();
  for (const fault of faults) {
    const line = `found ${fault.found}; wanted ${fault.wanted}`;
    const before = found.get(fault.at);
    found.set(fault.at, before === undefined ? line : `${before}. ${line}`);
  }
  return found;
}
