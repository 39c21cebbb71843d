import { wish } from './media.ts';
import { FORCED, PALETTES, type Palette, type Scheme } from './tokens.ts';

/** What the person chose: the system's own light or dark, or one of them always. */
export type SchemeChoice = 'system' | Scheme;

const dark = wish('(prefers-color-scheme: dark)');
/** Colours that the person's system imposes on every page. */
const forced = wish('(forced-colors: active)');
let choice: SchemeChoice = 'system';
const listeners = new Set<() => void>();

export const scheme = (): Scheme => (choice === 'system' ? (dark.holds() ? 'dark' : 'light') : choice);
export const palette = (): Palette => (forced.holds() ? FORCED : PALETTES[scheme()]);

/**
 * The palette as plain colours, for what reads colours by itself and knows no names that the system gives:
 * plots.
 */
export function plainPalette(): Palette {
  const named = palette();
  if (!forced.holds()) return named;
  const probe = document.createElement('span');
  probe.style.setProperty('forced-color-adjust', 'none');
  document.body.append(probe);
  const plain = Object.fromEntries(
    Object.entries(named).map(([name, colour]) => {
      probe.style.color = colour;
      return [name, getComputedStyle(probe).color];
    }),
  );
  probe.remove();
  return plain as unknown as Palette;
}

function apply(): void {
  const root = document.documentElement;
  for (const [name, colour] of Object.entries(palette())) root.style.setProperty(`--${name}`, colour);
  root.style.setProperty('color-scheme', scheme());
  for (const listener of listeners) listener();
}

/** Puts the palette on the page and keeps it in step with the system. */
export function startTheme(): void {
  dark.listen(apply);
  forced.listen(apply);
  apply();
}

export function chooseScheme(next: SchemeChoice): void {
  choice = next;
  apply();
}

/** Calls `listener` after every change; returns how to stop. */
export function onTheme(listener: () => void): () => void {
  listeners.add(listener);
  return () => listeners.delete(listener);
}
