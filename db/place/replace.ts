import { constants } from 'node:fs';
import { copyFile, link, open, readdir, rename, rm, stat } from 'node:fs/promises';
import { basename, dirname, join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { Problem } from '../../solver/problem/problem.ts';

/** Other programs (virus scanners, sync clients) may hold a file for a moment. */
const TRIES = 10;
const WITHIN_MS = 2000;
/** No write takes so long. */
const LEFT_MS = 3_600_000;
const BUSY = new Set(['EPERM', 'EACCES', 'EBUSY', 'EEXIST', 'ENOTEMPTY']);

let counter = 0;

/** A name beside `path` that nothing else uses. */
export function siblingOf(path: string): string {
  counter += 1;
  return join(dirname(path), `.${basename(path)}.${process.pid}-${Date.now().toString(36)}-${counter}.new`);
}

/** Takes away what a write of `path` left beside it that was cut off long ago, by a kill or a loss of power. */
export async function removeLeftovers(path: string): Promise<void> {
  const folder = dirname(path);
  const begin = `.${basename(path)}.`;
  for (const name of await readdir(folder).catch(() => [])) {
    if (!name.startsWith(begin) || !name.endsWith('.new')) continue;
    const file = join(folder, name);
    const there = await stat(file).catch(() => null);
    if (there && Date.now() - there.mtimeMs > LEFT_MS) await rm(file, { force: true }).catch(() => undefined);
  }
}

/** Makes what was written to `path` outlast a loss of power. */
export async function syncFile(path: string): Promise<void> {
  const file = await open(path, 'r+');
  try {
    await file.sync();
  } finally {
    await file.close();
  }
}

/** Makes a rename in `folder` outlast a loss of power, where the system can. */
export async function syncFolder(folder: string): Promise<void> {
  if (process.platform === 'win32') return;
  const handle = await open(folder, constants.O_RDONLY).catch(() => null);
  if (!handle) return;
  try {
    await handle.sync();
  } catch {
    // Some file systems cannot sync a folder; the rename itself has been done.
  } finally {
    await handle.close();
  }
}

/** Moves the finished file `from` over `to`, with retries where something holds it. */
export async function moveOver(from: string, to: string): Promise<void> {
  for (let attempt = 1; ; attempt += 1) {
    try {
      await rename(from, to);
      break;
    } catch (error) {
      const code = (error as NodeJS.ErrnoException).code ?? '';
      if (!BUSY.has(code) || attempt === TRIES) throw error;
      await wait(WITHIN_MS / TRIES);
    }
  }
  await syncFolder(dirname(to));
}

/** Moves the finished file `from` to `to`, which must not be there yet. */
export async function moveToFree(from: string, to: string): Promise<void> {
  try {
    await link(from, to);
  } catch (error) {
    const code = (error as NodeJS.ErrnoException).code;
    if (code === 'EEXIST') throw error;
    // File systems without hard links.
    await copyFile(from, to, constants.COPYFILE_EXCL);
    await syncFile(to);
  }
  await rm(from, { force: true });
  await syncFolder(dirname(to));
}

/** Writes `content` as the whole of `path`: a failure at any moment leaves what was there. */
export async function replaceFile(path: string, content: string | Uint8Array, replace = true): Promise<void> {
  await removeLeftovers(path);
  const sibling = siblingOf(path);
  try {
    const file = await open(sibling, 'wx');
    try {
      await file.writeFile(content);
      await file.sync();
    } finally {
      await file.close();
    }
    if (replace) await moveOver(sibling, path);
    else await moveToFree(sibling, path);
  } catch (error) {
    await rm(sibling, { force: true }).catch(() => undefined);
    throw writeProblem(error, path);
  }
}

/** What a failure to write means for the person. */
export function writeProblem(error: unknown, path: string): Problem {
  if (error instanceof Problem) return error;
  const kept = 'What was there before is untouched.';
  switch ((error as NodeJS.ErrnoException).code) {
    case 'EEXIST':
      return new Problem(
        'output',
        'There is a file of this name already.',
        path,
        'Choose another name, or replace it.',
      );
    case 'ENOENT':
    case 'ENOTDIR':
      return new Problem('output', 'The folder is not there.', path, 'Choose a folder that exists.');
    case 'ENOSPC':
    case 'EDQUOT':
      return new Problem(
        'output',
        `There is no room left on the disk. ${kept}`,
        path,
        'Free some space or choose another disk.',
      );
    case 'EROFS':
    case 'EACCES':
    case 'EPERM':
      return new Problem(
        'output',
        `This place cannot be written to. ${kept}`,
        path,
        'Choose another folder.',
      );
    case 'EBUSY':
      return new Problem(
        'output',
        `Another program holds this file. ${kept}`,
        path,
        'Close it there and try again.',
      );
    case 'EISDIR':
      return new Problem('output', 'This is a folder, not a file.', path, 'Give a file name.');
    case 'ENAMETOOLONG':
      return new Problem('output', 'The name is too long for this disk.', path, 'Choose a shorter name.');
    default:
      return new Problem(
        'output',
        `The file could not be written. ${kept}`,
        path,
        'Try again, or choose another place.',
      );
  }
}
