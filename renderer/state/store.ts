import { useSyncExternalStore } from 'react';

/** A value that is replaced, never changed, and those who want to know. */
export interface Store<T> {
  get(): T;
  set(next: T): void;
  /** Replaces some fields. */
  patch(fields: Partial<T>): void;
  subscribe(listener: () => void): () => void;
}

export function createStore<T>(first: T): Store<T> {
  let value = first;
  const listeners = new Set<() => void>();
  const set = (next: T): void => {
    if (Object.is(next, value)) return;
    value = next;
    for (const listener of [...listeners]) listener();
  };
  return {
    get: () => value,
    set,
    patch: (fields) => set({ ...value, ...fields }),
    subscribe: (listener) => {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
  };
}

/** The value of a store, or what `pick` takes of it, rendered anew when that changes. */
export function useStore<T>(store: Store<T>): T;
export function useStore<T, P>(store: Store<T>, pick: (value: T) => P): P;
export function useStore<T, P>(store: Store<T>, pick?: (value: T) => P): T | P {
  return useSyncExternalStore(store.subscribe, () => (pick ? pick(store.get()) : store.get()));
}
