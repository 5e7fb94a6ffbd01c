/** npm run import: stores a record of a station in the database and says what was found in it. */
import { basename } from 'node:path';
import { migrate } from '../db/migrate.ts';
import { type Db, openDatabase } from '../db/open.ts';
import type { StoredRecord } from '../db/records.ts';
import { findStation, listStations, type StoredStation, stationsNamed } from '../db/stations.ts';
import { recordQuery } from '../server/api.ts';
import { refuse } from '../server/errors.ts';
import { importRecord } from '../server/importRecord.ts';
import { readAs } from '../server/readFile.ts';
import { databasePath } from '../server/settings.ts';
import { readBytes, required, runCommand } from './support/command.ts';
import { grouped } from './support/table.ts';

/** What the HTTP interface takes in the query, the command takes as options: `flowUnit` is `--flow-unit`. */
const OPTIONS = new Map(
  Object.keys(recordQuery.shape).map((name) => [name, name.replace(/[A-Z]/g, (letter) => `-${letter.toLowerCase()}`)]),
);

const HELP = `npm run --silent import -- --station NAME|ID --record FILE [options]

Stores a record (a log of flow, or of level with run states, as CSV; or a profile as JSON) under a station of the
database, whole or not at all, and prints what was found in it.

  --station NAME|ID    the station, as the page or the HTTP interface stored it
  --record FILE        the record
  --name NAME          its name in lists; by default the file's
  --file-name NAME     the file's name to remember, where FILE is a passing one
  --json               what was stored, as JSON

What the file leaves open is found out; these override it:

  --time-column NAME   --flow-column NAME
  --flow-unit UNIT     m3/s, m3/h, L/s, ML/d, gpm or MGD
  --time-zone ZONE     of times without offset: Europe/Dublin, or +01:00 for a logger that never changes its clock
  --date-order dmy|mdy --decimal .|,   --delimiter ,|;|tab character

The database is NTH_PUMP_DB, or .data/nth-pump.sqlite inside the checkout.
Exit code 0 when stored, 2 when something is to be mended (one line each), 1 for anything unexpected.
`;

runCommand(HELP, { values: ['station', 'record', ...OPTIONS.values()], switches: ['json'] }, (given) => {
  const stationName = required(given, 'station');
  const path = required(given, 'record');
  const asked = [...OPTIONS].flatMap(([name, option]) => (given[option] === undefined ? [] : [[name, given[option]]]));
  const { name, fileName = basename(path), ...options } = readAs(recordQuery, Object.fromEntries(asked), 'options');
  const data = readBytes(path);
  const db = openDatabase(databasePath(process.env));
  try {
    migrate(db);
    const record = importRecord(db, stationOf(db, stationName), { name, fileName, data, options }, Date.now());
    process.stdout.write(given.json === true ? `${JSON.stringify(record, null, 2)}\n` : summary(record));
  } finally {
    db.close();
  }
});

/** The station of an id, else the one of that name. */
function stationOf(db: Db, text: string): StoredStation {
  const byId = /^\d{1,15}$/.test(text) ? findStation(db, Number(text)) : null;
  if (byId) return byId;
  const named = stationsNamed(db, text);
  const [station] = named;
  if (station && named.length === 1) return station;
  if (station) {
    const ids = named.map(({ id }) => id).join(', ');
    const found = `${named.length} stations named '${text}'`;
    refuse({ code: 'conflict', file: 'arguments', at: '--station', found, wanted: `an id: ${ids}` });
  }
  const known = listStations(db).map((entry) => `${entry.id} (${entry.name})`);
  const wanted = known.length === 0 ? 'a station; none is stored yet' : `one of ${known.join(', ')}`;
  refuse({ code: 'not_found', file: 'arguments', at: '--station', found: `'${text}'`, wanted });
}

function summary({ id, name, stationId, report }: StoredRecord): string {
  const lines = [
    `Record ${id} '${name}' of station ${stationId}`,
    `  ${report.from} to ${report.to}`,
    `  ${report.intervals} intervals, mostly of ${report.stepSeconds} s`,
    `  ${grouped(report.hours, 1)} h with values, ${grouped(report.gapHours, 1)} h without`,
  ];
  const { minFlowM3s, meanFlowM3s, maxFlowM3s, volumeM3 } = report;
  if (minFlowM3s !== null && meanFlowM3s !== null && maxFlowM3s !== null) {
    const [least, mean, most] = [minFlowM3s, meanFlowM3s, maxFlowM3s].map((flow) => flow.toPrecision(4));
    lines.push(`  flow ${least} m³/s at least, ${mean} in the mean, ${most} at most`);
  }
  if (volumeM3 !== null) lines.push(`  volume ${grouped(volumeM3)} m³`);
  for (const gap of report.gaps.slice(0, 20)) {
    lines.push(`  gap ${gap.from} to ${gap.to} (${grouped(gap.hours, 1)} h)`);
  }
  if (report.gaps.length > 20) lines.push(`  and ${report.gaps.length - 20} gaps more`);
  for (const note of report.notes) lines.push(`  ${note.code}: ${note.text}`);
  return `${lines.join('\n')}\n`;
}
