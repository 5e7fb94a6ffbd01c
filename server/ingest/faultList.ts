import { type Fault, InputError } from '../errors.ts';

/** More faults than this in one file are counted, not listed: they nearly always have one cause. */
const LISTED = 50;

/** Gathers the faults of one file, one per line of it, so that a person can mend them all at once. */
export class FaultList {
  readonly #file: string;
  readonly #faults: Fault[] = [];
  readonly #lines = new Set<number>();
  #unlisted = 0;

  constructor(file: string) {
    this.#file = file;
  }

  /** Adds a fault of one line; a line that already has one is left alone, since the rest may follow from it. */
  atLine(line: number, code: Fault['code'], found: string, wanted: string): void {
    if (this.#lines.has(line)) return;
    this.#lines.add(line);
    this.add(`line ${line}`, code, found, wanted);
  }

  /** Adds a fault of a place that is not a line: a field path, or '' for the whole file. */
  add(at: string, code: Fault['code'], found: string, wanted: string): void {
    if (this.#faults.length < LISTED) this.#faults.push({ code, file: this.#file, at, found, wanted });
    else this.#unlisted++;
  }

  get isEmpty(): boolean {
    return this.#faults.length === 0;
  }

  /** Throws an {@link InputError} with everything found so far; does nothing if nothing was. */
  throwIfAny(): void {
    const last = this.#faults.at(-1);
    if (last === undefined) return;
    this.#faults.sort((a, b) => lineNumber(a) - lineNumber(b));
    if (this.#unlisted === 0) throw new InputError(this.#faults);
    const rest = `${this.#unlisted} more faults`;
    throw new InputError([
      ...this.#faults,
      { code: last.code, file: this.#file, at: '', found: rest, wanted: 'these mended first' },
    ]);
  }
}

/** Faults come in the order of the checks; people mend a file from top to bottom. */
function lineNumber(fault: Fault): number {
  return Number(/^line (\d+)$/.exec(fault.at)?.[1] ?? 0);
}
