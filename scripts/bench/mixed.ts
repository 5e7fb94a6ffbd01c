import { advise } from '../../server/advise.ts';
import { compareRules } from '../../server/staging/compare.ts';
import { demandRecord } from '../../server/staging/demandRecord.ts';
import { steady } from '../../server/staging/rules/steady.ts';
import { runRule } from '../../server/staging/run.ts';
import { stagedPumpsOf } from '../../server/staging/stagedPumpsOf.ts';
import { readStation } from '../../server/station/readStation.ts';
import { flowsOf, logOf, mixedStationFile, YEAR_OF_MINUTES } from './made.ts';
import { type Measured, shortest, within } from './measure.ts';

const PUMPS = 8;
const QUARTERS = YEAR_OF_MINUTES / 15;
const QUESTIONS = 50;

/** Eight pumps that all differ, six of them on drives: a whole comparison, `steady` on a year of minutes, and advice. */
export function benchMixed(rounds: number): Measured[] {
  const station = readStation(mixedStationFile(PUMPS), 'bench.json');
  const quarters = logOf(flowsOf(QUARTERS, PUMPS), 900);
  const minutes = demandRecord(station, logOf(flowsOf(YEAR_OF_MINUTES, PUMPS), 60));
  const capacity = stagedPumpsOf(station, station.duty).flatOut(PUMPS).flow;
  const ask = () => {
    for (let i = 0; i < QUESTIONS; i++) advise(station, { flow: ((i + 0.5) / QUESTIONS) * capacity });
  };
  return [
    within(
      '8 different pumps, every rule, a year of quarter-hours',
      shortest(rounds, () => compareRules({ station, log: quarters, tariff: null })),
      2000,
    ),
    within(
      '8 different pumps, steady, a year of minutes',
      shortest(1, () => runRule(steady, stagedPumpsOf(station, station.duty), minutes)),
      10_000,
    ),
    within('8 different pumps, advice for one moment', shortest(rounds, ask) / QUESTIONS, 5),
  ];
}
