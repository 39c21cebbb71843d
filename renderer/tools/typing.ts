import { parseQuantity } from '../../solver/chip/units.ts';
import { ratioToNumber } from '../../solver/chip/units-exact.ts';
import type { Xy } from '../geometry/vector.ts';

/**
 * Figures typed at the pointer: a row of fields, one at hand. Lengths without a unit are in mm, as the
 * chip's edge is; widths in µm.
 */
export interface Typing {
  readonly field: number;
  readonly texts: readonly string[];
}

export const noTyping = (fields: number): Typing => ({ field: 0, texts: Array(fields).fill('') });

export const isTyping = (typing: Typing): boolean => typing.texts.some((text) => text !== '');

export function typeInto(typing: Typing, text: string): Typing {
  return {
    ...typing,
    texts: typing.texts.map((old, i) => (i === typing.field ? `${old}${text}`.slice(0, 40) : old)),
  };
}

export function rubOut(typing: Typing): Typing {
  return { ...typing, texts: typing.texts.map((old, i) => (i === typing.field ? old.slice(0, -1) : old)) };
}

export const nextField = (typing: Typing): Typing => ({
  ...typing,
  field: (typing.field + 1) % typing.texts.length,
});

/** A length in nm, NaN where the text is none, null where it is empty. */
export function readLength(text: string, bareUnit: string): number | null {
  if (text.trim() === '') return null;
  const parsed = parseQuantity(text, 'length', bareUnit);
  return parsed.ok ? Math.round(ratioToNumber(parsed.exact) * 1e9) : Number.NaN;
}

/** Degrees, NaN where the text is none, null where it is empty. */
export function readAngle(text: string): number | null {
  if (text.trim() === '') return null;
  const parsed = parseQuantity(text, 'angle', 'deg');
  return parsed.ok ? ratioToNumber(parsed.exact) : Number.NaN;
}

/** "5 mm, 13 mm" or "5, 13" as a place; null where it is none. */
export function readPlace(text: string): Xy | null {
  const parts = text.split(/[,;]/);
  if (parts.length !== 2) return null;
  const [x, y] = parts.map((part) => readLength(part, 'mm'));
  return typeof x === 'number' && typeof y === 'number' && Number.isFinite(x) && Number.isFinite(y)
    ? [x, y]
    : null;
}

/** "200", or "200 to 100" for a taper: the width at both ends, nm; null where it is empty, NaN where it is none. */
export function readWidths(text: string): readonly [number, number] | null {
  if (text.trim() === '') return null;
  const [from, to, ...more] = taperOf(text);
  const a = readLength(from!, 'um') ?? Number.NaN;
  const b = to === undefined ? a : (readLength(to, 'um') ?? Number.NaN);
  return more.length > 0 ? [Number.NaN, Number.NaN] : [a, b];
}

const taperOf = (text: string): string[] => text.split(/\s*(?:\bto\b|>|–)\s*/);

/** Why typed widths cannot be used, '' where they can. */
export function widthsFault(text: string): string {
  if (text.trim() === '') return '';
  const parts = taperOf(text);
  if (parts.length > 2 || (parts.length === 2 && parts.some((part) => part.trim() === '')))
    return 'Takes one width, or two for a taper, such as "200 to 100".';
  return parts.map((part) => lengthFault(part, 'um')).find(Boolean) ?? '';
}

/**
 * The far corner of a box from its first one under typed sizes, on the side where the hand points; a size
 * that was not typed is as the hand points, or as the other where the hand has not left the corner.
 * Null where none is typed or one is nonsense.
 */
export function sizedCorner(first: Xy, hand: Xy, texts: readonly string[]): Xy | null {
  const sizes = [0, 1].map((axis) => readLength(texts[axis] ?? '', 'mm'));
  if (sizes.every((size) => size === null)) return null;
  if (sizes.some((size) => size !== null && !(size > 0))) return null;
  const [a, b] = [0, 1].map((axis) => {
    const own = sizes[axis] ?? null;
    const away = hand[axis]! - first[axis]!;
    const size = own ?? (away !== 0 ? Math.abs(away) : sizes[1 - axis]!);
    return first[axis]! + (away < 0 ? -size : size);
  });
  return [a!, b!];
}

/** Why a typed length cannot be used, '' where it can. */
export function lengthFault(text: string, bareUnit: string): string {
  if (text.trim() === '') return '';
  const parsed = parseQuantity(text, 'length', bareUnit);
  if (!parsed.ok) return parsed.what.replace(/^takes /, 'Takes ');
  return ratioToNumber(parsed.exact) > 0 ? '' : 'Takes a length above zero.';
}
