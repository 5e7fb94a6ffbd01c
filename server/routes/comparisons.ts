import type { Router } from 'express';
import { findComparison, listComparisons, type StoredComparison } from '../../db/comparisons.ts';
import { findStation } from '../../db/stations.ts';
import { type ComparisonBody, type ComparisonEntry, comparisonQuery, comparisonRequest, seriesQuery } from '../api.ts';
import { jsonBody, resource } from '../body.ts';
import { compareStored, recomputer } from '../compareRules.ts';
import { type Context, existing } from '../context.ts';
import { refuse } from '../errors.ts';
import { readAs } from '../readFile.ts';
import { powerOverFlow, ruleSeries } from '../staging/pictures.ts';
import { isoUtc } from '../time.ts';
import { ownFields } from './ownFields.ts';

/** Comparisons: made once, stored, and read back the same. */
export function comparisonRoutes(router: Router, { db, now }: Context): void {
  const find = (id: unknown): StoredComparison => existing((each) => findComparison(db, each), id, 'id', 'comparison');

  resource(router, '/comparisons', {
    get: [
      (request, response) => {
        const { stationId } = readAs(comparisonQuery, request.query, 'query');
        const station =
          stationId === undefined ? null : existing((id) => findStation(db, id), stationId, 'stationId', 'station');
        const entries = listComparisons(db, station?.id ?? null).map(
          ({ createdMs, ...entry }): ComparisonEntry => ({ ...entry, createdAt: isoUtc(createdMs) }),
        );
        response.json(entries);
      },
    ],
    post: [
      ...jsonBody('request'),
      (request, response) => {
        const { station, ...asked } = readAs(comparisonRequest, request.body, 'request');
        const made = compareStored(db, { ...asked, ...(station && { station: ownFields(station) }) }, now());
        response.status(201).location(`/api/comparisons/${made.id}`).json(bodyOf(made));
      },
    ],
  });

  resource(router, '/comparisons/:id', {
    get: [(request, response) => void response.json(bodyOf(find(request.params.id)))],
  });

  const recomputed = recomputer(db);
  resource(router, '/comparisons/:id/power-over-flow', {
    get: [(request, response) => void response.json(powerOverFlow(recomputed(find(request.params.id)).comparison))],
  });
  resource(router, '/comparisons/:id/series', {
    get: [
      (request, response) => {
        const stored = find(request.params.id);
        const { rule, ...part } = readAs(seriesQuery, request.query, 'query');
        const { comparison, sets } = recomputed(stored);
        const series = ruleSeries(comparison, rule, part, sets);
        if (series === null) {
          const wanted = `one of ${stored.result.rules.map((each) => each.rule).join(', ')}`;
          refuse({ code: 'not_found', file: 'query', at: 'rule', found: `'${rule}', which was not run`, wanted });
        }
        response.json(series);
      },
    ],
  });
}

function bodyOf({ id, stationId, recordId, tariffId, createdMs, choices, result }: StoredComparison): ComparisonBody {
  return { id, stationId, recordId, tariffId, createdAt: isoUtc(createdMs), without: choices.without, ...result };
}
