import { spawn, spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';

const ROOT = fileURLToPath(new URL('../..', import.meta.url));

export interface Ended {
  readonly code: number | null;
  readonly stdout: string;
  readonly stderr: string;
}

/** Runs a command of scripts/ as `npm run` does, to its end. */
export function command(name: string, args: readonly string[], env: Readonly<Record<string, string>> = {}): Ended {
  const { status, stdout, stderr } = spawnSync(process.execPath, ['scripts/run.mjs', name, ...args], {
    cwd: ROOT,
    env: { ...process.env, ...env },
    encoding: 'utf8',
  });
  return { code: status, stdout, stderr };
}

export interface Server {
  /** What it printed as its address, without the line end. */
  readonly address: string;
  /** From the start of the process to its address [ms]. */
  readonly startMs: number;
  /** Sends a signal and waits for the end. */
  stop(signal: NodeJS.Signals): Promise<Ended>;
}

/** Starts server/main.ts with so much of an environment, and waits for its address or its end. */
export function server(env: Readonly<Record<string, string>>): Promise<Server | Ended> {
  const before = performance.now();
  const child = spawn(process.execPath, ['--import', 'tsx', 'server/main.ts'], {
    cwd: ROOT,
    env: { ...process.env, ...env },
  });
  let stdout = '';
  let stderr = '';
  child.stderr.on('data', (data) => {
    stderr += data;
  });
  const end = new Promise<Ended>((resolve) => {
    child.on('close', (code) => resolve({ code, stdout, stderr }));
  });
  return new Promise((resolve) => {
    end.then(resolve);
    child.stdout.on('data', (data) => {
      stdout += data;
      if (!stdout.includes('\n')) return;
      resolve({
        address: stdout.trimEnd(),
        startMs: performance.now() - before,
        stop: (signal) => {
          child.kill(signal);
          return end;
        },
      });
    });
  });
}
