import { useSyncExternalStore } from 'react';

/** A value that is replaced, never changed, and those who want to know. */
export interface Store<T> {
  get(): T;
  set(next: T): void;
  /** Replaces some fields. */
  patch(fields: Partial<T>): void;
  subscribe(listener: () => void): () => void;
}

/** A store that can hold what it does not tell yet. */
export interface PatientStore<T> extends Store<T> {
  /** Replaces the value; who wants to know hears of it with `tell`, or with whatever is set next. */
  hold(next: T): void;
  tell(): void;
}

export function createStore<T>(first: T): PatientStore<T> {
  let value = first;
  let held = false;
  const listeners = new Set<() => void>();
  const tell = (): void => {
    held = false;
    for (const listener of [...listeners]) listener();
  };
  const set = (next: T): void => {
    if (Object.is(next, value) && !held) return;
    value = next;
    tell();
  };
  return {
    get: () => value,
    set,
    hold: (next) => {
      held ||= !Object.is(next, value);
      value = next;
    },
    tell: () => {
      if (held) tell();
    },
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
