/** A wish of the person's system that the page follows. */
export interface Wish {
  /** As it was told last. */
  holds(): boolean;
  /** Calls `listener` after every change; returns how to stop. */
  listen(listener: () => void): () => void;
}

/**
 * Follows a media query. Who reads `matches` of a list that listens may take its change away from it: where that
 * happens between the change and the frame that would tell of it, as it does in what draws every frame, no event
 * comes. So it is read once, and then only told.
 */
export function wish(query: string): Wish {
  const list = typeof matchMedia === 'function' ? matchMedia(query) : null;
  let held = list?.matches ?? false;
  const listeners = new Set<() => void>();
  list?.addEventListener('change', (event) => {
    held = event.matches;
    for (const listener of [...listeners]) listener();
  });
  return {
    holds: () => held,
    listen(listener) {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
  };
}
