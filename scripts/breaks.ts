/** npm run breaks: the suite can fail. One line of a copy after another is made wrong, and a test has to go red. */
import { readFileSync, writeFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { refuse } from '../server/errors.ts';
import { BREAKS, type Break } from './breaks/list.ts';
import { type Outcome, outcomeOf, row, withRows } from './breaks/outcome.ts';
import { TreeCopy } from './breaks/treeCopy.ts';
import { optional, runCommand } from './support/command.ts';

const HELP = `npm run --silent breaks -- [options]

Copies the checkout to a passing folder, runs the tests named in scripts/breaks/list.ts, which have to pass, and then
makes one line wrong at a time: of the tests that belong to it at least one has to fail. Prints the first that does.

  --only WORDS   only breaks that have these words in what is wrong
  --write        also renews the table in DEVELOPERS.md, where all breaks are found; not with --only
  --help         this text

Exit code 0 where every break turns a test red, 1 where one does not or the tests fail unbroken, 2 for a wrong option.
`;

runCommand(HELP, { values: ['only'], switches: ['write'] }, async (given) => {
  const breaks = chosen(optional(given, 'only'), given.write === true);
  const copy = new TreeCopy(fileURLToPath(new URL('..', import.meta.url)));
  // Also where something is thrown, or somebody stops the command.
  process.on('exit', () => copy.remove());
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) process.on(signal, () => process.exit(1));
  const files = [...new Set(breaks.map(({ tests }) => tests))];
  const whole = outcomeOf(await copy.test(files, false));
  if (whole.kind !== 'green') {
    process.stderr.write(`Nothing is broken yet, and still: ${whole.kind === 'red' ? whole.test : whole.why}\n`);
    process.exitCode = 1;
    return;
  }
  process.stdout.write(`Unbroken: ${whole.passed} tests of ${files.length} files pass\n`);

  const rows: string[] = [];
  for (const each of breaks) {
    const outcome = outcomeOf(await copy.broken(each, () => copy.test([each.tests], true)));
    if (outcome.kind === 'red') rows.push(row(each, outcome.test));
    process.stdout.write(`${each.what} (${each.file})\n  ${told(outcome)}\n`);
  }
  process.stdout.write(`${rows.length} of ${breaks.length} breaks turn a test red\n`);
  if (rows.length < breaks.length) process.exitCode = 1;
  else if (given.write === true) {
    const developers = new URL('../DEVELOPERS.md', import.meta.url);
    writeFileSync(developers, withRows(readFileSync(developers, 'utf8'), rows));
  }
});

function told(outcome: Outcome): string {
  if (outcome.kind === 'red') return outcome.test;
  return outcome.kind === 'green' ? 'NO TEST FAILS' : `NO TEST SAYS ANYTHING: ${outcome.why}`;
}

function chosen(words: string | null, write: boolean): readonly Break[] {
  if (words === null) return BREAKS;
  const breaks = BREAKS.filter(({ what }) => what.includes(words));
  const wanted = 'words of a break, and no --write beside it';
  if (breaks.length === 0 || write)
    refuse({ code: 'bad_option', file: 'arguments', at: '--only', found: words, wanted });
  return breaks;
}
