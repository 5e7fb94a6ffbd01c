import { faultLine, InputError } from '../../server/errors.ts';
import { type ReadRecord, type RecordInput, readRecord } from '../../server/ingest/record.ts';

/** Reads a record of a made-up station: L/s, m, kW, Dublin time, pumps P1 and P2, unless said otherwise. */
export function aRecord(data: string | Uint8Array, changes: Partial<RecordInput> = {}): ReadRecord {
  return readRecord({
    fileName: 'flow.csv',
    data,
    units: { flow: 'L/s', head: 'm', power: 'kW' },
    timeZone: 'Europe/Dublin',
    pumpNames: ['P1', 'P2'],
    ...changes,
  });
}

/** The faults that a call is refused with, one line each after their code; fails the test if it is not refused. */
export function faultsOf(call: () => unknown): string[] {
  try {
    call();
  } catch (error) {
    if (error instanceof InputError) return error.faults.map((fault) => `${fault.code} ${faultLine(fault)}`);
    throw error;
  }
  throw new Error('the file was accepted');
}

/** Starts of the intervals as ISO text to the minute, so that a test can be read. */
export function starts({ log }: ReadRecord): string[] {
  return Array.from(log.startMs, (ms) => new Date(ms).toISOString().slice(0, 16));
}

/** Flow in L/s without the dust of the conversion; null where there is none. */
export function litres({ log }: ReadRecord): (number | null)[] {
  return Array.from(log.flow ?? [], (flow) => (Number.isNaN(flow) ? null : Number((flow * 1000).toPrecision(12))));
}

export function noteCodes({ report }: ReadRecord): string[] {
  return report.notes.map((note) => note.code);
}
