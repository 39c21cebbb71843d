import type { Boundary } from './boundary.ts';
import { Grid } from './grid.ts';

/** Closed lines: piece i runs from point i to point next[i]. */
type Polylines = Pick<Boundary, 'count' | 'x' | 'y' | 'next'>;

/** A place where two pieces of a cut boundary cross or touch; null where none do. */
export function crossingPlace(boundary: Polylines): readonly [number, number] | null {
  const { count, x, y, next } = boundary;
  const boxes = new Float64Array(4 * count);
  for (let i = 0; i < count; i += 1) {
    const j = next[i];
    boxes[4 * i] = Math.min(x[i], x[j]);
    boxes[4 * i + 1] = Math.min(y[i], y[j]);
    boxes[4 * i + 2] = Math.max(x[i], x[j]);
    boxes[4 * i + 3] = Math.max(y[i], y[j]);
  }
  const grid = new Grid(boxes);
  let found: readonly [number, number] | null = null;
  for (let i = 0; i < count && !found; i += 1) {
    grid.near(boxes[4 * i], boxes[4 * i + 1], boxes[4 * i + 2], boxes[4 * i + 3], (other) => {
      if (found || other <= i || next[i] === other || next[other] === i) return;
      found = meeting(boundary, i, other);
    });
  }
  return found;
}

function meeting(boundary: Polylines, i: number, k: number): readonly [number, number] | null {
  const { x, y, next } = boundary;
  const j = next[i];
  const l = next[k];
  const apart = (c: Float64Array): boolean =>
    Math.max(c[i], c[j]) < Math.min(c[k], c[l]) || Math.max(c[k], c[l]) < Math.min(c[i], c[j]);
  if (apart(x) || apart(y)) return null;
  const side = (a: number, b: number, c: number): number =>
    (x[b] - x[a]) * (y[c] - y[a]) - (y[b] - y[a]) * (x[c] - x[a]);
  const c = side(i, j, k);
  const d = side(i, j, l);
  if (c > 0 === d > 0 && c !== 0 && d !== 0) return null;
  const a = side(k, l, i);
  const b = side(k, l, j);
  if (a > 0 === b > 0 && a !== 0 && b !== 0) return null;
  const t = a === b ? 0 : a / (a - b);
  return [x[i] + t * (x[j] - x[i]), y[i] + t * (y[j] - y[i])];
}
