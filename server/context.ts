import type { Db } from '../db/open.ts';
import { refuse } from './errors.ts';

/** What the routes are given: nothing in them opens a database or looks at the clock. */
export interface Context {
  readonly db: Db;
  /** Now, UTC [ms]. */
  readonly now: () => number;
}

/**
 * What an id stands for.
 *
 * @param find   looks it up; null where there is none
 * @param text   the id as it was sent
 * @param at     the field or part of the path it came in, e.g. `stationId`
 * @param thing  what it should be, e.g. `station`
 * @throws       InputError not_found
 */
export function existing<T>(find: (id: number) => T | null, text: unknown, at: string, thing: string): T {
  const id = /^\d{1,15}$/.test(String(text)) ? Number(text) : null;
  const found = id === null ? null : find(id);
  return found ?? notFound(text, at, thing);
}

/** Refuses an id that stands for nothing. */
function notFound(text: unknown, at: string, thing: string): never {
  refuse({ code: 'not_found', file: 'request', at, found: `'${String(text)}'`, wanted: `the id of a ${thing}` });
}
