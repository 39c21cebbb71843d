import { readdir, stat } from 'node:fs/promises';
import { homedir } from 'node:os';
import { basename, dirname, extname, join, resolve } from 'node:path';
import { replaceFile } from '../../db/place/replace.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { readBytes } from '../files/read.ts';
import type { Handlers } from './handlers.ts';

const MOST_LISTED = 5000;

/** A path as the person meant it: "~" is their own folder, and it must be complete. */
export function wholePath(path: string): string {
  const told = path === '~' || path.startsWith('~/') ? join(homedir(), path.slice(1)) : path;
  const absolute = resolve(told);
  if (absolute !== told && !/^([A-Za-z]:)?[\\/]/.test(told))
    throw new Problem('not-readable', 'The path does not begin at a folder.', path, 'Give the whole path.');
  return absolute;
}

function kindOf(name: string): 'project' | 'description' | 'other' {
  const end = extname(name).toLowerCase();
  if (end === '.chw') return 'project';
  return end === '.json' ? 'description' : 'other';
}

async function startFolder(): Promise<string> {
  const documents = join(homedir(), 'Documents');
  const there = await stat(documents).catch(() => null);
  return there?.isDirectory() ? documents : homedir();
}

export const fileRequests: Handlers<'files.list' | 'files.read' | 'files.write'> = {
  'files.list': async (_session, input) => {
    const folder = input.folder === undefined ? await startFolder() : wholePath(input.folder);
    const found = await readdir(folder, { withFileTypes: true }).catch(() => {
      throw new Problem('not-readable', 'This folder cannot be read.', folder, 'Choose another folder.');
    });
    const shown = found
      .filter((entry) => !entry.name.startsWith('.'))
      .sort((a, b) => (a.name < b.name ? -1 : 1));
    const entries = await Promise.all(
      shown.slice(0, MOST_LISTED).map(async (entry) => {
        const path = join(folder, entry.name);
        const there = await stat(path).catch(() => null);
        if (!there || !(there.isFile() || there.isDirectory())) return null;
        const kind = there.isDirectory() ? ('folder' as const) : kindOf(entry.name);
        return { name: entry.name, path, kind, size: there.size, changed: there.mtimeMs };
      }),
    );
    const parent = dirname(folder);
    return {
      folder,
      parent: parent === folder ? null : parent,
      entries: entries.filter((entry) => entry !== null),
      more: shown.length > MOST_LISTED,
    };
  },
  'files.read': async (_session, input) => {
    const path = wholePath(input.path);
    return { name: basename(path), bytes: await readBytes(path) };
  },
  'files.write': async (_session, input) => {
    const path = wholePath(input.path);
    await replaceFile(path, input.content, input.replace === true);
    return { path };
  },
};
