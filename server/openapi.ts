import { z } from 'zod';
import * as answers from './answerSchemas.ts';
import {
  adviceQuery,
  cardQuery,
  caseRequest,
  comparisonQuery,
  comparisonRequest,
  recordQuery,
  seriesQuery,
  spotRequest,
} from './api.ts';
import { FILE_SCHEMA_NAMES, type JsonSchema } from './schemas.ts';
import { stationFile } from './station/stationFile.ts';
import { tariffFileSchema } from './tariff/tariffFile.ts';

/** What one method of a path takes and gives. */
export interface Operation {
  readonly summary: string;
  readonly query?: z.ZodObject;
  /** The JSON of the body, or a record in one of its forms. */
  readonly body?: z.ZodType | 'record';
  readonly status: 200 | 201 | 204;
  /** Absent where nothing is answered. */
  readonly answer?: z.ZodType;
}

type Methods = Partial<Record<'get' | 'post' | 'put' | 'delete', Operation>>;

const ok = (summary: string, answer: z.ZodType, more: Partial<Operation> = {}): Operation => ({
  summary,
  status: 200,
  answer,
  ...more,
});
const made = (summary: string, answer: z.ZodType, more: Partial<Operation>): Operation => ({
  ...ok(summary, answer, more),
  status: 201,
});
const removed = (summary: string): Operation => ({ summary, status: 204 });

/** Every operation of the interface, by path below `/api`; a test holds it against the routes of the server. */
const OPERATIONS: Readonly<Record<string, Methods>> = {
  '/health': { get: ok('Whether the server answers, and its version', answers.health) },
  '/stations': {
    get: ok('Stations', z.array(answers.stationEntry)),
    post: made('Store a station file', answers.stationBody, { body: stationFile }),
  },
  '/stations/:id': {
    get: ok('A station file, as its owner wrote it', answers.stationBody),
    put: ok('Replace a station file', answers.stationBody, { body: stationFile }),
    delete: removed('Remove a station with its records and comparisons'),
  },
  '/stations/:id/facts': { get: ok('What a station file comes to before any record', answers.facts) },
  '/stations/:id/card': { get: ok("The operator's card", answers.card, { query: cardQuery }) },
  '/stations/:id/advice': {
    get: ok('What to run at this moment; advice only', answers.advice, { query: adviceQuery }),
  },
  '/stations/:id/spot-readings': {
    post: ok('Gauge readings laid on the curves', answers.spotReadings, { body: spotRequest }),
  },
  '/stations/:id/records': {
    get: ok('Records of a station', z.array(answers.recordEntry)),
    post: made('Import a record: the whole file, or the list of lines to mend', answers.recordEntry, {
      query: recordQuery,
      body: 'record',
    }),
  },
  '/stations/:id/records/:recordId': {
    get: ok('A record and its quality', answers.recordEntry),
    delete: removed('Remove a record with its comparisons'),
  },
  '/tariffs': {
    get: ok('Tariffs', z.array(answers.tariffEntry)),
    post: made('Store a tariff file', answers.tariffBody, { body: tariffFileSchema }),
  },
  '/tariffs/:id': {
    get: ok('A tariff file, as its owner wrote it', answers.tariffBody),
    put: ok('Replace a tariff file', answers.tariffBody, { body: tariffFileSchema }),
    delete: removed('Remove a tariff'),
  },
  '/comparisons': {
    get: ok('Comparisons', z.array(answers.comparisonEntry), { query: comparisonQuery }),
    post: made('Compare staging rules on a record', answers.comparisonBody, { body: comparisonRequest }),
  },
  '/comparisons/:id': { get: ok('A comparison, as it was made', answers.comparisonBody) },
  '/comparisons/:id/power-over-flow': { get: ok('Power over flow of each count', answers.powerOverFlow) },
  '/comparisons/:id/series': {
    get: ok('What a rule did over time', answers.ruleSeries, { query: seriesQuery }),
  },
  '/comparisons/:id/card': {
    get: ok("The operator's card at the heads of the record", answers.comparisonCard, { query: cardQuery }),
  },
  '/comparisons/:id/map': { get: ok('The best count over flow and static head', answers.bestCountMap) },
  '/cases': { post: ok('The case for a change', answers.caseResult, { body: caseRequest }) },
  '/schemas/:name': { get: ok('JSON Schema of a kind of file', answers.document) },
  '/openapi.json': { get: ok('This description', answers.document) },
};

