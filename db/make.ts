import type { Chip } from '../solver/chip/chip.ts';
import { fold } from './journal/fold.ts';
import { append } from './journal/journal.ts';
import { makeLayout } from './layout/layout.ts';
import { NO_HASH } from './store/hash.ts';
import { pack } from './store/pack.ts';
import { sealOfAbout, sealOfRows, writeSeal } from './store/seals.ts';
import { Store } from './store/store.ts';

/** What a file says about itself. */
export interface About {
  /** Version of the program that made it. */
  readonly program: string;
}

/** Writes a new project file holding `chip` at `path`, where nothing is yet; whole and closed on return. */
export function makeFile(path: string, chip: Chip, about: About): void {
  const store = Store.open(path, 'make');
  try {
    makeLayout(store);
    fillFile(store, chip, about);
    store.pragma('wal_checkpoint(TRUNCATE)');
  } finally {
    store.close();
  }
}

/** Puts the first content into a file that has its layout. */
export function fillFile(store: Store, chip: Chip, about: About): void {
  store.transaction(() => {
    store.run('INSERT INTO about (key, value) VALUES (?, ?)', 'made', new Date().toISOString());
    store.run('INSERT INTO about (key, value) VALUES (?, ?)', 'program', about.program);
    writeSeal(store, 'about', sealOfAbout(store));
    writeSeal(store, 'base', { seq: 0, rows: 0, digest: NO_HASH });
    for (const table of ['result', 'trial'] as const) writeSeal(store, table, sealOfRows(store, table));
  });
  const start = {
    seq: 1,
    kind: 'start',
    of: null,
    made: Date.now(),
    label: 'start',
    body: pack(chip),
  } as const;
  const first = append(store, NO_HASH, start);
  fold(store, { chip: null, seq: 0, base: { seq: 0, hash: NO_HASH } }, { chip, seq: 1, hash: first.hash });
}
