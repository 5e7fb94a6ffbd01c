/** npm start: installs and builds what is missing, then serves. See server/main.ts for the settings. */
import { ensureBuilt, ensureInstalled, runTypeScript } from './ensure.mjs';

ensureInstalled();
ensureBuilt();
runTypeScript('server/main.ts', process.argv.slice(2));
