import { toCaller } from '../cell/canonical.ts';
import type { CellSolution } from '../cell/cell.ts';
import { depthValues } from '../cell/depth.ts';
import { flowField, HALF } from '../cell/flow-field.ts';
import { quadratic, quadraticGradient } from '../cell/triangle.ts';
import type { Mesh } from '../mesh/mesh.ts';
import { rectangleShear } from '../section/rectangle-curve.ts';

/** Parts of a floor by their wall shear: areas in m², stresses in Pa. */
export interface FloorParts {
  readonly area: Float64Array;
  readonly stress: Float64Array;
}

/** Share of a band of floor across a rectangular duct, and its stress. */
const STRIPS = 400;

/**
 * Floor of a straight rectangular duct, exactly: strips along it, of equal width, half of the floor being
 * the mirror image of the other.
 * @param gradient Pa/m
 */
export function ductFloor(width: number, depth: number, length: number, gradient: number): FloorParts {
  const area = new Float64Array(STRIPS).fill((width * length) / STRIPS);
  const stress = Float64Array.from(
    { length: STRIPS },
    (_, i) => gradient * rectangleShear(width, depth, ((i + 0.5) / STRIPS) * (width / 2)),
  );
  return { area, stress };
}

/** Small triangles that each triangle of a cell is cut into, per side: as small as a tenth of the depth, as far as that goes. */
const FINEST = 0.1;
const LEAST_CUTS = 3;
const MOST_CUTS = 10;

/**
 * Floor of a solved cell within a part of its plan; null where fields were not kept.
 * @param pressures on the faces, Pa
 * @param within tells whether a point of the plan (coordinates of the shape, m) belongs
 */
export function cellFloor(
  solution: CellSolution,
  pressures: ArrayLike<number>,
  within: (x: number, y: number) => boolean,
): FloorParts | null {
  const field = flowField(solution, pressures);
  if (!field) return null;
  const { mesh, depth, inPlane, placement } = field;
  const { inPlaneSlope } = depthValues(depth, 1);
  const sx = new Float64Array(mesh.nodeCount);
  const sy = new Float64Array(mesh.nodeCount);
  for (let k = 0; k < inPlane.length; k += 1) {
    for (let i = 0; i < mesh.nodeCount; i += 1) {
      sx[i] += (inPlaneSlope[k] * inPlane[k][i]) / HALF;
      sy[i] += (inPlaneSlope[k] * inPlane[k][mesh.nodeCount + i]) / HALF;
    }
  }
  const area: number[] = [];
  const stress: number[] = [];
  const n = new Float64Array(6);
  const da = new Float64Array(6);
  const db = new Float64Array(6);
  for (let t = 0; t < mesh.triangles.length / 6; t += 1) {
    const cuts = Math.min(MOST_CUTS, Math.max(LEAST_CUTS, Math.ceil(sizeOf(mesh, t) / FINEST)));
    for (let i = 0; i < cuts; i += 1) {
      for (let j = 0; j < 2 * (cuts - i) - 1; j += 1) {
        const offset = j % 2 === 0 ? 1 / 3 : 2 / 3;
        const la = (i + offset) / cuts;
        const lb = ((j >> 1) + offset) / cuts;
        quadratic(la, lb, n);
        quadraticGradient(la, lb, da, db);
        let [x, y, xa, xb, ya, yb, tx, ty] = [0, 0, 0, 0, 0, 0, 0, 0];
        for (let k = 0; k < 6; k += 1) {
          const node = mesh.triangles[6 * t + k];
          x += n[k] * mesh.x[node];
          y += n[k] * mesh.y[node];
          xa += da[k] * mesh.x[node];
          xb += db[k] * mesh.x[node];
          ya += da[k] * mesh.y[node];
          yb += db[k] * mesh.y[node];
          tx += n[k] * sx[node];
          ty += n[k] * sy[node];
        }
        const [px, py] = toCaller(placement, x, y);
        if (!within(px, py)) continue;
        area.push((Math.abs(xa * yb - xb * ya) * placement.scale ** 2) / (2 * cuts * cuts));
        stress.push(Math.hypot(tx, ty));
      }
    }
  }
  return { area: Float64Array.from(area), stress: Float64Array.from(stress) };
}

/** Root of a triangle's area. */
function sizeOf({ x, y, triangles }: Mesh, t: number): number {
  const [a, b, c] = triangles.subarray(6 * t, 6 * t + 3);
  return Math.sqrt(Math.abs((x[b] - x[a]) * (y[c] - y[a]) - (x[c] - x[a]) * (y[b] - y[a])) / 2);
}

/** Share of the area whose stress lies within the two bounds. */
export function shareWithin({ area, stress }: FloorParts, low: number, high: number): number {
  let inside = 0;
  let whole = 0;
  for (let i = 0; i < area.length; i += 1) {
    whole += area[i];
    if (stress[i] >= low && stress[i] <= high) inside += area[i];
  }
  return whole > 0 ? inside / whole : 0;
}
