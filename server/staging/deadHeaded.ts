import type { Note } from '../errors.ts';
import type { Pump } from '../hydraulics/pump.ts';
import { root } from '../hydraulics/roots.ts';
import { systemHead } from '../hydraulics/systemCurve.ts';
import { pumpsByMake, type Station } from '../station/station.ts';
import { FLOW_UNITS, HEAD_UNITS } from '../units.ts';
import type { DemandRecord } from './demandRecord.ts';
import { hoursText } from './hoursText.ts';
import type { Run } from './run.ts';

/** Head [m] that a pump makes against its closed check valve at its highest speed. */
function highestHead(pump: Pump): number {
  return pump.shutoffHead(Math.max(1, pump.maxSpeed));
}

/** Pumps that cannot open their check valves against a header head [m], at whatever speed (model.md §3). */
export function deadHeaded(duty: readonly Pump[], headerHead: number): Pump[] {
  return duty.filter((pump) => highestHead(pump) <= headerHead);
}

/** Says which pumps are never proposed at a moment, and why; nothing where all of them can deliver. */
export function deadHeadedNotes(station: Station, duty: readonly Pump[], headerHead: number): Note[] {
  const shut = deadHeaded(duty, headerHead);
  if (shut.length === 0) return [];
  return [note(`At a header head of ${headText(station, headerHead)} ${shutText(station, shut)}`)];
}

/** Says above which flow each pump is shut out by the others, up to the capacity of all [m³/s]. */
export function shutOutNotes(
  station: Station,
  duty: readonly Pump[],
  { staticHead, capacity }: { readonly staticHead: number; readonly capacity: number },
): Note[] {
  const header = (flow: number) => systemHead(station.friction, staticHead, flow);
  const unit = station.units.flow;
  return pumpsByMake(duty).flatMap((pumps) => {
    const most = highestHead(pumps[0]!);
    if (most <= staticHead || most > header(capacity)) return [];
    const flow = root((q) => header(q) - most, 0, capacity);
    return [note(`Above ${figure(flow / FLOW_UNITS[unit])} ${unit} in the main ${shutText(station, pumps)}`)];
  });
}

/** Says for how long pumps were shut out over a record, at the flow that was delivered under one rule at least. */
export function deadHeadedOverRecord(
  station: Station,
  duty: readonly Pump[],
  record: DemandRecord,
  runs: readonly Run[],
): Note[] {
  const staticAt = (i: number) => (typeof record.staticHead === 'number' ? record.staticHead : record.staticHead[i]!);
  const delivered = record.flow.map((_, i) => runs.reduce((most, { series }) => Math.max(most, series.flow[i]!), 0));
  const most = (values: Float64Array) => values.reduce((a, b) => Math.max(a, b), 0);
  const highest = systemHead(station.friction, most(record.flow.map((_, i) => staticAt(i))), most(delivered));
  const makes = pumpsByMake(duty)
    .map((pumps) => ({ pumps, most: highestHead(pumps[0]!), seconds: 0 }))
    .filter((make) => make.most <= highest);
  if (makes.length === 0) return [];
  for (let i = 0; i < delivered.length; i++) {
    const header = systemHead(station.friction, staticAt(i), delivered[i]!);
    for (const make of makes) if (make.most <= header) make.seconds += record.seconds[i]!;
  }
  return makes.flatMap(({ pumps, seconds }) =>
    seconds > 0 ? [note(`For ${hoursText(seconds / 3600)} of the record ${shutText(station, pumps)}`)] : [],
  );
}

function note(text: string): Note {
  return { code: 'dead-headed', text };
}

function shutText(station: Station, pumps: readonly Pump[]): string {
  const names = pumps.map((pump) => pump.name);
  const list = names.length > 1 ? `${names.slice(0, -1).join(', ')} and ${names.at(-1)}` : names[0];
  const heads = [...new Set(pumps.map((pump) => headText(station, highestHead(pump))))].join(', ');
  const [are, their, valves] = names.length > 1 ? ['are', 'their', 'check valves'] : ['is', 'its', 'check valve'];
  return (
    `${list} ${are} dead-headed behind ${their} ${valves}: ${their} head at no flow is ${heads}, and the header asks ` +
    `for more. ${names.length > 1 ? 'They are' : 'It is'} left out of every set then.`
  );
}

function headText({ units }: Station, head: number): string {
  return `${figure(head / HEAD_UNITS[units.head])} ${units.head}`;
}

function figure(value: number): string {
  return String(Number(value.toPrecision(4)));
}
