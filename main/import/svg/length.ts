import { unitSize } from '../../../solver/chip/units.ts';
import { type Affine, compose, scaling, shift } from '../affine.ts';
import type { Element } from './tree.ts';

type Attributes = Element['attributes'];

/** Pixels of an inch, as CSS has it and SVG after it. */
const PER_INCH = 96;
const LENGTH = /^\s*([+-]?(?:\d+\.?\d*|\.\d+)(?:e[+-]?\d+)?)\s*(mm|cm|in|pt|pc|q|um|µm|μm|m|px|)\s*$/i;

/** A length such as "75mm", in m and in pixels; null where it is none, or relative to something. */
function read(text: string | undefined): { readonly metres: number; readonly pixels: number } | null {
  const match = LENGTH.exec(text ?? '');
  const value = Number(match?.[1]);
  if (!match || !Number.isFinite(value)) return null;
  const name = match[2].toLowerCase();
  const inch = unitSize('in');
  const pixel = inch / PER_INCH;
  const sizes: Readonly<Record<string, number>> = {
    pt: inch / 72,
    pc: inch / 6,
    q: unitSize('mm') / 4,
    px: pixel,
    '': pixel,
  };
  const size = sizes[name] ?? unitSize(name.replace(/[µμ]/, 'u'));
  const plain = name === '' || name === 'px';
  return { metres: value * size, pixels: plain ? value : (value * size) / pixel };
}

/** A length within a drawing, in pixels. */
export const pixelsOf = (text: string | undefined): number | null => read(text)?.pixels ?? null;

/** The size of a page; `metres` is 0 for pixels and bare numbers, which say nothing of the chip. */
export function lengthOf(
  text: string | undefined,
): { readonly metres: number; readonly pixels: number } | null {
  const length = read(text);
  if (!length || !(length.pixels > 0)) return null;
  return /[a-zµμ]\s*$/i.test(text!) && !/px\s*$/i.test(text!) ? length : { ...length, metres: 0 };
}

/**
 * How a box of an element is fitted into the size it is shown at, by preserveAspectRatio; null where the
 * box is none or the size is not told.
 */
export function fitted(own: Attributes, size: Attributes): Affine | null {
  const box = (own.viewBox ?? '')
    .trim()
    .split(/[\s,]+/)
    .map(Number);
  const [x, y, w, h] = box;
  const [width, height] = [pixelsOf(size.width), pixelsOf(size.height)];
  if (box.length !== 4 || !box.every(Number.isFinite) || !(w > 0 && h > 0) || !width || !height) return null;
  const [align = 'xMidYMid', how = 'meet'] = (own.preserveAspectRatio ?? '')
    .trim()
    .split(/\s+/)
    .filter(Boolean);
  const [sx, sy] = [width / w, height / h];
  if (align === 'none') return compose(scaling(sx, sy), shift(-x, -y));
  const scale = how === 'slice' ? Math.max(sx, sy) : Math.min(sx, sy);
  const part = (min: string, max: string): number =>
    align.includes(min) ? 0 : align.includes(max) ? 1 : 0.5;
  const left = (width - scale * w) * part('xMin', 'xMax');
  const top = (height - scale * h) * part('YMin', 'YMax');
  return compose(shift(left, top), compose(scaling(scale, scale), shift(-x, -y)));
}
