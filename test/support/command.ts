import { spawn, spawnSync } from 'node:child_process';
import { existsSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll } from 'vitest';

export const ROOT = fileURLToPath(new URL('../..', import.meta.url));
export const MAIN = join(ROOT, 'dist', 'cli', 'main.js');
export const MARROW_HILL = join(ROOT, 'fixtures', 'marrow-hill');

/** Real magnetograms beside the repository; undefined, with a printed reason, where they are not there. */
export function realData(): string | undefined {
  const folder = process.env.SPOTJOULE_REAL_DATA ?? join(ROOT, '..', 'shared', 'data', 'real');
  if (existsSync(folder)) return folder;
  console.warn(
    'real magnetograms are not here (set SPOTJOULE_REAL_DATA to their folder): tests on them are left out',
  );
  return undefined;
}

export interface Outcome {
  readonly status: number | null;
  readonly stdout: string;
  readonly stderr: string;
}

/** Runs the built command in `folder`. */
export function spotjoule(folder: string, ...args: readonly string[]): Outcome {
  const { status, stdout, stderr } = spawnSync(process.execPath, [MAIN, ...args], {
    cwd: folder,
    encoding: 'utf8',
    env: { ...process.env, FORCE_COLOR: '' },
    maxBuffer: 64 << 20,
    timeout: 50_000,
  });
  return { status, stdout, stderr };
}

/** Starts the built command and gives the running process. */
export function startSpotjoule(folder: string, ...args: readonly string[]) {
  return spawn(process.execPath, [MAIN, ...args], { cwd: folder, stdio: 'ignore' });
}

/** A scratch folder that goes when the test file ends. */
export function scratchFolder(): string {
  const folder = mkdtempSync(join(tmpdir(), 'spotjoule-test-'));
  afterAll(() => rmSync(folder, { recursive: true, force: true }));
  return folder;
}
