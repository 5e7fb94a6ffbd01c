import type { ComparisonBody, RecordEntry, StationEntry, TariffEntry } from '../server/api.ts';
import type { CaseFile } from '../server/economics/caseFile.ts';
import { type Fault, faultLine } from '../server/errors.ts';
import type { CaseResult } from '../server/makeCase.ts';
import type { BestCountMap } from '../server/staging/bestCountMap.ts';
import type { PowerOverFlow, RuleSeries } from '../server/staging/pictures.ts';
import type { RuleId } from '../server/staging/result.ts';
import type { StationFile } from '../server/station/stationFile.ts';
import type { TariffFile } from '../server/tariff/tariffFile.ts';
import type { ComparisonCard } from './questions/which/cardText.ts';

/** A stored station: the file its owner wrote, with its id. */
export type StationBody = StationFile & { readonly id: number; readonly demo: boolean };

/** A stored tariff: the file its owner wrote, with its id. */
export type TariffBody = TariffFile & { readonly id: number; readonly demo: boolean };

/** What somebody read off the gauges, in the station's units and kW; null is what was not read. */
export interface SpotReading {
  readonly flow: number | null;
  readonly head: number | null;
  readonly powerKw: number | null;
  /** How many, of equal pumps; of those that differ, which. */
  readonly pumpsOn?: number;
  readonly pumps?: readonly string[];
}

/** A reading beside what the curves say. */
export interface LaidReading extends SpotReading {
  readonly pumpsOn: number;
  readonly pumps: readonly string[];
  /** Of the pumps, behind their branches, and of the system, at the flow that was read. */
  readonly curveHead: number | null;
  readonly systemHead: number | null;
  /** Where so many pumps and the system meet, direct on line. */
  readonly curveFlow: number;
  readonly curvePowerKw: number;
}

export interface ComparisonRequest {
  readonly stationId: number;
  readonly recordId: number;
  readonly tariffId: number | null;
  readonly rules?: readonly RuleId[];
  readonly without?: readonly string[];
  /** Replaces the stored station for this one comparison: a what-if. */
  readonly station?: StationFile;
}

/** An answer other than 2xx, or none at all; `lines` are for the reader, one fault each. */
export class ApiError extends Error {
  readonly status: number;
  readonly lines: readonly string[];

  constructor(status: number, lines: readonly string[]) {
    super(lines.join('\n'));
    this.name = 'ApiError';
    this.status = status;
    this.lines = lines;
  }
}

interface Call {
  readonly method?: 'GET' | 'POST' | 'PUT' | 'DELETE';
  readonly json?: unknown;
  readonly body?: Blob;
  readonly type?: string;
  readonly signal?: AbortSignal | undefined;
}

/**
 * The lines of a problem document, the file called as its owner calls it.
 *
 * @param problem   the parsed body, whatever it is
 * @param fileName  stands for the name that the server gave to the body
 */
export function problemLines(problem: unknown, status: number, fileName?: string): string[] {
  if (typeof problem === 'object' && problem !== null) {
    const { faults, detail, title } = problem as { faults?: Fault[]; detail?: string; title?: string };
    if (Array.isArray(faults) && faults.length > 0) {
      return faults.map((fault) => faultLine(fileName === undefined ? fault : { ...fault, file: fileName }));
    }
    const said = detail ?? title;
    if (said) return said.split('\n');
  }
  return [`The server answered with status ${status} and no reason.`];
}

async function call<T>(path: string, { method = 'GET', json, body, type, signal }: Call = {}, fileName?: string) {
  let response: Response;
  try {
    response = await fetch(`/api${path}`, {
      method,
      ...(json !== undefined && { body: JSON.stringify(json), headers: { 'Content-Type': 'application/json' } }),
      ...(body !== undefined && { body, headers: { 'Content-Type': type ?? 'application/octet-stream' } }),
      ...(signal && { signal }),
    });
  } catch (error) {
    if (signal?.aborted) throw error;
    throw new ApiError(0, ['The server does not answer. Is it still running?']);
  }
  const text = await response.text();
  const content: unknown = text === '' ? null : parsed(text);
  if (!response.ok) throw new ApiError(response.status, problemLines(content, response.status, fileName));
  return content as T;
}

