import { Problem } from '../problem/problem.ts';
import { BOUNDS } from './bounds.ts';
import { findSlip, type Slip } from './description-slip.ts';

/** How many keys a text of JSON writes: its colons outside strings. */
function keysWritten(text: string): number {
  let count = 0;
  for (let i = 0; i < text.length; i += 1) {
    const code = text.charCodeAt(i);
    if (code === 0x3a) count += 1;
    else if (code === 0x22) {
      do i = text.indexOf('"', i + 1);
      while (isEscaped(text, i));
    }
  }
  return count;
}

function isEscaped(text: string, at: number): boolean {
  let from = at;
  while (text.charCodeAt(from - 1) === 0x5c) from -= 1;
  return (at - from) % 2 === 1;
}

/** How many keys were kept of them: of a key that stands twice in one group only the last. */
function keysKept(value: unknown): number {
  let count = 0;
  const rest: object[] = [];
  const look = (entry: unknown): void => {
    if (typeof entry !== 'object' || entry === null) return;
    // Numbers and points are most of what a long description holds, and they hold no keys.
    if (Array.isArray(entry) && typeof entry[0] === 'number' && typeof entry.at(-1) !== 'object') {
      if (entry.length <= 2 || entry.every((part) => typeof part !== 'object')) return;
    }
    rest.push(entry);
  };
  look(value);
  while (rest.length > 0) {
    const next = rest.pop()!;
    if (Array.isArray(next)) for (const entry of next) look(entry);
    else {
      // Of JSON.parse: own keys only, without a list made of them.
      for (const key in next) {
        count += 1;
        look((next as Record<string, unknown>)[key]);
      }
    }
  }
  return count;
}

function syntaxProblem(text: string, slip: Slip): Problem {
  const lines = text.slice(0, slip.offset).split('\n');
  const where = `line ${lines.length}, column ${lines.at(-1)!.length + 1}`;
  return new Problem('syntax', slip.what, where, slip.remedy);
}

/**
 * JSON text to its value; a `Problem` with line and column where it is none, or where a key stands twice
 * in one group, of which one would be lost. A byte-order mark is let pass.
 */
export function parseJson(text: string): unknown {
  if (text.length > BOUNDS.text) {
    throw new Problem(
      'too-many',
      `The text has ${text.length.toLocaleString('en')} characters; at most ${BOUNDS.text.toLocaleString('en')} are read.`,
      '',
      'Split the chip, or draw long channels with fewer points.',
    );
  }
  const bare = text.charCodeAt(0) === 0xfeff ? text.slice(1) : text;
  let value: unknown;
  try {
    value = JSON.parse(bare);
  } catch {
    const slip = findSlip(bare) ?? {
      offset: 0,
      what: 'This is not JSON.',
      remedy: 'Write the chip as JSON.',
    };
    throw syntaxProblem(bare, slip);
  }
  if (keysWritten(bare) !== keysKept(value)) {
    const slip = findSlip(bare, true);
    if (slip) throw syntaxProblem(bare, slip);
  }
  return value;
}