/** Schemas that operations share, by the names they have in the document. */
const NAMED = z.registry<{ id: string }>();
for (const [id, schema] of Object.entries({
  StationFile: stationFile,
  TariffFile: tariffFileSchema,
  ComparisonRequest: comparisonRequest,
  SpotRequest: spotRequest,
  CaseRequest: caseRequest,
  ...Object.fromEntries(Object.entries(answers).map(([name, each]) => [name[0]!.toUpperCase() + name.slice(1), each])),
})) {
  NAMED.add(schema, { id });
}

const place = (id: string) => `#/components/schemas/${id}`;

function reference(schema: z.ZodType): JsonSchema {
  if (schema instanceof z.ZodArray) return { type: 'array', items: reference(schema.element as z.ZodType) };
  return { $ref: place(NAMED.get(schema)!.id) };
}

function namedSchemas(): JsonSchema {
  const { schemas } = z.toJSONSchema(NAMED, { io: 'input', uri: place });
  // Their place in the document says who they are.
  return Object.fromEntries(
    Object.entries(schemas).map(([id, { $schema: _draft, $id: _id, ...schema }]) => [id, schema as JsonSchema]),
  );
}

const PATH_PARAMETERS: Readonly<Record<string, JsonSchema>> = {
  id: { type: 'integer', minimum: 1 },
  recordId: { type: 'integer', minimum: 1 },
  name: { type: 'string', enum: FILE_SCHEMA_NAMES },
};

const RECORD_BODY = {
  required: true,
  content: {
    'text/csv': { schema: { type: 'string', description: 'a header row, a column of times, a column of flows' } },
    'application/json': { schema: { description: 'a profile' } },
    'application/octet-stream': {},
    'text/plain': {},
  },
};

/**
 * The interface as an OpenAPI 3.1 document.
 *
 * @param version  of the program
 */
export function openApi(version: string): JsonSchema {
  const paths = Object.fromEntries(
    Object.entries(OPERATIONS).map(([path, methods]) => [
      `/api${path.replaceAll(/:(\w+)/g, '{$1}')}`,
      Object.fromEntries(
        Object.entries(methods).map(([method, operation]) => [method, described(path, method, operation)]),
      ),
    ]),
  );
  return {
    openapi: '3.1.0',
    info: {
      title: 'Nth Pump',
      version,
      description: 'Staging advice for pump stations. It advises; it does not control.',
      license: { name: 'MIT', identifier: 'MIT' },
    },
    servers: [{ url: '/' }],
    paths,
    components: {
      schemas: namedSchemas(),
      responses: {
        Problem: {
          description: 'What is wrong with the request, field by field (RFC 9457)',
          content: { 'application/problem+json': { schema: reference(answers.problem) } },
        },
      },
      securitySchemes: {
        token: { type: 'http', scheme: 'bearer', description: 'Wanted where the server was started with a token.' },
      },
    },
    security: [{}, { token: [] }],
  };
}

function described(path: string, method: string, { summary, query, body, status, answer }: Operation): JsonSchema {
  const inPath = [...path.matchAll(/:(\w+)/g)].map(([, name]) => ({
    name: name!,
    in: 'path',
    required: true,
    schema: PATH_PARAMETERS[name!]!,
  }));
  const parameters = [...inPath, ...(query ? queryParameters(query) : [])];
  return {
    operationId: operationId(path, method),
    summary,
    ...(parameters.length > 0 && { parameters }),
    ...(body && {
      requestBody:
        body === 'record'
          ? RECORD_BODY
          : { required: true, content: { 'application/json': { schema: reference(body) } } },
    }),
    responses: {
      [status]: answer
        ? { description: 'Done', content: { 'application/json': { schema: reference(answer) } } }
        : { description: 'Done; nothing is answered' },
      '4XX': { $ref: '#/components/responses/Problem' },
    },
  };
}

function queryParameters(query: z.ZodObject): JsonSchema[] {
  // What comes in a query is text; the schema is of what it is read as.
  const made = z.toJSONSchema(query, { io: 'output' });
  const wanted = z.toJSONSchema(query, { io: 'input' }).required ?? [];
  return Object.entries(made.properties ?? {}).map(([name, schema]) => ({
    name,
    in: 'query',
    required: wanted.includes(name),
    schema: schema as JsonSchema,
  }));
}

/** `getStationsIdCard` */
function operationId(path: string, method: string): string {
  const words = path.split(/[^a-zA-Z]+/).filter((word) => word !== '');
  return method + words.map((word) => word[0]!.toUpperCase() + word.slice(1)).join('');
}
