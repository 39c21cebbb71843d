import { readdirSync, readFileSync } from 'node:fs';
import { dirname, join, relative, resolve } from 'node:path';
import { expect, test } from 'vitest';
import { FREE, type Room, TABLE } from './import-table.ts';

const ROOT = resolve(import.meta.dirname, '../..');
const STATEMENT =
  /^\s*(?:import|export)\b[^'"`]*?from\s*['"]([^'"]+)['"]|^\s*import\s*['"]([^'"]+)['"]|\bimport\(\s*['"]([^'"]+)['"]\s*\)|new URL\(\s*['"](\.[^'"]+\.ts)['"]/gm;

function files(folder: string): string[] {
  return readdirSync(join(ROOT, folder), { withFileTypes: true, recursive: true })
    .filter((entry) => entry.isFile() && /\.(ts|tsx|cts)$/.test(entry.name))
    .map((entry) => relative(ROOT, join(entry.parentPath, entry.name)))
    .filter((file) => !FREE.test(file));
}

function roomOf(file: string): string {
  let room = dirname(file);
  while (!(room in TABLE) && room !== '.') room = dirname(room);
  return room;
}

/** Every import of `text` that the table does not allow for `file`, as readable lines. */
function breaches(file: string, text: string): string[] {
  const name = roomOf(file);
  const room: Room | undefined = TABLE[name];
  if (!room) return [`${file}: no room of the import table holds this file`];
  const allowed = [name, ...room.ours, ...(room.packages ?? []), ...(room.node ? ['node:*'] : [])].join(', ');
  const found: string[] = [];
  for (const match of text.matchAll(STATEMENT)) {
    const target = match[1] ?? match[2] ?? match[3] ?? match[4]!;
    const line = text.slice(0, match.index).split('\n').length;
    let ok: boolean;
    if (target.startsWith('.')) {
      const there = roomOf(relative(ROOT, resolve(ROOT, dirname(file), target)));
      ok = there === name || room.ours.some((owner) => there === owner || there.startsWith(`${owner}/`));
    } else if (target.startsWith('node:')) {
      ok = room.node === true;
    } else {
      ok = (room.packages ?? []).some((owner) => target === owner || target.startsWith(`${owner}/`));
    }
    if (!ok) found.push(`${file}:${line} imports '${target}'; ${name} may import only: ${allowed}`);
  }
  return found;
}

test('imports run downward only, by the import table', () => {
  const all = ['solver', 'db', 'main', 'renderer'].flatMap(files);
  expect(all.length).toBeGreaterThan(0);
  expect(all.flatMap((file) => breaches(file, readFileSync(join(ROOT, file), 'utf8')))).toEqual([]);
});

test('a breach is named by file, line and what is allowed', () => {
  const text = "import { z } from 'zod';\nimport { open } from '../../db/open.ts';\n";
  const [first, second] = breaches('solver/sparse/order.ts', text);
  expect(first).toContain(
    "solver/sparse/order.ts:1 imports 'zod'; solver/sparse may import only: solver/sparse",
  );
  expect(second).toContain('solver/sparse/order.ts:2');
  expect(breaches('db/open.ts', "import fs from 'node:fs';\nimport D from 'better-sqlite3';")).toEqual([]);
  expect(breaches('renderer/a.ts', "import x from '../db/open.ts'")).toHaveLength(1);
  expect(breaches('renderer/a.ts', "const x = await import('../main/jobs/run.ts')")).toHaveLength(1);
});
