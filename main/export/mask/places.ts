import { stat } from 'node:fs/promises';
import { extname, join } from 'node:path';
import { Problem } from '../../../solver/problem/problem.ts';

const isFolder = async (path: string): Promise<boolean> =>
  (await stat(path).catch(() => null))?.isDirectory() === true;

/**
 * Where the files go that are made for `path`: into it where it is a folder or ends in a separator; a
 * single file to exactly `path`; else `path` without its ending, and what tells the files apart, is
 * each one's name.
 */
export async function placesFor(path: string, names: readonly string[]): Promise<string[]> {
  if (/[\\/]$/.test(path) || (await isFolder(path))) return names.map((name) => join(path, name));
  if (names.length === 1) return [path];
  const stem = path.slice(0, path.length - extname(path).length);
  // names are "<chip>.<what tells it apart>": the chip's name gives way to the one that was chosen
  return names.map((name) => `${stem}${name.slice(name.indexOf('.'))}`);
}

/** Throws where a file is there already. */
export async function checkFree(paths: readonly string[]): Promise<void> {
  for (const path of paths) {
    if ((await stat(path).catch(() => null)) === null) continue;
    throw new Problem(
      'output',
      'There is a file of this name already.',
      path,
      'Choose another name, or replace it.',
    );
  }
}
