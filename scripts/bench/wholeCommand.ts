import { spawnSync } from 'node:child_process';
import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import type { BenchFiles } from './importing.ts';
import { type Measured, measured, shortest } from './measure.ts';

const MEMORY_AIM_MB = 400;

export interface Memory {
  readonly what: string;
  readonly megabytes: number;
  readonly aim: number;
}

/** `npm run compare` as a person runs it: a process of its own, from the files to the JSON. */
export function benchCommand(
  files: BenchFiles,
  rounds: number,
  shell: number | null,
): { times: Measured[]; memory: Memory | null } {
  const root = join(import.meta.dirname, '..', '..');
  const peak = join(files.folder, 'peak');
  // Every Node of the command writes down its largest resident size as it ends.
  const report = `import { appendFileSync } from 'node:fs';
    process.on('exit', () => appendFileSync(${JSON.stringify(peak)}, process.resourceUsage().maxRSS + '\\n'));`;
  const env = { ...process.env, NODE_OPTIONS: `--import=data:text/javascript,${encodeURIComponent(report)}` };
  const inputs = ['--station', files.station, '--record', files.record, '--tariff', files.tariff];
  const time = shortest(rounds, () => {
    const { status, stderr } = spawnSync(process.execPath, ['scripts/run.mjs', 'compare', ...inputs, '--json'], {
      cwd: root,
      env,
      maxBuffer: 1e9,
    });
    if (status !== 0) throw new Error(`compare: ${stderr}`);
  });
  const what = 'compare as a process, all rules';
  return {
    times: [
      shell === null
        ? measured(what, time)
        : measured(what, time, { what: "sqlite3 shell's .import", milliseconds: shell, aim: 4 }),
    ],
    memory: existsSync(peak) ? { what, megabytes: mostKilobytes(peak) / 1000, aim: MEMORY_AIM_MB } : null,
  };
}

function mostKilobytes(path: string): number {
  return Math.max(...readFileSync(path, 'utf8').trim().split('\n').map(Number));
}
