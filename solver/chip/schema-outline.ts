import Flatbush from 'flatbush';
import type { Point } from './chip.ts';

/** Twice the signed area of the triangle a, b, c: its sign is exact for whole coordinates. */
function turn(a: Point, b: Point, c: Point): number {
  const left = (b[0] - a[0]) * (c[1] - a[1]);
  const right = (b[1] - a[1]) * (c[0] - a[0]);
  const det = left - right;
  // Three rounding steps of half a unit in the last place bound the error of the products' difference.
  if (Math.abs(det) > 4.5e-16 * (Math.abs(left) + Math.abs(right))) return det;
  if (![...a, ...b, ...c].every(Number.isInteger)) return det;
  const exact =
    (BigInt(b[0]) - BigInt(a[0])) * (BigInt(c[1]) - BigInt(a[1])) -
    (BigInt(b[1]) - BigInt(a[1])) * (BigInt(c[0]) - BigInt(a[0]));
  return Number(exact);
}

const within = (a: Point, b: Point, p: Point): boolean =>
  Math.min(a[0], b[0]) <= p[0] &&
  p[0] <= Math.max(a[0], b[0]) &&
  Math.min(a[1], b[1]) <= p[1] &&
  p[1] <= Math.max(a[1], b[1]);

/** Whether the closed segments ab and cd share a point. */
function meet(a: Point, b: Point, c: Point, d: Point): boolean {
  const abc = turn(a, b, c);
  const abd = turn(a, b, d);
  const cda = turn(c, d, a);
  const cdb = turn(c, d, b);
  if (((abc > 0 && abd < 0) || (abc < 0 && abd > 0)) && ((cda > 0 && cdb < 0) || (cda < 0 && cdb > 0))) {
    return true;
  }
  return (
    (abc === 0 && within(a, b, c)) ||
    (abd === 0 && within(a, b, d)) ||
    (cda === 0 && within(c, d, a)) ||
    (cdb === 0 && within(c, d, b))
  );
}

/** What keeps a closed outline from being a simple polygon, or null; edge i runs from point i to the next. */
export function outlineFault(
  outline: readonly Point[],
):
  | { readonly kind: 'repeats' | 'doubles'; readonly point: number }
  | { readonly kind: 'crosses'; readonly edges: readonly [number, number] }
  | { readonly kind: 'empty' }
  | null {
  const n = outline.length;
  if (n < 3) return { kind: 'empty' };
  const point = (i: number): Point => outline[i % n]!;
  let area = 0;
  for (let i = 0; i < n; i += 1) {
    const [a, b, c] = [point(i), point(i + 1), point(i + 2)];
    if (a[0] === b[0] && a[1] === b[1]) return { kind: 'repeats', point: (i + 1) % n };
    const back = (b[0] - a[0]) * (c[0] - b[0]) + (b[1] - a[1]) * (c[1] - b[1]) < 0;
    if (back && turn(a, b, c) === 0) return { kind: 'doubles', point: (i + 1) % n };
    area += turn(point(0), a, b);
  }
  const index = new Flatbush(n);
  for (let i = 0; i < n; i += 1) {
    const [a, b] = [point(i), point(i + 1)];
    index.add(Math.min(a[0], b[0]), Math.min(a[1], b[1]), Math.max(a[0], b[0]), Math.max(a[1], b[1]));
  }
  index.finish();
  for (let i = 0; i < n; i += 1) {
    const [a, b] = [point(i), point(i + 1)];
    let other = -1;
    index.search(
      Math.min(a[0], b[0]),
      Math.min(a[1], b[1]),
      Math.max(a[0], b[0]),
      Math.max(a[1], b[1]),
      (j) => {
        if (other < 0 && j > i + 1 && !(i === 0 && j === n - 1) && meet(a, b, point(j), point(j + 1)))
          other = j;
        return false;
      },
    );
    if (other >= 0) return { kind: 'crosses', edges: [i, other] };
  }
  return area === 0 ? { kind: 'empty' } : null;
}
