/** npm run migrate: brings the database up to the migrations of this checkout, and says which it applied. */
import { MigrationError, migrate } from '../db/migrate.ts';
import { openDatabase } from '../db/open.ts';
import { databasePath } from '../server/settings.ts';
import { runCommand } from './support/command.ts';

const HELP = `npm run --silent migrate

Applies what is new of migrations/ to the database, each file with its record in one transaction.

  --help    this text

The database is NTH_PUMP_DB, or .data/nth-pump.sqlite inside the checkout.
Exit code 0 when it is up to date, 2 for a bad option, 1 where it cannot be brought up to date.
`;

runCommand(HELP, { values: [] }, () => {
  const path = databasePath(process.env);
  const db = openDatabase(path);
  try {
    const applied = migrate(db);
    process.stdout.write(`${path}: ${applied.length === 0 ? 'nothing to apply' : `applied ${applied.join(', ')}`}\n`);
  } catch (error) {
    if (!(error instanceof MigrationError)) throw error;
    process.stderr.write(`${error.message}\n`);
    process.exitCode = 1;
  } finally {
    db.close();
  }
});
