/** npm run import: stores a record of a station in the database and says what was found in it. */
import { readFileSync } from 'node:fs';
import { basename } from 'node:path';
import { parseArgs } from 'node:util';
import { migrate } from '../db/migrate.ts';
import { type Db, openDatabase } from '../db/open.ts';
import type { StoredRecord } from '../db/records.ts';
import { findStation, listStations, type StoredStation, stationsNamed } from '../db/stations.ts';
import { recordQuery } from '../server/api.ts';
import { faultLine, InputError, refuse } from '../server/errors.ts';
import { importRecord } from '../server/importRecord.ts';
import { readAs } from '../server/readFile.ts';
import { databasePath } from '../server/settings.ts';

const OPTIONS = Object.keys(recordQuery.shape).filter((name) => name !== 'fileName');
const kebab = (name: string): string => name.replace(/[A-Z]/g, (letter) => `-${letter.toLowerCase()}`);

const HELP = `npm run --silent import -- --station NAME|ID --record FILE [options]

Stores a record (a log of flow, or of level with run states, as CSV; or a profile as JSON) under a station of the
database, whole or not at all, and prints what was found in it.

  --station NAME|ID   the station; the page or the HTTP interface stores them
  --record FILE       the record
${OPTIONS.map((name) => `  --${kebab(name)} VALUE`).join('\n')}
  --json              print the record's entry as JSON
  --help              this text

The database is NTH_PUMP_DB, or .data/nth-pump.sqlite inside the checkout.
Exit code 0 when stored, 2 when something is to be mended (one line each), 1 for anything unexpected.
`;

function main(): void {
  const given = readArguments();
  if (given.help === true) {
    process.stdout.write(HELP);
    return;
  }
  const stationName = required(given.station, 'station');
  const path = required(given.record, 'record');
  const asked = Object.fromEntries(
    OPTIONS.flatMap((name) => (given[kebab(name)] === undefined ? [] : [[name, given[kebab(name)]]])),
  );
  const { name, fileName: _fileName, ...options } = readAs(recordQuery, asked, 'options');
  const data = readBytes(path);
  const db = openDatabase(databasePath(process.env));
  try {
    migrate(db);
    const record = importRecord(
      db,
      stationOf(db, stationName),
      { name, fileName: basename(path), data, options },
      Date.now(),
    );
    process.stdout.write(given.json === true ? `${JSON.stringify(record, null, 2)}\n` : summary(record));
  } finally {
    db.close();
  }
}

function readArguments(): Record<string, string | boolean | undefined> {
  const text = Object.fromEntries(
    ['station', 'record', ...OPTIONS.map(kebab)].map((name) => [name, { type: 'string' as const }]),
  );
  try {
    return parseArgs({ options: { ...text, json: { type: 'boolean' }, help: { type: 'boolean' } } }).values;
  } catch (error) {
    if (!(error instanceof TypeError)) throw error;
    refuse({
      code: 'bad_option',
      file: 'arguments',
      at: '',
      found: error.message.split('\n')[0]!,
      wanted: 'the options of --help',
    });
  }
}

function required(value: string | boolean | undefined, name: string): string {
  if (typeof value === 'string' && value !== '') return value;
  refuse({ code: 'bad_option', file: 'arguments', at: `--${name}`, found: 'nothing', wanted: 'a value; see --help' });
}

function readBytes(path: string): Uint8Array {
  try {
    return readFileSync(path);
  } catch (error) {
    const reason = (error as NodeJS.ErrnoException).code;
    if (reason === undefined) throw error;
    refuse({ code: 'not_found', file: path, at: '', found: `no readable file (${reason})`, wanted: 'a record' });
  }
}

/** The station of an id, else the one of that name. */
function stationOf(db: Db, text: string): StoredStation {
  const byId = /^\d{1,15}$/.test(text) ? findStation(db, Number(text)) : null;
  const named = byId ? [byId] : stationsNamed(db, text);
  const [station] = named;
  if (station && named.length === 1) return station;
  if (station) {
    const found = `${named.length} stations named '${text}'`;
    refuse({
      code: 'conflict',
      file: 'arguments',
      at: '--station',
      found,
      wanted: `an id: ${named.map(({ id }) => id).join(', ')}`,
    });
  }
  const known = listStations(db).map((entry) => `${entry.id} (${entry.name})`);
  const wanted = known.length === 0 ? 'a station; none is stored yet' : `one of ${known.join(', ')}`;
  refuse({ code: 'not_found', file: 'arguments', at: '--station', found: `'${text}'`, wanted });
}

function summary({ id, name, stationId, report }: StoredRecord): string {
  const lines = [
    `Record ${id} '${name}' of station ${stationId}`,
    `  ${report.from} to ${report.to}`,
    `  ${report.intervals} intervals, mostly of ${report.stepSeconds} s: ${rounded(report.hours)} h with values, ${rounded(report.gapHours)} h without`,
  ];
  if (report.meanFlowM3s !== null && report.minFlowM3s !== null && report.maxFlowM3s !== null) {
    const flows = [report.minFlowM3s, report.meanFlowM3s, report.maxFlowM3s].map((flow) => flow.toPrecision(4));
    lines.push(`  flow ${flows[0]} least, ${flows[1]} mean, ${flows[2]} most m³/s`);
  }
  if (report.volumeM3 !== null) lines.push(`  volume ${rounded(report.volumeM3)} m³`);
  for (const gap of report.gaps.slice(0, 20)) lines.push(`  gap ${gap.from} to ${gap.to} (${rounded(gap.hours)} h)`);
  if (report.gaps.length > 20) lines.push(`  and ${report.gaps.length - 20} gaps more`);
  for (const note of report.notes) lines.push(`  ${note.code}: ${note.text}`);
  return `${lines.join('\n')}\n`;
}

function rounded(value: number): string {
  return String(Math.round(value * 100) / 100);
}

try {
  main();
} catch (error) {
  if (error instanceof InputError) {
    process.stderr.write(`${error.faults.map(faultLine).join('\n')}\n`);
    process.exitCode = 2;
  } else {
    console.error(error);
    process.exitCode = 1;
  }
}
