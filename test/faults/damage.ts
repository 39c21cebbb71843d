import type { Content } from '../../db/check/content.ts';
import { Damage } from '../../db/check/damage.ts';
import { canonical } from '../../db/chip/canonical.ts';
import { kindOfFile } from '../../db/layout/layout.ts';
import { VERSION } from '../../db/layout/tables.ts';
import { contentOf } from '../../db/read.ts';
import { Store } from '../../db/store/store.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { random, whole } from './random.ts';

const PAGE = 4096;

export type Harm = 'flip' | 'cut' | 'swap';

/** The bytes of a file harmed in one way at a random place, and what was done. */
export function harmed(
  bytes: Uint8Array,
  harm: Harm,
  next: () => number,
): { bytes: Uint8Array; what: string } {
  const copy = Buffer.from(bytes);
  const pages = Math.floor(copy.length / PAGE);
  if (harm === 'flip') {
    const at = whole(next, copy.length);
    const bit = whole(next, 8);
    copy[at] = copy[at]! ^ (1 << bit);
    return { bytes: copy, what: `bit ${bit} of byte ${at}` };
  }
  if (harm === 'cut') {
    const length = whole(next, copy.length);
    return { bytes: copy.subarray(0, length), what: `cut to ${length}` };
  }
  const a = whole(next, pages);
  const b = whole(next, pages);
  const page = Buffer.from(copy.subarray(a * PAGE, (a + 1) * PAGE));
  copy.copy(copy, a * PAGE, b * PAGE, (b + 1) * PAGE);
  page.copy(copy, b * PAGE);
  return { bytes: copy, what: `pages ${a} and ${b} swapped` };
}

export type Verdict = 'refused' | 'damaged' | 'whole';

/** What opening such bytes comes to, and the content where they open as whole. Throws on anything else. */
export function opening(bytes: Uint8Array): { verdict: Verdict; store?: Store; content?: Content } {
  const kind = kindOfFile(bytes.subarray(0, 100));
  if (kind.kind !== 'ours' || kind.version > VERSION) return { verdict: 'refused' };
  let store: Store;
  try {
    store = Store.ofBytes(bytes);
  } catch {
    return { verdict: 'damaged' };
  }
  try {
    return { verdict: 'whole', store, content: contentOf(store, kind.version) };
  } catch (error) {
    store.close();
    if (error instanceof Damage) return { verdict: 'damaged' };
    if (error instanceof Problem) return { verdict: 'refused' };
    throw error;
  }
}

/** Everything a file holds, as text to compare. */
export function everything(store: Store, content: Content): string {
  const rows = (sql: string): string => JSON.stringify(store.all(sql));
  return [
    canonical(content.chip),
    JSON.stringify([content.seq, content.stacks.done, content.stacks.undone]),
    rows('SELECT * FROM about ORDER BY key'),
    rows('SELECT * FROM journal ORDER BY seq'),
    rows('SELECT * FROM result ORDER BY id'),
    rows('SELECT * FROM trial ORDER BY id'),
    rows('SELECT key, body, hash FROM cell ORDER BY key'),
  ].join('\n');
}

export interface DamageCount {
  /** Files that did not open as whole with their content as it was. */
  found: number;
  /** Files that opened as whole although their content had changed. */
  missed: number;
  /** Harm that changed nothing that is content. */
  harmless: number;
  readonly misses: string[];
}

/** Harms copies of a file `times` times and counts what opening finds. */
export function harmMany(bytes: Uint8Array, times: number, seed: number): DamageCount {
  const before = opening(bytes);
  if (!before.store || !before.content) throw new Error('the file to harm is not whole');
  const original = everything(before.store, before.content);
  before.store.close();
  const count: DamageCount = { found: 0, missed: 0, harmless: 0, misses: [] };
  const next = random(seed);
  for (let time = 0; time < times; time += 1) {
    const harm: Harm = time % 10 === 8 ? 'cut' : time % 10 === 9 ? 'swap' : 'flip';
    const { bytes: bad, what } = harmed(bytes, harm, next);
    const after = opening(bad);
    if (!after.store || !after.content) {
      count.found += 1;
      continue;
    }
    if (everything(after.store, after.content) === original) count.harmless += 1;
    else {
      count.missed += 1;
      count.misses.push(what);
    }
    after.store.close();
  }
  return count;
}
