import { open, rm } from 'node:fs/promises';
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
      await moveOver(sibling, path);
    }
  } catch (error) {
    for (const { sibling } of ready) await rm(sibling, { force: true }).catch(() => undefined);
    throw writeProblem(error, at);
  }
}
