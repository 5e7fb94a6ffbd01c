/** npm run staging: the operator's card, from a station file. */

import { refuse } from '../server/errors.ts';
import {
  cardOf,
  type HandedCard,
  type HandedPoint,
  type LateStagingCost,
  lateStagingCost,
} from '../server/operatorCard.ts';
import { headSpan } from '../server/staging/bestCountMap.ts';
import { compareRules, resultOf } from '../server/staging/compare.ts';
import { type OwnOrderCost, ownOrderCost } from '../server/staging/ownOrder.ts';
import type { Station } from '../server/station/station.ts';
import { PSI, usualMainsHz } from '../server/units.ts';
import {
  type Given,
  list,
  numberOf,
  optional,
  recordFrom,
  required,
  runCommand,
  stationFrom,
  tariffFrom,
  warn,
} from './support/command.ts';
import { grouped, table } from './support/table.ts';

const HELP = `npm run --silent staging -- --station S.json [--static-head H] [options]

The operator's card: for each extra pump the flow at which it pays, when to bring it on and when to drop it.

  --station FILE     the station
  --static-head H    in the file's unit of head, instead of the file's own
  --band PERCENT     how much more staying may cost before a step is made (1 by default)
  --without P2       take a pump out (several: P2,P3)
  --record FILE      a flow log (CSV) or profile (JSON): how the steps move over its static heads, and what it costs to
                     wait until the running pumps are flat out
  --tariff FILE      with --record: that cost in money too
  --mains 50|60      Hz of the supply, for speeds; by default 60 with US units or a currency of North America, else 50
  --json             the card as JSON, in the file's units
  --help             this text

Advice only: it controls nothing. Exit code 0 on success, 2 when something is to be mended, 1 for anything unexpected.
`;

const VALUES = ['station', 'static-head', 'band', 'without', 'record', 'tariff', 'mains'];

runCommand(HELP, { values: VALUES, switches: ['json'] }, (given) => {
  const { station } = stationFrom(required(given, 'station'));
  const mainsHz = mainsOf(given, station);
  const without = list(given, 'without') ?? [];
  const over = overRecord(given, station, without);
  const card = cardOf(station, {
    staticHead: numberOf(optional(given, 'static-head'), '--static-head'),
    bandPercent: numberOf(optional(given, 'band'), '--band'),
    without,
    ...(over?.range && { range: over.range }),
  });
  if (given.json === true) {
    const whole = over ? { ...card, lateStaging: over.lateStaging, ownOrder: over.ownOrder } : card;
    process.stdout.write(`${JSON.stringify(whole, null, 2)}\n`);
    return;
  }
  const { lateStaging = null, ownOrder = null } = over ?? {};
  process.stdout.write(readable(card, { mainsHz, currency: station.currency, lateStaging, ownOrder }));
});

/** What a record adds to the card: the range of its static heads, and what staging late costs. */
function overRecord(given: Given, station: Station, without: readonly string[]) {
  const tariffPath = optional(given, 'tariff');
  const path = optional(given, 'record');
  if (path === null) {
    if (tariffPath === null) return null;
    refuse({
      code: 'bad_option',
      file: 'arguments',
      at: '--tariff',
      found: 'no --record',
      wanted: 'a record to price',
    });
  }
  const { log, report } = recordFrom(path, station);
  warn(report.notes);
  const tariff = tariffPath === null ? null : tariffFrom(tariffPath).tariff;
  const comparison = compareRules({ station, log, tariff, rules: ['late-staging', 'best-count'], without });
  const { low, high, varies } = headSpan(comparison);
  return {
    range: varies ? { low, high } : null,
    lateStaging: lateStagingCost(resultOf(comparison, { station: '', record: '', tariff: null })),
    ownOrder: ownOrderCost(comparison),
  };
}

function mainsOf(given: Given, station: Station): number {
  const text = optional(given, 'mains');
  if (text === null) return usualMainsHz(station);
  if (text === '50' || text === '60') return Number(text);
  refuse({ code: 'bad_option', file: 'arguments', at: '--mains', found: `'${text}'`, wanted: '50 or 60' });
}

