/** npm run advice: which pumps to run at this moment, from a station file. */
import { advise, type HandedWay } from '../server/advise.ts';
import { list, numberOf, optional, required, runCommand, stationFrom } from './support/command.ts';

const HELP = `npm run --silent advice -- --station S.json --flow Q [options]

Which pumps to run at this moment, at what speed, and what the next best would cost.

  --station FILE     the station
  --flow Q           in the file's unit of flow
  --static-head H    in the file's unit of head, instead of the file's own
  --level L          level of the storage, where the station knows the other side
  --without P2       take a pump out (several: P2,P3)
  --json             as JSON
  --help             this text

Advice only: it controls nothing. Exit code 0 on success, 2 when something is to be mended, 1 for anything unexpected.
`;

runCommand(HELP, { values: ['station', 'flow', 'static-head', 'level', 'without'], switches: ['json'] }, (given) => {
  const { station } = stationFrom(required(given, 'station'));
  const advice = advise(station, {
    flow: numberOf(required(given, 'flow'), '--flow'),
    staticHead: numberOf(optional(given, 'static-head'), '--static-head'),
    level: numberOf(optional(given, 'level'), '--level'),
    without: list(given, 'without'),
  });
  if (given.json === true) {
    process.stdout.write(`${JSON.stringify(advice, null, 2)}\n`);
    return;
  }
  const lines = [
    `${advice.station}: ${advice.flow} ${advice.units.flow} at ${Number(advice.staticHead.toPrecision(4))} ${advice.units.head} static head`,
    advice.best ? `run ${wayText(advice.best)}` : 'run nothing',
  ];
  if (advice.nextBest)
    lines.push(`next best ${wayText(advice.nextBest)}: ${advice.nextBest.extraKw.toPrecision(3)} kW more`);
  if (advice.shortfall > 0) lines.push(`short of ${advice.shortfall.toPrecision(4)} ${advice.units.flow}`);
  lines.push(...advice.notes.map((note) => `${note.code}: ${note.text}`), ...advice.cautions);
  process.stdout.write(`${lines.join('\n')}\n`);
});

function wayText({ pumps, share, restsWith, powerKw, kwhPerM3 }: HandedWay): string {
  const names = pumps.map(({ name, speed, onDrive }) => (onDrive ? `${name} at ${(100 * speed).toFixed(1)} %` : name));
  const time =
    restsWith === null ? '' : ` for ${(100 * share).toFixed(0)} % of the time, else ${restsWith.join(' + ') || 'none'}`;
  const perVolume = kwhPerM3 === null ? '' : `, ${kwhPerM3.toPrecision(3)} kWh/m³`;
  return `${names.join(' + ')}${time}: ${powerKw.toPrecision(4)} kW${perVolume}`;
}
