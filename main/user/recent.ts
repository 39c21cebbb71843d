import { access } from 'node:fs/promises';
import { basename } from 'node:path';
import { z } from 'zod';
import { readRecord, writeRecord } from './record.ts';

const FILE = 'recent.json';
const MOST = 20;
const schema = z.array(z.object({ path: z.string(), opened: z.number() }));

export interface Recent {
  readonly path: string;
  readonly name: string;
  readonly opened: number;
  /** Whether the file is where it was. */
  readonly there: boolean;
}

/** Projects opened last, newest first. */
export async function listRecent(folder: string): Promise<Recent[]> {
  const all = await readRecord(folder, FILE, schema, []);
  return await Promise.all(
    all.map(async ({ path, opened }) => ({
      path,
      name: basename(path),
      opened,
      there: await access(path).then(
        () => true,
        () => false,
      ),
    })),
  );
}

export async function noteRecent(folder: string, path: string): Promise<void> {
  const all = await readRecord(folder, FILE, schema, []);
  const rest = all.filter((entry) => entry.path !== path);
  await writeRecord(folder, FILE, [{ path, opened: Date.now() }, ...rest].slice(0, MOST));
}

export async function forgetRecent(folder: string, path: string): Promise<void> {
  const all = await readRecord(folder, FILE, schema, []);
  await writeRecord(
    folder,
    FILE,
    all.filter((entry) => entry.path !== path),
  );
}