function digits(value: number): string {
  return String(Number(value.toPrecision(4)));
}

function readable(
  card: HandedCard,
  about: {
    readonly mainsHz: number;
    readonly currency: string;
    readonly lateStaging: LateStagingCost | null;
    readonly ownOrder: OwnOrderCost | null;
  },
): string {
  const { flow, head } = card.units;
  const percent = (share: number) => `${(100 * share).toFixed(1)} %`;
  return [
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
    '',
    ...instruments(card, about.mainsHz),
    ...(card.sets.length > 0 ? [`Best sets as flow rises (${flow}):`] : []),
    ...card.sets.map(
      (set) =>
        `  from ${digits(set.from)} to ${digits(set.to)}: ${set.pumps.join(' + ')}${set.text === '' ? '' : ` (${set.text})`}` +
        `${set.rests ? ', resting part of the time' : ''}` +
        `${set.savedKw === null || set.savedKw < 0.005 ? '' : `, ${set.savedKw.toPrecision(2)} kW less than the station's own order`}`,
    ),
    ...card.levels.map(
      ({ start, stop }, i) =>
        `Level: pump ${i + 1} starts at ${digits(start)} ${head}, stops at ${digits(stop)} ${head}.`,
    ),
    ...moves(card),
    ...costText('Waiting until the running pumps are flat out', about.lateStaging, about.currency),
    ...costText("Keeping to the station's own order", about.ownOrder, about.currency),
    ...card.notes.map((note) => `${note.code}: ${note.text}`),
    '',
    ...card.cautions,
    '',
  ].join('\n');
}

/** What drives and gauges show where a step is made, in the units that they may have. */
function instruments({ steps, units, ratedSpeedRpm, basis }: HandedCard, mainsHz: number): string[] {
  if (steps.length === 0) return [];
  const speeds = (share: number) => [
    ...(basis === 'direct-on-line' ? [] : [(share * mainsHz).toFixed(1)]),
    ...(ratedSpeedRpm === null ? [] : [(share * ratedSpeedRpm).toFixed(0)]),
  ];
  const names = [...(basis === 'direct-on-line' ? [] : ['Hz']), ...(ratedSpeedRpm === null ? [] : ['rpm'])];
  const row = (name: string, at: HandedPoint) => [
    name,
    ...speeds(at.speedBefore),
    ...speeds(at.speedAfter),
    digits(at.headerHead),
    digits(at.headerKpa),
    digits(at.headerKpa / 100),
    digits((1000 * at.headerKpa) / PSI),
  ];
  return [
    table([
      [
        'at the step',
        ...names.map((name) => `${name} before`),
        ...names.map((name) => `${name} after`),
        `header ${units.head}`,
        'kPa',
        'bar',
        'psi',
      ],
      ...steps.flatMap((step) => [
        row(`${step.from} to ${step.to}, bring on`, step.atBringOn),
        row(`${step.from} to ${step.to}, drop off`, step.atDropOff),
      ]),
    ]),
  ];
}

/** How the crossings move from the lowest to the highest static head. */
function moves({ moves: moved, steps, units }: HandedCard): string[] {
  if (moved === null) return [];
  const said = (flow: number | null | undefined) => (flow == null ? 'no crossing' : `${digits(flow)} ${units.flow}`);
  const heads = `${digits(moved.low.staticHead)} to ${digits(moved.high.staticHead)} ${units.head}`;
  return steps.map(({ from, to }) => {
    const [low, high] = [said(moved.low.flows[from - 1]), said(moved.high.flows[from - 1])];
    return `Static head ${heads}: step ${from} to ${to}, ${low === high ? `${low} at either end` : `from ${low} to ${high}`}.`;
  });
}

function costText(what: string, over: LateStagingCost | OwnOrderCost | null, currency: string): string[] {
  if (over === null) return [];
  const money = over.cost === null ? '' : ` and ${currency} ${grouped(over.cost, 2)}`;
  return [`${what} takes ${grouped(over.energyKwh)} kWh${money} more over the ${grouped(over.hours)} h of the record.`];
}
