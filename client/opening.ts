import type { RecordEntry, StationEntry, TariffEntry } from '../server/api.ts';
import type { StationBody } from './api.ts';

/** The record that came last, or null. */
export function latestRecord(records: readonly RecordEntry[]): RecordEntry | null {
  return records.reduce<RecordEntry | null>((last, each) => (last && last.id > each.id ? last : each), null);
}

/**
 * The tariff to open a station with: the one it was last compared under; else the last one that could be its own, being
 * in its currency and zone. Null compares energy only.
 */
export function tariffFor(
  station: StationBody,
  entry: Pick<StationEntry, 'tariffId'> | undefined,
  tariffs: readonly TariffEntry[],
): number | null {
  if (entry?.tariffId != null && tariffs.some((each) => each.id === entry.tariffId)) return entry.tariffId;
  const fits = tariffs.filter(
    (each) => each.currency === station.currency && each.timeZone === station.timeZone && each.demo === station.demo,
  );
  return fits.at(-1)?.id ?? null;
}
