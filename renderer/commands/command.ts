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
  /** It goes on while its key is held down. */
  readonly repeats?: true;
  /** What it would be done to, read after the title: "Undo: widen 3 channels". */
  of?(): string | null;
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

/** What of a pressed key says which one it is. */
export interface Pressed {
  readonly key: string;
  /** Where the key lies, whatever the layout writes on it: "KeyC", "Digit1". */
  readonly code?: string;
  readonly ctrlKey: boolean;
  readonly metaKey: boolean;
  readonly altKey: boolean;
  readonly shiftKey: boolean;
  getModifierState?(name: string): boolean;
}

/** How a pressed key is written: "Ctrl+Shift+z", "c", "Delete", "?". */
export function keyText(event: Pressed): string {
  const name = event.key === ' ' ? 'Space' : event.key;
  const single = name.length === 1;
  const parts: string[] = [];
  // the key for third signs comes as Ctrl and Alt together: what it writes is a sign of its own
  const third = single && event.getModifierState?.('AltGraph') === true;
  if ((event.ctrlKey || event.metaKey) && !third) parts.push('Ctrl');
  if (event.altKey && !third) parts.push('Alt');
  // a sign such as "?" has its shift within it
  if (event.shiftKey && (!single || /\p{L}/u.test(name) || parts.length > 0)) parts.push('Shift');
  parts.push(single ? name.toLowerCase() : name);
  return parts.join('+');
}

/**
 * The key as a layout of Latin letters would write it, by where it lies: for letters of another script, and
 * for digits that a layout has with Shift alone. Null where the layout's own sign says enough.
 */
export function latinKeyText(event: Pressed): string | null {
  const { key, code = '' } = event;
  if (key.length !== 1) return null;
  const digit = /^Digit(\d)$/.exec(code)?.[1];
  if (digit && !/\d/.test(key)) return keyText({ ...plain(event), key: digit, shiftKey: false });
  const letter = /^Key([A-Z])$/.exec(code)?.[1];
  // signs of other scripts are beyond the first 128
  return letter && key.codePointAt(0)! > 127 ? keyText({ ...plain(event), key: letter.toLowerCase() }) : null;
}

const plain = ({ ctrlKey, metaKey, altKey, shiftKey }: Pressed): Omit<Pressed, 'key'> => ({
  ctrlKey,
  metaKey,
  altKey,
  shiftKey,
});

/** How a key is shown to people. */
export const keyShown = (key: string): string =>
  key
    .split('+')
    .map((part) => (part.length === 1 ? part.toUpperCase() : part))
    .join('+')
    .replace(/^\+\+$/, '+');
