/**
 * Loader hooks for Node: strips the types of .ts files with esbuild. Names of functions are left alone: keeping them
 * through a helper, as ready-made loaders do, costs every closure of the hot loops several times what it does.
 */
import { createHash } from 'node:crypto';
import { mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { transformSync, version } from 'esbuild';

const SETTINGS = { loader: 'ts', format: 'esm', target: 'node20.10', sourcemap: 'inline', sourcesContent: false };

const kept = fileURLToPath(new URL('../.build/javascript/', import.meta.url));

export async function load(url, context, nextLoad) {
  if (!url.startsWith('file:') || !url.endsWith('.ts')) return nextLoad(url, context);
  const path = fileURLToPath(url);
  return { format: 'module', source: javaScriptOf(path, readFileSync(path, 'utf8')), shortCircuit: true };
}

function javaScriptOf(path, source) {
  const digest = createHash('sha256')
    .update(`${version}\0${JSON.stringify(SETTINGS)}\0${path}\0`)
    .update(source)
    .digest('hex');
  const file = join(kept, `${digest}.mjs`);
  try {
    return readFileSync(file, 'utf8');
  } catch {
    // Not kept yet, or kept where nobody may read it: made anew.
  }
  const { code } = transformSync(source, { ...SETTINGS, sourcefile: path });
  keep(file, code);
  return code;
}

/** Whole or not at all, for several processes may do it at once; where nothing can be written, nothing is kept. */
function keep(file, code) {
  const draft = `${file}.${process.pid}`;
  try {
    mkdirSync(kept, { recursive: true });
    writeFileSync(draft, code);
    renameSync(draft, file);
  } catch {
    // A checkout that may not be written to works all the same, only slower.
  }
}
