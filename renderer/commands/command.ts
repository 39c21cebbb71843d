import type { Ref } from '../state/ref.ts';

/** One thing the program can do, with its key. */
export interface Command {
  /** Kept with a person's own keys: never changed once given. */
  readonly id: string;
  readonly title: string;
  /** Keys it has at first, as `keyText` writes them; the first is the one shown. */
  readonly keys: readonly string[];
  /** A short help, in place. */
  readonly help: string;
  readonly group: 'Draw' | 'Change' | 'Show' | 'Chip' | 'Program';
  /** Null where it can be done now, else why not. */
  why?(): string | null;
  run(): void | Promise<void>;
}

export interface Commands {
  readonly all: readonly Command[];
  byId(id: string): Command;
  run(id: string): void;
  /** The command of a key as pressed, null where there is none. */
  forKey(key: string): Command | null;
  /** The key shown for a command, '' where it has none. */
  keyOf(id: string): string;
  /** Brings a place on the chip into view and chooses it. */
  show(ref: Ref): void;
}

/** How a pressed key is written: "Ctrl+Shift+z", "c", "Delete", "?". */
export function keyText(event: {
  readonly key: string;
  readonly ctrlKey: boolean;
  readonly metaKey: boolean;
  readonly altKey: boolean;
  readonly shiftKey: boolean;
}): string {
  const name = event.key === ' ' ? 'Space' : event.key;
  const single = name.length === 1;
  const parts: string[] = [];
  if (event.ctrlKey || event.metaKey) parts.push('Ctrl');
  if (event.altKey) parts.push('Alt');
  // a sign such as "?" has its shift within it
  if (event.shiftKey && (!single || /\p{L}/u.test(name) || parts.length > 0)) parts.push('Shift');
  parts.push(single ? name.toLowerCase() : name);
  return parts.join('+');
}

/** How a key is shown to people. */
export const keyShown = (key: string): string =>
  key
    .split('+')
    .map((part) => (part.length === 1 ? part.toUpperCase() : part))
    .join('+')
    .replace(/^\+\+$/, '+');
