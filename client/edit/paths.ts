import { fieldPath } from '../../server/readFile.ts';
import type { Path } from '../station.ts';

/** Objects that a file may leave out: when their last field is emptied, they go too. */
const MAY_GO = new Set([
  'liquid',
  'storage',
  'allowable',
  'preferred',
  'rules',
  'steady',
  'suctionLoss',
  'holidays',
  'ratchet',
]);

/** What stands at a path of a file; undefined where there is nothing. */
export function valueAt(file: unknown, path: Path): unknown {
  let here = file;
  for (const key of path) {
    if (typeof here !== 'object' || here === null) return undefined;
    here = (here as Record<string | number, unknown>)[key];
  }
  return here;
}

/** A copy of a file with another value at a path; undefined takes the field, or the entry of a list, away. */
export function withValue<T>(file: T, path: Path, value: unknown): T {
  const [key, ...rest] = path;
  if (key === undefined) return value as T;
  const copy = (
    Array.isArray(file)
      ? [...file]
      : typeof file === 'object' && file !== null
        ? { ...file }
        : typeof key === 'number'
          ? []
          : {}
  ) as Record<string | number, unknown>;
  const next = withValue(copy[key], rest, value);
  const emptied = typeof key === 'string' && MAY_GO.has(key) && isEmpty(next);
  if (next !== undefined && !emptied) copy[key] = next;
  else if (Array.isArray(copy)) copy.splice(Number(key), 1);
  else delete copy[key];
  return copy as T;
}

function isEmpty(value: unknown): boolean {
  return typeof value === 'object' && value !== null && !Array.isArray(value) && Object.keys(value).length === 0;
}

/** `pumps[0].curve.bestFlow`, as faults name it. */
export function pathText(path: Path): string {
  return fieldPath(path);
}
