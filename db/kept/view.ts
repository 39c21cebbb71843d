import { Problem } from '../../solver/problem/problem.ts';
import { sealOfAbout, writeSeal } from '../store/seals.ts';
import type { Store } from '../store/store.ts';

/** What a window remembers of its view of a chip: JSON, and nothing of it is the chip's. */
export type KeptView = Readonly<Record<string, unknown>>;

const KEY = 'view';
const MOST = 4 * 1024 * 1024;

/** Replaces it whole. It is no step: nothing of it is undone. */
export function keepView(store: Store, view: KeptView): void {
  const text = JSON.stringify(view);
  if (text.length > MOST)
    throw new Problem(
      'too-many',
      'What is to be remembered of the view is larger than 4 MB.',
      '',
      'Lock fewer parts at once.',
    );
  store.transaction(() => {
    store.run(
      'INSERT INTO about (key, value) VALUES (?, ?) ON CONFLICT (key) DO UPDATE SET value = excluded.value',
      KEY,
      text,
    );
    writeSeal(store, 'about', sealOfAbout(store));
  });
}

/** Empty where nothing was kept, or what was kept cannot be read. */
export function findView(store: Store): KeptView {
  const text = store.get('SELECT value FROM about WHERE key = ?', KEY)?.value;
  if (typeof text !== 'string') return {};
  try {
    const view: unknown = JSON.parse(text);
    return typeof view === 'object' && view !== null && !Array.isArray(view) ? { ...view } : {};
  } catch {
    return {};
  }
}
