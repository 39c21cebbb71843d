import { averageCurve } from './average-curve.ts';
import type { BoundedFlow } from './bounded-flow.ts';
import { peakVelocity } from './peak-velocity.ts';
import { curvePoints, peakOf, shearNear } from './read-curve.ts';
import type { SectionShape } from './section-shape.ts';
import type { UnitSection } from './unit-section.ts';
import { STILL, type WallCurve, wallCurve, wallEdges, wallTurns } from './wall-curve.ts';
import { residualOf, wallShear } from './wall-shear.ts';

/**
 * Everything about a section from its solved flow, in the shape's unit. The shears come from the stress
 * function; their error is twice what the consistent flux of the velocity, an independent figure, differs
 * by where they are read. `shearError` besides is the part of it that refining is asked to mend.
 */
export function readSection(
  shape: SectionShape,
  solved: BoundedFlow,
): { unit: UnitSection; shearError: number } {
  const { mesh, system, flow, conductance } = solved;
  const edges = wallEdges(mesh);
  const turns = wallTurns(mesh, edges);
  const still = new Uint8Array(mesh.nodeCount);
  for (let k = 0; k < edges.length; k += 1) {
    if (turns[k] > STILL) still[mesh.boundary[3 * edges[k] + 1]] = 1;
  }
  if (turns[edges.length] > STILL) still[mesh.boundary[3 * edges[0]]] = 1;
  const flux = new Float64Array(mesh.nodeCount);
  wallShear(mesh, edges, residualOf(mesh, system.element, flow.load, flow.u), still, flux);
  const whole = wallCurve(mesh, edges, turns, flow.psi, flux);
  const curve = shape.averaged > 0 ? averageCurve(whole, shape.averaged) : whole;

  const peak = shape.reentrant.length > 0 ? null : peakOf(curve);
  const floor = shearNear(curve, shape.floorMiddle);
  const side = shearNear(curve, shape.sideMiddle);
  const top = peakVelocity(mesh, flow.u, shape.symmetric);
  const mean = shape.area / shape.perimeter;
  const peakError = peak ? (2 * peak.doubt) / peak.shear : 0;
  const shearError = Math.max(peakError, (2 * floor.doubt) / mean, (2 * side.doubt) / mean);
  // Averaging lowers a peak by about the square of its length: seen by half the length.
  const half = peak && shape.averaged > 0 ? peakOf(averageCurve(whole, shape.averaged / 2)).shear : 0;
  const averaging = peak && half > 0 ? (2 * Math.abs(half - peak.shear)) / peak.shear : 0;
  return {
    unit: {
      conductance,
      top: top.value,
      topAt: top.at,
      peakShear: peak?.shear ?? null,
      peakShearAt: peak?.at ?? null,
      floorShear: floor.shear,
      sideShear: side.shear,
      error: solved.meshError + (shape.moved * squareOf(whole)) / conductance,
      shearError: shearError + averaging,
      wall: curvePoints(curve),
    },
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
