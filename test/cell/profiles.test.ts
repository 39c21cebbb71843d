import { relativeDifference } from '../../solver/cell/difference.ts';
import { equivalent } from '../../solver/cell/equivalent.ts';
import { planMesh } from '../../solver/cell/plan-mesh.ts';
import type { CellShape } from '../../solver/cell/shape.ts';
import type { Profile } from '../../solver/section/profile.ts';
import { verify } from '../verify/row.ts';
import { bend, tee } from './shapes.ts';
import { tetraPortMatrix } from './tetra.ts';

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
