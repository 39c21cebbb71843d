import { type Affine, compose, SAME, scaling, shift, turning } from '../affine.ts';

/** A list of transforms as SVG writes it, null where it is none. */
export function readTransform(text: string): Affine | null {
  let all: Affine = SAME;
  let rest = text.trim().slice(0, 10_000);
  while (rest !== '') {
    const match = /^([a-zA-Z]+)\s*\(([^()]*)\)[\s,]*/.exec(rest);
    if (!match) return null;
    const numbers = match[2]
      .trim()
      .split(/[\s,]+/)
      .map(Number);
    if (numbers.some((value) => !Number.isFinite(value))) return null;
    const one = single(match[1], numbers);
    if (!one) return null;
    all = compose(all, one);
    rest = rest.slice(match[0].length);
  }
  return all;
}

function single(name: string, n: readonly number[]): Affine | null {
  const count = n.length;
  const radians = (degrees: number): number => (degrees * Math.PI) / 180;
  if (name === 'matrix' && count === 6) return [n[0], n[1], n[2], n[3], n[4], n[5]];
  if (name === 'translate' && (count === 1 || count === 2)) return shift(n[0], n[1] ?? 0);
  if (name === 'scale' && (count === 1 || count === 2)) return scaling(n[0], n[1] ?? n[0]);
  if (name === 'rotate' && count === 1) return turning(radians(n[0]));
  if (name === 'rotate' && count === 3) {
    return compose(compose(shift(n[1], n[2]), turning(radians(n[0]))), shift(-n[1], -n[2]));
  }
  if (name === 'skewX' && count === 1) return [1, 0, Math.tan(radians(n[0])), 1, 0, 0];
  if (name === 'skewY' && count === 1) return [1, Math.tan(radians(n[0])), 0, 1, 0, 0];
  return null;
}
