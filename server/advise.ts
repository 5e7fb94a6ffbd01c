import { type Note, refuse } from './errors.ts';
import type { Pump } from './hydraulics/pump.ts';
import { CARD_CAUTIONS } from './operatorCard.ts';
import { adviceNow, type Way } from './staging/advice.ts';
import { dutyWithout } from './staging/compare.ts';
import type { State } from './staging/state.ts';
import type { Station } from './station/station.ts';
import { type FileUnits, FLOW_UNITS, HEAD_UNITS } from './units.ts';

/** What to run at this moment, in the units of the station file. Advice only. */
export interface HandedAdvice {
  readonly format: 'nth-pump/advice/1';
  readonly station: string;
  readonly units: FileUnits;
  readonly flow: number;
  readonly staticHead: number;
  readonly headerHead: number;
  readonly best: HandedWay | null;
  readonly nextBest: (HandedWay & { readonly extraKw: number }) | null;
  readonly shortfall: number;
  readonly notes: readonly Note[];
  readonly cautions: readonly string[];
}

export interface HandedWay {
  readonly pumps: readonly {
    readonly name: string;
    readonly speed: number;
    readonly flow: number;
    readonly onDrive: boolean;
  }[];
  /** Names of the pumps that run on while the others rest, and the time share of all of `pumps`; 1 where none rests. */
  readonly restsWith: readonly string[] | null;
  readonly share: number;
  readonly powerKw: number;
  readonly kwhPerM3: number | null;
}

export interface Moment {
  readonly flow: number;
  /** Level of the storage, in the station's unit of head. */
  readonly level?: number | undefined;
  readonly staticHead?: number | undefined;
  readonly without?: readonly string[] | undefined;
}

/**
 * Advice for one moment: the set, its speeds and power, the next best, and the warnings.
 *
 * @throws InputError for a flow or static head below 0, a level where the station does not know the other side, or both
 */
export function advise(station: Station, moment: Moment): HandedAdvice {
  const flowUnit = FLOW_UNITS[station.units.flow];
  const headUnit = HEAD_UNITS[station.units.head];
  if (!(moment.flow >= 0)) {
    refuse({ code: 'negative_flow', file: 'request', at: 'flow', found: `${moment.flow}`, wanted: '0 or more' });
  }
  if (moment.level !== undefined && moment.staticHead !== undefined) {
    refuse({
      code: 'unknown_field',
      file: 'request',
      at: 'level',
      found: 'a level beside staticHead',
      wanted: 'one of the two',
    });
  }
  const staticHead = headOf(station, moment, headUnit);
  const duty = dutyWithout(station, moment.without ?? []);
  const advice = adviceNow(station, duty, moment.flow * flowUnit, staticHead);
  const way = ({ state, restsIn, share, power, kwhPerM3 }: Way): HandedWay => ({
    pumps: pumpsOf(state),
    restsWith: restsIn && pumpsOf(restsIn).map((pump) => pump.name),
    share,
    powerKw: power / 1000,
    kwhPerM3,
  });
  return {
    format: 'nth-pump/advice/1',
    station: station.name,
    units: station.units,
    flow: moment.flow,
    staticHead: staticHead / headUnit,
    headerHead: advice.headerHead / headUnit,
    best: advice.best && way(advice.best),
    nextBest: advice.nextBest && { ...way(advice.nextBest), extraKw: advice.nextBest.extraPower / 1000 },
    shortfall: advice.shortfall / flowUnit,
    notes: [...proposedNotes(duty), ...advice.notes],
    cautions: CARD_CAUTIONS,
  };

  function pumpsOf(state: State): HandedWay['pumps'] {
    const names = duty.filter((_, place) => Math.floor(state.set / 2 ** place) % 2 === 1).map((pump) => pump.name);
    const each = state.running.flatMap((r) =>
      Array.from({ length: r.count }, () => ({
        speed: r.onDrive ? r.speed : 1,
        flow: r.flow / flowUnit,
        onDrive: r.onDrive,
      })),
    );
    return names.map((name, i) => ({ name, ...each[i]! }));
  }
}

/** A proposed drive is not there yet, and a person at the switchboard should know that speeds are not to be had. */
function proposedNotes(duty: readonly Pump[]): Note[] {
  const names = duty.filter((pump) => pump.hasDrive && !pump.driveFitted).map((pump) => pump.name);
  if (names.length === 0) return [];
  return [
    {
      code: 'proposed-drives',
      text: `Drives are proposed and not fitted on ${names.join(', ')}: this is what to run once they are.`,
    },
  ];
}

function headOf(station: Station, { staticHead, level }: Moment, unit: number): number {
  let head = station.staticHead;
  if (staticHead !== undefined) head = staticHead * unit;
  else if (level !== undefined) {
    const suction = station.storage.side === 'suction';
    const other = suction ? station.dischargeLevel : station.suctionLevel;
    if (other === null) {
      const wanted = `system.${suction ? 'dischargeLevel' : 'suctionLevel'} in the station, or a static head`;
      refuse({ code: 'missing_field', file: 'request', at: 'level', found: 'a level', wanted });
    }
    head = suction ? other - level * unit : level * unit - other;
  }
  if (!(head >= 0)) {
    const found = `a static head of ${(head / unit).toPrecision(4)}`;
    refuse({ code: 'static_head_negative', file: 'request', at: 'staticHead', found, wanted: '0 or more' });
  }
  return head;
}
