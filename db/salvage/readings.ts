import { readFile } from 'node:fs/promises';
import { makeLayout } from '../layout/layout.ts';
import { openInMemory } from '../read.ts';
import { Store } from '../store/store.ts';
import { pageOneOf } from './page-one.ts';

/** Ways to read a damaged file, the plainest first; each an open store in memory. */
export async function* readings(path: string): AsyncGenerator<Store> {
  const plain = await openInMemory(path).catch(() => null);
  if (plain) yield plain;
  const bytes = await readFile(path);
  // Where the first page is broken nothing else can be found, although the rest may be whole: every file
  // of a layout has its tables begin on the same pages, so a fresh one's first page leads to them.
  const mended = pageOneOf(fresh(), bytes);
  if (!mended) return;
  const store = await Promise.resolve()
    .then(() => Store.ofBytes(mended))
    .catch(() => null);
  if (store) yield store;
}

let freshBytes: Uint8Array | null = null;

/** The bytes of a file with its layout and nothing else. */
function fresh(): Uint8Array {
  if (!freshBytes) {
    const store = Store.inMemory();
    try {
      makeLayout(store);
      freshBytes = store.bytes();
    } finally {
      store.close();
    }
  }
  return freshBytes;
}
