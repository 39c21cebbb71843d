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

/**
 * How many keys were kept of them: of a key that stands twice in one group only the last. Lists are gone
 * through in the outermost group alone: what else holds groups in lists only costs the exact look for a slip.
 */
function keysKept(value: unknown): number {
  let count = 0;
  const rest: object[] = [];
  const group = (entry: object): void => {
    // Of JSON.parse: own keys only, without a list made of them.
    for (const key in entry) {
      count += 1;
      const part = (entry as Record<string, unknown>)[key];
      if (isGroup(part)) rest.push(part);
    }
  };
  if (!isGroup(value)) return 0;
  group(value);
  for (const list of Object.values(value)) {
    if (Array.isArray(list)) for (const entry of list) if (isGroup(entry)) group(entry);
  }
  while (rest.length > 0) group(rest.pop()!);
  return count;
}

function isGroup(value: unknown): value is object {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
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
