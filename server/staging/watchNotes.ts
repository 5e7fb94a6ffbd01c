import type { Note } from '../errors.ts';
import type { Station } from '../station/station.ts';
import { HEAD_UNITS } from '../units.ts';
import type { DemandRecord } from './demandRecord.ts';
import { hoursText } from './hoursText.ts';
import type { Run } from './run.ts';

/** What is said about the velocity in the main and about the suction, for all runs together (model.md §10). */
export function watchNotes(station: Station, record: DemandRecord, runs: readonly Run[]): Note[] {
  const notes: Note[] = [];
  const list = (hours: (run: Run) => number): string | null => {
    const met = runs.filter((run) => hours(run) > 0);
    return met.length > 0 ? met.map((run) => `${run.rule.id} ${hoursText(hours(run))}`).join(', ') : null;
  };
  const { main, suction, units } = station;
  const velocity = (ms: number) => `${Number((ms / HEAD_UNITS[units.head]).toPrecision(3))} ${units.head}/s`;
  const slow = list((run) => run.totals.watched.main?.hoursBelowScouring ?? 0);
  if (main && slow) {
    notes.push({
      code: 'main-slow',
      text:
        `The flow in the widest pipe is slower than ${velocity(main.leastVelocity)} while pumps run: ${slow}. ` +
        'A rising main that carries solids needs that much, once or twice a day at least, or it silts up.',
    });
  }
  const fast = list((run) => run.totals.watched.main?.hoursAboveMaximum ?? 0);
  if (main && fast) {
    notes.push({
      code: 'main-fast',
      text:
        `The flow in the narrowest pipe is faster than ${velocity(main.mostVelocity)}: ${fast}. Friction and surge ` +
        '(water hammer) grow with it; have the main checked before running so.',
    });
  }
  const short = list((run) => run.totals.watched.npsh?.hoursBelowMargin ?? 0);
  if (suction && short) {
    const least = Math.min(...runs.map((run) => run.totals.watched.npsh?.leastRatio ?? Infinity));
    notes.push({
      code: 'npsh-margin',
      text:
        `NPSH available is less than ${suction.margin} times what a pump needs: ${short}; at worst ` +
        `${least.toFixed(2)} times. ${least < 1 ? 'Below 1 it cavitates. ' : ''}Fewer pumps carry more each, and need more.`,
    });
  }
  if (suction && record.suctionLevel === null) {
    notes.push({
      code: 'npsh-unknown',
      text: 'NPSH is not checked: neither the record nor the station file says how high the water stands at the suction.',
    });
  }
  return notes;
}
