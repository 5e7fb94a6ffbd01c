import type { PumpEntry, StationFile } from '../server/station/stationFile.ts';

/** Drives of a station's duty pumps, and how many pumps there are. */
export interface Equipment {
  readonly duty: number;
  readonly standby: number;
  /** Duty pumps with a drive in place, and with one in place or proposed. */
  readonly fitted: number;
  readonly driven: number;
}

/** What a station file has, pumps that stand for several counted one by one. */
export function equipmentOf(station: StationFile): Equipment {
  const sum = { duty: 0, standby: 0, fitted: 0, driven: 0 };
  for (const entry of station.pumps) {
    const count = entry.count ?? 1;
    if (entry.role === 'standby') {
      sum.standby += count;
      continue;
    }
    const drives = drivesOf(entry);
    sum.duty += count;
    if (drives.length > 0) sum.driven += count;
    if (drives.length > 0 && drives.every((drive) => drive.fitted ?? true)) sum.fitted += count;
  }
  return sum;
}

/** Names of the duty pumps; one that stands for several has them numbered, as everywhere. */
export function dutyNames(station: StationFile): string[] {
  return station.pumps
    .filter((entry) => entry.role !== 'standby')
    .flatMap(({ name, count = 1 }) =>
      count === 1 ? [name] : Array.from({ length: count }, (_, i) => `${name}-${i + 1}`),
    );
}

function drivesOf(entry: PumpEntry) {
  const parts = 'train' in entry ? entry.train : [entry];
  return parts.flatMap((part) => (part.drive ? [part.drive] : []));
}

/** A number of the station file that the page lets a reader change. */
export type Path = readonly (string | number)[];

/** The number at a path, or null where the file has none there. */
export function numberAt(file: unknown, path: Path): number | null {
  let value: unknown = file;
  for (const key of path) {
    if (typeof value !== 'object' || value === null) return null;
    value = (value as Record<string | number, unknown>)[key];
  }
  return typeof value === 'number' ? value : null;
}

/** A copy of the file with another number at a path; every part off the path is shared. */
export function withNumber<T>(file: T, path: Path, value: number): T {
  const [key, ...rest] = path;
  if (key === undefined) return value as T;
  const copy = (Array.isArray(file) ? [...file] : { ...file }) as Record<string | number, unknown>;
  copy[key] = withNumber(copy[key], rest, value);
  return copy as T;
}

/** One number in which a draft differs from what is saved. */
export interface Difference {
  readonly path: Path;
  readonly saved: number;
  readonly draft: number;
}

/** Where two station files of one shape differ in a number, in the order of the file. */
export function differences(saved: unknown, draft: unknown, path: Path = []): Difference[] {
  if (saved === draft) return [];
  if (typeof saved === 'number' && typeof draft === 'number') return [{ path, saved, draft }];
  if (typeof saved !== 'object' || typeof draft !== 'object' || saved === null || draft === null) return [];
  return Object.entries(saved).flatMap(([key, value]) =>
    differences(value, (draft as Record<string, unknown>)[key], [...path, Array.isArray(saved) ? Number(key) : key]),
  );
}

/** A station body without what the server adds, ready to be sent back. */
export function stationFileOf<T extends { id: number; demo: boolean }>(body: T): Omit<T, 'id' | 'demo'> {
  const { id: _id, demo: _demo, ...file } = body;
  return file;
}
