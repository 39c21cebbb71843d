import { rm } from 'node:fs/promises';
import { readProjectChip } from '../read.ts';
import { moveOver, moveToFree, removeLeftovers, siblingOf, syncFile, writeProblem } from './replace.ts';

/** What can write a whole copy of itself. */
export interface Source {
  backup(path: string): Promise<void>;
}

/** Writes a whole copy of a project to `path`, checked before it takes the place of what was there. */
export async function copyOut(source: Source, path: string, replace: boolean): Promise<void> {
  await removeLeftovers(path);
  const sibling = siblingOf(path);
  try {
    await source.backup(sibling);
    await readProjectChip(sibling);
    await syncFile(sibling);
    if (replace) {
      await removeLogs(path);
      await moveOver(sibling, path);
    } else {
      await moveToFree(sibling, path);
    }
  } catch (error) {
    throw writeProblem(error, path);
  } finally {
    await removeFile(sibling);
  }
}

/** A log left beside a file that goes would be taken for the new one's. */
async function removeLogs(path: string): Promise<void> {
  for (const side of ['-wal', '-shm']) await rm(`${path}${side}`, { force: true });
}

/** Takes a file of ours away with what lies beside it. */
export async function removeFile(path: string): Promise<void> {
  for (const side of ['', '-wal', '-shm', '-journal'])
    await rm(`${path}${side}`, { force: true }).catch(() => undefined);
}
