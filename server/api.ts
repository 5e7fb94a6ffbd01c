import { z } from 'zod';
import type { QualityReport } from './ingest/log.ts';
import { type ComparisonResult, RULE_IDS } from './staging/result.ts';
import { FLOW_UNITS, type FlowUnit } from './units.ts';

/** Requests and answers of the HTTP interface. Stations and tariffs are their files; see their own schemas. */

const id = z.union([z.int(), z.string()]);

/** A number in a query; one that is left empty is a slip, and not 0. */
const inQuery = z.string().trim().min(1).pipe(z.coerce.number());

/** Body of `POST /api/comparisons`. Whether rules and pumps are known, the comparison itself says. */
export const comparisonRequest = z.strictObject({
  stationId: id,
  recordId: id,
  tariffId: id.nullable().optional(),
  /** A station file that stands for the stored one this once: a what-if. It is kept with the comparison only. */
  station: z.record(z.string(), z.unknown()).optional(),
  /** Left out: every rule that the station can run. */
  rules: z.array(z.string()).min(1).optional(),
  /** Names of pumps taken out. */
  without: z.array(z.string()).optional(),
});

/** Query of `GET /api/comparisons`. */
export const comparisonQuery = z.strictObject({ stationId: z.string().optional() });

/** Query of `POST /api/stations/:id/records`: names, and what the person says of the file where detection would guess. */
export const recordQuery = z.strictObject({
  name: z.string().min(1).optional(),
  fileName: z.string().min(1).optional(),
  timeColumn: z.string().min(1).optional(),
  flowColumn: z.string().min(1).optional(),
  flowUnit: z.enum(Object.keys(FLOW_UNITS) as [FlowUnit, ...FlowUnit[]]).optional(),
  timeZone: z.string().min(1).optional(),
  dateOrder: z.enum(['dmy', 'mdy']).optional(),
  decimal: z.enum(['.', ',']).optional(),
  delimiter: z.enum([',', ';', '\t', '|']).optional(),
});

/** Query of `GET /api/comparisons/:id/series`. */
export const seriesQuery = z.strictObject({
  rule: z.enum(RULE_IDS),
  buckets: z.coerce.number().int().min(10).max(20_000).default(1500),
  fromMs: z.coerce.number().int().default(0),
  toMs: z.coerce.number().int().default(Number.MAX_SAFE_INTEGER),
});

/** Query of the operator's card: static head in the station's unit of head, band in percent, pumps out as `P2,P3`. */
export const cardQuery = z.strictObject({
  staticHead: inQuery.optional(),
  bandPercent: inQuery.optional(),
  without: z.string().optional(),
});

/** Query of `GET /api/stations/:id/advice`, in the station's units. */
export const adviceQuery = z.strictObject({
  flow: inQuery,
  level: inQuery.optional(),
  staticHead: inQuery.optional(),
  without: z.string().optional(),
});

/** Body of `POST /api/stations/:id/spot-readings`: gauge readings, in the station's units (power in kW). */
export const spotRequest = z.strictObject({
  readings: z
    .array(
      z
        .strictObject({
          flow: z.number().min(0).nullable().optional(),
          head: z.number().min(0).nullable().optional(),
          powerKw: z.number().min(0).nullable().optional(),
          pumpsOn: z.int().min(1).max(20).optional(),
          pumps: z.array(z.string()).min(1).optional(),
        })
        .refine((reading) => (reading.pumpsOn === undefined) !== (reading.pumps === undefined), {
          message: "either pumpsOn, how many of the station's order ran, or pumps, their names",
        }),
    )
    .min(1)
    .max(500),
  without: z.array(z.string()).optional(),
});

/** Body of `POST /api/cases`: a case file, on a stored comparison or on stored files. */
export const caseRequest = z.union([
  z.strictObject({ comparisonId: id, case: z.unknown() }),
  z.strictObject({
    stationId: id,
    recordId: id,
    tariffId: id,
    without: z.array(z.string()).optional(),
    case: z.unknown(),
  }),
]);

export type CaseRequest = z.infer<typeof caseRequest>;

export type { StationEntry } from '../db/stations.ts';

export interface RecordEntry {
  readonly id: number;
  readonly stationId: number;
  readonly name: string;
  readonly fileName: string;
  readonly sha256: string;
  readonly createdAt: string;
  readonly report: QualityReport;
}

export interface TariffEntry {
  readonly id: number;
  readonly name: string;
  readonly demo: boolean;
  readonly currency: string;
  readonly timeZone: string;
}

export interface ComparisonEntry {
  readonly id: number;
  readonly stationId: number;
  readonly recordId: number;
  /** null where none was given, or where it has been removed since. */
  readonly tariffId: number | null;
  readonly createdAt: string;
}

export type ComparisonBody = ComparisonEntry & { readonly without: readonly string[] } & ComparisonResult;
