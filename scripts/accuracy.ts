/** npm run accuracy: every figure of ours that is held against one from outside, and how far they differ. */
import { readFileSync, writeFileSync } from 'node:fs';
import { TOPICS } from '../tests/accuracy/all.ts';
import { groupsOf, section, tableOf, withSection } from '../tests/accuracy/table.ts';
import { runCommand } from './support/command.ts';
import { table } from './support/table.ts';

const HELP = `npm run --silent accuracy -- [--write]

Prints every check against an outside figure: what it is, where it is from, the figure printed there, ours, the
difference, what is allowed and why.

  --write   also renews the last section of README.md, where no check fails
  --help    this text

Exit code 0 where all differences are within what is allowed, 1 otherwise.
`;

runCommand(HELP, { values: [], switches: ['write'] }, (given) => {
  const topics = TOPICS.map((topic) => ({ heading: topic.heading, groups: groupsOf(topic) }));
  for (const { heading, groups } of topics) {
    process.stdout.write(`\n${heading}\n`);
    for (const group of groups) {
      const [head, ...lines] = tableOf(group);
      const marked = lines.map((line, i) => [...line, group.rows[i]!.passes ? '' : 'FAILS']);
      const allowed = group.why === null ? '' : `allowed: ${group.why}\n`;
      process.stdout.write(`\n${group.kind}: ${group.source}\n${allowed}${table([[...head!, ''], ...marked])}`);
    }
  }
  const rows = topics.flatMap(({ groups }) => groups).flatMap((group) => group.rows);
  const failed = rows.filter(({ passes }) => !passes);
  process.stdout.write(`\n${rows.length} checks, ${failed.length} failed\n`);
  for (const { check, ours, error } of failed) {
    process.stderr.write(`${check.what} (${check.source}): printed ${check.printed}, ours ${error ?? ours}\n`);
  }
  if (failed.length > 0) process.exitCode = 1;
  else if (given.write === true) {
    const readme = new URL('../README.md', import.meta.url);
    writeFileSync(readme, withSection(readFileSync(readme, 'utf8'), section(TOPICS)));
  }
});
