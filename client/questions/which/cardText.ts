import type { ComparisonBody } from '../../../server/api.ts';
import type { HandedCard, HandedSet, LateStagingCost } from '../../../server/operatorCard.ts';
import type { OwnOrderCost } from '../../../server/staging/ownOrder.ts';
import type { StationFile } from '../../../server/station/stationFile.ts';
import { FLOW_UNITS, HEAD_UNITS, PSI, usualMainsHz } from '../../../server/units.ts';
import { type Format, list, type Measure, ordinal } from '../../format.ts';

/** The card that goes with a comparison, as the server hands it. */
export type ComparisonCard = HandedCard & {
  readonly lateStaging: LateStagingCost | null;
  readonly ownOrder: OwnOrderCost | null;
};

/** How the header's head is told: as a head, or as the pressure that a gauge shows. */
export const PRESSURES = ['head', 'kPa', 'bar', 'psi'] as const;
export type Pressure = (typeof PRESSURES)[number];

/** Frequency of the mains [Hz], at which a drive turns a pump at rated speed. */
export const MAINS = ['auto', '50', '60'] as const;
export type MainsChoice = (typeof MAINS)[number];

/** A pressure from kilopascals, or a head from metres, in what the reader chose. */
export function pressureMeasure(pressure: Pressure, format: Format): Measure {
  if (pressure === 'head') return format.head;
  return { unit: pressure, factor: pressure === 'kPa' ? 1 : pressure === 'bar' ? 0.01 : 1000 / PSI };
}

/** What the reader chose, else a guess from units and currency. */
export function mainsOf(choice: MainsChoice, station: Pick<StationFile, 'units' | 'currency'>): 50 | 60 {
  if (choice !== 'auto') return choice === '50' ? 50 : 60;
  return usualMainsHz(station);
}

/** A speed in the three ways an operator may read it; rpm is left out where the rated speed is not known. */
export function speedText(
  share: number,
  { mains, ratedSpeedRpm }: { readonly mains: number; readonly ratedSpeedRpm: number | null },
  format: Format,
): string {
  const parts = [format.say(format.percent, 100 * share), format.say({ unit: 'Hz', factor: mains }, share)];
  if (ratedSpeedRpm !== null) parts.push(`${format.whole(ratedSpeedRpm * share)}\u00a0rpm`);
  return parts.join(' · ');
}

/** Flows and heads of a card, from its own units to those of the API. */
export function siOf({ units }: Pick<HandedCard, 'units'>): {
  readonly flow: (value: number) => number;
  readonly head: (value: number) => number;
} {
  return { flow: (value) => value * FLOW_UNITS[units.flow], head: (value) => value * HEAD_UNITS[units.head] };
}

/** A ladder drawn to the scale of flow: shares of its height, 0 at no flow and 1 at the top. */
export interface Ladder {
  /** In the unit of the card. */
  readonly top: number;
  /** Where each count, or set of pumps that differ, runs; neighbours overlap in the band in which either may run. */
  readonly zones: readonly {
    /** The count; of sets, the place in their row, from 1. */
    readonly id: number;
    readonly name: string;
    readonly from: number;
    readonly to: number;
    /** Middle of where no other may run, for its name. */
    readonly middle: number;
  }[];
  readonly rungs: readonly {
    /** The zone that it leads to. */
    readonly id: number;
    readonly dropOff: number;
    readonly bringOn: number;
    /** Middle of the place beside the ladder where the rung is told. */
    readonly told: number;
  }[];
}

/** Null where no pump can lift the static head. */
export function ladderOf({
  steps,
  capacities,
  sets,
}: Pick<HandedCard, 'steps' | 'capacities' | 'sets'>): Ladder | null {
  const top = Math.max(0, ...capacities, ...steps.map((step) => step.bringOn));
  if (!(top > 0)) return null;
  if (sets.length > 0) {
    const names = sets.map((set) => (set.pumps.length > 0 ? set.pumps.join(' + ') : 'none can'));
    const changes = sets.flatMap(({ change }) => (change ? [change] : []));
    return laddered(top, names, 1, changes);
  }
  const first = steps[0]?.from ?? Math.max(1, capacities.findIndex((capacity) => capacity > 0) + 1);
  return laddered(
    top,
    [first, ...steps.map((step) => step.to)].map((count) => String(count)),
    first,
    steps,
  );
}

