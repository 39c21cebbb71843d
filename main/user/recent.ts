import { access } from 'node:fs/promises';
import { basename, dirname } from 'node:path';
import { z } from 'zod';
import { draftFolder } from '../../db/place/drafts.ts';
import { readRecord, writeRecord } from './record.ts';

const FILE = 'recent.json';
const MOST = 20;
const schema = z.array(z.object({ path: z.string(), opened: z.number(), name: z.string().optional() }));

export interface Recent {
  readonly path: string;
  readonly name: string;
  readonly opened: number;
  /** Whether the file is where it was. */
  readonly there: boolean;
  /** Kept in the program's own folder, no place chosen yet. */
  readonly draft: boolean;
}

/** Projects opened last, newest first. */
export async function listRecent(folder: string): Promise<Recent[]> {
  const all = await readRecord(folder, FILE, schema, []);
  return await Promise.all(
    all.map(async ({ path, opened, name }) => ({
      path,
      name: name ?? basename(path),
      opened,
      draft: dirname(path) === draftFolder({ userData: folder }),
      there: await access(path).then(
        () => true,
        () => false,
      ),
    })),
  );
}

/** Puts a project first; `name` is what to call it where its file name says nothing. */
export async function noteRecent(folder: string, path: string, name?: string): Promise<void> {
  const all = await readRecord(folder, FILE, schema, []);
  const rest = all.filter((entry) => entry.path !== path);
  await writeRecord(
    folder,
    FILE,
    [{ path, opened: Date.now(), ...(name === undefined ? {} : { name }) }, ...rest].slice(0, MOST),
  );
}

export async function forgetRecent(folder: string, path: string): Promise<void> {
  const all = await readRecord(folder, FILE, schema, []);
  await writeRecord(
    folder,
    FILE,
    all.filter((entry) => entry.path !== path),
  );
}
