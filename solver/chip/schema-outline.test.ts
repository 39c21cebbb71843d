import fc from 'fast-check';
import { expect, test } from 'vitest';
import type { Point } from './chip.ts';
import { outlineFault } from './schema-outline.ts';

/** Sign of the turn a, b, c in whole numbers. */
function turn(a: Point, b: Point, c: Point): number {
  const [ax, ay, bx, by, cx, cy] = [...a, ...b, ...c].map(BigInt) as bigint[];
  const value = (bx! - ax!) * (cy! - ay!) - (by! - ay!) * (cx! - ax!);
  return value > 0n ? 1 : value < 0n ? -1 : 0;
}

const between = (a: Point, b: Point, p: Point): boolean =>
  turn(a, b, p) === 0 &&
  [0, 1].every((k) => Math.min(a[k]!, b[k]!) <= p[k]! && p[k]! <= Math.max(a[k]!, b[k]!));

function meet(a: Point, b: Point, c: Point, d: Point): boolean {
  if (between(a, b, c) || between(a, b, d) || between(c, d, a) || between(c, d, b)) return true;
  return turn(a, b, c) * turn(a, b, d) < 0 && turn(c, d, a) * turn(c, d, b) < 0;
}

/** Whether a closed outline is simple, by comparing every two edges in whole numbers. */
function isSimple(outline: readonly Point[]): boolean {
  const n = outline.length;
  const point = (i: number): Point => outline[i % n]!;
  for (let i = 0; i < n; i += 1) {
    const [a, b, c] = [point(i), point(i + 1), point(i + 2)];
    if (a[0] === b[0] && a[1] === b[1]) return false;
    // Neighbours share a corner; more than that they share only where one turns back over the other.
    if (turn(a, b, c) === 0 && (between(a, b, c) || between(b, c, a))) return false;
    for (let j = i + 2; j < n; j += 1) {
      if (i === 0 && j === n - 1) continue;
      if (meet(a, b, point(j), point(j + 1))) return false;
    }
  }
  return true;
}

test('an outline is taken for simple just where no two edges meet', () => {
  for (const most of [4, 1_000_000_000]) {
    const coordinate = fc.integer({ min: -most, max: most });
    fc.assert(
      fc.property(
        fc.array(fc.tuple(coordinate, coordinate), { minLength: 3, maxLength: 8 }),
        (outline: Point[]) => {
          expect(outlineFault(outline) === null).toBe(isSimple(outline));
        },
      ),
      { numRuns: 3000 },
    );
  }
});

test('a corner a nanometre beside an edge a metre long is told from one on it', () => {
  const metre = 1_000_000_000;
  const spike = (depth: number): Point[] => [
    [-metre, -metre],
    [metre, metre - 1],
    [metre, metre],
    [1, depth],
    [-metre, metre],
  ];
  // The edge passes (1, 0.5 + 1e-9 nm): one nanometre above it lies apart, at nought below it crosses.
  expect(outlineFault(spike(1))).toBeNull();
  expect(outlineFault(spike(0))).toMatchObject({ kind: 'crosses' });
});

test('large outlines are gone through with an index', () => {
  const ring = Array.from({ length: 20_000 }, (_, i): Point => {
    const angle = (2 * Math.PI * i) / 20_000;
    return [Math.round(1e8 * Math.cos(angle)), Math.round(1e8 * Math.sin(angle))];
  });
  expect(outlineFault(ring)).toBeNull();
  const [a, b] = [ring[100]!, ring[15_000]!];
  ring[100] = b;
  ring[15_000] = a;
  expect(outlineFault(ring)).toMatchObject({ kind: 'crosses' });
});
