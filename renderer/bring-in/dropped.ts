import type { Desk } from '../state/desk.ts';

/** A drawing that was dropped on the page, until the panel takes it. */
const WAITING = new WeakMap<Desk, File>();

export const isDrawing = (name: string): boolean => /\.(dxf|svg|gds|gds2|gdsii)$/i.test(name);

/** Keeps a dropped drawing for the panel and shows it; a panel that is open already is shown anew. */
export function showDropped(desk: Desk, file: File): void {
  WAITING.set(desk, file);
  desk.view.patch({ panel: 'card' });
  // The next turn: a panel that is there goes and comes back, and takes the file.
  setTimeout(() => desk.view.patch({ panel: 'bring in' }));
}

export function takeWaiting(desk: Desk): File | null {
  const file = WAITING.get(desk) ?? null;
  WAITING.delete(desk);
  return file;
}
