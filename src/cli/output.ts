import { randomBytes } from 'node:crypto';
import { existsSync, mkdirSync, renameSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { basename, dirname, join, resolve } from 'node:path';
import { setImmediate } from 'node:timers/promises';
import { DataError } from '../errors.js';

/** What an operating-system error means in plain words. */
function reasonOf(error: unknown): string {
  const { code, message } = error as NodeJS.ErrnoException;
  const known: Record<string, string> = {
    ENOENT: 'there is no such place',
    EACCES: 'permission denied',
    EPERM: 'permission denied',
    EROFS: 'the file system is read-only',
    ENOSPC: 'the disk is full',
    EDQUOT: 'the disk quota is used up',
    EEXIST: 'a file of that name is in the way',
    ENOTDIR: 'a file of that name is in the way',
    EISDIR: 'a directory of that name is in the way',
  };
  return known[code ?? ''] ?? message;
}

/** Makes a folder for results. Throws DataError when that cannot be done. */
export function makeOutputFolder(folder: string): void {
  try {
    // Folder by folder: Node's own recursive mkdir never returns where a parent refuses (as /proc).
    const missing: string[] = [];
    let parent = resolve(folder);
    for (; !existsSync(parent); parent = dirname(parent)) missing.push(parent);
    if (!statSync(parent).isDirectory())
      throw Object.assign(new Error('not a directory'), { code: 'ENOTDIR' });
    for (const path of missing.reverse()) mkdirSync(path);
  } catch (error) {
    throw new DataError(
      `cannot make the output folder: ${reasonOf(error)}`,
      { file: folder },
      error,
    );
  }
}

/**
 * Writes several files as one: each to a temporary name in its own folder, and only when all are
 * there are they renamed. On a fault no temporary file stays behind and files of an earlier run are
 * whole; Ctrl-C in between waits for the last rename. Throws DataError.
 */
export async function writeTogether(
  files: readonly { readonly path: string; readonly content: string | Uint8Array }[],
): Promise<void> {
  const tag = `${process.pid}-${randomBytes(4).toString('hex')}`;
  const pairs = files.map(({ path, content }) => ({
    path,
    content,
    temporary: join(dirname(path), `.${basename(path)}.${tag}.part`),
  }));
  const clean = () => {
    for (const { temporary } of pairs) rmSync(temporary, { force: true });
  };
  // Held back until the files are whole: the handler runs at the pause below.
  const interrupted = () => process.exit(130);
  process.once('SIGINT', interrupted);
  process.once('SIGTERM', interrupted);
  let current = '';
  try {
    for (const { path, content, temporary } of pairs) {
      current = path;
      writeFileSync(temporary, content);
    }
    for (const { path, temporary } of pairs) {
      current = path;
      renameSync(temporary, path);
    }
  } catch (error) {
    clean();
    throw new DataError(`cannot be written: ${reasonOf(error)}`, { file: current }, error);
  } finally {
    await setImmediate();
    process.removeListener('SIGINT', interrupted);
    process.removeListener('SIGTERM', interrupted);
  }
}
