import type { Router } from 'express';
import { findComparison, type StoredComparison } from '../../db/comparisons.ts';
import { findStation } from '../../db/stations.ts';
import { advise } from '../advise.ts';
import { adviceQuery, cardQuery, caseRequest, spotRequest } from '../api.ts';
import { jsonBody, resource } from '../body.ts';
import { caseOfStored } from '../caseOfStored.ts';
import { recomputer } from '../compareRules.ts';
import { type Context, existing } from '../context.ts';
import { refuse } from '../errors.ts';
import type { Pump } from '../hydraulics/pump.ts';
import { cardOf, lateStagingCost } from '../operatorCard.ts';
import { readAs } from '../readFile.ts';
import { bestCountMap, headSpan } from '../staging/bestCountMap.ts';
import { dutyWithout } from '../staging/compare.ts';
import { ownOrderCost } from '../staging/ownOrder.ts';
import { laySpotReadings } from '../staging/spotReadings.ts';
import { readStation } from '../station/readStation.ts';
import { FLOW_UNITS, HEAD_UNITS } from '../units.ts';

/** What the three people take away: the operator's card, the map of best counts, readings on the curves, the case. */
export function answerRoutes(router: Router, { db }: Context): void {
  const findStored = (id: unknown): StoredComparison =>
    existing((each) => findComparison(db, each), id, 'id', 'comparison');
  const stationOf = (id: unknown) =>
    readStation(existing((each) => findStation(db, each), id, 'id', 'station').file, 'station.json');

  resource(router, '/stations/:id/card', {
    get: [
      (request, response) => {
        const { without, ...query } = readAs(cardQuery, request.query, 'query');
        response.json(cardOf(stationOf(request.params.id), { ...query, without: names(without) }));
      },
    ],
  });

  resource(router, '/stations/:id/advice', {
    get: [
      (request, response) => {
        const { without, ...moment } = readAs(adviceQuery, request.query, 'query');
        response.json(advise(stationOf(request.params.id), { ...moment, without: names(without) }));
      },
    ],
  });

  resource(router, '/stations/:id/spot-readings', {
    post: [
      ...jsonBody('request'),
      (request, response) => {
        const station = stationOf(request.params.id);
        const { readings, without } = readAs(spotRequest, request.body, 'request');
        const flow = FLOW_UNITS[station.units.flow];
        const head = HEAD_UNITS[station.units.head];
        const scaled = (value: number | null, unit: number) => (value === null ? null : value * unit);
        const back = (value: number | null, unit: number) => (value === null ? null : value / unit);
        const duty = dutyWithout(station, without ?? []);
        const laid = laySpotReadings(
          station,
          readings.map((reading, i) => ({
            flow: scaled(reading.flow ?? null, flow),
            head: scaled(reading.head ?? null, head),
            power: scaled(reading.powerKw ?? null, 1000),
            pumps: reading.pumps
              ? named(duty, reading.pumps, `readings[${i}].pumps`)
              : duty.slice(0, Math.min(reading.pumpsOn!, duty.length)),
          })),
        );
        response.json({
          units: station.units,
          readings: laid.map((one) => ({
            flow: back(one.flow, flow),
            head: back(one.head, head),
            powerKw: back(one.power, 1000),
            pumpsOn: one.pumps.length,
            pumps: one.pumps.map((pump) => pump.name),
            curveHead: back(one.curveHead, head),
            systemHead: back(one.systemHead, head),
            curveFlow: one.curveFlow / flow,
            curvePowerKw: one.curvePower / 1000,
          })),
        });
      },
    ],
  });

  const recomputed = recomputer(db);
  resource(router, '/comparisons/:id/card', {
    get: [
      (request, response) => {
        const stored = findStored(request.params.id);
        const { without: _without, ...query } = readAs(cardQuery, request.query, 'query');
        const { comparison } = recomputed(stored);
        const span = headSpan(comparison);
        const card = cardOf(comparison.station, {
          ...query,
          without: stored.choices.without,
          ...(span.varies && { range: { low: span.low, high: span.high } }),
        });
        response.json({
          ...card,
          lateStaging: lateStagingCost(stored.result),
          ownOrder: ownOrderCost(comparison),
        });
      },
    ],
  });
  resource(router, '/comparisons/:id/map', {
    get: [
      (request, response) => void response.json(bestCountMap(recomputed(findStored(request.params.id)).comparison)),
    ],
  });

  resource(router, '/cases', {
    post: [
      ...jsonBody('request'),
      (request, response) => void response.json(caseOfStored(db, readAs(caseRequest, request.body, 'request'))),
    ],
  });
}

/** Duty pumps by their names, in the station's order. */
function named(duty: readonly Pump[], asked: readonly string[], at: string): readonly Pump[] {
  for (const name of asked) {
    if (duty.some((pump) => pump.name === name)) continue;
    const wanted = `one of ${duty.map((pump) => pump.name).join(', ')}`;
    refuse({ code: 'unknown_name', file: 'request', at, found: `'${name}'`, wanted });
  }
  return duty.filter((pump) => asked.includes(pump.name));
}

function names(text: string | undefined): string[] {
  return (text ?? '')
    .split(',')
    .map((name) => name.trim())
    .filter((name) => name !== '');
}
