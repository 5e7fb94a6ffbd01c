import { fileURLToPath } from 'node:url';

/** The database file: NTH_PUMP_DB, or one inside the checkout that git ignores. */
export function databasePath(environment: Readonly<Record<string, string | undefined>>): string {
  return environment.NTH_PUMP_DB || fileURLToPath(new URL('../.data/nth-pump.sqlite', import.meta.url));
}
