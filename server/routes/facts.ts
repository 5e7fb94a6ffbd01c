import type { Router } from 'express';
import { findStation } from '../../db/stations.ts';
import { resource } from '../body.ts';
import { type Context, existing } from '../context.ts';
import { readStation } from '../station/readStation.ts';
import { stationFacts } from '../stationFacts.ts';

/** What a station file comes to before any record: curves and their fit, operating points, firm capacity. */
export function factRoutes(router: Router, { db }: Context): void {
  resource(router, '/stations/:id/facts', {
    get: [
      (request, response) => {
        const { file } = existing((each) => findStation(db, each), request.params.id, 'id', 'station');
        response.json(stationFacts(readStation(file, 'station.json')));
      },
    ],
  });
}
