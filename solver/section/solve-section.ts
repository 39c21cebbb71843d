import type { Mesh } from '../mesh/mesh.ts';
import { meshShape } from '../mesh/mesh-shape.ts';
import type { Sizing } from '../mesh/sizing.ts';
import { Problem } from '../problem/problem.ts';
import { averageCurve } from './average-curve.ts';
import { elementTable } from './element-table.ts';
import { peakVelocity } from './peak-velocity.ts';
import { planeFlow } from './plane-flow.ts';
import { DEGREE_4 } from './quadrature.ts';
import { curvePoints, peakOf, shearNear } from './read-curve.ts';
import { type SectionShape, SYMMETRY } from './section-shape.ts';
import { stiffness } from './stiffness.ts';
import type { UnitSection } from './unit-section.ts';
import { STILL, type WallCurve, wallCurve, wallEdges, wallTurns } from './wall-curve.ts';
import { residualOf, wallShear } from './wall-shear.ts';

/**
 * Flow through a section by quadratic finite elements, refined until it is known well enough: −∇²u = 1
 * with u = 0 on the wall. The conductance is the middle of its two bounds (`planeFlow`) and its error half
 * their distance, a proven bound but for the geometry of curved edges, which is estimated and added; the
 * shears come from the stress function, and their error is twice what the consistent flux of the velocity,
 * an independent figure, differs by where they are read.
 */

/** Accuracy asked of the shears, which converge more slowly: ten times that of the conductance, or a tenth of its root. */
const shearAsked = (accuracy: number): number =>
  accuracy > 1e-4 ? 10 * accuracy : 0.1 * Math.sqrt(accuracy);
const ROUNDS = 8;
const MOST_TRIANGLES = 60_000;
/** Rounds for the shears alone; what is then left is told in `shearError`, not refined for ever. */
const SHEAR_ROUNDS = 4;
const SHEAR_STEP = 0.65;
const SHEAR_TRIANGLES = 4000;
/** The curved triangles' area differs from the true one; the flow differs by at most about this times as much. */
const GEOMETRY = 4;

/**
 * @param accuracy of the conductance, relative
 * @param shear accuracy of the shears, relative
 * @throws Problem 'profile' or 'not-converged', naming `where`
 */
export function solveSection(
  shape: SectionShape,
  accuracy: number,
  where: string,
  shear = shearAsked(accuracy),
): UnitSection {
  const dh = (4 * shape.area) / shape.perimeter;
  let size = 0.35 * dh * Math.min(1.4, (accuracy / 1e-3) ** 0.2);
  let perQuarter = accuracy < 3e-5 ? 6 : 4;
  let shearRounds = 0;
  for (let round = 1; ; round += 1) {
    const mesh = sectionMesh(shape, size, perQuarter, where);
    const { unit, meshError, shearError, geometry } = solveOn(shape, mesh);
    const flowWorst = meshError / accuracy;
    if (flowWorst <= 1) {
      const fine = mesh.triangles.length > 6 * SHEAR_TRIANGLES;
      if (shearError <= shear || shearRounds === SHEAR_ROUNDS || fine) return unit;
      shearRounds += 1;
      size *= SHEAR_STEP;
      continue;
    }
    if (round >= ROUNDS || mesh.triangles.length > 6 * MOST_TRIANGLES) {
      throw notReached(accuracy, meshError, where);
    }
    // Fourth order, and not quite trusted.
    size *= Math.max(0.4, 0.85 * flowWorst ** -0.25);
    if (geometry > 0.25 * accuracy) perQuarter = Math.ceil(1.6 * perQuarter);
  }
}

/** The mesh that a section is solved on: graded at obtuse corners, far at re-entrant ones. */
export function sectionMesh(shape: SectionShape, size: number, perQuarter: number, where: string): Mesh {
  const sizing: Sizing = {
    size,
    perQuarter,
    points: [
      ...shape.obtuse.map(([x, y]) => ({ x, y, size: 0.25 * size })),
      ...shape.reentrant.map(([x, y]) => ({ x, y, size: 0.03 * size })),
    ],
  };
  try {
    const mesh = meshShape(shape.shape, sizing, where);
    if (shape.stretch !== 1) for (let i = 0; i < mesh.nodeCount; i += 1) mesh.x[i] *= shape.stretch;
    return mesh;
  } catch (error) {
    if (!(error instanceof Problem)) throw error;
    throw new Problem('profile', `The cross-section cannot be solved. ${error.what}`, where, error.remedy);
  }
}

