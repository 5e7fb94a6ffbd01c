import { existsSync, readFileSync } from 'node:fs';
import type { Log } from '../../server/ingest/log.ts';
import { readRecord } from '../../server/ingest/record.ts';
import { readStation } from '../../server/station/readStation.ts';
import type { Station } from '../../server/station/station.ts';
import type { Tariff } from '../../server/tariff/tariff.ts';
import { readTariff } from '../../server/tariff/tariffFile.ts';

/** Whole examples of tests/reference/examples: the files, and what an independent implementation makes of them. */

const folder = new URL('../reference/examples/', import.meta.url);
const text = (path: string) => readFileSync(new URL(path, folder), 'utf8');

/** A file of an example as its JSON has it. */
export function exampleJson(name: string, file: string): unknown {
  return JSON.parse(text(`${name}/${file}`));
}

/** What is compared; an example without a tariff has none. */
export function exampleOf(name: string): { station: Station; log: Log; tariff: Tariff | null } {
  const station = readStation(exampleJson(name, 'station.json'), 'station.json');
  const { log } = readRecord({
    fileName: 'record.csv',
    data: text(`${name}/record.csv`),
    units: station.units,
    timeZone: station.timeZone,
    pumpNames: station.duty.map((pump) => pump.name),
  });
  const priced = existsSync(new URL(`${name}/tariff.json`, folder));
  return { station, log, tariff: priced ? readTariff(exampleJson(name, 'tariff.json'), 'tariff.json') : null };
}
