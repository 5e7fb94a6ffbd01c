import express, { type Express } from 'express';
import { resource } from './body.ts';
import type { Context } from './context.ts';
import { loopbackNamesOnly, requireToken, safeHeaders, sameOriginWrites } from './guards.ts';
import { problemHandler, sendProblem } from './problem.ts';
import { answerRoutes } from './routes/answers.ts';
import { comparisonRoutes } from './routes/comparisons.ts';
import { factRoutes } from './routes/facts.ts';
import { recordRoutes } from './routes/records.ts';
import { schemaRoutes } from './routes/schemas.ts';
import { stationRoutes } from './routes/stations.ts';
import { tariffRoutes } from './routes/tariffs.ts';

export interface AppOptions extends Context {
  readonly version: string;
  /** Folder of the built page; null serves the API alone. */
  readonly clientFolder: string | null;
  /** What the API wants as a bearer token; null lets everybody in who reaches it. */
  readonly token: string | null;
  /** Whether it is reached from this machine only. */
  readonly loopback: boolean;
  /** Where faults of ours go. */
  readonly log: (error: unknown) => void;
}

/** The server without its port, so that a test can hold it. */
export function createApp(options: AppOptions): Express {
  const app = express();
  app.disable('x-powered-by');
  app.disable('etag');
  app.use(safeHeaders);
  if (options.loopback) app.use(loopbackNamesOnly);

  const api = express.Router();
  api.use((_request, response, next) => {
    response.set('Cache-Control', 'no-store');
    next();
  });
  api.use(sameOriginWrites);
  if (options.token !== null) api.use(requireToken(options.token));
  resource(api, '/health', {
    get: [(_request, response) => void response.json({ status: 'ok', version: options.version })],
  });
  stationRoutes(api, options);
  factRoutes(api, options);
  recordRoutes(api, options);
  tariffRoutes(api, options);
  comparisonRoutes(api, options);
  answerRoutes(api, options);
  schemaRoutes(api, options);
  api.use((request, response) => sendProblem(response, 404, `There is nothing at ${request.originalUrl}.`));
  app.use('/api', api);

  if (options.clientFolder !== null) servePage(app, options.clientFolder);
  app.use((request, response) => sendProblem(response, 404, `There is nothing at ${request.originalUrl}.`));
  app.use(problemHandler(options.log));
  return app;
}

function servePage(app: Express, folder: string): void {
  // Files under assets bear a digest in their name; the page that names them is asked for anew.
  const cacheControl = (path: string): string =>
    /[\\/]assets[\\/]/.test(path) ? 'public, max-age=31536000, immutable' : 'no-cache';
  app.use(
    express.static(folder, { setHeaders: (response, path) => response.set('Cache-Control', cacheControl(path)) }),
  );
}
