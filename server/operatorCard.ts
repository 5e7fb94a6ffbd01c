import { type Note, refuse } from './errors.ts';
import type { Pump } from './hydraulics/pump.ts';
import { systemHead } from './hydraulics/systemCurve.ts';
import { type CardStep, headerPressure, operatorCard, type StepReason } from './staging/card.ts';
import { dutyWithout } from './staging/compare.ts';
import type { ComparisonResult } from './staging/result.ts';
import type { SpeedsOfSet } from './staging/setLadder.ts';
import { dutyPumpsAreEqual, type Station } from './station/station.ts';
import { type FileUnits, FLOW_UNITS, HEAD_UNITS } from './units.ts';

/** The card as it is handed over: in the units of the station file, with what must stand beside it. */
export interface HandedCard {
  readonly format: 'nth-pump/card/1';
  readonly station: string;
  readonly units: FileUnits;
  readonly staticHead: number;
  readonly bandPercent: number;
  readonly basis: 'drives' | 'proposed-drives' | 'direct-on-line';
  readonly pumps: readonly string[];
  /** Whether they are equal, so that a count says who runs. */
  readonly alike: boolean;
  readonly ratedSpeedRpm: number | null;
  readonly steps: readonly HandedStep[];
  /** For pumps that differ: which set is the best as flow rises, against the station's own order; empty otherwise. */
  readonly sets: readonly HandedSet[];
  /** Largest flow of one pump, of two, … */
  readonly capacities: readonly number[];
  readonly levels: readonly { readonly start: number; readonly stop: number }[];
  readonly moves: {
    readonly low: { readonly staticHead: number; readonly flows: readonly (number | null)[] };
    readonly high: { readonly staticHead: number; readonly flows: readonly (number | null)[] };
  } | null;
  readonly notes: readonly Note[];
  readonly cautions: readonly string[];
}

export interface HandedStep {
  readonly from: number;
  readonly to: number;
  /** Name of the pump that comes on, the next in the station's order. */
  readonly pump: string;
  readonly flow: number;
  readonly bringOn: number;
  readonly dropOff: number;
  readonly speedBefore: number;
  readonly speedAfter: number;
  readonly atBringOn: HandedPoint;
  readonly atDropOff: HandedPoint;
  readonly reason: StepReason;
  readonly text: string;
  readonly crossings: readonly number[];
}

export interface HandedSet {
  readonly from: number;
  readonly to: number;
  readonly pumps: readonly string[];
  readonly add: readonly string[];
  readonly drop: readonly string[];
  readonly rests: boolean;
  /** Against the best of the station's own order, in the middle of the stretch; null where that cannot meet it. */
  readonly savedKw: number | null;
  /** `add B, drop J` */
  readonly text: string;
  /** When to change into this set and back, and at what speeds; null for the first. */
  readonly change: {
    readonly bringOn: number;
    readonly dropOff: number;
    readonly headerHead: number;
    readonly headerKpa: number;
    readonly before: readonly HandedSpeed[];
    readonly after: readonly HandedSpeed[];
  } | null;
}

export interface HandedSpeed {
  readonly pump: string;
  /** Share of rated speed; 1 direct on line. */
  readonly speed: number;
  /** null where the rated speed is not known. */
  readonly rpm: number | null;
  readonly onDrive: boolean;
}

/** Speeds as share of rated; header head in the file's unit, and as a pressure. */
export interface HandedPoint {
  readonly speedBefore: number;
  readonly speedAfter: number;
  readonly headerHead: number;
  readonly headerKpa: number;
}

/** What stands on every card (model.md §10). */
export const CARD_CAUTIONS: readonly string[] = [
  'Advice only: it controls nothing. Local codes and a licensed engineer have the last word.',
  "Keep each pump above its maker's minimum flow, and never run against a closed valve.",
  'Change speed and valves slowly: sudden changes, and a power cut, cause surge (water hammer).',
  'Mind the least speed for motor cooling, critical speeds, and starts per hour.',
  'Lock out and test before work on a pump; a wet well is a confined space.',
];

/**
 * The operator's card of a station.
 *
 * @param staticHead   in the file's unit of head, by default the file's
 * @param bandPercent  how much more staying may cost before a step, 1 by default
 * @param range        lowest and highest static head of a record [m], by default from the storage levels
 * @throws             InputError for a static head below 0, a band out of range, an unknown pump
 */
