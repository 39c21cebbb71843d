import type { Mesh } from '../mesh/mesh.ts';
import { meshShape } from '../mesh/mesh-shape.ts';
import { Problem } from '../problem/problem.ts';
import { type BoundedFlow, boundedFlow } from './bounded-flow.ts';
import { readSection } from './read-section.ts';
import type { SectionShape } from './section-shape.ts';
import type { UnitSection } from './unit-section.ts';

/**
 * Flow through a section by quadratic finite elements, refined until it is known well enough: −∇²u = 1
 * with u = 0 on the wall. The conductance is the middle of its two bounds (`planeFlow`) and its error half
 * their distance: a proven bound, but for the geometry of curved edges, which is estimated and added.
 */

/** Accuracy asked of the shears, which converge more slowly. */
const shearAsked = (accuracy: number): number =>
  accuracy > 1e-4 ? 10 * accuracy : 0.1 * Math.sqrt(accuracy);
/** Mesh size over hydraulic diameter, and at most over depth, that mostly serves for 0.1 %. */
const FIRST_SIZE = 0.19;
const FIRST_SIZE_OF_DEPTH = 0.28;
const MEASURED_GROWTH = 0.5;
const ROUNDS = 8;
const MOST_TRIANGLES = 60_000;
/** Rounds for the shears alone; what is then left is told in `shearError`, not refined for ever. */
const SHEAR_ROUNDS = 4;
const SHEAR_STEP = 0.65;
const SHEAR_TRIANGLES = 4000;

/**
 * @param accuracy of the conductance, relative; shears are asked to be within ten times as much (below
 *   1e-4 a tenth of its root)
 * @throws Problem 'profile' or 'not-converged', naming `where`
 */
export function solveSection(shape: SectionShape, accuracy: number, where: string): UnitSection {
  const shear = shearAsked(accuracy);
  let { solved, size, perQuarter } = solveFlow(shape, accuracy, where);
  for (let round = 0; ; round += 1) {
    const { unit, shearError } = readSection(shape, solved);
    const fine = solved.mesh.triangles.length > 6 * SHEAR_TRIANGLES;
    if (shearError <= shear || round === SHEAR_ROUNDS || fine) return unit;
    size *= SHEAR_STEP;
    solved = boundedFlow(shape, sectionMesh(shape, size, perQuarter, where));
  }
}

export interface SolvedFlow {
  readonly solved: BoundedFlow;
  /** The mesh size that served, in the shape's unit, and the edges per quarter circle. */
  readonly size: number;
  readonly perQuarter: number;
}

/** The flow alone. */
export function solveFlow(shape: SectionShape, accuracy: number, where: string): SolvedFlow {
  const dh = (4 * shape.area) / shape.perimeter;
  let size = Math.min(FIRST_SIZE * dh, FIRST_SIZE_OF_DEPTH) * (accuracy / 1e-3) ** 0.25;
  let perQuarter = accuracy < 3e-5 ? 6 : 4;
  for (let round = 1; ; round += 1) {
    const solved = boundedFlow(shape, sectionMesh(shape, size, perQuarter, where));
    if (solved.meshError <= accuracy) return { solved, size, perQuarter };
    if (round === ROUNDS || solved.mesh.triangles.length > 6 * MOST_TRIANGLES) {
      throw notReached(accuracy, solved.meshError, where);
    }
    // Fourth order, and not quite trusted.
    size *= Math.max(0.4, 0.85 * (solved.meshError / accuracy) ** -0.25);
    if (solved.geometry > 0.25 * accuracy) perQuarter = Math.ceil(1.6 * perQuarter);
  }
}

/** The mesh that a section is solved on: graded at obtuse corners, far at re-entrant ones. */
export function sectionMesh(shape: SectionShape, size: number, perQuarter: number, where: string): Mesh {
  const points = [
    ...shape.obtuse.map(([x, y]) => ({ x, y, size: 0.25 * size })),
    ...shape.reentrant.map(([x, y]) => ({ x, y, size: 0.03 * size })),
  ];
  try {
    // A measured wall has more edges than its flow asks for: the mesh leaves them behind fast.
    const growth = shape.averaged > 0 ? { growth: MEASURED_GROWTH } : {};
    const mesh = meshShape(shape.shape, { size, perQuarter, points, ...growth }, where);
    if (shape.stretch !== 1) for (let i = 0; i < mesh.nodeCount; i += 1) mesh.x[i] *= shape.stretch;
    return mesh;
  } catch (error) {
    if (!(error instanceof Problem)) throw error;
    throw new Problem('profile', `The cross-section cannot be solved. ${error.what}`, where, error.remedy);
  }
}

function notReached(accuracy: number, error: number, where: string): Problem {
  return new Problem(
    'not-converged',
    `The cross-section is known to ${error.toPrecision(2)} of its flow, not to the ${accuracy} asked for.`,
    where,
    'Ask for less accuracy, or simplify the outline.',
  );
}
