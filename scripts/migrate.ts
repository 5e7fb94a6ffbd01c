/** npm run migrate: brings the database up to the migrations of this checkout, and says which it applied. */
import { MigrationError, migrate } from '../db/migrate.ts';
import { openDatabase } from '../db/open.ts';
import { databasePath } from '../server/settings.ts';

if (process.argv.includes('--help')) {
  process.stdout.write('npm run migrate\n\nApplies what is new of migrations/ to the database (NTH_PUMP_DB).\n');
} else {
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
}
