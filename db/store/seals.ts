import { sameBytes, sha256Of } from './hash.ts';
import type { Store } from './store.ts';

/** What is sealed. `base`: the step before the first one kept; `journal`, `chip`: as of the last folding. */
export const SEALED = ['about', 'base', 'journal', 'chip', 'result', 'trial'] as const;
export type Sealed = (typeof SEALED)[number];

export interface Seal {
  readonly seq: number;
  readonly rows: number;
  readonly digest: Uint8Array;
}

export function writeSeal(store: Store, what: Sealed, seal: Seal): void {
  store.run(
    'INSERT INTO seal (what, seq, rows, digest) VALUES (?, ?, ?, ?) ON CONFLICT (what) DO UPDATE SET seq = excluded.seq, rows = excluded.rows, digest = excluded.digest',
    what,
    seal.seq,
    seal.rows,
    seal.digest,
  );
}

/** Every seal; null where one is missing, strange or no seal at all. */
export function readSeals(store: Store): Readonly<Record<Sealed, Seal>> | null {
  const found: Partial<Record<Sealed, Seal>> = {};
  for (const row of store.all('SELECT what, seq, rows, digest FROM seal')) {
    const what = SEALED.find((name) => name === row.what);
    const { seq, rows, digest } = row;
    if (!what || typeof seq !== 'number' || typeof rows !== 'number' || !(digest instanceof Uint8Array))
      return null;
    found[what] = { seq, rows, digest };
  }
  return SEALED.every((what) => found[what]) ? (found as Record<Sealed, Seal>) : null;
}

/** The tables whose rows carry their own hash and are sealed as a whole, and the order of their rows. */
const ROWS = {
  result: 'SELECT hash FROM result ORDER BY id',
  trial: 'SELECT hash FROM trial ORDER BY id',
} as const;
export type RowTable = keyof typeof ROWS;

export function sealOfRows(store: Store, table: RowTable): Seal {
  const hashes = store.all(ROWS[table]).map((row) => row.hash as Uint8Array);
  return { seq: 0, rows: hashes.length, digest: sha256Of(Buffer.concat(hashes)) };
}

export function sealOfAbout(store: Store): Seal {
  const rows = store.all('SELECT key, value FROM about ORDER BY key');
  return {
    seq: 0,
    rows: rows.length,
    digest: sha256Of(...rows.flatMap((row) => [String(row.key), String(row.value)])),
  };
}

export function sameSeal(a: Seal, b: Seal): boolean {
  return a.seq === b.seq && a.rows === b.rows && sameBytes(a.digest, b.digest);
}
