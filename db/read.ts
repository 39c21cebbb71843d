import { copyFile, mkdtemp, open, readFile, rm, stat } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Chip } from '../solver/chip/chip.ts';
import { Problem } from '../solver/problem/problem.ts';
import { type Content, checkStructure, readContent } from './check/content.ts';
import { Damage } from './check/damage.ts';
import { kindOfFile, migrate } from './layout/layout.ts';
import { VERSION } from './layout/tables.ts';
import { stepAsync } from './seam.ts';
import { Store } from './store/store.ts';
import { projectProblem } from './words.ts';

/** Bytes that a project file may have; a larger one is refused unread. */
const MOST_BYTES = 1024 * 1024 * 1024;

/** Checks what can be checked without opening: that it is a file, of this program, not newer. */
export async function checkedVersion(path: string): Promise<number> {
  const there = await stat(path).catch(() => null);
  if (!there)
    throw new Problem(
      'not-readable',
      'There is no such file, or it cannot be reached.',
      path,
      'Check where it is.',
    );
  if (!there.isFile())
    throw new Problem('not-readable', 'This is not a file.', path, 'Choose a project file (.chw).');
  if (there.size > MOST_BYTES)
    throw new Problem('too-many', 'The file is larger than 1 GB.', path, 'Open a smaller one.');
  const kind = kindOfFile(await firstBytes(path));
  if (kind.kind === 'empty')
    throw new Problem('project', 'The file is empty.', path, 'Go back to a backup, if this was a project.');
  if (kind.kind === 'foreign')
    throw new Problem(
      'project',
      'This is no Channelwright project.',
      path,
      'Choose a file that ends in .chw.',
    );
  if (kind.version > VERSION)
    throw new Problem(
      'project',
      `The project was made by a newer version of the program (project format ${kind.version}; this one knows up to ${VERSION}).`,
      path,
      'Install the newer version; the file is untouched.',
    );
  return kind.version;
}

async function firstBytes(path: string): Promise<Uint8Array> {
  const file = await open(path, 'r').catch(() => {
    throw new Problem('not-readable', 'The file cannot be read.', path, 'Check that it is yours to read.');
  });
  try {
    const head = Buffer.alloc(100);
    const { bytesRead } = await file.read(head, 0, 100, 0);
    return head.subarray(0, bytesRead);
  } finally {
    await file.close();
  }
}

/** Whether steps lie beside the file that are not in it yet. */
export async function hasLog(path: string): Promise<boolean> {
  const log = await stat(`${path}-wal`).catch(() => null);
  return log !== null && log.size > 0;
}

/**
 * The file as it stands, opened in memory: whatever is done to it, nothing changes on disk, and
 * whoever has it open is not disturbed. Steps beside the file are taken in by way of a copy.
 */
export async function openInMemory(path: string): Promise<Store> {
  if (!(await hasLog(path))) return Store.ofBytes(await stepAsync('read file', () => readFile(path)));
  const folder = await mkdtemp(join(tmpdir(), 'channelwright-'));
  try {
    const copy = join(folder, 'copy.chw');
    await copyFile(path, copy);
    await copyFile(`${path}-wal`, `${copy}-wal`);
    const store = Store.open(copy, 'write');
    try {
      store.pragma('wal_checkpoint(TRUNCATE)');
    } finally {
      store.close();
    }
    return Store.ofBytes(await readFile(copy));
  } finally {
    await rm(folder, { recursive: true, force: true });
  }
}

/**
 * The content of a store of layout `version`, which is brought up first where it is older. Throws
 * `Damage` where it is not whole, a `Problem` where it is whole and makes no chip; failures of the disk
 * pass as they are.
 */
export function contentOf(store: Store, version: number): Content {
  try {
    checkStructure(store, version);
    if (version < VERSION) migrate(store, version);
    return readContent(store);
  } catch (error) {
    if (error instanceof Damage) throw error;
    if (error instanceof Problem) throw unusable(error);
    if (isOfTheDisk(error)) throw error;
    throw new Damage(['it cannot be read to its end']);
  }
}

/** A file that is as it was written, but by something that is not this program. */
function unusable({ what, where }: Problem): Problem {
  const place = where ? ` (${where})` : '';
  return new Problem(
    'project',
    `What the project holds cannot be used${place}: ${what}`,
    '',
    'Go back to a backup, or to where the file came from.',
  );
}

/** Whether a failure says something of the disk or of other programs, and nothing of the file's content. */
export function isOfTheDisk(error: unknown): boolean {
  const code = String((error as { code?: unknown }).code ?? '');
  if (code.startsWith('SQLITE_'))
    return !/^SQLITE_(CORRUPT|NOTADB|ERROR|SCHEMA|FORMAT|CONSTRAINT|TOOBIG|RANGE|MISMATCH)/.test(code);
  return /^E[A-Z0-9]+$/.test(code) && !code.startsWith('ERR');
}

export function damagedProblem(damage: Damage, path: string): Problem {
  return new Problem(
    'project',
    `The project file is damaged: ${damage.reasons.join('; ')}. It is left as it is.`,
    path,
    'Open it in the program: what can be read is recovered into a new file. Or go back to a backup.',
  );
}

/** The chip of a project file as it stands, for reading only: the file and its folder are not written to. */
export async function readProjectChip(path: string): Promise<Chip> {
  const version = await checkedVersion(path);
  try {
    const store = await openInMemory(path);
    try {
      return contentOf(store, version).chip;
    } finally {
      store.close();
    }
  } catch (error) {
    if (error instanceof Problem) throw error;
    if (isOfTheDisk(error)) throw projectProblem(error, path);
    throw damagedProblem(error instanceof Damage ? error : new Damage(['it cannot be opened']), path);
  }
}
