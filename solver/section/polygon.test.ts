import { expect, test } from 'vitest';
import { verify } from '../../test/verify/row.ts';
import { Problem } from '../problem/problem.ts';
import { perimeterCurve } from './perimeter-curve.ts';
import { polygonShape } from './polygon-shape.ts';
import { SectionCache } from './section-cache.ts';
import { sectionOf } from './section-of.ts';
import { simplify } from './simplify.ts';

type Points = [number, number][];
const relative = (got: number, wanted: number): number => Math.abs(got / wanted - 1);
const solve = (points: Points, accuracy = 1e-3) =>
  sectionOf({ kind: 'polygon', points }, 1, 1, 'layer flow', { accuracy, cache: new SectionCache() });

function random(seed: number): () => number {
  let state = seed;
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return state / 2 ** 32;
  };
}

const R = 50e-6;
/** A bore as a microscope sees it: `noise` is the greatest deviation over the radius. */
function circle(count: number, noise: number, seed = 1): Points {
  const next = random(seed);
  return Array.from({ length: count }, (_, i) => {
    const r = R * (1 + noise * (2 * next() - 1));
    const angle = (2 * Math.PI * i) / count;
    return [3e-4 + r * Math.cos(angle), 1e-4 + r * Math.sin(angle)];
  });
}
const TUBE = (Math.PI * R ** 4) / 8;

verify(
  {
    quantity: 'resistance of a measured circle, 400 points with ± 0.3 % noise, worst of five',
    check: 'exact',
    at: '100 µm bore',
    source:
      'Hagen–Poiseuille; mean radius known to 0.3 %/√(3·400) = 0.009 %, roughness narrows by less than its height',
    tolerance: 4 * 0.003,
  },
  () =>
    Math.max(...[1, 2, 3, 4, 5].map((seed) => relative(solve(circle(400, 0.003, seed)).conductance, TUBE))),
);
verify(
  {
    quantity: 'resistance of a polygon round a circle, against that of equal area',
    check: 'exact',
    at: '400 points, no noise',
    source: 'Hagen–Poiseuille with the polygon’s area',
    tolerance: 2e-5,
  },
  () => {
    const section = solve(circle(400, 0), 1e-4);
    return relative(section.conductance, section.area ** 2 / (8 * Math.PI));
  },
);

test('a noisy outline costs no refinement storm, and keeps its shear readable', () => {
  const cache = new SectionCache();
  const points = circle(400, 0.003);
  const section = sectionOf({ kind: 'polygon', points }, 1, 1, '', { cache });
  // One point of the curve per Gauss point: the boundary is as fine as the measurement, not finer.
  expect(cache.entries().sections[0].unit.wall.length / 3).toBeLessThan(2 * 2 * 400);
  expect(section.error).toBeLessThan(2e-3);
  expect(section.peakShear).not.toBeNull();
  expect(section.peakShear! / section.meanShear).toBeGreaterThan(1);
  expect(section.peakShear! / section.meanShear).toBeLessThan(1.15);
});

test('thousands of points are thinned out, and the error says by how much that may matter', () => {
  const points = circle(5000, 0.001);
  const shape = polygonShape(points, '');
  expect(shape.shape[0].length).toBeLessThanOrEqual(400);
  expect(shape.moved).toBeGreaterThan(0);
  const section = solve(points);
  expect(relative(section.conductance, TUBE)).toBeLessThan(section.error + 0.004);
  expect(section.error).toBeGreaterThan(shape.moved);
});

test('direction, start, a repeated first point and place do not matter', () => {
  const points: Points = [
    [0, 0],
    [2, 0.1],
    [1.8, 1],
    [0.3, 0.9],
  ];
  const wanted = solve(points);
  const same = (other: Points): void => {
    const got = solve(other);
    expect(relative(got.conductance, wanted.conductance)).toBeLessThan(1e-9);
    expect(relative(got.peakShear!, wanted.peakShear!)).toBeLessThan(1e-6);
  };
  same([...points].reverse());
  same([...points.slice(2), ...points.slice(0, 2)]);
  same([...points, points[0]]);
  const moved = solve(points.map(([x, y]) => [x + 10, y - 3]));
  expect(relative(moved.conductance, wanted.conductance)).toBeLessThan(1e-9);
  expect(moved.peakAt[0] - wanted.peakAt[0]).toBeCloseTo(10, 6);
  expect(moved.peakAt[1] - wanted.peakAt[1]).toBeCloseTo(-3, 6);
  // Turned, the side middle is another place, and the mesh is refined for that.
  const turned = solve(points.map(([x, y]) => [-y, x]));
  expect(relative(turned.conductance, wanted.conductance)).toBeLessThan(turned.error + wanted.error);
});

