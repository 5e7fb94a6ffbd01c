/** node --import ./scripts/typescript.mjs FILE.ts: runs TypeScript, each file turned into JavaScript once and kept. */
import { register } from 'node:module';

register('./typescriptHooks.mjs', import.meta.url);
