/** npm run bench: how long things take on a year of minutes, against something general-purpose in the same run. */
import { benchImport, shellImport, withFiles } from './bench/importing.ts';
import { YEAR_OF_MINUTES } from './bench/made.ts';
import type { Measured } from './bench/measure.ts';
import { benchMixed } from './bench/mixed.ts';
import { benchRules } from './bench/rules.ts';
import { benchCommand, type Memory } from './bench/wholeCommand.ts';
import { optional, runCommand } from './support/command.ts';
import { table } from './support/table.ts';

const HELP = `npm run --silent bench -- [--rounds N] [--json]

Times the program on a made-up year of minutes with six pumps: import, every staging rule, bills, the whole command.
Each time is the shortest of N rounds (3 by default); ratios are against a general-purpose thing timed in the same run.

  --rounds N  rounds of each
  --json      as JSON (nth-pump/bench/1)
`;

runCommand(HELP, { values: ['rounds'], switches: ['json'] }, (given) => {
  const rounds = Math.max(1, Number(optional(given, 'rounds') ?? 3));
  const results = withFiles((files) => {
    const shell = shellImport(files, rounds);
    if (shell === null) process.stderr.write('There is no sqlite3 shell here: what is held against it is left out.\n');
    const imports = benchImport(files, rounds, shell);
    const command = benchCommand(files, rounds, shell);
    return {
      times: [...imports, ...command.times, ...benchRules(rounds), ...benchMixed(rounds)],
      memory: command.memory,
    };
  });
  if (given.json === true) {
    const machine = { node: process.version, platform: `${process.platform} ${process.arch}` };
    const result = { format: 'nth-pump/bench/1', intervals: YEAR_OF_MINUTES, rounds, machine, ...results };
    process.stdout.write(`${JSON.stringify(result, null, 2)}\n`);
  } else process.stdout.write(readable(results.times, results.memory));
});

function readable(times: readonly Measured[], memory: Memory | null): string {
  const rows = times.map((m) => [
    m.what,
    m.milliseconds.toFixed(1),
    m.againstMilliseconds?.toFixed(1) ?? '',
    m.ratio?.toFixed(2) ?? '',
    aimOf(m),
    m.against ?? '',
  ]);
  const peak = memory && `${memory.what}: ${memory.megabytes.toFixed(0)} MB at most, aim < ${memory.aim} MB\n`;
  return `${table([['what', 'ms', 'against ms', 'ratio', 'aim', 'against'], ...rows])}${peak ? `\n${peak}` : ''}`;
}

function aimOf({ ratio, aim, milliseconds, aimMilliseconds }: Measured): string {
  if (aim !== null) return `≤ ${aim}${(ratio ?? 0) > aim ? ' missed' : ''}`;
  if (aimMilliseconds === null) return '';
  return `≤ ${aimMilliseconds} ms${milliseconds > aimMilliseconds ? ' missed' : ''}`;
}
