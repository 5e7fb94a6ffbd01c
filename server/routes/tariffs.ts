import type { Router } from 'express';
import {
  deleteTariff,
  findTariff,
  insertTariff,
  listTariffs,
  replaceTariff,
  type StoredTariff,
} from '../../db/tariffs.ts';
import { jsonBody, resource } from '../body.ts';
import { type Context, existing } from '../context.ts';
import { publicHolidayDates } from '../holidays.ts';
import { readTariff } from '../tariff/tariffFile.ts';
import { ownFields } from './ownFields.ts';

const FILE = 'tariff.json';

/** Tariffs: the file goes in and comes out as its owner wrote it. */
export function tariffRoutes(router: Router, { db, now }: Context): void {
  const find = (id: unknown): StoredTariff => existing((each) => findTariff(db, each), id, 'id', 'tariff');
  const body = ({ id, demo, file }: StoredTariff): unknown => ({ id, demo, ...file });

  resource(router, '/tariffs', {
    get: [
      (_request, response) => {
        const entries = listTariffs(db).map(({ id, name, demo, file }) => ({
          id,
          name,
          demo,
          currency: file.currency,
          timeZone: file.timeZone,
        }));
        response.json(entries);
      },
    ],
    post: [
      ...jsonBody(FILE),
      (request, response) => {
        const file = ownFields(request.body);
        const { name } = readTariff(file, FILE, publicHolidayDates);
        const id = insertTariff(db, { name, file, nowMs: now() });
        response
          .status(201)
          .location(`/api/tariffs/${id}`)
          .json(body(find(id)));
      },
    ],
  });

  resource(router, '/tariffs/:id', {
    get: [(request, response) => void response.json(body(find(request.params.id)))],
    put: [
      ...jsonBody(FILE),
      (request, response) => {
        const { id } = find(request.params.id);
        const file = ownFields(request.body);
        const { name } = readTariff(file, FILE, publicHolidayDates);
        replaceTariff(db, id, { name, file, nowMs: now() });
        response.json(body(find(id)));
      },
    ],
    delete: [
      (request, response) => {
        deleteTariff(db, find(request.params.id).id);
        response.status(204).end();
      },
    ],
  });
}
