import { canonical } from '../../solver/cell/canonical.ts';
import type { Accuracy } from '../../solver/cell/cell.ts';
import { levelOf, solveLevel } from '../../solver/cell/level.ts';
import { peakShear } from '../../solver/cell/peak.ts';
import { planMesh } from '../../solver/cell/plan-mesh.ts';
import type { CellShape } from '../../solver/cell/shape.ts';
import { solveCell } from '../../solver/cell/solve-cell.ts';
import { memoryStore } from '../../solver/cell/store.ts';
import { rectangleSection } from '../../solver/section/rectangle.ts';
import { verify } from '../verify/row.ts';
import { bend, crossing, star, tee } from './shapes.ts';

const FINE: Accuracy = { flow: 0.001, peak: null };

const store = memoryStore();

/** Resistance per length of a channel of width 1, viscosity 1, by the exact series. */
const perLength = (depth: number): number => 1 / rectangleSection(1, depth).conductance;

/** Pressures at faces 1..n-1 per unit flow into each, all leaving by the last face, by rows. */
function impedance(shape: CellShape, accuracy = FINE): number[][] {
  const { portMatrix, faces } = solveCell(shape, accuracy, store);
  const n = faces - 1;
  const a = Array.from({ length: n }, (_, i) => [
    ...Array.from({ length: n }, (__, j) => portMatrix[i * faces + j]!),
    ...Array.from({ length: n }, (__, j) => (i === j ? 1 : 0)),
  ]);
  for (let i = 0; i < n; i += 1) {
    const pivot = a[i]![i]!;
    for (let j = 0; j < 2 * n; j += 1) a[i]![j]! /= pivot;
    for (let k = 0; k < n; k += 1) {
      if (k === i) continue;
      const factor = a[k]![i]!;
      for (let j = 0; j < 2 * n; j += 1) a[k]![j]! -= factor * a[i]![j]!;
    }
  }
  return a.map((row) => row.slice(n));
}

/** Excess length of a square bend, in widths: resistance in lengths of duct less its two arms of 1. */
const bendExcess = (depth: number, accuracy = FINE): number =>
  impedance(bend(depth), accuracy)[0]![0]! / perLength(depth) - 2;

const VOLUMES =
  'staggered finite volumes on graded grids, Richardson extrapolation, +-0.0004 widths (made for this program, unpublished)';
/** A tenth of a per cent of the resistance of a channel two widths long, in widths. */
const TENTH = 0.002;
for (const [depth, value] of [
  [1, 0.6922],
  [0.5, 0.6448],
] as const)
  verify(
    {
      quantity: 'excess length of a square bend (absolute, in widths)',
      check: 'package',
      at: `depth/width ${depth}`,
      source: VOLUMES,
      tolerance: TENTH,
    },
    () => Math.abs(bendExcess(depth) - value),
  );
for (const [name, i, j, value] of [
  ['Z11', 0, 0, 0.6643],
  ['Z12', 0, 1, 0.2524],
  ['Z22', 1, 1, 0.6643],
] as const)
  verify(
    {
      quantity: `impedance ${name} of a T less its arms (absolute, in widths)`,
      check: 'package',
      at: 'depth/width 1',
      source: VOLUMES,
      tolerance: TENTH,
    },
    () => {
      const arms = i === j ? 2 : 1;
      return Math.abs(impedance(tee(1))[i]![j]! / perLength(1) - arms - value);
    },
  );

/** Value at depth 0 from depths d and 2d, whose error goes with the depth. */
const shallow = (of: (depth: number) => number): number => 2 * of(0.04) - of(0.08);
verify(
  {
    quantity: 'excess length of a square bend as its depth goes to zero (absolute, in widths)',
    check: 'exact',
    at: 'extrapolated from depth/width 0.04 and 0.08',
    source: '1 - 2 ln 2 / pi = 0.5587288, potential flow (Hall 1967, Thin Solid Films 1, 277, from memory)',
    tolerance: 0.004,
  },
  () => Math.abs(shallow((depth) => bendExcess(depth)) - (1 - (2 * Math.LN2) / Math.PI)),
);
const cross = (i: number, j: number, arms: number): number =>
  // Arms 0, 90, 180, 270 degrees; the last is the outlet, so its opposite is the arm at 90 degrees.
  shallow((depth) => impedance(crossing(depth))[i]![j]! / perLength(depth) - arms);
for (const [name, i, j, arms, value] of [
  ['into one side arm', 0, 0, 2, 1 / 2],
  ['at one side arm, into the other', 0, 2, 1, 1 / 4 - Math.LN2 / (2 * Math.PI)],
  ['at a side arm, into the arm opposite the outlet', 0, 1, 1, 1 / 4 + Math.LN2 / (2 * Math.PI)],
  ['into the arm opposite the outlet', 1, 1, 2, 1 / 2 + Math.LN2 / Math.PI],
] as const)
  verify(
    {
      quantity: `impedance of a cross as its depth goes to zero, ${name} (absolute, in widths)`,
      check: 'exact',
      at: 'extrapolated from depth/width 0.04 and 0.08',
      source: 'potential flow, 1/2 and 1/4 +- ln 2 / 2 pi (numbers recomputed, closed forms matched to them)',
      tolerance: 0.004,
    },
    () => Math.abs(cross(i, j, arms) - value),
  );

const straight = (width: number, length: number, depth: number): CellShape =>
  star(
    [
      { angle: 0, width },
      { angle: 180, width },
    ],
    depth,
    0,
    length / 2 / width,
  );
for (const [width, depth] of [
  [1, 0.1],
  [1, 0.5],
  [1, 1],
  [1, 3],
] as const)
  verify(
    {
      quantity: 'conductance of a straight piece',
      check: 'exact',
      at: `depth/width ${depth / width}`,
      source: 'series for rectangular ducts, Shah and London 1978',
      tolerance: 0.001,
    },
    () => solveCell(straight(width, 2, depth), FINE).portMatrix[0]! * perLength(depth) * 2 - 1,
  );
verify(
  {
    quantity: 'peak wall shear of a straight piece',
    check: 'exact',
    at: 'depth/width 0.5',
    source: 'series for rectangular ducts, Shah and London 1978',
    tolerance: 0.005,
  },
  () => {
    const section = rectangleSection(1, 0.5);
    return (
      peakShear(solveCell(straight(1, 2, 0.5), { flow: 0.001, peak: 0.01 }), [2, 0])!.value /
        section.peakShear! -
      1
    );
  },
);
verify(
  {
    quantity: 'resistance of two halves in series against the whole piece',
    check: 'invariant',
    at: 'straight channel cut by an artificial face, depth/width 0.5, finest mesh',
    source: 'fully developed flow stays so',
    tolerance: 1e-6,
  },
  () => {
    const conductance = (length: number): number => {
      const { shape } = canonical(straight(1, length, 0.5));
      return solveLevel(levelOf(planMesh(shape, 0.18, '', 1e5), 2), 2, 1e-10).matrix[0]!;
    };
    return conductance(1) / 2 / conductance(2) - 1;
  },
);
