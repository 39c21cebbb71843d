import { z } from 'zod';
import { Problem } from '../../solver/problem/problem.ts';
import { readRecord, writeRecord } from './record.ts';

const FILE = 'preferences.json';
const MOST = 512 * 1024;
const schema = z.record(z.string(), z.json());
export type Preferences = z.infer<typeof schema>;

export async function preferences(folder: string): Promise<Preferences> {
  return await readRecord(folder, FILE, schema, {});
}

/** Sets those named; null takes one away. Returns all. */
export async function setPreferences(folder: string, patch: Preferences): Promise<Preferences> {
  const all = { ...(await preferences(folder)) };
  for (const [key, value] of Object.entries(patch)) {
    if (value === null) delete all[key];
    else all[key] = value;
  }
  if (JSON.stringify(all).length > MOST)
    throw new Problem('too-many', 'The preferences are larger than 512 kB.', '', 'Keep less in them.');
  await writeRecord(folder, FILE, all);
  return all;
}
