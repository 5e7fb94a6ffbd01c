import { InputError, type Note } from '../errors.ts';
import { type DrawdownTest, drawdownTests } from '../ingest/drawdown.ts';
import { inflowFromLevels } from '../ingest/inflow.ts';
import type { Log } from '../ingest/log.ts';
import type { Station } from '../station/station.ts';
import { volumeAt } from '../station/storage.ts';

/** A log with a flow: its own, or the inflow worked out from its levels, and the pump tests that came with it. */
export interface FlowLog {
  readonly log: Log;
  /** Each run of the pumps as a volumetric (drawdown) test; empty where the log has its own flow. */
  readonly drawdowns: readonly DrawdownTest[];
  readonly notes: readonly Note[];
}

/**
 * A log with a flow for each interval. One that has levels and run states but no flow is turned into inflow by the
 * volume balance of the station's storage (model.md §9); what was logged stays as it is in the record.
 *
 * @throws InputError missing_field where the station's storage has no level–volume table or area
 */
export function flowOfLog(station: Station, log: Log): FlowLog {
  if (log.flow !== null) return { log, drawdowns: [], notes: [] };
  const { table, side } = station.storage;
  if (table === null) {
    throw new InputError([
      {
        code: 'missing_field',
        file: 'station',
        at: 'storage.area',
        found: 'a record of levels, and storage without area or points',
        wanted: 'storage.area or storage.points, to turn levels into flow',
      },
    ]);
  }
  const inflow = inflowFromLevels({ log, volume: (level) => volumeAt(table, level), side });
  return { log: inflow.log, drawdowns: drawdownTests(inflow), notes: inflow.notes };
}
