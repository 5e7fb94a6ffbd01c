import { refuse } from './errors.ts';

/** Objects and lists inside one another; no file of ours has a third of this. */
const DEEPEST = 32;

const [QUOTE, BACKSLASH] = [34, 92];
const OPENING = new Set([91, 123]); // [ {
const CLOSING = new Set([93, 125]); // ] }

/**
 * Refuses JSON nested deeper than any file of ours, before a reader follows it down and runs out of stack.
 *
 * @throws InputError out_of_range
 */
export function refuseDeepNesting(json: Uint8Array, file: string): void {
  let depth = 0;
  let quoted = false;
  for (let i = 0; i < json.length; i++) {
    const byte = json[i]!;
    if (byte === QUOTE) quoted = !quoted;
    else if (quoted) {
      if (byte === BACKSLASH) i++;
    } else if (OPENING.has(byte)) {
      if (++depth > DEEPEST) {
        const wanted = `lists and objects at most ${DEEPEST} deep`;
        refuse({ code: 'out_of_range', file, at: '', found: 'lists within lists without end', wanted });
      }
    } else if (CLOSING.has(byte)) depth--;
  }
}
