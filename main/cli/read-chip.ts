import { open } from 'node:fs/promises';
import { basename, extname } from 'node:path';
import { BOUNDS } from '../../solver/chip/bounds.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { Problem } from '../../solver/problem/problem.ts';

/** What every SQLite file, and so every project, begins with. */
const PROJECT_MARK = 'SQLite format 3\0';

/** A character of a description takes at most three bytes of UTF-8 per unit counted. */
const MOST_BYTES = BOUNDS.text * 3;

async function bytesOf(path: string): Promise<Buffer | 'project'> {
  const unreadable = (what: string, remedy: string): Problem => new Problem('not-readable', what, '', remedy);
  try {
    const file = await open(path, 'r');
    try {
      const there = await file.stat();
      if (!there.isFile())
        throw unreadable('This is not a file.', 'Name a chip description or a project file.');
      const mark = Buffer.alloc(PROJECT_MARK.length);
      await file.read(mark, 0, mark.length, 0);
      if (mark.toString('latin1') === PROJECT_MARK) return 'project';
      if (there.size > MOST_BYTES) {
        throw new Problem(
          'too-many',
          `The file has ${there.size.toLocaleString('en')} bytes, more than any description.`,
          '',
          'Check that it is the right file.',
        );
      }
      return await file.readFile();
    } finally {
      await file.close();
    }
  } catch (error) {
    if (error instanceof Problem) throw error;
    const { code } = error as NodeJS.ErrnoException;
    if (code === 'ENOENT' || code === 'ENOTDIR')
      throw unreadable('There is no such file.', 'Check the path.');
    if (code === 'EISDIR')
      throw unreadable('This is a folder.', 'Name a chip description or a project file.');
    throw unreadable('The file cannot be read.', 'Check that it is yours to read.');
  }
}

/** The chip of a description or of a project file, told apart by how the file begins. Throws `Problem`. */
export async function readChipFile(path: string): Promise<Chip> {
  const bytes = await bytesOf(path);
  if (bytes === 'project') {
    const { readProjectChip } = await import('../../db/read.ts');
    return await readProjectChip(path);
  }
  let text: string;
  try {
    text = new TextDecoder('utf-8', { fatal: true, ignoreBOM: true }).decode(bytes);
  } catch {
    throw new Problem(
      'not-readable',
      'The file is not text in UTF-8.',
      '',
      'Save it as UTF-8, or check that it is a chip description.',
    );
  }
  return readDescription(text, basename(path, extname(path)));
}
