import { expect, test } from 'vitest';
import { relativeDifference } from '../../solver/cell/difference.ts';
import { equivalent } from '../../solver/cell/equivalent.ts';
import { peakShear } from '../../solver/cell/peak.ts';
import { planMesh } from '../../solver/cell/plan-mesh.ts';
import type { CellShape } from '../../solver/cell/shape.ts';
import { solveCell } from '../../solver/cell/solve-cell.ts';
import type { Profile } from '../../solver/section/profile.ts';
import { verify } from '../verify/row.ts';
import { bend, tee } from './shapes.ts';
import { tetraFlow, tetraPortMatrix } from './tetra.ts';

const LAYERS = [-1, -0.8, -0.4, 0, 0.4, 0.8, 1];

/** Widens or narrows the arms (width 1, legs 1, square in the middle) by `ratio`, with their ends where they are. */
const widened =
  (ratio: (s: number) => number) =>
  (x: number, y: number, s: number): [number, number] => {
    const r = ratio(s);
    const along = (v: number): number =>
      Math.abs(v) <= 0.5 ? r * v : Math.sign(v) * (r / 2 + (Math.abs(v) - 0.5) * (1.5 - r / 2));
    return [along(x), along(y)];
  };

/** Difference of the stand-in rectangles from the true section, both on the same tetrahedra, over its bound. */
function overBound(shape: CellShape, profile: Profile, ratio: (s: number) => number): number {
  const { depth, faces } = shape;
  const standIn = equivalent({ ...shape, profile }, '');
  const plan = planMesh({ ...shape, depth: 1 }, 1.5, '', 1e5);
  const exact = tetraPortMatrix(plan, faces, depth / 2, LAYERS, widened(ratio));
  // The outline that was moved shows the width that stands in.
  const ys = standIn.shape.loops[0]!.filter((edge) => edge.tag === 1).map((edge) => edge.y);
  const width = 2 * Math.abs(ys[0]!);
  const simple = tetraPortMatrix(
    plan,
    faces,
    standIn.shape.depth / 2,
    LAYERS,
    widened(() => width),
  );
  return relativeDifference(simple, exact, faces) / standIn.error;
}

const SOURCE = 'tetrahedra with sloped walls, direct solution';
for (const [name, make] of [
  ['square bend', bend],
  ['T junction', tee],
] as const) {
  const depth = 0.2;
  const angle = 54.735610317;
  const slope = 1 / Math.tan((angle * Math.PI) / 180);
  verify(
    {
      quantity: 'error of the rectangles that stand in, over its bound',
      check: 'band',
      at: `${name}, side walls at 54.7 degrees, depth/width 0.2`,
      source: SOURCE,
      tolerance: 1,
    },
    () => overBound(make(depth), { kind: 'trapezoid', wallAngle: angle }, (s) => 1 - depth * (1 - s) * slope),
  );
}
verify(
  {
    quantity: 'error of the rectangles that stand in, over its bound',
    check: 'band',
    at: 'square bend, etched round, depth/width 0.3',
    source: SOURCE,
    tolerance: 1,
  },
  () =>
    overBound(
      bend(0.3),
      { kind: 'rounded' },
      (s) => 1 + 0.6 * Math.sqrt(Math.max(0, 1 - ((1 - s) / 2) ** 2)),
    ),
);

/** Distance from a wall whose arms are one wide, and the normal into the fluid. */
type Wall = (x: number, y: number) => readonly [number, number, number];
const straight =
  (nx: number, ny: number): Wall =>
  (x, y) => [nx * x + ny * y + 0.5, nx, ny];
/** A quarter of the plan that is solid, with its corner rounded. */
const quarter =
  (sx: number, sy: number, fillet: number): Wall =>
  (x, y) => {
    const px = Math.max(0.5 + fillet - sx * x, 0);
    const py = Math.max(0.5 + fillet - sy * y, 0);
    const far = Math.hypot(px, py);
    return [far - fillet, (-sx * px) / far, (-sy * py) / far];
  };

