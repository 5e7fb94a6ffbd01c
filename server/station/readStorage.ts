import { shown } from '../readFile.ts';
import { isUsFlow, US_GALLON } from '../units.ts';
import { DIFFERS, type Reading, scaled } from './reading.ts';
import type { StationFile } from './stationFile.ts';
import { type Storage, volumeAt } from './storage.ts';

/** Active volume, levels and volumes of the wet well or tower (model.md §9). */
export function readStorage(file: StationFile, reading: Reading): Storage {
  const entry = file.storage ?? {};
  if (entry.area !== undefined && entry.points) {
    reading.fault('unknown_field', 'storage.area', 'area beside points', 'one of the two');
  }
  const side = entry.side ?? 'suction';
  const us = isUsFlow(file.units.flow);
  const volume = us ? US_GALLON : 1;
  const levels = (entry.levels ?? []).map((l) => ({ start: l.start * reading.head, stop: l.stop * reading.head }));
  let table: Storage['table'] = null;
  if (entry.points) {
    entry.points.forEach((p, i) => {
      const before = entry.points![i - 1];
      if (before && (p.level <= before.level || p.volume <= before.volume)) {
        reading.fault(
          'levels_contradict',
          `storage.points[${i}]`,
          shown(p),
          'level and volume above those of the row before',
        );
      }
    });
    table = {
      levels: entry.points.map((p) => p.level * reading.head),
      volumes: entry.points.map((p) => p.volume * volume),
    };
  } else if (entry.area !== undefined) {
    const area = entry.area * reading.head ** 2;
    table = { levels: [0, 1], volumes: [0, area] };
  }
  checkLevels(entry, side, reading);
  const lead = levels[0];
  const fromLevels = table && lead ? Math.abs(volumeBetween(table, lead.start, lead.stop)) : null;
  const given = scaled(entry.activeVolume, volume);
  if (given !== null && fromLevels !== null && Math.abs(given / fromLevels - 1) > DIFFERS) {
    const text = Number((fromLevels / volume).toPrecision(3));
    reading.notes.push({
      code: 'volume-differs',
      text: `storage.activeVolume is ${entry.activeVolume}, and ${entry.points ? 'points' : 'area'} and levels of the first pump give ${text} ${us ? 'US gallons' : 'm³'}: activeVolume is taken.`,
    });
  }
  return { side, activeVolume: given ?? fromLevels, table, levels };
}

function volumeBetween(table: NonNullable<Storage['table']>, a: number, b: number): number {
  return volumeAt(table, a) - volumeAt(table, b);
}

/** A wet well starts pumps as it fills and stops them as it empties; a tower the other way round. */
function checkLevels(
  { levels = [], points }: NonNullable<StationFile['storage']>,
  side: Storage['side'],
  reading: Reading,
): void {
  const rises = side === 'suction';
  const [lowest, highest] = points ? [points[0]!.level, points.at(-1)!.level] : [-Infinity, Infinity];
  levels.forEach((level, i) => {
    const at = `storage.levels[${i}]`;
    for (const field of ['start', 'stop'] as const) {
      if (level[field] >= lowest && level[field] <= highest) continue;
      const wanted = `a level of storage.points, ${lowest} to ${highest}`;
      reading.fault('levels_contradict', `${at}.${field}`, `${level[field]}`, wanted);
    }
    if (rises ? level.stop >= level.start : level.stop <= level.start) {
      reading.fault(
        'levels_contradict',
        `${at}.stop`,
        `${level.stop}`,
        `${rises ? 'below' : 'above'} start, ${level.start}`,
      );
    }
    const before = levels[i - 1];
    if (before && (rises ? level.start < before.start : level.start > before.start)) {
      reading.fault(
        'levels_contradict',
        `${at}.start`,
        `${level.start}`,
        `${rises ? 'not below' : 'not above'} ${before.start}, that of the pump before`,
      );
    }
  });
}
