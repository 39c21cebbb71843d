import { toCaller } from '../cell/canonical.ts';
import type { CellSolution } from '../cell/cell.ts';
import { depthValues } from '../cell/depth.ts';
import { flowField, HALF } from '../cell/flow-field.ts';

/** Places over the half depth where side-wall shear is looked at. */
const LEVELS = 16;

/**
 * Largest wall shear of a solved cell within a part of its plan, in the unit of the face pressures; null
 * where the cell has no peak, 0 where no part of it lies within.
 *
 * @param within tells whether a point of the plan (coordinates of the shape) belongs
 */
export function largestWithin(
  solution: CellSolution,
  pressures: ArrayLike<number>,
  within: (x: number, y: number) => boolean,
): number | null {
  const field = solution.sharp ? null : flowField(solution, pressures);
  if (!field) return null;
  const { mesh, depth, inPlane, wallAlong, wallAcross, placement } = field;
  const inside = new Uint8Array(mesh.nodeCount);
  for (let i = 0; i < mesh.nodeCount; i += 1) {
    const [x, y] = toCaller(placement, mesh.x[i], mesh.y[i]);
    inside[i] = within(x, y) ? 1 : 0;
  }
  let most = 0;
  const { inPlaneSlope } = depthValues(depth, 1);
  for (let i = 0; i < mesh.nodeCount; i += 1) {
    if (inside[i] === 0) continue;
    let x = 0;
    let y = 0;
    for (let k = 0; k < inPlane.length; k += 1) {
      x += inPlaneSlope[k] * inPlane[k][i];
      y += inPlaneSlope[k] * inPlane[k][mesh.nodeCount + i];
    }
    most = Math.max(most, (x * x + y * y) / (HALF * HALF));
  }
  for (let level = 0; level < LEVELS; level += 1) {
    const values = depthValues(depth, level / LEVELS);
    for (let e = 0; e < wallAlong[0].length; e += 1) {
      if (inside[mesh.boundary[e]] === 0) continue;
      let along = 0;
      let up = 0;
      for (let k = 0; k < wallAlong.length; k += 1) along += values.inPlane[k] * wallAlong[k][e];
      for (let m = 0; m < wallAcross.length; m += 1) up += values.across[m] * wallAcross[m][e];
      most = Math.max(most, along * along + up * up);
    }
  }
  return Math.sqrt(most);
}