/**
 * The peak by the rectangle that stands in, over that of tetrahedra whose walls lean inward by `inward` at
 * each height, less the same with upright walls (what the mesh of tetrahedra does to a peak falls out), over
 * the bound of the difference.
 */
function peakOverBound(
  shape: CellShape,
  profile: Profile,
  walls: readonly Wall[],
  inward: (s: number) => number,
  pressures: readonly number[],
): number {
  const plan = planMesh({ ...shape, depth: 1 }, 1.4, '', 1e5, 12);
  const near = (x: number, y: number): boolean => Math.max(Math.abs(x), Math.abs(y)) < 1.3;
  const accuracy = { flow: 0.003, peak: 0.01 };
  const ratio = (given: CellShape, lean: (s: number) => number): number => {
    const moved = (x: number, y: number, s: number): [number, number] => {
      const to: [number, number] = [x, y];
      for (const wall of walls) {
        const [far, nx, ny] = wall(x, y);
        const by = Math.max(0, 1 - 2 * far) * lean(s);
        to[0] += by * nx;
        to[1] += by * ny;
      }
      return to;
    };
    const exact = tetraFlow(plan, shape.faces, shape.depth / 2, PEAK_LAYERS, moved).peak(pressures, near);
    return peakShear(solveCell(given, accuracy), pressures)!.value / exact;
  };
  const leaning = { ...shape, profile };
  return (
    Math.abs(ratio(leaning, inward) / ratio(shape, () => 0) - 1) /
    solveCell(leaning, accuracy).profilePeakError!
  );
}
const PEAK_LAYERS = [-1, -0.8, -0.45, 0, 0.45, 0.8, 1];

const slope = (angle: number): number => 1 / Math.tan((angle * Math.PI) / 180) / 2;
const bent = (fillet: number): Wall[] => [quarter(1, 1, fillet), straight(1, 0), straight(0, 1)];
const teed = (fillet: number): Wall[] => [quarter(1, -1, fillet), quarter(-1, -1, fillet), straight(0, -1)];
for (const [at, shape, profile, walls, inward, pressures] of [
  [
    'bend, fillet 0.1, side walls at 54.7 degrees, depth/width 0.2',
    bend(0.2, 0.1),
    { kind: 'trapezoid', wallAngle: 54.735610317 },
    bent(0.1),
    (s: number) => 0.2 * (1 - s) * slope(54.735610317),
    [1, 0],
  ],
  [
    'T junction, fillet 0.1, side walls at 75 degrees, depth/width 0.5',
    tee(0.5, 0.1),
    { kind: 'trapezoid', wallAngle: 75 },
    teed(0.1),
    (s: number) => 0.5 * (1 - s) * slope(75),
    [1, -0.4, 0],
  ],
  [
    'bend, fillet 0.3, etched round, depth/width 0.2',
    bend(0.2, 0.3),
    { kind: 'rounded' },
    bent(0.3),
    (s: number) => -0.2 * Math.sqrt(Math.max(0, 1 - ((1 - s) / 2) ** 2)),
    [1, 0],
  ],
] as const)
  verify(
    {
      quantity: 'error of the peak shear where walls lean, over its bound',
      check: 'band',
      at,
      source: SOURCE,
      tolerance: 1,
    },
    () => peakOverBound(shape, profile, walls, inward, pressures),
  );

test('an etch that eats up a fillet leaves a sharp corner, which has no peak', () => {
  const etched = (fillet: number) => solveCell({ ...bend(0.2, fillet), profile: { kind: 'rounded' } });
  expect(etched(0.19)).toMatchObject({ leansSharp: true, peakError: null });
  expect(etched(0.25).leansSharp).toBe(false);
  expect(etched(0.25).peakError).toBeGreaterThan(0.18);
  // Walls that lean inward widen every fillet.
  const leaning = solveCell({ ...bend(0.2, 0.05), profile: { kind: 'trapezoid', wallAngle: 75 } });
  expect(leaning.leansSharp).toBe(false);
  expect(solveCell({ ...bend(0.2, 0.05), profile: { kind: 'ellipse' } })).toMatchObject({
    leansSharp: false,
    peakError: null,
  });
});
