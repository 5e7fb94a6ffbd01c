/**
 * What a fresh clone lacks, put in place before anything else runs. Plain Node without dependencies: it is read before
 * any are installed.
 */
import { spawn, spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

/** The checkout. */
export const ROOT = fileURLToPath(new URL('..', import.meta.url));

const at = (...path) => join(ROOT, ...path);
const say = (sentence) => process.stderr.write(`${sentence}\n`);

/** The oldest Node this runs on, as package.json says. */
const OLDEST_NODE = 20;

/** Installs the dependencies where they are missing, belong to another lock file, or were built for another Node. */
export function ensureInstalled() {
  if (Number(process.versions.node.split('.')[0]) < OLDEST_NODE) {
    say(`Nth Pump needs Node ${OLDEST_NODE} or newer; this is ${process.versions.node}.`);
    process.exit(1);
  }
  const wanted = `${sha256(readFileSync(at('package-lock.json')))} node-abi-${process.versions.modules}\n`;
  const stamp = at('node_modules', '.nth-pump-install');
  if (existsSync(stamp) && readFileSync(stamp, 'utf8') === wanted && isComplete()) return;
  if (existsSync(stamp) || !isComplete() || isOlderThanLock()) {
    say('Installing the dependencies; compiling the SQLite binding takes about a minute.');
    const { status } = npm(['ci', '--no-audit', '--no-fund']);
    if (status !== 0) {
      say('The dependencies could not be installed: see above. "npm ci" in this folder repeats it.');
      process.exit(1);
    }
    if (!existsSync(SQLITE_BINDING)) npm(['rebuild', 'better-sqlite3']);
  }
  writeFileSync(stamp, wanted);
}

const SQLITE_BINDING = at('node_modules', 'better-sqlite3', 'build', 'Release', 'better_sqlite3.node');
const INSTALLED_LOCK = at('node_modules', '.package-lock.json'); // written by npm as the last step of an install

const isComplete = () => existsSync(INSTALLED_LOCK) && existsSync(SQLITE_BINDING);
// npm writes the two files within the same second; a checkout of a newer lock file comes later.
const isOlderThanLock = () => statSync(at('package-lock.json')).mtimeMs > statSync(INSTALLED_LOCK).mtimeMs + 1000;

/** npm's own output goes to stderr, so that stdout carries data only. */
function npm(args) {
  return spawnSync('npm', args, { cwd: ROOT, stdio: ['ignore', 2, 2], shell: process.platform === 'win32' });
}

/** Builds the page where its sources are not those of the last build. */
export function ensureBuilt() {
  const wanted = sourcesDigest();
  const stamp = at('.build', 'client.sha256');
  const built = existsSync(at('.build', 'client', 'index.html')) && existsSync(stamp);
  if (built && readFileSync(stamp, 'utf8') === wanted) return;
  say('Building the page.');
  const { status } = spawnSync(process.execPath, [at('node_modules', 'vite', 'bin', 'vite.js'), 'build', 'client'], {
    cwd: ROOT,
    stdio: ['ignore', 2, 2],
  });
  if (status !== 0) {
    say('The page could not be built: see above.');
    process.exit(1);
  }
  mkdirSync(at('.build'), { recursive: true });
  writeFileSync(stamp, wanted);
}

/** The page is made of its own folder and of the calculation folders, which run in the browser too. */
function sourcesDigest() {
  const files = ['client', 'server'].flatMap((folder) =>
    readdirSync(at(folder), { recursive: true, withFileTypes: true })
      .filter((entry) => entry.isFile())
      .map((entry) => join(entry.parentPath ?? entry.path, entry.name)),
  );
  const digest = createHash('sha256');
  for (const file of [...files, at('package-lock.json')].sort()) digest.update(`${file}\0`).update(readFileSync(file));
  return digest.digest('hex');
}

function sha256(bytes) {
  return createHash('sha256').update(bytes).digest('hex');
}

/**
 * Runs a TypeScript file of this checkout in a Node of its own, and ends as it ends. Whoever stops this process stops
 * that one too; npm told to stop ends with its shell and tells nobody, so the parent is watched where npm is one.
 */
export function runTypeScript(file, args) {
  const child = spawn(
    process.execPath,
    ['--enable-source-maps', '--import', import.meta.resolve('./typescript.mjs'), at(file), ...args],
    {
      stdio: 'inherit',
    },
  );
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, () => child.kill(signal));
  const parent = process.ppid;
  if (process.env.npm_lifecycle_event !== undefined) {
    const watch = setInterval(() => {
      if (process.ppid === parent) return;
      clearInterval(watch);
      child.kill('SIGTERM');
    }, 250);
  }
  child.on('exit', (code, signal) => {
    process.exit(code ?? (signal === 'SIGINT' ? 130 : 1));
  });
}
