import { existsSync, readFileSync } from 'node:fs';
import type { AddressInfo } from 'node:net';
import { fileURLToPath } from 'node:url';
import { MigrationError, migrate } from '../db/migrate.ts';
import { openDatabase } from '../db/open.ts';
import { createApp } from './app.ts';
import { demoStations } from './demo/all.ts';
import { isLoopback } from './guards.ts';
import { loadDemo } from './loadDemo.ts';
import { databasePath } from './settings.ts';
import { warmUp } from './warmUp.ts';

/** The one file that reads the environment, opens the database and listens. Only the address goes to stdout. */

const DEFAULT_PORT = 8717;
const inCheckout = (path: string): string => fileURLToPath(new URL(`../${path}`, import.meta.url));
const say = (sentence: string): void => void process.stderr.write(`${sentence}\n`);

function stop(sentence: string): never {
  say(sentence);
  process.exit(1);
}

const host = process.env.HOST || '127.0.0.1';
const token = process.env.NTH_PUMP_TOKEN || null;
const askedPort = process.env.PORT ? Number(process.env.PORT) : null;
if (askedPort !== null && !(Number.isInteger(askedPort) && askedPort >= 0 && askedPort <= 65_535)) {
  stop(`PORT is '${process.env.PORT}'; wanted a number from 0 to 65535.`);
}
if (!isLoopback(host) && token === null) {
  stop(`HOST is ${host}, which others can reach: set NTH_PUMP_TOKEN to the token that they must send.`);
}

const path = databasePath(process.env);
const db = openDatabase(path);
try {
  const applied = migrate(db);
  if (applied.length > 0) say(`Database ${path}: applied ${applied.join(', ')}.`);
} catch (error) {
  if (error instanceof MigrationError) stop(error.message);
  throw error;
}
const loaded = loadDemo(db, demoStations, Date.now());
if (loaded > 0) say(`Loaded ${loaded} demo stations into the empty database.`);

const clientFolder = inCheckout('.build/client');
const { version } = JSON.parse(readFileSync(inCheckout('package.json'), 'utf8')) as { version: string };
const app = createApp({
  db,
  now: Date.now,
  version,
  clientFolder: existsSync(clientFolder) ? clientFolder : null,
  token,
  loopback: isLoopback(host),
  log: (error) => console.error(error),
});

const server = app.listen(askedPort ?? DEFAULT_PORT, host);
server.on('listening', () => {
  const { port } = server.address() as AddressInfo;
  const name = host.includes(':') ? `[${host}]` : host;
  process.stdout.write(`http://${name}:${port}\n`);
  warmUp(db);
});
server.on('error', (error: NodeJS.ErrnoException) => {
  if (error.code !== 'EADDRINUSE') throw error;
  if (askedPort !== null) stop(`Port ${askedPort} of ${host} is taken: stop what uses it, or set PORT to another.`);
  say(`Port ${DEFAULT_PORT} is taken; taking a free one.`);
  server.listen(0, host);
});

for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) {
  process.once(signal, () => {
    server.close(() => {
      db.close();
      process.exit(0);
    });
    server.closeAllConnections();
  });
}
