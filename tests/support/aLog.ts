import type { NewRecord } from '../../db/records.ts';
import type { Log } from '../../server/ingest/log.ts';
import { isoUtc } from '../../server/time.ts';

/** A made-up log of so many intervals of a minute from 2025 on; interval 7 of every hundred has no flow. */
export function aLog(intervals: number, startMs = Date.UTC(2025, 0, 1)): Log {
  const column = (value: (i: number) => number): Float64Array =>
    Float64Array.from({ length: intervals }, (_, i) => value(i));
  return {
    startMs: column((i) => startMs + i * 60_000),
    seconds: column(() => 60),
    flow: column((i) => (i % 100 === 7 ? Number.NaN : i / 1000)),
    level: null,
    staticHead: column((i) => 10 + (i % 3)),
    power: null,
    pumpsOn: null,
    pumps: [
      { name: 'P-1', on: column((i) => i % 2), speed: null, power: column((i) => i * 10) },
      { name: 'P-2', on: null, speed: column(() => 0.9), power: null },
    ],
  };
}

/** The log as a record to store under a station; the report is as plain as can be. */
export function aRecord(stationId: number, log: Log): NewRecord {
  const last = log.startMs.length - 1;
  return {
    stationId,
    name: 'made up',
    fileName: 'made-up.csv',
    sha256: 'ab'.repeat(32),
    log,
    report: {
      from: isoUtc(log.startMs[0]!),
      to: isoUtc(log.startMs[last]! + log.seconds[last]! * 1000),
      intervals: log.startMs.length,
      stepSeconds: 60,
      hours: log.startMs.length / 60,
      gapHours: 0,
      gaps: [],
      minFlowM3s: null,
      maxFlowM3s: null,
      meanFlowM3s: null,
      volumeM3: null,
      notes: [],
    },
    nowMs: Date.UTC(2026, 0, 1),
  };
}
