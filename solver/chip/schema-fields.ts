import { z } from 'zod';
import { BOUNDS } from './bounds.ts';
import type { LengthUnit } from './chip.ts';
import { Fault, valueInWords } from './schema-fault.ts';
import { nearest } from './schema-nearest.ts';
import { step } from './schema-parse.ts';
import { KINDS, type Kind, parseQuantity, wholeNm } from './units.ts';
import { ratioToNumber } from './units-exact.ts';
import { planNm } from './units-write.ts';

// Without this zod compiles schemas with `new Function`, which a strict content security policy reports.
z.config({ jitless: true });

/** Control characters, line separators, halves of characters and signs that turn the direction of writing. */
const UNPRINTABLE = /[\p{Cc}\p{Cs}\p{Zl}\p{Zp}\u202a-\u202e\u2066-\u2069]/u;

export function readText(value: unknown, max: number, lines = false): string {
  if (typeof value !== 'string') {
    throw new Fault('quantity', `takes a text; ${valueInWords(value)}.`, 'Write it between double quotes.');
  }
  if (value.length > max) {
    throw new Fault('too-many', `has ${value.length} characters; at most ${max} are kept.`, 'Shorten it.');
  }
  if (UNPRINTABLE.test(lines ? value.replace(/[\n\t]/g, '') : value)) {
    throw new Fault('quantity', 'holds a control character.', 'Write it with printable characters only.');
  }
  return value;
}

export function readId(value: unknown): string {
  if (typeof value !== 'string') {
    throw new Fault(
      'quantity',
      `takes a text; ${valueInWords(value)}.`,
      'Write the id between double quotes.',
    );
  }
  if (value.trim() === '') throw new Fault('missing', 'is empty.', 'Give an id such as "feed".');
  return readText(value, BOUNDS.id);
}

/** A number that a quantity may have: zero, or within sixty powers of ten of one. */
export function readSize(value: number, noun: string): number {
  const size = Math.abs(value);
  if (size > 1e60 || (size < 1e-60 && size !== 0) || Number.isNaN(size)) {
    throw new Fault(
      'range',
      `takes ${noun}; the number is too ${size < 1 ? 'small' : 'large'}.`,
      'Write a number of a size that things have.',
    );
  }
  return value + 0;
}

/** A quantity: text with a unit, or a bare number, which is SI; `bare` false where the unit must be stated. */
export function readField(value: unknown, kind: Kind, bare = true): number {
  const { noun, example } = KINDS[kind];
  if (typeof value === 'number' && bare) return readSize(value, noun);
  if (typeof value === 'string' && kind !== 'number') {
    const parsed = parseQuantity(value, kind);
    if (parsed.ok) return readSize(ratioToNumber(parsed.exact), noun);
    throw new Fault('quantity', parsed.what, parsed.remedy);
  }
  throw new Fault(
    'quantity',
    `takes ${noun}${bare ? '' : ' with its unit'}; ${valueInWords(value)}.`,
    kind === 'number' ? `Write a number, such as ${example}.` : `Write ${noun}, such as "${example}".`,
  );
}

function inPlan(nm: number): number {
  if (Math.abs(nm) > BOUNDS.coordinate) {
    throw new Fault(
      'range',
      'is more than one metre.',
      'Check the unit; a chip lies within a metre of its origin.',
    );
  }
  return nm;
}

/** A plan length in whole nanometres: a number in `unit`, or text with a unit of its own. */
export function readPlan(value: unknown, unit: LengthUnit): number {
  if (typeof value === 'number') return inPlan(planNm(readSize(value, 'a length'), unit));
  if (typeof value === 'string') {
    const parsed = parseQuantity(value, 'length');
    if (!parsed.ok) throw new Fault('quantity', parsed.what, parsed.remedy);
    return inPlan(wholeNm(parsed.exact));
  }
  throw new Fault(
    'quantity',
    `takes a length; ${valueInWords(value)}.`,
    'Write a length, such as 120 or "120 um".',
  );
}

