import type { Row, Store } from '../store/store.ts';

/** Most keys that are tried one by one. */
const MOST_TRIED = 400_000;

/** Rows that `sql` yields until it fails, which is the point. */
function rowsUntilFault(store: Store, sql: string, take: (row: Row) => void): boolean {
  try {
    for (const row of store.iterate(sql)) take(row);
    return true;
  } catch {
    return false;
  }
}

/**
 * Every row that can be read of a table with a whole-number key: read from both ends up to where
 * reading fails, then every key between by itself.
 */
export function readableByNumber(store: Store, table: string, key: string, last: number): Map<number, Row> {
  const found = new Map<number, Row>();
  const take = (row: Row): void => {
    const number = row[key];
    if (typeof number === 'number') found.set(number, row);
  };
  const base = `SELECT * FROM ${table} ORDER BY ${key}`;
  if (rowsUntilFault(store, base, take)) return found;
  rowsUntilFault(store, `${base} DESC`, take);
  const top = Math.min(Math.max(last, ...edge(found)), MOST_TRIED);
  for (let number = 1; number <= top; number += 1) {
    if (found.has(number)) continue;
    const row = attempt(() => store.get(`SELECT * FROM ${table} WHERE ${key} = ?`, number));
    if (row) take(row);
  }
  return found;
}

function edge(found: ReadonlyMap<number, unknown>): number[] {
  let most = 0;
  for (const number of found.keys()) most = Math.max(most, number);
  return [most];
}

/** Every row that can be read of the chip's table, by kind and place. */
export function readableParts(
  store: Store,
  kinds: readonly string[],
  most: number,
): Map<string, Map<number, Row>> {
  const found = new Map<string, Map<number, Row>>(kinds.map((kind) => [kind, new Map()]));
  const take = (row: Row): void => {
    if (typeof row.place === 'number') found.get(String(row.kind))?.set(row.place, row);
  };
  const base = 'SELECT * FROM chip ORDER BY kind';
  if (rowsUntilFault(store, `${base}, place`, take)) return found;
  rowsUntilFault(store, `${base} DESC, place DESC`, take);
  for (const kind of kinds) {
    const those = found.get(kind)!;
    for (let place = 0, missing = 0; place < most && missing < 20_000; place += 1) {
      if (those.has(place)) continue;
      const row = attempt(() => store.get('SELECT * FROM chip WHERE kind = ? AND place = ?', kind, place));
      if (row) take(row);
      else missing += 1;
    }
  }
  return found;
}

/** Rows of a table with a text key, from both ends. */
export function readableByText(store: Store, table: string, key: string): Row[] {
  const found = new Map<string, Row>();
  const take = (row: Row): void => {
    found.set(String(row[key]), row);
  };
  const base = `SELECT * FROM ${table} ORDER BY rowid`;
  if (!rowsUntilFault(store, base, take)) rowsUntilFault(store, `${base} DESC`, take);
  return [...found.values()];
}

export function attempt<T>(work: () => T): T | null {
  try {
    return work();
  } catch {
    return null;
  }
}
