import type { Router } from 'express';
import {
  deleteStation,
  findStation,
  insertStation,
  listStations,
  replaceStation,
  type StoredStation,
} from '../../db/stations.ts';
import { jsonBody, resource } from '../body.ts';
import { type Context, existing } from '../context.ts';
import { readStation } from '../station/readStation.ts';
import { ownFields } from './ownFields.ts';

const FILE = 'station.json';

/** Stations: the file goes in and comes out as its owner wrote it. */
export function stationRoutes(router: Router, { db, now }: Context): void {
  const find = (id: unknown): StoredStation => existing((each) => findStation(db, each), id, 'id', 'station');
  const body = ({ id, demo, file }: StoredStation): unknown => ({ id, demo, ...file });

  resource(router, '/stations', {
    get: [(_request, response) => void response.json(listStations(db))],
    post: [
      ...jsonBody(FILE),
      (request, response) => {
        const file = ownFields(request.body);
        const { name } = readStation(file, FILE);
        const id = insertStation(db, { name, file, nowMs: now() });
        response
          .status(201)
          .location(`/api/stations/${id}`)
          .json(body(find(id)));
      },
    ],
  });

  resource(router, '/stations/:id', {
    get: [(request, response) => void response.json(body(find(request.params.id)))],
    put: [
      ...jsonBody(FILE),
      (request, response) => {
        const { id } = find(request.params.id);
        const file = ownFields(request.body);
        const { name } = readStation(file, FILE);
        replaceStation(db, id, { name, file, nowMs: now() });
        response.json(body(find(id)));
      },
    ],
    delete: [
      (request, response) => {
        deleteStation(db, find(request.params.id).id);
        response.status(204).end();
      },
    ],
  });
}
