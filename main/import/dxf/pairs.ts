import { Problem } from '../../../solver/problem/problem.ts';
import { LIMITS } from '../work.ts';

/** The pairs of group code and value that an ASCII DXF file is, one after another. */
export class Pairs {
  readonly text: string;
  #at = 0;
  /** Line of the code last read, from 1. */
  line = 0;
  #lines = 0;
  code = 0;
  /** Where the value stands in the text. */
  start = 0;
  end = 0;
  readonly kept = new Kept();

  constructor(text: string) {
    this.text = text;
  }

  get share(): number {
    return this.#at / this.text.length;
  }

  get value(): string {
    return this.text.slice(this.start, this.end);
  }

  /** Steps over a line, which is then `start` to `end`; false at the end of the file. */
  #nextLine(): boolean {
    if (this.#at >= this.text.length) return false;
    let end = this.text.indexOf('\n', this.#at);
    if (end < 0) end = this.text.length;
    const last = this.text.charCodeAt(end - 1) === 13 ? end - 1 : end;
    this.start = this.#at;
    this.end = Math.max(this.#at, last);
    this.#at = end + 1;
    this.#lines += 1;
    return true;
  }

  /** Steps to the next pair; false at the end of the file. */
  next(): boolean {
    const any = this.#nextLine();
    this.line = this.#lines;
    if (!any) return false;
    this.code = wholeIn(this.text, this.start, this.end);
    if (Number.isNaN(this.code)) {
      const code = this.value.trim();
      if (code === '' && this.#at >= this.text.length) return false;
      throw new Problem(
        'syntax',
        `A group code is a whole number, not "${code.slice(0, 40)}".`,
        `line ${this.line}`,
        'Check that the file is an ASCII DXF and whole; save it again from the program that made it.',
      );
    }
    if (this.#nextLine()) return true;
    throw new Problem(
      'syntax',
      'The file ends after a group code.',
      `line ${this.line}`,
      'The file was cut short: save or copy it again.',
    );
  }
}

/** Group codes and the places of their values, of all entities that are kept: an object each would cost more than reading them. */
class Kept {
  codes = new Int32Array(1024);
  starts = new Int32Array(1024);
  ends = new Int32Array(1024);
  count = 0;

  add(code: number, start: number, end: number): void {
    if (this.count === this.codes.length) {
      this.codes = grown(this.codes);
      this.starts = grown(this.starts);
      this.ends = grown(this.ends);
    }
    this.codes[this.count] = code;
    this.starts[this.count] = start;
    this.ends[this.count] = end;
    this.count += 1;
  }
}

function grown(array: Int32Array<ArrayBuffer>): Int32Array<ArrayBuffer> {
  const out = new Int32Array(2 * array.length);
  out.set(array);
  return out;
}

const [SPACE, TAB, PLUS, MINUS, POINT, ZERO] = [32, 9, 43, 45, 46, 48];

/** A whole number of at most five digits, spaces around it allowed; NaN where it is none. */
function wholeIn(text: string, start: number, end: number): number {
  let k = start;
  let last = end;
  while (k < last && isSpace(text.charCodeAt(k))) k += 1;
  while (last > k && isSpace(text.charCodeAt(last - 1))) last -= 1;
  const minus = text.charCodeAt(k) === MINUS;
  if (minus && k < last) k += 1;
  if (last - k < 1 || last - k > 5) return Number.NaN;
  let value = 0;
  for (; k < last; k += 1) {
    const digit = text.charCodeAt(k) - ZERO;
    if (digit < 0 || digit > 9) return Number.NaN;
    value = 10 * value + digit;
  }
  return minus ? -value : value;
}

const isSpace = (code: number): boolean => code === SPACE || (code >= TAB && code <= 13) || code === 0xfeff;

/** Powers of ten that are exact. */
const TENS = Float64Array.from({ length: 23 }, (_, k) => 10 ** k);
/** Digits whose whole number is exact. */
const MOST_DIGITS = 15;

/**
 * A decimal number. One of few digits without an exponent is a whole number through a power of ten, both
 * exact: their quotient is the double next to it, as `Number` gives it.
 */
function decimalIn(text: string, start: number, end: number): number {
  let k = start;
  while (k < end && text.charCodeAt(k) === SPACE) k += 1;
  const sign = text.charCodeAt(k);
  if (sign === MINUS || sign === PLUS) k += 1;
  let value = 0;
  let digits = 0;
  let after = -1;
  for (; k < end; k += 1) {
    const digit = text.charCodeAt(k) - ZERO;
    if (digit >= 0 && digit <= 9) {
      value = 10 * value + digit;
      digits += 1;
      if (after >= 0) after += 1;
    } else if (digit === POINT - ZERO && after < 0) after = 0;
    else break;
  }
  if (k !== end || digits === 0 || digits > MOST_DIGITS) {
    const rest = text.slice(start, end);
    return rest.trim() === '' ? Number.NaN : Number(rest);
  }
  if (after > 0) value /= TENS[after];
  return sign === MINUS ? -value : value;
}

/** One entity with its groups, in the file's order. */
export class Entity {
  readonly type: string;
  /** Line of its type's code. */
  readonly line: number;
  /** Its number of groups. */
  readonly count: number;
  readonly #text: string;
  readonly #kept: Kept;
  readonly #first: number;

  constructor(type: string, line: number, { text, kept }: Pairs, first: number) {
    this.type = type;
    this.line = line;
    this.count = kept.count - first;
    this.#text = text;
    this.#kept = kept;
    this.#first = first;
  }

  code(k: number): number {
    return k < this.count ? this.#kept.codes[this.#first + k] : Number.NaN;
  }

  text(k: number): string {
    const at = this.#first + k;
    return this.#text.slice(this.#kept.starts[at], this.#kept.ends[at]);
  }

  /** A number as DXF writes it; a `Problem` names what is none. */
  number(k: number): number {
    const at = this.#first + k;
    const value = decimalIn(this.#text, this.#kept.starts[at], this.#kept.ends[at]);
    if (Number.isFinite(value)) return value;
    throw new Problem(
      'quantity',
      `Group ${this.code(k)} takes a number, not "${this.text(k).trim().slice(0, 40)}".`,
      `line ${this.line + 2 * k + 3}`,
      'Mend the file, or save the drawing again.',
    );
  }

  /** Where the first group of a code stands, -1 where there is none. */
  find(code: number): number {
    const { codes } = this.#kept;
    for (let k = 0; k < this.count; k += 1) if (codes[this.#first + k] === code) return k;
    return -1;
  }
}

/** Reads the groups of the entity whose type was just met, up to the next 0; false at the end of the file. */
export function readEntity(pairs: Pairs): { entity: Entity; more: boolean } {
  const type = pairs.value.trim().toUpperCase();
  const { line, kept } = pairs;
  const first = kept.count;
  for (;;) {
    const more = pairs.next();
    if (!more || pairs.code === 0) return { entity: new Entity(type, line, pairs, first), more };
    if (kept.count - first >= LIMITS.groups) {
      throw new Problem(
        'too-many',
        `One ${type.slice(0, 40)} has more than ${LIMITS.groups.toLocaleString('en')} groups.`,
        `line ${line}`,
        'Draw it with fewer points, or split it.',
      );
    }
    kept.add(pairs.code, pairs.start, pairs.end);
  }
}

/** The first value of a code, or undefined. */
export function textOf(entity: Entity, code: number): string | undefined {
  const k = entity.find(code);
  return k < 0 ? undefined : entity.text(k).trim();
}

export function numberOf(entity: Entity, code: number, fallback: number): number {
  const k = entity.find(code);
  return k < 0 ? fallback : entity.number(k);
}

/** A number that must be there. */
export function needed(entity: Entity, code: number): number {
  const k = entity.find(code);
  if (k >= 0) return entity.number(k);
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
  for (let k = 0; k < entity.count; k += 1) if (entity.code(k) === code) out.push(entity.number(k));
  return out;
}
