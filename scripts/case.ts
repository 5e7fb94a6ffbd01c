/** npm run case: whether a change of staging is worth its money, from files. */
import { basename } from 'node:path';
import { readCase } from '../server/economics/caseFile.ts';
import { makeCase } from '../server/makeCase.ts';
import { list, readJson, recordFrom, required, runCommand, stationFrom, tariffFrom, warn } from './support/command.ts';
import { grouped, table } from './support/table.ts';

const HELP = `npm run --silent case -- --station S.json --record R.csv --tariff T.json --case C.json [options]

Whether a change of staging pays: the baseline rule against the proposed one (and the other options of the case file)
on the same record, scaled to a year.

  --station FILE    the station
  --record FILE     its flow log (CSV), or a profile (JSON)
  --tariff FILE     the tariff
  --case FILE       baseline, proposed rule, capital, years, rates (nth-pump/case/1)
  --without P2      take a pump out (several: P2,P3)
  --json            the result as JSON (nth-pump/case-result/1)
  --help            this text

Advice only: it controls nothing. Exit code 0 on success, 2 when something is to be mended, 1 for anything unexpected.
`;

runCommand(HELP, { values: ['station', 'record', 'tariff', 'case', 'without'], switches: ['json'] }, (given) => {
  const { station } = stationFrom(required(given, 'station'));
  const { log, report } = recordFrom(required(given, 'record'), station);
  warn(report.notes);
  const { tariff } = tariffFrom(required(given, 'tariff'));
  const casePath = required(given, 'case');
  const terms = readCase(readJson(casePath), basename(casePath));
  const result = makeCase({ station, log, tariff, without: list(given, 'without') ?? [] }, terms, basename(casePath));
  if (given.json === true) {
    process.stdout.write(`${JSON.stringify(result, null, 2)}\n`);
    return;
  }
  const years = (value: number | null) => (value === null ? 'never' : value.toFixed(1));
  process.stdout.write(
    [
      `${result.station}: ${result.baseline.rule} against ${result.rule}, ${result.years} years at ${(100 * result.discountRate).toFixed(1)} %`,
      '',
      result.sentence,
      result.reason,
      ...result.wouldChange,
      '',
      table([
        [
          'option',
          'rule',
          'kWh a year',
          `cost a year ${result.currency}`,
          'saves a year',
          'payback y',
          'discounted y',
          'NPV',
          'IRR',
          'SIR',
          'verdict',
        ],
        ...result.options.map((option) => [
          option.name,
          option.rule,
          grouped(option.annual.energyKwh),
          grouped(option.annual.totalCost),
          grouped(option.annualCostSaving),
          years(option.simplePaybackYears),
          years(option.discountedPaybackYears),
          grouped(option.npv),
          option.irr === null ? 'none' : `${(100 * option.irr).toFixed(1)} %`,
          option.savingsToInvestment === null ? 'none' : option.savingsToInvestment.toFixed(2),
          option.advice.replaceAll('-', ' '),
        ]),
      ]),
      ...result.notes.map((note) => `${note.code}: ${note.text}`),
      ...result.cautions,
      '',
    ].join('\n'),
  );
});
