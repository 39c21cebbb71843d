/**
 * Text of many numbers, written into one run of bytes: as a string each, a mask's numbers would cost more than all
 * that goes before them.
 */
export class TextBytes {
  #bytes = new Uint8Array(1 << 16);
  #at = 0;

  /** Text in ASCII. */
  ascii(text: string): void {
    const at = this.#room(text.length);
    for (let i = 0; i < text.length; i++) this.#bytes[at + i] = text.charCodeAt(i);
  }

  /** Any text, as UTF-8. */
  text(text: string): void {
    const at = this.#room(Buffer.byteLength(text));
    Buffer.from(this.#bytes.buffer).write(text, at);
  }

  append(other: TextBytes): void {
    const from = other.#bytes.subarray(0, other.#at);
    const at = this.#room(from.length);
    this.#bytes.set(from, at);
  }

  /**
   * `value` times ten to the power of `shift`, rounded to `decimals` (6 at least), without zeros at its end.
   * Within a hair of half way between two such numbers it is rounded as `exact` has it, the same in full.
   */
  fixed(value: number, shift: number, decimals: number, exact: (value: number) => number): void {
    const scaled = value * TENS[decimals + shift]!;
    const size = Math.abs(scaled);
    const low = Math.floor(size);
    const off = size - low - 0.5;
    if (!(size < MOST) || Math.abs(off) < HAIR * size) {
      this.ascii(String(Number(exact(value).toFixed(decimals))));
      return;
    }
    const rounded = off > 0 ? low + 1 : low;
    const one = TENS[decimals]!;
    const whole = Math.floor(rounded / one);
    const fraction = rounded - whole * one;
    let at = this.#room(LONGEST);
    const bytes = this.#bytes;
    if (scaled < 0 && rounded > 0) bytes[at++] = MINUS;
    let digits = 1;
    for (let rest = whole; rest >= 10; digits++) rest = (rest / 10) | 0;
    putDigits(bytes, at, at + digits, whole);
    at += digits;
    if (fraction > 0) {
      bytes[at] = POINT;
      const high = Math.floor(fraction / 1e6);
      const end = at + 1 + decimals;
      putDigits(bytes, at + 1, end - 6, high);
      putDigits(bytes, end - 6, end, fraction - high * 1e6);
      for (at = end; bytes[at - 1] === ZERO; ) at--;
    }
    this.#at = at;
  }

  bytes(): Uint8Array {
    return this.#bytes.slice(0, this.#at);
  }

  toString(): string {
    return Buffer.from(this.#bytes.buffer, 0, this.#at).toString('utf8');
  }

  #room(size: number): number {
    const at = this.#at;
    if (at + size > this.#bytes.length) {
      const more = new Uint8Array(Math.max(2 * this.#bytes.length, at + size));
      more.set(this.#bytes.subarray(0, at));
      this.#bytes = more;
    }
    this.#at = at + size;
    return at;
  }
}

const MINUS = 0x2d;
const POINT = 0x2e;
const ZERO = 0x30;
const TENS = [1, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11, 1e12, 1e13, 1e14];
/**
 * Scaled values below this have fifteen digits at most, so that the double nearest to them is spelt the same; and
 * with six decimals or more a whole part below 2^31, whose digits are counted in small integers.
 */
const MOST = 1e15;
/** More than the share of a value that two ways to scale it can differ by. */
const HAIR = 1e-15;
/** Sign, whole part, point, decimals. */
const LONGEST = 32;

/** The last digits of a whole number below 2^31, with zeros before it. */
function putDigits(bytes: Uint8Array, from: number, to: number, value: number): void {
  let rest = value | 0;
  for (let k = to - 1; k >= from; k--) {
    const tenth = (rest / 10) | 0;
    bytes[k] = ZERO + rest - 10 * tenth;
    rest = tenth;
  }
}

/**
 * The number spelt in `bytes` between two places, the very double that `Number` makes of it; NaN where there is none.
 */
export function numberIn(bytes: Uint8Array, from: number, to: number): number {
  let at = from;
  const minus = bytes[at] === MINUS;
  if (minus) at++;
  let mantissa = 0;
  let point = -1;
  const first = at;
  for (; at < to; at++) {
    const digit = bytes[at]! - ZERO;
    if (digit >= 0 && digit <= 9) mantissa = 10 * mantissa + digit;
    else if (digit === POINT - ZERO && point < 0) point = at;
    else break;
  }
  // both exact: their quotient is rounded once
  if (at < to || at - first - (point < 0 ? 0 : 1) < 1 || at - first > 15) return spelt(bytes, from, to);
  const value = point < 0 ? mantissa : mantissa / TENS[to - 1 - point]!;
  return minus ? -value : value;
}

function spelt(bytes: Uint8Array, from: number, to: number): number {
  const text = String.fromCharCode(...bytes.subarray(from, to)).trim();
  return text === '' ? Number.NaN : Number(text);
}
