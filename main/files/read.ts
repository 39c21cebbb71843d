import { open, stat } from 'node:fs/promises';
import { Problem } from '../../solver/problem/problem.ts';

/** Bytes of a file to import. */
const MOST = 64 * 1024 * 1024;

/** The bytes of an ordinary file of bearable size. */
export async function readBytes(path: string): Promise<Uint8Array> {
  const gone = (): never => {
    throw new Problem(
      'not-readable',
      'This file cannot be read.',
      path,
      'Check that it is there and yours to read.',
    );
  };
  const there = await stat(path).catch(gone);
  if (!there.isFile()) gone();
  if (there.size > MOST)
    throw new Problem('too-many', 'This file is larger than 64 MB.', path, 'Give a smaller one.');
  const file = await open(path, 'r').catch(gone);
  try {
    return new Uint8Array(await file.readFile());
  } finally {
    await file.close();
  }
}

/** The text of such a file. */
export async function readText(path: string): Promise<string> {
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(await readBytes(path));
  } catch (error) {
    if (error instanceof Problem) throw error;
    throw new Problem(
      'not-readable',
      'This file is not text.',
      path,
      'Choose a project (.chw) or a chip description (.json).',
    );
  }
}
