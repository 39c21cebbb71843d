import { area, FillRule, type Path64, type Paths64, union, xor } from 'clipper2-ts';
import { describe, expect, test } from 'vitest';
import { random } from '../../../test/chip/random-drawing.ts';
import { differenceOf } from './difference.ts';
import { Loops } from './loops.ts';
import { split } from './split.ts';

const rectangle = (x0: number, y0: number, x1: number, y1: number): Path64 => [
  { x: x0, y: y0 },
  { x: x1, y: y0 },
  { x: x1, y: y1 },
  { x: x0, y: y1 },
];

const polygons = (paths: Paths64): Loops => {
  const loops = new Loops();
  for (const path of paths) {
    for (const { x, y } of path) loops.add(x, y, 0);
    loops.close();
  }
  return loops;
};

const apart = (a: Paths64, b: Paths64): number => differenceOf(polygons(a), polygons(b));

const covered = (paths: Paths64): number => paths.reduce((sum, path) => sum + area(path), 0);

/** Rings and slanted polygons united: grounds with holes, and with as many slanted as straight edges. */
function ground(seed: number, reach: number): Paths64 {
  const next = random(seed);
  const paths: Paths64 = [];
  for (let k = 0; k < 60; k += 1) {
    const [x, y] = [reach * next(), reach * next()];
    const [r, n] = [(0.03 + 0.05 * next()) * reach, 3 + Math.floor(30 * next())];
    const ring = Array.from({ length: n }, (_, i) => ({
      x: Math.round(x + r * Math.cos((2 * Math.PI * i) / n)),
      y: Math.round(y + r * Math.sin((2 * Math.PI * i) / n)),
    }));
    paths.push(
      k % 3 === 0
        ? rectangle(Math.round(x - r), Math.round(y - r / 4), Math.round(x + r), Math.round(y))
        : ring,
    );
  }
  return union(paths, FillRule.NonZero);
}

const perimeter = (paths: Paths64): number =>
  paths.reduce(
    (sum, path) =>
      sum +
      path.reduce((own, p, k) => {
        const q = path[(k + 1) % path.length]!;
        return own + Math.hypot(q.x - p.x, q.y - p.y);
      }, 0),
    0,
  );

describe('polygons cut into pieces', () => {
  test.each([1, 2, 3, 4])('cover the same ground, each once, without holes (%i)', (seed) => {
    const whole = ground(seed, 4e7);
    const pieces = split(whole, 50);
    expect(pieces.length).toBeGreaterThan(10);
    for (const piece of pieces) {
      expect(piece.length).toBeLessThanOrEqual(50);
      expect(area(piece)).toBeGreaterThan(0);
    }
    // cuts across slanted edges are rounded to whole nanometres
    const off = apart(whole, pieces);
    expect(off).toBeLessThan(0.5 * perimeter(whole));
    // the general operation of the polygon library finds as much
    const general = covered(xor(whole, pieces, FillRule.NonZero));
    expect(Math.abs(off - general)).toBeLessThan(0.2 * perimeter(whole));
  });

  test('what is wrong with pieces is told with its area', () => {
    const whole = ground(5, 4e7);
    const pieces = split(whole, 50);
    const rounding = apart(whole, pieces);
    const one = pieces[7]!;
    const missing = apart(
      whole,
      pieces.filter((piece) => piece !== one),
    );
    expect(missing / area(one)).toBeCloseTo(1, 3);
    // ground covered twice
    expect(apart(whole, [...pieces, one]) / area(one)).toBeCloseTo(1, 3);
    // one moved by 3 µm: both what it leaves and what it lies upon
    const moved = one.map(({ x, y }) => ({ x: x + 3000, y }));
    const height = Math.max(...one.map(({ y }) => y)) - Math.min(...one.map(({ y }) => y));
    const off = apart(
      whole,
      pieces.map((piece) => (piece === one ? moved : piece)),
    );
    expect(off).toBeGreaterThan(2 * 3000 * height * 0.9);
    expect(rounding).toBeLessThan(1e-3 * off);
  });
});

describe('the difference of polygons', () => {
  test('cut along the axes in any way there is none', () => {
    const a = [rectangle(0, 0, 100, 100)];
    const b = [rectangle(0, 0, 40, 100), rectangle(40, 0, 100, 30), rectangle(40, 30, 100, 100)];
    expect(apart(a, b)).toBe(0);
    expect(apart(b, a)).toBe(0);
    expect(apart(a, [])).toBe(10_000);
    expect(apart(a, b.slice(1))).toBe(4000);
    expect(apart(a, [rectangle(0, 0, 41, 100), ...b.slice(1)])).toBe(100);
  });

  test('of grounds that have little in common is what the library finds at once', () => {
    for (let seed = 1; seed <= 5; seed += 1) {
      const [a, b] = [ground(seed, 4e7), ground(seed + 50, 4e7)];
      const wanted = covered(xor(a, b, FillRule.NonZero));
      expect(apart(a, b) / wanted).toBeCloseTo(1, 5);
    }
  });
});
