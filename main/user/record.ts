import { mkdir, readFile } from 'node:fs/promises';
import { join } from 'node:path';
import type { z } from 'zod';
import { replaceFile } from '../../db/place/replace.ts';

/**
 * A small file of the person's own, read afresh at every use (two runs of the program may share it).
 * One that cannot be read counts as empty: preferences are never worth refusing to start for.
 */
export async function readRecord<T>(
  folder: string,
  file: string,
  schema: z.ZodType<T>,
  empty: T,
): Promise<T> {
  try {
    const parsed = schema.safeParse(JSON.parse(await readFile(join(folder, file), 'utf8')));
    return parsed.success ? parsed.data : empty;
  } catch {
    return empty;
  }
}

/** Replaces it whole. */
export async function writeRecord(folder: string, file: string, value: unknown): Promise<void> {
  await mkdir(folder, { recursive: true });
  await replaceFile(join(folder, file), `${JSON.stringify(value, null, 2)}\n`);
}