/** A length in metres where a bare number is in `unit`; the decimal text of the number is what counts. */
export function readMetres(value: unknown, unit: LengthUnit): number {
  return typeof value === 'number'
    ? readField(`${readSize(value, 'a length')} ${unit}`, 'length')
    : readField(value, 'length');
}

export const text = (max: number, lines = false) =>
  z.unknown().transform(step((value) => readText(value, max, lines)));
export const id = () => z.unknown().transform(step(readId));
export const quantity = (kind: Kind, bare = true) =>
  z.unknown().transform(step((value) => readField(value, kind, bare)));
export const plan = (unit: LengthUnit) => z.unknown().transform(step((value) => readPlan(value, unit)));
export const inMetres = (unit: LengthUnit) => z.unknown().transform(step((value) => readMetres(value, unit)));

export const choice = <const T extends string>(words: readonly T[]) =>
  z.unknown().transform(
    step((value): T => {
      const found = words.find((word) => word === value);
      if (found !== undefined) return found;
      const close = typeof value === 'string' ? nearest(value, words) : undefined;
      throw new Fault(
        'quantity',
        `takes one of ${words.map((word) => `"${word}"`).join(', ')}; ${valueInWords(value)}.`,
        `Write ${close === undefined ? 'one of them' : `"${close}"`}.`,
      );
    }),
  );

/** A list of at most `max`; what is in it is looked at only after it was counted. */
export function readList(value: unknown, max: number, min = 0): unknown[] {
  if (!Array.isArray(value)) {
    throw new Fault('quantity', `takes a list; ${valueInWords(value)}.`, 'Write it between square brackets.');
  }
  if (value.length > max || value.length < min) {
    const least = min > 0 ? `${min} to ` : 'at most ';
    throw new Fault(
      value.length > max ? 'too-many' : 'missing',
      min === max
        ? `takes ${max} entries; it has ${value.length}.`
        : `takes ${least}${max.toLocaleString('en')} entries; it has ${value.length.toLocaleString('en')}.`,
      value.length > max ? 'Take some away.' : 'Add what is missing.',
    );
  }
  return value;
}

export const list = <T extends z.ZodType>(entry: T, max: number, min = 0) =>
  z
    .unknown()
    .transform(step((value) => readList(value, max, min)))
    .pipe(z.array(entry));

/** Two entries of one kind. */
export const pair = <T extends z.ZodType>(entry: T) =>
  z
    .unknown()
    .transform(step((value) => readList(value, 2, 2)))
    .pipe(z.tuple([entry, entry]));

/** Throws for a value that is no group of keys, for an unknown key, and for a missing one. */
export function readKeys(
  value: unknown,
  known: ReadonlySet<string>,
  required: Readonly<Record<string, string>>,
): Record<string, unknown> {
  if (value === null || typeof value !== 'object' || Array.isArray(value)) {
    throw new Fault(
      'quantity',
      `takes a group of keys; ${valueInWords(value)}.`,
      'Write it between curly brackets.',
    );
  }
  // Of JSON: own keys only, and no list of them made for each of a hundred thousand groups.
  for (const key in value) {
    if (known.has(key)) continue;
    throw new Fault(
      'unknown-key',
      `is no known key here.`,
      `Did you mean "${nearest(key, known)}"? Known: ${[...known].join(', ')}.`,
      [key],
    );
  }
  for (const key in required) {
    if (!Object.hasOwn(value, key)) {
      throw new Fault('missing', `has no "${key}".`, `Add "${key}", such as ${required[key]}.`);
    }
  }
  return value as Record<string, unknown>;
}

/** A group of exactly these keys; `required` holds an example for each that must be there. */
export function keyed<S extends z.ZodRawShape>(shape: S, required: { readonly [K in keyof S]?: string }) {
  const known = new Set(Object.keys(shape));
  return z
    .unknown()
    .transform(step((value) => readKeys(value, known, required as Readonly<Record<string, string>>)))
    .pipe(z.object(shape));
}
