/** npm run compare: staging rules side by side on a station, a record and a tariff, all from files; stores nothing. */
import { jsonDigest, sha256 } from '../server/digest.ts';
import { refuse } from '../server/errors.ts';
import { compareRules, resultOf } from '../server/staging/compare.ts';
import { demandRecord } from '../server/staging/demandRecord.ts';
import { flowOfLog } from '../server/staging/flowOfLog.ts';
import type { ComparisonResult, RuleId } from '../server/staging/result.ts';
import { list, optional, recordFrom, required, runCommand, stationFrom, tariffFrom, warn } from './support/command.ts';
import { IntervalsFile } from './support/intervalsFile.ts';
import { grouped, table } from './support/table.ts';

const HELP = `npm run --silent compare -- --station S.json --record R.csv [--tariff T.json] [options]

Works out, for each interval of the record, what each staging rule does, and adds up energy, cost and shortfall.

  --station FILE    the station
  --record FILE     its flow log (CSV), or a profile (JSON)
  --tariff FILE     the tariff; without one there is energy but no money
  --rules a,b,…     only these rules; by default all that the station can run
  --without P2      take a pump out (several: P2,P3)
  --intervals FILE  also write what each rule does in each interval, as CSV
  --json            the result as JSON (nth-pump/result/1) instead of a table
  --help            this text

Advice only: it controls nothing. Exit code 0 on success, 2 when something is to be mended, 1 for anything unexpected.
`;

runCommand(
  HELP,
  { values: ['station', 'record', 'tariff', 'rules', 'without', 'intervals'], switches: ['json'] },
  (given) => {
    const { station, file: stationFile } = stationFrom(required(given, 'station'));
    const { log, report, data } = recordFrom(required(given, 'record'), station);
    const tariffPath = optional(given, 'tariff');
    const tariff = tariffPath === null ? null : tariffFrom(tariffPath);
    warn(report.notes);

    const intervalsPath = optional(given, 'intervals');
    const intervals = intervalsPath === null ? null : open(intervalsPath);
    const record = intervals && demandRecord(station, flowOfLog(station, log).log);
    const without = list(given, 'without');
    const duty = station.duty.filter((pump) => !without?.includes(pump.name));
    const comparison = compareRules({
      station,
      log,
      tariff: tariff?.tariff ?? null,
      rules: list(given, 'rules') as RuleId[] | undefined,
      without,
      onAction:
        intervals && record
          ? (rule, i, action) => intervals.add(rule, record, duty, station.standbyPower, i, action)
          : undefined,
      onProgress: (share) =>
        process.stderr.isTTY && process.stderr.write(`\r${Math.round(share * 100)} % of the rules`),
    });
    if (process.stderr.isTTY) process.stderr.write('\r\x1b[K');
    intervals?.close();
    const result = resultOf(comparison, {
      station: jsonDigest(stationFile),
      record: sha256(data),
      tariff: tariff && jsonDigest(tariff.file),
    });
    process.stdout.write(given.json === true ? `${JSON.stringify(result, null, 2)}\n` : readable(result));
  },
);

function open(path: string): IntervalsFile {
  try {
    return new IntervalsFile(path);
  } catch (error) {
    const reason = (error as NodeJS.ErrnoException).code;
    if (reason === undefined) throw error;
    refuse({
      code: 'bad_option',
      file: 'arguments',
      at: '--intervals',
      found: `${path} (${reason})`,
      wanted: 'a file to write',
    });
  }
}

function readable(result: ComparisonResult): string {
  const { record, inputs, rules } = result;
  const priced = rules.some((rule) => rule.totalCost !== undefined);
  const counts = Object.keys(rules[0]?.hoursByCount ?? {});
  const head = [
    'rule',
    'kWh',
    'kWh/m³',
    ...(priced ? [`cost ${inputs.currency}`] : []),
    'peak kW',
    'short m³',
    'starts',
  ];
  const rows = rules.map((rule) => [
    rule.rule,
    grouped(rule.energyKwh),
    rule.kwhPerM3 === null ? 'unknown' : rule.kwhPerM3.toFixed(4),
    ...(priced ? [grouped(rule.totalCost!, 2)] : []),
    grouped(rule.peakKw, 1),
    grouped(rule.shortfallM3),
    rule.starts === null ? 'unknown' : grouped(rule.starts),
    ...counts.map((count) => grouped(rule.hoursByCount[count] ?? 0)),
  ]);
  return [
    `${inputs.station}, ${record.from} to ${record.to}`,
    `${grouped(record.hours, 1)} h with a flow, ${grouped(record.gapHours, 1)} h without; ${grouped(record.volumeM3)} m³`,
    '',
    table([[...head, ...counts.map((count) => `h at ${count}`)], ...rows]).trimEnd(),
    '',
    ...result.notes.map((note) => `${note.code}: ${note.text}`),
    'Advice only: it controls nothing; local codes and a licensed engineer have the last word.',
    '',
  ].join('\n');
}
