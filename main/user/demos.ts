import { readdir, readFile } from 'node:fs/promises';
import { join } from 'node:path';
import { Problem } from '../../solver/problem/problem.ts';

export interface Demo {
  readonly id: string;
  readonly name: string;
  readonly says: string;
}

const ID = /^[a-z0-9-]{1,80}$/;

function field(value: unknown, key: string): string {
  const found =
    typeof value === 'object' && value !== null ? (value as Record<string, unknown>)[key] : undefined;
  return typeof found === 'string' ? found : '';
}

/** The chip descriptions that come with the program, by file name. */
export async function listDemos(assets: string): Promise<Demo[]> {
  const folder = join(assets, 'demo');
  const names = await readdir(folder).catch(() => []);
  const demos: Demo[] = [];
  for (const file of names.filter((name) => name.endsWith('.json')).sort()) {
    const id = file.slice(0, -'.json'.length);
    if (!ID.test(id)) continue;
    try {
      const description: unknown = JSON.parse(await readFile(join(folder, file), 'utf8'));
      demos.push({ id, name: field(description, 'name') || id, says: field(description, 'note') });
    } catch {
      // A demo that cannot be read is not offered; the test of the demos says so.
    }
  }
  return demos;
}

/** The description of one demo, as text. */
export async function demoText(assets: string, id: string): Promise<string> {
  if (ID.test(id)) {
    const text = await readFile(join(assets, 'demo', `${id}.json`), 'utf8').catch(() => null);
    if (text !== null) return text;
  }
  throw new Problem('not-readable', 'There is no demo of this name.', id, 'Choose one from the list.');
}
