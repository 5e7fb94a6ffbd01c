import type { Router } from 'express';
import { deleteRecord, findRecord, listRecords, type StoredRecord } from '../../db/records.ts';
import { findStation, type StoredStation } from '../../db/stations.ts';
import { type RecordEntry, recordQuery } from '../api.ts';
import { recordBody, resource } from '../body.ts';
import { type Context, existing } from '../context.ts';
import { importRecord } from '../importRecord.ts';
import { readAs } from '../readFile.ts';
import { isoUtc } from '../time.ts';

/** Records of a station. */
export function recordRoutes(router: Router, { db, now }: Context): void {
  const station = (id: unknown): StoredStation => existing((each) => findStation(db, each), id, 'id', 'station');
  const record = (params: Record<string, unknown>): StoredRecord => {
    const { id: stationId } = station(params.id);
    const ofStation = (each: number): StoredRecord | null => {
      const found = findRecord(db, each);
      return found?.stationId === stationId ? found : null;
    };
    return existing(ofStation, params.recordId, 'recordId', `record of station ${stationId}`);
  };

  resource(router, '/stations/:id/records', {
    get: [(request, response) => void response.json(listRecords(db, station(request.params.id).id).map(entryOf))],
    post: [
      ...recordBody,
      (request, response) => {
        const { name, fileName, ...options } = readAs(recordQuery, request.query, 'query');
        const data = Buffer.isBuffer(request.body) ? request.body : Buffer.alloc(0);
        const toImport = { name, fileName: fileName ?? defaultName(request.headers['content-type']), data, options };
        const made = importRecord(db, station(request.params.id), toImport, now());
        response.status(201).location(`/api/stations/${made.stationId}/records/${made.id}`).json(entryOf(made));
      },
    ],
  });

  resource(router, '/stations/:id/records/:recordId', {
    get: [(request, response) => void response.json(entryOf(record(request.params)))],
    delete: [
      (request, response) => {
        deleteRecord(db, record(request.params).id);
        response.status(204).end();
      },
    ],
  });
}

function defaultName(type: string | undefined): string {
  return type?.startsWith('application/json') ? 'record.json' : 'record.csv';
}

function entryOf({ createdMs, ...record }: StoredRecord): RecordEntry {
  return { ...record, createdAt: isoUtc(createdMs) };
}
