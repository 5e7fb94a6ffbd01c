import { existsSync } from 'node:fs';
import { mkdtemp, rm } from 'node:fs/promises';
import type { Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { type Browser, chromium, type Page } from 'playwright-core';
import { build } from 'vite';
import { migrate } from '../../db/migrate.ts';
import { openDatabase } from '../../db/open.ts';
import { createApp } from '../../server/app.ts';

const PLACES = ['/usr/bin/chromium', '/usr/bin/chromium-browser', '/usr/bin/google-chrome'];

/** The browser of this machine, or null; where one is required, its lack is an error. */
export function chromiumPath(): string | null {
  const found = [process.env.CHROMIUM, ...PLACES].find((path) => path !== undefined && existsSync(path));
  if (found) return found;
  if (process.env.CI || process.env.NTH_PUMP_BROWSER === 'required') {
    throw new Error(`no Chromium at ${PLACES.join(', ')}, and this run requires one`);
  }
  process.stderr.write('The browser tests are skipped: Chromium was not found.\n');
  return null;
}

const ARGUMENTS = [
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
];

/** The real program on a new database, with a browser before it. */
export interface Stage {
  /** Folder of the built page. */
  readonly clientFolder: string;
  readonly origin: string;
  /** A page of its own, in English. What the page writes to its console as an error, and where it asks, is noted. */
  open(options?: { readonly width?: number; readonly dark?: boolean }): Promise<Watched>;
  /** Errors that the server took for its own. */
  readonly bugs: unknown[];
  close(): Promise<void>;
}

export interface Watched {
  readonly page: Page;
  readonly errors: string[];
  readonly elsewhere: string[];
}

export async function stage(executablePath: string): Promise<Stage> {
  const folder = await mkdtemp(join(tmpdir(), 'nth-pump-page-'));
  const clientFolder = join(folder, 'client');
  const configFile = fileURLToPath(new URL('../../client/vite.config.ts', import.meta.url));
  // In the mode of the tests, so that what the libraries warn of is heard.
  await build({ configFile, logLevel: 'error', build: { outDir: clientFolder } });
  const db = openDatabase(join(folder, 'test.sqlite'));
  migrate(db);
  const bugs: unknown[] = [];
  const app = createApp({
    db,
    now: Date.now,
    version: '0.0.0',
    clientFolder,
    token: null,
    loopback: true,
    log: (error) => void bugs.push(error),
  });
  const server = await new Promise<Server>((resolve) => {
    const listening = app.listen(0, '127.0.0.1', () => resolve(listening));
  });
  const origin = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;
  const browser: Browser = await chromium.launch({ executablePath, args: ARGUMENTS });
  return {
    clientFolder,
    origin,
    bugs,
    async open({ width = 1440, dark = false } = {}) {
      const page = await browser.newPage({
        viewport: { width, height: 900 },
        colorScheme: dark ? 'dark' : 'light',
        locale: 'en-IE',
        timezoneId: 'America/New_York',
      });
      const watched: Watched = { page, errors: [], elsewhere: [] };
      page.on('console', (message) => {
        if (message.type() === 'error' || message.type() === 'warning') watched.errors.push(message.text());
      });
      page.on('pageerror', (error) => void watched.errors.push(String(error)));
      page.on('request', (request) => {
        const url = new URL(request.url());
        if (url.hostname !== '127.0.0.1' && !['data:', 'blob:'].includes(url.protocol)) {
          watched.elsewhere.push(request.url());
        }
      });
      await page.goto(origin);
      return watched;
    },
    async close() {
      await browser.close();
      server.closeAllConnections();
      await new Promise((resolve) => server.close(resolve));
      db.close();
      await rm(folder, { recursive: true });
    },
  };
}

export interface DroppedFile {
  readonly name: string;
  readonly content: string;
}

/** Drops files on the page, as a person does from a folder. */
export async function drop(page: Page, files: readonly DroppedFile[]): Promise<void> {
  await page.evaluate((list) => {
    const dataTransfer = new DataTransfer();
    for (const { name, content } of list) dataTransfer.items.add(new File([content], name));
    for (const type of ['dragover', 'drop']) {
      document.body.dispatchEvent(new DragEvent(type, { dataTransfer, bubbles: true, cancelable: true }));
    }
  }, files);
}