function parsed(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return null;
  }
}

/** The HTTP interface, typed. Every function throws {@link ApiError}, or the abort of its own signal. */
export const api = {
  stations: (signal?: AbortSignal) => call<StationEntry[]>('/stations', { signal }),
  station: (id: number, signal?: AbortSignal) => call<StationBody>(`/stations/${id}`, { signal }),
  addStation: (file: unknown, fileName: string) =>
    call<StationBody>('/stations', { method: 'POST', json: file }, fileName),
  keepStation: (id: number, file: StationFile) => call<StationBody>(`/stations/${id}`, { method: 'PUT', json: file }),
  removeStation: (id: number) => call<null>(`/stations/${id}`, { method: 'DELETE' }),
  spotReadings: (id: number, readings: readonly SpotReading[], without: readonly string[], signal?: AbortSignal) =>
    call<{ readonly readings: readonly LaidReading[] }>(`/stations/${id}/spot-readings`, {
      method: 'POST',
      json: { readings, without },
      signal,
    }),

  records: (stationId: number, signal?: AbortSignal) =>
    call<RecordEntry[]>(`/stations/${stationId}/records`, { signal }),
  addRecord: (stationId: number, file: Blob, fileName: string, type: string) =>
    call<RecordEntry>(
      `/stations/${stationId}/records?${new URLSearchParams({ fileName })}`,
      { method: 'POST', body: file, type },
      fileName,
    ),
  removeRecord: (stationId: number, id: number) =>
    call<null>(`/stations/${stationId}/records/${id}`, { method: 'DELETE' }),

  tariffs: (signal?: AbortSignal) => call<TariffEntry[]>('/tariffs', { signal }),
  tariff: (id: number, signal?: AbortSignal) => call<TariffBody>(`/tariffs/${id}`, { signal }),
  addTariff: (file: unknown, fileName: string) =>
    call<TariffBody>('/tariffs', { method: 'POST', json: file }, fileName),
  keepTariff: (id: number, file: TariffFile) => call<TariffBody>(`/tariffs/${id}`, { method: 'PUT', json: file }),
  removeTariff: (id: number) => call<null>(`/tariffs/${id}`, { method: 'DELETE' }),

  compare: (request: ComparisonRequest, signal?: AbortSignal) =>
    call<ComparisonBody>('/comparisons', { method: 'POST', json: request, signal }),
  powerOverFlow: (comparisonId: number, signal?: AbortSignal) =>
    call<PowerOverFlow>(`/comparisons/${comparisonId}/power-over-flow`, { signal }),
  card: (comparisonId: number, { bandPercent }: { bandPercent: number }, signal?: AbortSignal) =>
    call<ComparisonCard>(
      `/comparisons/${comparisonId}/card?${new URLSearchParams({ bandPercent: String(bandPercent) })}`,
      { signal },
    ),
  map: (comparisonId: number, signal?: AbortSignal) =>
    call<BestCountMap>(`/comparisons/${comparisonId}/map`, { signal }),
  makeCase: (comparisonId: number, file: CaseFile, signal?: AbortSignal) =>
    call<CaseResult>('/cases', { method: 'POST', json: { comparisonId, case: file }, signal }),
  series: (comparisonId: number, rule: RuleId, part: { fromMs?: number; toMs?: number }, signal?: AbortSignal) => {
    const query = new URLSearchParams({ rule });
    if (part.fromMs !== undefined) query.set('fromMs', String(Math.floor(part.fromMs)));
    if (part.toMs !== undefined) query.set('toMs', String(Math.ceil(part.toMs)));
    return call<RuleSeries>(`/comparisons/${comparisonId}/series?${query}`, { signal });
  },
};

/** What to tell a reader about anything thrown while asking the server. */
export function linesOf(error: unknown): readonly string[] {
  if (error instanceof ApiError) return error.lines;
  return [error instanceof Error ? error.message : String(error)];
}
