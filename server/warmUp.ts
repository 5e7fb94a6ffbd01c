import type { Db } from '../db/open.ts';
import { findStation, listStations } from '../db/stations.ts';
import { advise } from './advise.ts';
import { InputError } from './errors.ts';
import { stagedPumpsOf } from './staging/stagedPumpsOf.ts';
import { readStation } from './station/readStation.ts';
import { FLOW_UNITS } from './units.ts';

/** So many questions, and the engine has compiled what answers them. */
const QUESTIONS = 24;

/**
 * Asks for advice on the stored stations a few times, one question a turn so that others come between, so that an
 * operator's first question is answered as fast as the next. Stores and says nothing.
 */
export function warmUp(db: Db): void {
  const ids = listStations(db).map(({ id }) => id);
  let asked = 0;
  const next = (): void => {
    if (!db.open || ids.length === 0 || asked >= QUESTIONS) return;
    ask(db, ids[asked % ids.length]!, (asked + 0.5) / QUESTIONS);
    asked++;
    setImmediate(next);
  };
  setImmediate(next);
}

function ask(db: Db, id: number, share: number): void {
  const stored = findStation(db, id);
  if (!stored) return;
  try {
    const station = readStation(stored.file, 'station.json');
    const capacity = stagedPumpsOf(station, station.duty).flatOut(station.duty.length).flow;
    advise(station, { flow: (share * capacity) / FLOW_UNITS[station.units.flow] });
  } catch (error) {
    // A file that an older version stored may be refused today; whoever asks for it is told.
    if (!(error instanceof InputError)) throw error;
  }
}
