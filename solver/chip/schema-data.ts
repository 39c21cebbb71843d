import { z } from 'zod';
import { BOUNDS } from './bounds.ts';
import { Fault, valueInWords } from './schema-fault.ts';
import { choice, readSize } from './schema-fields.ts';
import { parseWith, step } from './schema-parse.ts';

/** Building blocks for a chip that comes as data: whole nanometres and SI numbers only. */

export function readNm(value: unknown): number {
  if (Number.isInteger(value) && Math.abs(value as number) <= BOUNDS.coordinate) return (value as number) + 0;
  throw new Fault(
    'quantity',
    `takes whole nanometres within a metre; ${valueInWords(value)}.`,
    'Give a whole number of nanometres.',
  );
}

function readSi(value: unknown): number {
  if (typeof value === 'number') return readSize(value, 'a number');
  throw new Fault('quantity', `takes a number; ${valueInWords(value)}.`, 'Give the value in SI units.');
}

export const field = <T>(read: (value: unknown) => T) => z.unknown().transform(step(read));
export const nm = field(readNm);
export const si = field(readSi);

export const kind = <const K extends string>(word: K) => choice([word]);

/** One of several shapes told apart by `kind`. */
export function byKind<T>(shapes: Readonly<Record<string, z.ZodType<T>>>): z.ZodType<T> {
  const kinds = Object.keys(shapes);
  return z.unknown().transform(
    step((value): T => {
      const word = readKind(value, kinds);
      return parseWith(shapes[word]!, value);
    }),
  );
}

function readKind(value: unknown, kinds: readonly string[]): string {
  const word = value !== null && typeof value === 'object' ? (value as { kind?: unknown }).kind : undefined;
  if (typeof word === 'string' && kinds.includes(word)) return word;
  throw new Fault('quantity', `has no known "kind".`, `Give one of ${kinds.join(', ')}.`);
}

/** One of several shapes told apart by a key that only it has. */
export function byKey<T>(
  shapes: readonly (readonly [key: string, shape: z.ZodType<T>])[],
  what: string,
): z.ZodType<T> {
  return z.unknown().transform(
    step((value): T => {
      const found = shapes.find(
        ([key]) => value !== null && typeof value === 'object' && Object.hasOwn(value, key),
      );
      if (found) return parseWith(found[1], value);
      throw new Fault('missing', `is no ${what}.`, `Give one of ${shapes.map(([key]) => key).join(', ')}.`);
    }),
  );
}
