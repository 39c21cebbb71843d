import { Problem } from '../../../solver/problem/problem.ts';
import { LIMITS } from '../work.ts';

/** The pairs of group code and value that an ASCII DXF file is, one after another. */
export class Pairs {
  readonly #text: string;
  #at = 0;
  /** Line of the code last read, from 1. */
  line = 0;
  #lines = 0;
  code = 0;
  value = '';

  constructor(text: string) {
    this.#text = text;
  }

  get share(): number {
    return this.#at / this.#text.length;
  }

  #nextLine(): string | null {
    if (this.#at >= this.#text.length) return null;
    let end = this.#text.indexOf('\n', this.#at);
    if (end < 0) end = this.#text.length;
    const last = this.#text.charCodeAt(end - 1) === 13 ? end - 1 : end;
    const line = this.#text.slice(this.#at, Math.max(this.#at, last));
    this.#at = end + 1;
    this.#lines += 1;
    return line;
  }

  /** Steps to the next pair; false at the end of the file. */
  next(): boolean {
    const first = this.#nextLine();
    this.line = this.#lines;
    if (first === null) return false;
    const code = first.trim();
    if (code === '' && this.#at >= this.#text.length) return false;
    if (!/^-?\d{1,5}$/.test(code)) {
      throw new Problem(
        'syntax',
        `A group code is a whole number, not "${code.slice(0, 40)}".`,
        `line ${this.line}`,
        'Check that the file is an ASCII DXF and whole; save it again from the program that made it.',
      );
    }
    const value = this.#nextLine();
    if (value === null) {
      throw new Problem(
        'syntax',
        'The file ends after a group code.',
        `line ${this.line}`,
        'The file was cut short: save or copy it again.',
      );
    }
    this.code = Number(code);
    this.value = value;
    return true;
  }
}

/** One entity with its groups, in the file's order. */
export interface Entity {
  readonly type: string;
  readonly codes: readonly number[];
  readonly values: readonly string[];
  readonly line: number;
}

/** Reads the groups of the entity whose type was just met, up to the next 0; false at the end of the file. */
export function readEntity(pairs: Pairs): { entity: Entity; more: boolean } {
  const type = pairs.value.trim().toUpperCase();
  const { line } = pairs;
  const codes: number[] = [];
  const values: string[] = [];
  for (;;) {
    if (!pairs.next()) return { entity: { type, codes, values, line }, more: false };
    if (pairs.code === 0) return { entity: { type, codes, values, line }, more: true };
    if (codes.length >= LIMITS.groups) {
      throw new Problem(
        'too-many',
        `One ${type.slice(0, 40)} has more than ${LIMITS.groups.toLocaleString('en')} groups.`,
        `line ${line}`,
        'Draw it with fewer points, or split it.',
      );
    }
    codes.push(pairs.code);
    values.push(pairs.value);
  }
}

/** The last value of a code, or undefined. */
export function textOf({ codes, values }: Entity, code: number): string | undefined {
  const k = codes.indexOf(code);
  return k < 0 ? undefined : values[k].trim();
}

/** A number as DXF writes it; a `Problem` names what is none. */
export function numberFrom(text: string, line: number, code: number): number {
  const value = Number(text);
  if (Number.isFinite(value) && text.trim() !== '') return value;
  throw new Problem(
    'quantity',
    `Group ${code} takes a number, not "${text.trim().slice(0, 40)}".`,
    `line ${line}`,
    'Mend the file, or save the drawing again.',
  );
}

export function numberOf(entity: Entity, code: number, fallback: number): number {
  const k = entity.codes.indexOf(code);
  return k < 0 ? fallback : numberFrom(entity.values[k], entity.line + 2 * k + 3, code);
}

/** A number that must be there. */
export function needed(entity: Entity, code: number): number {
  const k = entity.codes.indexOf(code);
  if (k >= 0) return numberFrom(entity.values[k], entity.line + 2 * k + 3, code);
  throw new Problem(
    'missing',
    `A ${entity.type} has no group ${code}.`,
    `line ${entity.line}`,
    'Mend the file, or save the drawing again.',
  );
}

/** All numbers of a code, in order. */
export function numbersOf(entity: Entity, code: number): number[] {
  const out: number[] = [];
  entity.codes.forEach((found, k) => {
    if (found === code) out.push(numberFrom(entity.values[k], entity.line + 2 * k + 3, code));
  });
  return out;
}
