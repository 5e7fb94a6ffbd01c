/** run.mjs NAME …: runs scripts/NAME.ts with the arguments that follow, installing first what is missing. */
import { existsSync } from 'node:fs';
import { join } from 'node:path';
import { ensureInstalled, ROOT, runTypeScript } from './ensure.mjs';

const [name, ...args] = process.argv.slice(2);
if (name === undefined || !existsSync(join(ROOT, 'scripts', `${name}.ts`))) {
  process.stderr.write(
    `There is no script ${name ?? '(none named)'}: run.mjs takes the name of a file in scripts, without .ts.\n`,
  );
  process.exit(2);
}
ensureInstalled();
runTypeScript(`scripts/${name}.ts`, args);
