import type { Chip } from '../../solver/chip/chip.ts';
import { chipHash, differences, LIST_KINDS, listOf } from '../chip/parts.ts';
import { writeSeal } from '../store/seals.ts';
import type { Store } from '../store/store.ts';

/** Steps that can always be undone, and from how many on the oldest are let go. */
export const LEAST_STEPS = 10_000;
export const MOST_STEPS = 20_000;

/** What the chip's own rows hold, and the step before the first one kept. */
export interface Folded {
  readonly chip: Chip | null;
  readonly seq: number;
  readonly base: { readonly seq: number; readonly hash: Uint8Array };
}

/** Writes the chip as it stands into its rows, all in one go, and lets steps go that are beyond the bound. */
export function fold(
  store: Store,
  before: Folded,
  now: { readonly chip: Chip; readonly seq: number; readonly hash: Uint8Array },
): Folded & { readonly chip: Chip } {
  return store.transaction(() => {
    writeChip(store, before.chip, now.chip);
    const rows = 1 + LIST_KINDS.reduce((sum, kind) => sum + listOf(now.chip, kind).length, 0);
    writeSeal(store, 'chip', { seq: now.seq, rows, digest: chipHash(now.chip) });
    writeSeal(store, 'journal', { seq: now.seq, rows: 0, digest: now.hash });
    const base = letGo(store, before.base, now.seq);
    return { chip: now.chip, seq: now.seq, base };
  });
}

function writeChip(store: Store, before: Chip | null, after: Chip): void {
  const { write, gone } = differences(before, after);
  for (const part of write) {
    store.run(
      'INSERT INTO chip (kind, place, body, hash) VALUES (?, ?, ?, ?) ON CONFLICT (kind, place) DO UPDATE SET body = excluded.body, hash = excluded.hash',
      part.kind,
      part.place,
      part.body,
      part.hash,
    );
  }
  for (const { kind, from } of gone) store.run('DELETE FROM chip WHERE kind = ? AND place >= ?', kind, from);
}

/** Drops the oldest steps where there are too many, never one that a kept undo or redo names. */
function letGo(store: Store, base: Folded['base'], seq: number): Folded['base'] {
  if (seq - base.seq <= MOST_STEPS) return base;
  let first = seq - LEAST_STEPS + 1;
  for (;;) {
    const named = store.get('SELECT min(of) AS of FROM journal WHERE seq >= ?', first)?.of;
    if (typeof named !== 'number' || named >= first) break;
    first = named;
  }
  if (first <= base.seq + 1) return base;
  const hash = store.get('SELECT hash FROM journal WHERE seq = ?', first - 1)?.hash as Uint8Array;
  store.run('DELETE FROM journal WHERE seq < ?', first);
  writeSeal(store, 'base', { seq: first - 1, rows: 0, digest: hash });
  return { seq: first - 1, hash };
}
