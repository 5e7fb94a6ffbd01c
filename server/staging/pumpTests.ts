import type { Note } from '../errors.ts';
import type { DrawdownTest } from '../ingest/drawdown.ts';
import type { Station } from '../station/station.ts';
import { FLOW_UNITS } from '../units.ts';
import type { DemandRecord } from './demandRecord.ts';
import { MixedPumps } from './mixedPumps.ts';
import type { PumpTestResult } from './result.ts';
import { staticHeadAt } from './rule.ts';

/** A set this far from its curves is worth a look: a choice of ours, well above what levels by the minute leave open. */
const WORTH_A_LOOK = 0.1;

/**
 * What each set of pumps delivered in the runs of a log of levels, against where its curve and the system meet at rated
 * speed and the static head of its runs (model.md §9). Runs are averaged by time.
 *
 * @param atRatedSpeed  false where the log has speeds: then runs are not at rated speed, and no curve is set beside them
 */
export function pumpTests(
  station: Station,
  record: DemandRecord,
  { drawdowns, atRatedSpeed }: { readonly drawdowns: readonly DrawdownTest[]; readonly atRatedSpeed: boolean },
): PumpTestResult[] {
  const all = [...station.duty, ...station.standby];
  const sets = new Map<string, { tests: DrawdownTest[]; seconds: number; head: number }>();
  let i = 0;
  for (const test of drawdowns) {
    const key = test.pumps?.join('+') ?? String(test.pumpsOn);
    const set = sets.get(key) ?? { tests: [], seconds: 0, head: 0 };
    sets.set(key, set);
    set.tests.push(test);
    const endMs = test.startMs + test.seconds * 1000;
    while (i < record.startMs.length && record.startMs[i]! < test.startMs) i++;
    for (; i < record.startMs.length && record.startMs[i]! < endMs; i++) {
      set.seconds += record.seconds[i]!;
      set.head += record.seconds[i]! * staticHeadAt(record, i);
    }
  }
  const solver = new MixedPumps(station, all);
  return [...sets.values()].map(({ tests, seconds, head }) => {
    const { pumps, pumpsOn } = tests[0]!;
    // A pump may have been renamed in the station file since the log was stored: then no curve is known to be its own.
    const places =
      pumps?.map((name) => all.findIndex((pump) => pump.name === name)) ?? [...all.keys()].slice(0, pumpsOn);
    const known = atRatedSpeed && places.length === pumpsOn && !places.includes(-1);
    solver.at(head / seconds);
    return {
      pumps,
      pumpsOn,
      runs: tests.length,
      hours: seconds / 3600,
      pumpedM3s: tests.reduce((sum, test) => sum + test.pumpedM3s * test.seconds, 0) / seconds,
      curveM3s: known ? solver.pointOf(places.map((place) => ({ place, speed: 1, onDrive: false }))).flow : null,
    };
  });
}

/** What the pump tests say, in a sentence; nothing where there were none. */
export function pumpTestNotes(station: Station, tests: readonly PumpTestResult[]): Note[] {
  if (tests.length === 0) return [];
  const unit = station.units.flow;
  const said = tests.map(({ pumps, pumpsOn, runs, pumpedM3s, curveM3s }) => {
    const who = pumps ? pumps.join(' + ') : `${pumpsOn} ${pumpsOn === 1 ? 'pump' : 'pumps'}`;
    const flow = `${who} gave ${Number((pumpedM3s / FLOW_UNITS[unit]).toPrecision(3))} ${unit} in ${runs} ${runs === 1 ? 'run' : 'runs'}`;
    if (curveM3s === null || curveM3s <= 0) return flow;
    const percent = 100 * (pumpedM3s / curveM3s - 1);
    if (Math.abs(percent) < 0.5) return `${flow}, as the curves say`;
    return `${flow}, ${Math.abs(percent).toFixed(0)} % ${percent < 0 ? 'less' : 'more'} than the curves say`;
  });
  const far = tests.some(
    ({ pumpedM3s, curveM3s }) => curveM3s !== null && Math.abs(pumpedM3s / curveM3s - 1) > WORTH_A_LOOK,
  );
  const doubt = far
    ? ' Where it is far off, a pump is worn or blocked, or the storage, a curve or the system is not as filed.'
    : '';
  return [{ code: 'pump-test', text: `By the levels ${said.join('; ')}.${doubt}` }];
}