function laddered(
  top: number,
  names: readonly string[],
  first: number,
  steps: readonly { readonly bringOn: number; readonly dropOff: number }[],
): Ladder {
  const zones = names.map((name, i) => {
    const [below, above] = [steps[i - 1], steps[i]];
    return {
      id: first + i,
      name,
      from: (below?.dropOff ?? 0) / top,
      to: (above?.bringOn ?? top) / top,
      middle: ((below?.bringOn ?? 0) + (above?.dropOff ?? top)) / 2 / top,
    };
  });
  const rungs = steps.map(({ dropOff, bringOn }, i) => ({
    id: first + i + 1,
    dropOff: dropOff / top,
    bringOn: bringOn / top,
    told: (i + 0.5) / steps.length,
  }));
  return { top, zones, rungs };
}

/** `Bring on the second pump at 53.6 L/s, drop it at 51.8 L/s` */
export function ladderSentence(card: HandedCard, format: Format): string {
  const { flow } = siOf(card);
  const say = (value: number) => format.say(format.flow, flow(value));
  if (card.sets.length > 0) return setsSentence(card.sets, say);
  const [step, ...more] = card.steps;
  if (step === undefined) return card.capacities.some((each) => each > 0) ? 'One pump does it all' : 'No pump can run';
  if (!card.alike) {
    const joins = card.steps.map((each) => `${each.pump} at ${say(each.bringOn)}`);
    return `${card.pumps[0]} runs first; bring on ${list(joins)}`;
  }
  const rest = more.map((each) => `the ${ordinal(each.to)} at ${say(each.bringOn)}`);
  return `Bring on the ${ordinal(step.to)} pump at ${say(step.bringOn)}${rest.length > 0 ? `, ${rest.join(', ')}` : ''}`;
}

/** Changes of sets beyond these are counted. */
const NAMED_CHANGES = 2;

/** `Jockey runs first; add Beck, drop Jockey at 110 L/s, add Jockey at 253 L/s, and 5 more changes above` */
function setsSentence(sets: readonly HandedSet[], say: (value: number) => string): string {
  const [first, ...others] = sets;
  const changes = others.map(({ text, change }) => `${text} at ${say(change!.bringOn)}`);
  const named = changes.length <= NAMED_CHANGES + 1 ? changes : changes.slice(0, NAMED_CHANGES);
  const more = changes.length - named.length;
  const begin = first!.pumps.length > 0 ? `${list(first!.pumps)} first` : 'None can run at first';
  return [
    `${begin}${named.length > 0 ? ';' : ''} ${named.join('; ')}`.trim(),
    ...(more > 0 ? [`${more} more changes above`] : []),
  ].join('; ');
}

/** What waiting until the running pumps are flat out would cost over the record; null where it was not compared. */
export function lateText(late: LateStagingCost | null, format: Format): string | null {
  if (late === null) return null;
  const over = `over the ${format.whole(late.hours)} hours of the record`;
  const energy = format.say(format.energy, Math.abs(late.energyKwh));
  if (Math.abs(late.energyKwh) < 0.5) return `Waiting until the running pumps are flat out costs nothing more ${over}.`;
  if (late.energyKwh < 0) return `Waiting until the running pumps are flat out saves ${energy} ${over}.`;
  const money = late.cost === null ? energy : `${format.say(format.money, late.cost)} and ${energy}`;
  return `Waiting until the running pumps are flat out costs ${money} more ${over}.`;
}

/** What bringing pumps on in the station's own order costs over the record; null where a count says who runs. */
export function ownOrderText({ ownOrder, pumps }: ComparisonCard, format: Format): string | null {
  if (ownOrder === null || ownOrder.energyKwh < 0.5) return null;
  const energy = format.say(format.energy, ownOrder.energyKwh);
  const money = ownOrder.cost === null ? energy : `${format.say(format.money, ownOrder.cost)} and ${energy}`;
  const over = `over the ${format.whole(ownOrder.hours)} hours of the record`;
  return `Keeping to the order ${list(pumps)} costs ${money} more ${over}, even with the best count at each flow.`;
}

/** What a card was computed from, so that two people can tell whether they hold the same. */
export function madeFrom(comparison: ComparisonBody, record: { readonly name: string }, format: Format): string {
  const { from, to } = comparison.record;
  const { station, sha256 } = comparison.inputs;
  return (
    `${station} (file ${sha256.station.slice(0, 8)}), ${record.name} (${sha256.record.slice(0, 8)}), ` +
    `${format.day(Date.parse(from))} to ${format.day(Date.parse(to))}; comparison ${comparison.id}, ` +
    `computed ${format.instant(Date.parse(comparison.createdAt))}`
  );
}
