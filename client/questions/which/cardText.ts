import type { ComparisonBody } from '../../../server/api.ts';
import type { HandedCard, LateStagingCost } from '../../../server/operatorCard.ts';
import type { StationFile } from '../../../server/station/stationFile.ts';
import { FLOW_UNITS, HEAD_UNITS, PSI, usualMainsHz } from '../../../server/units.ts';
import { type Format, type Measure, ordinal } from '../../format.ts';

/** The card that goes with a comparison, as the server hands it. */
export type ComparisonCard = HandedCard & { readonly lateStaging: LateStagingCost | null };

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
  { mains, ratedSpeedRpm }: { mains: number; ratedSpeedRpm: number | null },
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
  /** Where each count runs; neighbours overlap in the band in which either may run. */
  readonly counts: readonly {
    readonly count: number;
    readonly from: number;
    readonly to: number;
    /** Middle of where no other count may run, for its number. */
    readonly middle: number;
  }[];
  readonly rungs: readonly {
    readonly from: number;
    readonly to: number;
    readonly dropOff: number;
    readonly bringOn: number;
    /** Middle of the place beside the ladder where the rung is told. */
    readonly told: number;
  }[];
}

/** Null where no pump can lift the static head. */
export function ladderOf({ steps, capacities }: Pick<HandedCard, 'steps' | 'capacities'>): Ladder | null {
  const top = Math.max(0, ...capacities, ...steps.map((step) => step.bringOn));
  if (!(top > 0)) return null;
  const first = steps[0]?.from ?? Math.max(1, capacities.findIndex((capacity) => capacity > 0) + 1);
  const counts = [first, ...steps.map((step) => step.to)].map((count, i) => {
    const [below, above] = [steps[i - 1], steps[i]];
    return {
      count,
      from: (below?.dropOff ?? 0) / top,
      to: (above?.bringOn ?? top) / top,
      middle: ((below?.bringOn ?? 0) + (above?.dropOff ?? top)) / 2 / top,
    };
  });
  const rungs = steps.map(({ from, to, dropOff, bringOn }, i) => ({
    from,
    to,
    dropOff: dropOff / top,
    bringOn: bringOn / top,
    told: (i + 0.5) / steps.length,
  }));
  return { top, counts, rungs };
}

/** `Bring on the second pump at 53.6 L/s, drop it at 51.8 L/s` */
export function ladderSentence(card: HandedCard, format: Format): string {
  const { flow } = siOf(card);
  const [step, ...more] = card.steps;
  if (step === undefined) return card.capacities.some((each) => each > 0) ? 'One pump does it all' : 'No pump can run';
  const say = (value: number) => format.say(format.flow, flow(value));
  const rest = more.map((each) => `the ${ordinal(each.to)} at ${say(each.bringOn)}`);
  return `Bring on the ${ordinal(step.to)} pump at ${say(step.bringOn)}${rest.length > 0 ? `, ${rest.join(', ')}` : ''}`;
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
