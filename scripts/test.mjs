/**
 * npm test: types, lint, and the whole suite; what depends on the clock again in a zone whose clocks change. Arguments
 * go to vitest; with any, only the suite runs, once. With NTH_PUMP_BROWSER=required a test that is skipped is a failure.
 */
import { spawnSync } from 'node:child_process';
import { mkdirSync, readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { ensureInstalled, ROOT } from './ensure.mjs';

const DST_ZONE = 'America/New_York';
const DST_FILTERS = ['tests/ingest', 'tests/tariff', 'tests/time'];

ensureInstalled();
const args = process.argv.slice(2);
const totals = { passed: 0, failed: 0, skipped: 0 };

if (args.length === 0) {
  check('types', 'typescript/bin/tsc', ['--noEmit']);
  check('format and lint', '@biomejs/biome/bin/biome', ['check', '.']);
  suite('UTC', []);
  suite(DST_ZONE, DST_FILTERS);
} else {
  suite('UTC', args);
}

const skipsCount = process.env.NTH_PUMP_BROWSER === 'required' && totals.skipped > 0;
if (skipsCount) process.stdout.write(`${totals.skipped} skipped, and nothing may be: NTH_PUMP_BROWSER=required\n`);
const skipped = totals.skipped > 0 ? `, ${totals.skipped} skipped` : '';
process.stdout.write(`${totals.passed} passed, ${totals.failed} failed${skipped}\n`);
process.exitCode = totals.failed > 0 || totals.passed === 0 || skipsCount ? 1 : 0;

/** A check of the whole tree; one that fails counts as a failed test, one that passes is taken for granted. */
function check(name, bin, options) {
  process.stdout.write(`Checking ${name}\n`);
  if (run(bin, options, {}) !== 0) totals.failed++;
}

function suite(zone, options) {
  process.stdout.write(`Running the tests in ${zone}\n`);
  const report = join(ROOT, '.build', `tests-${zone.replace('/', '-')}.json`);
  mkdirSync(join(ROOT, '.build'), { recursive: true });
  rmSync(report, { force: true });
  const reporters = ['--reporter=default', '--reporter=json', `--outputFile.json=${report}`];
  const status = run('vitest/vitest.mjs', ['run', ...reporters, ...options], { TZ: zone });
  const failedBefore = totals.failed;
  try {
    const results = JSON.parse(readFileSync(report, 'utf8'));
    addUp(results);
    tellProven(results);
  } catch (error) {
    process.stdout.write(`The suite left no report: ${error.message}\n`);
  }
  // An error outside any test (a file that cannot be read, a rejection nobody awaits) fails the run, not a test.
  if (status !== 0 && totals.failed === failedBefore) totals.failed++;
}

function addUp(report) {
  totals.passed += report.numPassedTests;
  totals.failed += report.numFailedTests;
  totals.skipped += report.numPendingTests + report.numTodoTests;
  totals.failed += report.testResults.filter(
    (file) => file.status === 'failed' && file.assertionResults.length === 0,
  ).length;
}

/** Proofs and laws are told by what they hold: their titles say of how many stations, and how closely. */
function tellProven({ testResults }) {
  for (const { name, assertionResults } of testResults) {
    if (!/[\\/]tests[\\/](proofs|laws)[\\/]/.test(name)) continue;
    for (const { status, fullName, duration } of assertionResults) {
      if (status === 'passed') process.stdout.write(`Proven: ${fullName} (${(duration / 1000).toFixed(1)} s)\n`);
    }
  }
}

function run(bin, options, env) {
  const { status } = spawnSync(process.execPath, [join(ROOT, 'node_modules', bin), ...options], {
    cwd: ROOT,
    stdio: 'inherit',
    env: { ...process.env, ...env },
  });
  return status;
}
