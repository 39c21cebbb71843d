import type { Store } from '../store/store.ts';
import type { Migration } from './tables.ts';
import { APPLICATION_ID, MIGRATIONS } from './tables.ts';

/** Bytes that every file of this engine begins with. */
const MAGIC = 'SQLite format 3\0';

export type Kind =
  | { readonly kind: 'ours'; readonly version: number }
  | { readonly kind: 'foreign' }
  | { readonly kind: 'empty' };

/** What a file is, read from its first 100 bytes alone. */
export function kindOfFile(head: Uint8Array): Kind {
  if (head.length === 0) return { kind: 'empty' };
  const bytes = Buffer.from(head);
  if (bytes.length < 100 || bytes.toString('latin1', 0, 16) !== MAGIC) return { kind: 'foreign' };
  if (bytes.readInt32BE(68) !== APPLICATION_ID) return { kind: 'foreign' };
  const version = bytes.readInt32BE(60);
  return version >= 1 ? { kind: 'ours', version } : { kind: 'foreign' };
}

/** Brings a file from `from` to the newest layout, all in one go or not at all. */
export function migrate(store: Store, from: number, migrations: readonly Migration[] = MIGRATIONS): void {
  store.transaction(() => {
    for (const migration of migrations) {
      if (migration.to <= from) continue;
      for (const statement of migration.statements) store.exec(statement);
    }
    store.pragma(`application_id = ${APPLICATION_ID}`);
    store.pragma(`user_version = ${migrations.length}`);
  });
}

/** Sets up an empty file. */
export function makeLayout(store: Store): void {
  store.pragma('journal_mode = WAL');
  migrate(store, 0);
}

/** What a file of `version` must declare, and nothing else: name to statement. */
export function expectedLayout(version: number): ReadonlyMap<string, string> {
  const expected = new Map<string, string>();
  for (const migration of MIGRATIONS.slice(0, version)) {
    for (const statement of migration.statements) {
      const name = /^CREATE TABLE (\w+) /.exec(statement)?.[1];
      if (name) expected.set(name, statement);
    }
  }
  return expected;
}

/** The names of things in the file that do not belong there or differ; empty where all is as made. */
export function strangeLayout(store: Store, version: number): string[] {
  const expected = new Map(expectedLayout(version));
  const strange: string[] = [];
  for (const row of store.all('SELECT type, name, tbl_name, sql FROM sqlite_schema')) {
    const name = String(row.name);
    if (row.type === 'index' && row.sql === null && name.startsWith('sqlite_autoindex_')) continue;
    if (row.type === 'table' && row.tbl_name === name && expected.get(name) === row.sql)
      expected.delete(name);
    else strange.push(`${String(row.type)} ${name}`);
  }
  return [...strange, ...[...expected.keys()].map((name) => `no ${name}`)];
}
