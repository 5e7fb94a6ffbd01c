import { type ChildProcess, spawn } from 'node:child_process';
import { cpSync, mkdtempSync, readFileSync, rmSync, symlinkSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, relative, sep } from 'node:path';
import type { Break } from './list.ts';
import type { Report } from './outcome.ts';

/** Left behind: what is installed is linked to, the rest is no source. */
const NOT_COPIED = new Set(['node_modules', '.git', '.build', '.data', 'coverage']);

/** A break may make a loop endless. */
const LONGEST_RUN_MS = 120_000;

/** A copy of the checkout to break and test; the checkout itself is only read. */
export class TreeCopy {
  readonly folder = mkdtempSync(join(tmpdir(), 'nth-pump-breaks-'));
  private running: ChildProcess | null = null;

  constructor(checkout: string) {
    const filter = (path: string) => !NOT_COPIED.has(relative(checkout, path).split(sep)[0]!);
    try {
      cpSync(checkout, this.folder, { recursive: true, filter });
      symlinkSync(join(checkout, 'node_modules'), join(this.folder, 'node_modules'), 'junction');
    } catch (error) {
      this.remove();
      throw error;
    }
  }

  /** Breaks a line, does something, and mends the line again. */
  async broken<T>({ file, find, put }: Break, meanwhile: () => Promise<T>): Promise<T> {
    const path = join(this.folder, file);
    const whole = readFileSync(path, 'utf8');
    writeFileSync(
      path,
      whole.replace(find, () => put),
    );
    try {
      return await meanwhile();
    } finally {
      writeFileSync(path, whole);
    }
  }

  /** Runs some files of tests, to the first that fails where `bail` is set; null where the run leaves no report. */
  async test(files: readonly string[], bail: boolean): Promise<Report | null> {
    const path = join(this.folder, 'report.json');
    rmSync(path, { force: true });
    const vitest = join(this.folder, 'node_modules', 'vitest', 'vitest.mjs');
    const options = ['--reporter=json', `--outputFile.json=${path}`, '--cache=false', ...(bail ? ['--bail=1'] : [])];
    await this.ended(spawn(process.execPath, [vitest, 'run', ...options, ...files], this.surroundings()));
    try {
      return JSON.parse(readFileSync(path, 'utf8')) as Report;
    } catch {
      return null;
    }
  }

  private surroundings() {
    return {
      cwd: this.folder,
      stdio: 'ignore',
      timeout: LONGEST_RUN_MS,
      env: { ...process.env, TZ: 'UTC' },
    } as const;
  }

  private ended(child: ChildProcess): Promise<void> {
    this.running = child;
    return new Promise((resolve, reject) => {
      child.on('error', reject);
      child.on('close', () => {
        this.running = null;
        resolve();
      });
    });
  }

  /** Stops what runs in it, and deletes it. */
  remove(): void {
    this.running?.kill();
    rmSync(this.folder, { recursive: true, force: true });
  }
}
