const query = typeof matchMedia === 'function' ? matchMedia('(prefers-reduced-motion: reduce)') : null;

/** Whether the system lets things move. */
export const motionAllowed = (): boolean => !query?.matches;

/** Calls `listener` when that changes; returns how to stop. */
export function onMotion(listener: () => void): () => void {
  query?.addEventListener('change', listener);
  return () => query?.removeEventListener('change', listener);
}
