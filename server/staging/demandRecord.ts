import { InputError, type Note } from '../errors.ts';
import type { Log } from '../ingest/log.ts';
import type { Station } from '../station/station.ts';
import { isoUtc } from '../time.ts';

/** What the pumps had to do: the intervals of a record that have a flow, with the static head of each. */
export interface DemandRecord {
  readonly startMs: Float64Array;
  readonly seconds: Float64Array;
  /** Mean flow [m³/s]. */
  readonly flow: Float64Array;
  /** Static head of each interval [m], or one for all. */
  readonly staticHead: Float64Array | number;
  /** Level at the suction of each interval [m], NaN where unknown, or one for all; null where nothing says. */
  readonly suctionLevel: Float64Array | number | null;
  /** First instant and end of the whole record, and hours of it without a flow. */
  readonly fromMs: number;
  readonly toMs: number;
  readonly coveredSeconds: number;
  readonly gapSeconds: number;
  readonly volume: number;
  readonly notes: readonly Note[];
}

/**
 * The intervals of a log that have a flow. Gaps are left out and counted, never filled. Static head per interval is the
 * log's own where it has one, else from its level where the station knows the other side, else the station's number.
 *
 * @throws InputError static_head_negative where a level gives a static head below nothing
 */
export function demandRecord(station: Station, log: Log): DemandRecord {
  const flow = log.flow;
  if (flow === null) {
    throw new InputError([
      {
        code: 'missing_column',
        file: 'record',
        at: 'flow',
        found: 'no flow',
        wanted: 'a flow, or levels turned into one',
      },
    ]);
  }
  const all = log.startMs.length;
  let used = 0;
  for (let i = 0; i < all; i++) if (!Number.isNaN(flow[i]!)) used++;
  const pick = (channel: Float64Array): Float64Array => {
    if (used === all) return channel;
    const picked = new Float64Array(used);
    for (let i = 0, j = 0; i < all; i++) if (!Number.isNaN(flow[i]!)) picked[j++] = channel[i]!;
    return picked;
  };
  const startMs = pick(log.startMs);
  const seconds = pick(log.seconds);
  const flows = pick(flow);
  let covered = 0;
  let volume = 0;
  for (let j = 0; j < used; j++) {
    covered += seconds[j]!;
    volume += seconds[j]! * flows[j]!;
  }
  const fromMs = log.startMs[0]!;
  const toMs = log.startMs[all - 1]! + log.seconds[all - 1]! * 1000;
  const { heads, notes } = staticHeads(station, log, pick);
  if (typeof heads !== 'number') refuseNegative(heads, startMs);
  return {
    startMs,
    seconds,
    flow: flows,
    staticHead: heads,
    suctionLevel: suctionLevels(station, log, pick),
    fromMs,
    toMs,
    coveredSeconds: covered,
    gapSeconds: Math.max(0, (toMs - fromMs) / 1000 - covered),
    volume,
    notes,
  };
}

function staticHeads(
  station: Station,
  log: Log,
  pick: (channel: Float64Array) => Float64Array,
): { heads: Float64Array | number; notes: Note[] } {
  const fallback = station.staticHead;
  const suction = station.storage.side === 'suction';
  const other = suction ? station.dischargeLevel : station.suctionLevel;
  const given = log.staticHead && pick(log.staticHead);
  const levels = log.level && other !== null ? pick(log.level) : null;
  if (!given && !levels) return { heads: fallback, notes: [] };
  const used = { record: 0, level: 0, station: 0 };
  const heads = (given ?? levels!).map((_, i) => {
    const head = given?.[i] ?? Number.NaN;
    const level = levels?.[i] ?? Number.NaN;
    if (!Number.isNaN(head)) used.record++;
    else if (!Number.isNaN(level)) used.level++;
    else used.station++;
    if (!Number.isNaN(head)) return head;
    if (Number.isNaN(level)) return fallback;
    return suction ? other! - level : level - other!;
  });
  return { heads, notes: headNotes(used, station.storage.side) };
}

/** Where the static heads come from; of several sources, each with its share of the intervals. */
function headNotes(used: { record: number; level: number; station: number }, side: string): Note[] {
  const all = used.record + used.level + used.station;
  const which = (part: number) => (part === all ? 'each interval' : `${part} of ${all} intervals`);
  const rest = used.station > 0 ? ` In ${used.station} it is that of the station file, since the record has none.` : '';
  const notes: Note[] = [];
  if (used.record > 0) {
    const text = `The static head of ${which(used.record)} is that of the record.${rest}`;
    notes.push({ code: 'static-head-from-record', text });
  }
  if (used.level > 0) {
    const text = `The static head of ${which(used.level)} follows the record's level on the ${side} side.`;
    notes.push({ code: 'static-head-from-level', text: used.record > 0 ? text : `${text}${rest}` });
  }
  return notes;
}

function suctionLevels(
  station: Station,
  log: Log,
  pick: (channel: Float64Array) => Float64Array,
): Float64Array | number | null {
  const otherwise = station.suction?.level ?? null;
  if (!log.level || station.storage.side !== 'suction') return otherwise;
  return pick(log.level).map((level) => (Number.isNaN(level) ? (otherwise ?? level) : level));
}

function refuseNegative(heads: Float64Array, startMs: Float64Array): void {
  const at = heads.findIndex((head) => head < 0);
  if (at < 0) return;
  throw new InputError([
    {
      code: 'static_head_negative',
      file: 'record',
      at: isoUtc(startMs[at]!),
      found: `a static head of ${heads[at]!.toFixed(2)} m`,
      wanted: '0 or more: water would run by itself',
    },
  ]);
}
