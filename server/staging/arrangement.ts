import type { Pump } from '../hydraulics/pump.ts';
import { LeastPower, type Leave, type Mode } from './leastPower.ts';
import type { Make, Share } from './shares.ts';

/** A pump of an arrangement: its place in the station's order, how it runs, and what it carries. */
export interface Part {
  readonly place: number;
  readonly mode: Mode;
  /** [m³/s] */
  readonly flow: number;
}

/** Who runs at a flow, how, and who carries what. */
export interface Arrangement {
  /** Of all of them [m³/s]. */
  readonly flow: number;
  readonly parts: readonly Part[];
  /** The same for arrangements of the same pumps in the same modes. */
  readonly key: string;
}

/** The arrangement of some parts, in the station's order. */
export function arrangement(flow: number, parts: readonly Part[]): Arrangement {
  const sorted = [...parts].sort((a, b) => a.place - b.place);
  return { flow, parts: sorted, key: sorted.map(({ place, mode }) => `${place}${mode}`).join('+') };
}

/** Pumps of one make, and which they are. */
interface PlacedMake {
  readonly make: Make;
  readonly places: readonly number[];
}

/** Pumps at some places, those alike together. */
export function makesOf(places: readonly number[], duty: readonly Pump[], leave: (pump: Pump) => Leave): PlacedMake[] {
  const found = new Map<string, { least: LeastPower; places: number[] }>();
  for (const place of places) {
    const pump = duty[place]!;
    const known = found.get(pump.make);
    if (known) known.places.push(place);
    else found.set(pump.make, { least: new LeastPower(pump, leave(pump)), places: [place] });
  }
  return [...found.values()].map(({ least, places: all }) => ({ make: { least, count: all.length }, places: all }));
}

/** Shares by make, told to pumps: of equal ones the first in order run. */
export function partsOf(shares: readonly Share[], makes: readonly PlacedMake[]): Part[] {
  const used = new Map<LeastPower, number>();
  const parts: Part[] = [];
  for (const { least, mode, count, flow } of shares) {
    const { places } = makes.find((each) => each.make.least === least)!;
    for (let k = 0; k < count; k++) {
      const next = used.get(least) ?? 0;
      used.set(least, next + 1);
      parts.push({ place: places[next]!, mode, flow });
    }
  }
  return parts;
}

/** What the parts of an arrangement may carry, least and most, and what they have to in all [m³/s]. */
interface Room {
  readonly lows: readonly number[];
  readonly tops: readonly number[];
  readonly sum: number;
  readonly valve: boolean;
}

/** Scales free flows to a sum; what lies above a pump's most, or is missing at its least, goes to the others. */
export function stretch(parts: readonly Part[], flows: number[], { lows, tops, sum, valve }: Room): void {
  const capped = new Set<number>();
  for (let round = 0; round <= parts.length; round++) {
    let room = sum;
    let free = 0;
    parts.forEach(({ mode }, k) => {
      if (mode === 'line' && !valve) return;
      if (capped.has(k)) room -= flows[k]!;
      else free += flows[k]!;
    });
    if (free <= 0) return;
    const scale = room / free;
    let more = false;
    parts.forEach(({ mode }, k) => {
      if ((mode === 'line' && !valve) || capped.has(k)) return;
      flows[k]! *= scale;
      const held = Math.min(Math.max(flows[k]!, lows[k]!), tops[k]!);
      if (held === flows[k]) return;
      flows[k] = held;
      capped.add(k);
      more = true;
    });
    if (!more) return;
  }
}