test('a re-entrant corner leaves the peak unquoted, and the rest known', () => {
  const ell: Points = [
    [0, 0],
    [2, 0],
    [2, 1],
    [1, 1],
    [1, 2],
    [0, 2],
  ];
  const section = solve(ell);
  expect(section.peakShear).toBeNull();
  expect(section.peakShearAt).toBeNull();
  expect(section.error).toBeLessThanOrEqual(1e-3);
  const finer = solve(ell, 1e-5);
  expect(relative(section.conductance, finer.conductance)).toBeLessThan(section.error);
  // A dent that is mere measurement is none.
  const dented: Points = [
    [0, 0],
    [2, 0],
    [2, 1],
    [1, 0.999],
    [0, 1],
  ];
  expect(solve(dented).peakShear).not.toBeNull();
});

test('where flow and shear are read', () => {
  const box: Points = [
    [1, 1],
    [3, 1],
    [3, 2],
    [1, 2],
  ];
  const section = solve(box, 1e-4);
  const exact = sectionOf({ kind: 'rectangle' }, 2, 1);
  expect(relative(section.conductance, exact.conductance)).toBeLessThan(1e-4);
  expect(relative(section.floorShear, exact.floorShear)).toBeLessThan(1e-3);
  expect(relative(section.sideShear, exact.sideShear)).toBeLessThan(1e-3);
  expect(section.peakAt[0]).toBeCloseTo(2, 3);
  expect(section.peakAt[1]).toBeCloseTo(1.5, 3);
  expect(section.width).toBeCloseTo(2, 12);
  expect(section.depth).toBeCloseTo(1, 12);
  const curve = perimeterCurve({ kind: 'polygon', points: box }, 1, 1);
  expect(Math.min(...curve.x)).toBeCloseTo(1, 9);
  expect(Math.max(...curve.y)).toBeCloseTo(2, 9);
});

test('simplifying keeps every point within the tolerance', () => {
  const outline = circle(500, 0.01).map(([x, y]): [number, number] => [x / R, y / R]);
  const { outline: kept, moved } = simplify(outline, 0.02);
  expect(kept.length).toBeLessThan(60);
  expect(moved).toBeLessThanOrEqual(0.02);
  for (const [px, py] of outline) {
    const distance = Math.min(
      ...kept.map(([ax, ay], i) => {
        const [bx, by] = kept[(i + 1) % kept.length];
        const t = ((px - ax) * (bx - ax) + (py - ay) * (by - ay)) / ((bx - ax) ** 2 + (by - ay) ** 2);
        const s = Math.min(1, Math.max(0, t));
        return Math.hypot(px - ax - s * (bx - ax), py - ay - s * (by - ay));
      }),
    );
    expect(distance).toBeLessThanOrEqual(moved + 1e-12);
  }
  expect(simplify(outline, 0).outline).toHaveLength(500);
});

test.each<[string, Points, RegExp]>([
  [
    'a bow',
    [
      [0, 0],
      [1, 1],
      [1, 0],
      [0, 1],
    ],
    /crosses itself at \(0\.5000, 0\.5000\) m/,
  ],
  [
    'a spike',
    [
      [0, 0],
      [1, 0],
      [1, 1],
      [0.5, 1],
      [0.5, 5],
      [0.5, 1],
      [0, 1],
    ],
    /crosses itself at/,
  ],
  [
    'a line',
    [
      [0, 0],
      [1, 0],
      [2, 0],
    ],
    /encloses nothing/,
  ],
  [
    'two points',
    [
      [0, 0],
      [1, 0],
    ],
    /too few points/,
  ],
  [
    'one point thrice',
    [
      [1, 1],
      [1, 1],
      [1, 1],
    ],
    /too few points/,
  ],
  [
    'no number',
    [
      [0, 0],
      [1, Number.NaN],
      [0, 1],
    ],
    /no number/,
  ],
  ['too many', circle(20_001, 0), /20001 points/],
])('%s is refused', (_, points, what) => {
  try {
    solve(points);
    expect.unreachable();
  } catch (error) {
    expect(error).toBeInstanceOf(Problem);
    expect((error as Problem).where).toBe('layer flow');
    expect((error as Problem).what).toMatch(what);
  }
});