export interface Solved {
  readonly unit: UnitSection;
  /** The parts of the conductance's error that a finer mesh makes smaller, and that of curved edges. */
  readonly meshError: number;
  readonly geometry: number;
  /** The shears' error as far as refining is asked to mend it. */
  readonly shearError: number;
}

/** Everything about a section from one mesh, in the shape's unit. */
export function solveOn(shape: SectionShape, mesh: Mesh): Solved {
  const wall = new Uint8Array(mesh.nodeCount);
  const mirror = new Uint8Array(mesh.nodeCount);
  for (let i = 0; i < mesh.boundaryTag.length; i += 1) {
    const flags = mesh.boundaryTag[i] === SYMMETRY ? mirror : wall;
    for (let k = 0; k < 3; k += 1) flags[mesh.boundary[3 * i + k]] = 1;
  }
  const table = elementTable(mesh, DEGREE_4);
  const system = stiffness(mesh, table);
  const flow = planeFlow(mesh, table, system, wall, mirror);
  const halves = shape.symmetric ? 2 : 1;
  const conductance = (halves * (flow.lower + flow.upper)) / 2;
  let area = 0;
  for (const weight of table.weight) area += halves * weight;
  const geometry = GEOMETRY * Math.abs(area / shape.area - 1);

  const edges = wallEdges(mesh);
  const turns = wallTurns(mesh, edges);
  const still = new Uint8Array(mesh.nodeCount);
  for (let k = 0; k < edges.length; k += 1) {
    if (turns[k] > STILL) still[mesh.boundary[3 * edges[k] + 1]] = 1;
  }
  if (turns[edges.length] > STILL) still[mesh.boundary[3 * edges[0]]] = 1;
  const flux = new Float64Array(mesh.nodeCount);
  wallShear(mesh, edges, residualOf(mesh, system.element, flow.load, flow.u), still, flux);
  const wholeCurve = wallCurve(mesh, edges, turns, flow.psi, flux);
  const curve = shape.averaged > 0 ? averageCurve(wholeCurve, shape.averaged) : wholeCurve;
  const peak = shape.reentrant.length > 0 ? null : peakOf(curve);
  const floor = shearNear(curve, shape.floorMiddle);
  const side = shearNear(curve, shape.sideMiddle);
  const top = peakVelocity(mesh, flow.u, shape.symmetric);
  const mean = shape.area / shape.perimeter;
  const peakError = peak ? (2 * peak.doubt) / peak.shear : 0;
  const shearError = Math.max(peakError, (2 * floor.doubt) / mean, (2 * side.doubt) / mean);
  // Averaging lowers a peak by about the square of its length: seen by half the length.
  const half = peak && shape.averaged > 0 ? peakOf(averageCurve(wholeCurve, shape.averaged / 2)).shear : 0;
  const averaging = peak && half > 0 ? (2 * Math.abs(half - peak.shear)) / peak.shear : 0;
  const meshError = (flow.upper - flow.lower) / (flow.upper + flow.lower) + geometry;
  return {
    unit: {
      conductance,
      top: top.value,
      topAt: top.at,
      peakShear: peak?.shear ?? null,
      peakShearAt: peak?.at ?? null,
      floorShear: floor.shear,
      sideShear: side.shear,
      error: meshError + (shape.moved * squareOf(wholeCurve)) / conductance,
      shearError: shearError + averaging,
      wall: curvePoints(curve),
    },
    meshError,
    geometry,
    // Floor and side middle of a measured or notched outline may happen to lie in a corner.
    shearError: shape.averaged === 0 && shape.reentrant.length === 0 ? shearError : peakError,
  };
}

/** ∫shear² ds: how much the flow changes per distance that the wall moves (Hadamard's formula). */
function squareOf(curve: WallCurve): number {
  let sum = 0;
  for (let p = 0; p < curve.s.length; p += 2) {
    const length = (curve.s[p + 1] - curve.s[p]) * Math.sqrt(3);
    sum += (length * (curve.shear[p] ** 2 + curve.shear[p + 1] ** 2)) / 2;
  }
  return sum;
}

function notReached(accuracy: number, error: number, where: string): Problem {
  return new Problem(
    'not-converged',
    `The cross-section is known to ${error.toPrecision(2)} of its flow, not to the ${accuracy} asked for.`,
    where,
    'Ask for less accuracy, or simplify the outline.',
  );
}
