/** npm run staging: the operator's card, from a station file. */
import { cardOf } from '../server/operatorCard.ts';
import { numberOf, optional, required, runCommand, stationFrom } from './support/command.ts';
import { table } from './support/table.ts';

const HELP = `npm run --silent staging -- --station S.json [--static-head H] [options]

The operator's card: for each extra pump the flow at which it pays, when to bring it on and when to drop it.

  --station FILE     the station
  --static-head H    in the file's unit of head, instead of the file's own
  --band PERCENT     how much more staying may cost before a step is made (1 by default)
  --without P2       take a pump out (several: P2,P3)
  --json             the card as JSON, in the file's units
  --help             this text

Advice only: it controls nothing. Exit code 0 on success, 2 when something is to be mended, 1 for anything unexpected.
`;

runCommand(HELP, { values: ['station', 'static-head', 'band', 'without'], switches: ['json'] }, (given) => {
  const { station } = stationFrom(required(given, 'station'));
  const card = cardOf(station, {
    staticHead: numberOf(optional(given, 'static-head'), '--static-head'),
    bandPercent: numberOf(optional(given, 'band'), '--band'),
    without: optional(given, 'without')?.split(',') ?? [],
  });
  if (given.json === true) {
    process.stdout.write(`${JSON.stringify(card, null, 2)}\n`);
    return;
  }
  const { flow, head } = card.units;
  const digits = (value: number) => String(Number(value.toPrecision(4)));
  const percent = (share: number) => `${(100 * share).toFixed(1)} %`;
  process.stdout.write(
    [
      `${card.station}: which pump, when (static head ${digits(card.staticHead)} ${head}, ${card.basis.replaceAll('-', ' ')})`,
      '',
      table([
        [
          'step',
          `pays from ${flow}`,
          `bring on ${flow}`,
          `drop off ${flow}`,
          'speed before',
          'speed after',
          'header kPa',
        ],
        ...card.steps.map((step) => [
          `${step.from} to ${step.to}`,
          digits(step.flow),
          digits(step.bringOn),
          digits(step.dropOff),
          percent(step.atBringOn.speedBefore),
          percent(step.atBringOn.speedAfter),
          digits(step.atBringOn.headerKpa),
        ]),
      ]),
      ...card.steps.map((step) => `${step.from} to ${step.to}: ${step.text}`),
      ...(card.sets.length > 0 ? [`Best sets as flow rises (${flow}):`] : []),
      ...card.sets.map(
        (set) =>
          `  from ${digits(set.from)} to ${digits(set.to)}: ${set.pumps.join(' + ')}${set.text === '' ? '' : ` (${set.text})`}` +
          `${set.savedKw === null || set.savedKw < 0.005 ? '' : `, ${set.savedKw.toPrecision(2)} kW less than the station's own order`}`,
      ),
      ...card.notes.map((note) => `${note.code}: ${note.text}`),
      '',
      ...card.cautions,
      '',
    ].join('\n'),
  );
});
