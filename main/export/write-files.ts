import { constants } from 'node:fs';
import { copyFile, link, open, rm, stat } from 'node:fs/promises';
import { moveOver, siblingOf, writeProblem } from '../../db/place/replace.ts';

export interface Output {
  readonly path: string;
  readonly content: string | Uint8Array;
}

/**
 * Writes several files as one act: each whole beside its place and flushed to the disk first, and only
 * then all moved there. Where one can't be written none is, and what was there before is untouched.
 */
export async function writeFiles(outputs: readonly Output[]): Promise<void> {
  const ready: { readonly sibling: string; readonly path: string }[] = [];
  const moved: { readonly path: string; readonly before: string | null }[] = [];
  const spare: string[] = [];
  let at = '';
  try {
    for (const { path, content } of outputs) {
      at = path;
      const sibling = siblingOf(path);
      const file = await open(sibling, 'wx');
      ready.push({ sibling, path });
      try {
        await file.writeFile(content);
        await file.sync();
      } finally {
        await file.close();
      }
    }
    for (const { sibling, path } of ready) {
      at = path;
      const before = outputs.length > 1 ? await kept(path) : null;
      if (before !== null) spare.push(before);
      await moveOver(sibling, path);
      moved.push({ path, before });
    }
  } catch (error) {
    for (const { path, before } of moved.reverse()) {
      const back = before === null ? rm(path, { force: true }) : moveOver(before, path);
      await back.catch(() => undefined);
    }
    for (const { sibling } of ready) await rm(sibling, { force: true }).catch(() => undefined);
    throw writeProblem(error, at);
  } finally {
    for (const name of spare) await rm(name, { force: true }).catch(() => undefined);
  }
}

/** A second name for the file at `path`, to go back to; null where there is none. */
async function kept(path: string): Promise<string | null> {
  const there = await stat(path).catch(() => null);
  if (!there) return null;
  if (there.isDirectory()) throw Object.assign(new Error('a folder'), { code: 'EISDIR' });
  const name = siblingOf(path);
  // file systems without hard links
  await link(path, name).catch(() => copyFile(path, name, constants.COPYFILE_EXCL));
  return name;
}
