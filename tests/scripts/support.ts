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

let runs = 0;

/**
 * Runs a command of scripts/ within this process, which is far faster: the file is taken in anew, what it uses is not.
 * Only for commands that end within the turn they begin in.
 */
export async function commandHere(name: string, args: readonly string[]): Promise<Ended> {
  const told = { stdout: '', stderr: '' };
  const { argv, exitCode } = process;
  const before = { stdout: process.stdout.write, stderr: process.stderr.write };
  for (const stream of ['stdout', 'stderr'] as const) {
    process[stream].write = (text: string | Uint8Array) => {
      told[stream] += text;
      return true;
    };
  }
  process.argv = [argv[0]!, name, ...args];
  process.exitCode = 0;
  try {
    const file = `../../scripts/${name}.ts?run=${runs++}`;
    await import(/* @vite-ignore */ file);
    await new Promise(setImmediate);
    return { code: process.exitCode, ...told };
  } finally {
    process.stdout.write = before.stdout;
    process.stderr.write = before.stderr;
    process.argv = argv;
    process.exitCode = exitCode;
  }
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
  const child = spawn(process.execPath, ['--import', './scripts/typescript.mjs', 'server/main.ts'], {
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
