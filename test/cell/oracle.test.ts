import { canonical } from '../../solver/cell/canonical.ts';
import { relativeDifference } from '../../solver/cell/difference.ts';
import { levelOf, solveLevel } from '../../solver/cell/level.ts';
import { planMesh } from '../../solver/cell/plan-mesh.ts';
import type { CellShape } from '../../solver/cell/shape.ts';
import { verify } from '../verify/row.ts';
import { saddlePortMatrix } from './saddle.ts';
import { bend, star, tee } from './shapes.ts';
import { tetraPortMatrix } from './tetra.ts';

const mesh = (shape: CellShape, coarseness: number) => planMesh(canonical(shape).shape, coarseness, '', 1e5);

const wye = (depth: number, fillet: number): CellShape =>
  star(
    [
      { angle: 10, width: 1 },
      { angle: 130, width: 0.6 },
      { angle: 250, width: 0.8 },
    ],
    depth,
    fillet,
  );
for (const [name, shape] of [
  ['square bend, depth/width 1', bend(1)],
  ['T junction, depth/width 0.2', tee(0.2)],
  ['Y junction with fillets, depth/width 0.5', wye(0.5, 0.1)],
] as const)
  verify(
    {
      quantity: 'port matrix by pressure iteration against the whole saddle factored at once',
      check: 'invariant',
      at: `${name}, two depth modes`,
      source: 'the same discrete equations by L D L^T with refinement',
      tolerance: 1e-8,
    },
    () => {
      const level = levelOf(mesh(shape, 1.4), shape.faces);
      const direct = saddlePortMatrix(level.plane, 2, shape.faces);
      return relativeDifference(solveLevel(level, 2, 1e-10).matrix, direct, shape.faces);
    },
  );

const LAYERS = [0, 0.35, 0.65, 0.85, 1];
const SOURCE = 'quadratic velocity, linear pressure on tetrahedra, direct solution';
for (const [name, shape, coarseness, tolerance] of [
  ['square bend, depth/width 1', bend(1), 1, 0.004],
  ['square bend, depth/width 0.5', bend(0.5), 1, 0.006],
  ['T junction, depth/width 1', tee(1), 1.2, 0.006],
] as const)
  verify(
    { quantity: 'port matrix against tetrahedra', check: 'package', at: name, source: SOURCE, tolerance },
    () => {
      const fine = solveLevel(levelOf(mesh(shape, 0.6), shape.faces), 3, 1e-9).matrix;
      const slow = tetraPortMatrix(mesh(shape, coarseness), shape.faces, 0.5, LAYERS);
      return relativeDifference(slow, fine, shape.faces);
    },
  );
