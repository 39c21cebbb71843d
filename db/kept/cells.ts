import { sameBytes, sha256Of } from '../store/hash.ts';
import type { Row, Store } from '../store/store.ts';

/** Bytes of solved cells and sections that one project keeps. */
export const MOST_CELL_BYTES = 64 * 1024 * 1024;
const MOST_ONE = 16 * 1024 * 1024;

export interface CellEntry {
  readonly key: string;
  readonly bytes: Uint8Array;
}

function cellHash(key: string, body: Uint8Array): Uint8Array {
  return sha256Of(key, body);
}

export function cellIsWhole(row: Row): boolean {
  const { key, body, hash } = row;
  return typeof key === 'string' && body instanceof Uint8Array && sameBytes(hash, cellHash(key, body));
}

/**
 * Solved cells and sections by key. What was used is noted in memory and written with the next entry,
 * so that looking up costs no commit.
 */
export class Cells {
  readonly #store: Store;
  readonly #writable: boolean;
  readonly #used = new Set<string>();
  #bytes: number | null = null;
  #clock: number | null = null;

  constructor(store: Store, writable: boolean) {
    this.#store = store;
    this.#writable = writable;
  }

  /** Those found and whole. */
  get(keys: readonly string[]): CellEntry[] {
    const found: CellEntry[] = [];
    for (const key of keys) {
      const row = this.#store.get('SELECT key, body, hash FROM cell WHERE key = ?', key);
      if (!row || !cellIsWhole(row)) continue;
      found.push({ key, bytes: row.body as Uint8Array });
      this.#used.add(key);
    }
    return found;
  }

  put(entries: readonly CellEntry[]): void {
    if (!this.#writable) return;
    const fit = entries.filter((entry) => entry.bytes.length <= MOST_ONE);
    this.#store.transaction(() => {
      const now = this.#tick();
      for (const key of this.#used) this.#store.run('UPDATE cell SET used = ? WHERE key = ?', now, key);
      for (const { key, bytes } of fit) {
        this.#store.run(
          'INSERT INTO cell (key, used, body, hash) VALUES (?, ?, ?, ?) ON CONFLICT (key) DO UPDATE SET used = excluded.used, body = excluded.body, hash = excluded.hash',
          key,
          now,
          bytes,
          cellHash(key, bytes),
        );
      }
      const added = fit.reduce((sum, entry) => sum + entry.bytes.length, 0);
      if (this.#bytes === null || this.#bytes + added > MOST_CELL_BYTES) this.#bytes = this.#trim();
      else this.#bytes += added;
    });
    this.#used.clear();
  }

  #tick(): number {
    this.#clock ??= Number(this.#store.get('SELECT coalesce(max(used), 0) AS used FROM cell')?.used);
    this.#clock += 1;
    return this.#clock;
  }

  /** Takes away those longest unused until a quarter is free again, where they are too many; returns what stays. */
  #trim(): number {
    const rows = this.#store.all('SELECT key, octet_length(body) AS size FROM cell ORDER BY used DESC');
    let bytes = rows.reduce((sum, row) => sum + Number(row.size), 0);
    if (bytes <= MOST_CELL_BYTES) return bytes;
    while (bytes > MOST_CELL_BYTES * 0.75) {
      const row = rows.pop();
      if (!row) break;
      this.#store.run('DELETE FROM cell WHERE key = ?', String(row.key));
      bytes -= Number(row.size);
    }
    return bytes;
  }
}