export function cardOf(
  station: Station,
  {
    staticHead,
    bandPercent = 1,
    without = [],
    range,
  }: {
    staticHead?: number | undefined;
    bandPercent?: number | undefined;
    without?: readonly string[];
    range?: { readonly low: number; readonly high: number } | null;
  },
): HandedCard {
  if (staticHead !== undefined && !(staticHead >= 0)) {
    refuse({
      code: 'static_head_negative',
      file: 'request',
      at: 'staticHead',
      found: `${staticHead}`,
      wanted: '0 or more',
    });
  }
  if (!(bandPercent > 0 && bandPercent <= 20)) {
    refuse({
      code: 'out_of_range',
      file: 'request',
      at: 'band',
      found: `${bandPercent}`,
      wanted: 'more than 0, at most 20 %',
    });
  }
  const duty: readonly Pump[] = dutyWithout(station, without);
  const flow = FLOW_UNITS[station.units.flow];
  const head = HEAD_UNITS[station.units.head];
  const card = operatorCard(station, duty, {
    ...(staticHead !== undefined && { staticHead: staticHead * head }),
    band: bandPercent / 100,
    ...(range !== undefined && { range }),
  });
  const point = (at: CardStep['atBringOn']): HandedPoint => ({
    speedBefore: at.speedBefore,
    speedAfter: at.speedAfter,
    headerHead: at.headerHead / head,
    headerKpa: headerPressure(station, at.headerHead) / 1000,
  });
  const headerAt = (q: number) => {
    const made = systemHead(station.friction, card.staticHead, q);
    return { headerHead: made / head, headerKpa: headerPressure(station, made) / 1000 };
  };
  const speedOf = ({ place, speed, onDrive }: SpeedsOfSet[number]): HandedSpeed => {
    const { name, ratedSpeed } = duty[place]!;
    return { pump: name, speed, rpm: ratedSpeed === null ? null : speed * ratedSpeed, onDrive };
  };
  const moved = (side: { staticHead: number; flows: readonly (number | null)[] }) => ({
    staticHead: side.staticHead / head,
    flows: side.flows.map((each) => (each === null ? null : each / flow)),
  });
  return {
    format: 'nth-pump/card/1',
    station: station.name,
    units: station.units,
    staticHead: card.staticHead / head,
    bandPercent,
    basis: card.basis,
    pumps: duty.map((pump) => pump.name),
    alike: dutyPumpsAreEqual(duty),
    ratedSpeedRpm: card.ratedSpeedRpm,
    steps: card.steps.map((step) => ({
      ...step,
      pump: duty[step.to - 1]!.name,
      flow: step.flow / flow,
      bringOn: step.bringOn / flow,
      dropOff: step.dropOff / flow,
      atBringOn: point(step.atBringOn),
      atDropOff: point(step.atDropOff),
      crossings: step.crossings.map((each) => each / flow),
    })),
    sets: card.sets.map((step) => {
      const names = (places: readonly number[]) => places.map((place) => duty[place]!.name);
      const add = names(step.add);
      const drop = names(step.drop);
      const text = [
        ...(add.length > 0 ? [`add ${add.join(' and ')}`] : []),
        ...(drop.length > 0 ? [`drop ${drop.join(' and ')}`] : []),
      ].join(', ');
      return {
        from: step.from / flow,
        to: step.to / flow,
        pumps: names(step.places),
        add,
        drop,
        rests: step.rests,
        savedKw: step.savedPower === null ? null : step.savedPower / 1000,
        text,
        change: step.change && {
          bringOn: step.change.bringOn / flow,
          dropOff: step.change.dropOff / flow,
          ...headerAt(step.change.bringOn),
          before: step.change.before.map(speedOf),
          after: step.change.after.map(speedOf),
        },
      };
    }),
    capacities: card.capacities.map((each) => each / flow),
    levels: card.levels.map(({ start, stop }) => ({ start: start / head, stop: stop / head })),
    moves: card.moves && { low: moved(card.moves.low), high: moved(card.moves.high) },
    notes: [...station.notes, ...card.notes],
    cautions: CARD_CAUTIONS,
  };
}

/** What adding pumps only when the running ones are flat out costs over a record, against the best count. */
export interface LateStagingCost {
  readonly energyKwh: number;
  /** null without a tariff. */
  readonly cost: number | null;
  readonly hours: number;
}

/** null where the comparison did not run both rules. */
export function lateStagingCost(result: ComparisonResult): LateStagingCost | null {
  const late = result.rules.find((rule) => rule.rule === 'late-staging');
  const best = result.rules.find((rule) => rule.rule === 'best-count');
  if (!late || !best) return null;
  const priced = late.totalCost !== undefined && best.totalCost !== undefined;
  return {
    energyKwh: late.energyKwh - best.energyKwh,
    cost: priced ? late.totalCost! - best.totalCost! : null,
    hours: result.record.hours,
  };
}
