import { toCaller } from './canonical.ts';
import type { CellSolution } from './cell.ts';
import { depthValues } from './depth.ts';
import { flowField } from './flow-field.ts';
import { peakShear } from './peak.ts';
import { streamlines } from './streamline.ts';

/**
 * What is drawn of a solved cell: speed at half depth, wall shear along its walls, streamlines. In the
 * coordinates and unit of the shape; stresses in the unit of the face pressures.
 */
export interface CellPicture {
  /** x, y of each corner of the mesh. */
  readonly points: Float32Array;
  /** Three corners per triangle. */
  readonly triangles: Int32Array;
  /** Speed at half depth at each corner, over the largest in the cell. */
  readonly speed: Float32Array;
  /** Per wall edge: x, y of its ends and the outward unit normal, 6 numbers. */
  readonly walls: Float32Array;
  /** Largest wall shear over the depth of each wall edge. */
  readonly shear: Float32Array;
  /** x, y of each line's steps. */
  readonly lines: readonly Float32Array[];
  readonly peak: {
    readonly value: number;
    readonly at: readonly [number, number];
    readonly error: number;
  } | null;
}

/** Heights at which a side wall is looked at: half depth and up. */
const HEIGHTS = [0, 0.25, 0.5, 0.75];

/**
 * @param pressures on the faces
 * @param lines streamlines of equal flow
 * @returns null where the fields of the cell were not kept
 */
export function cellPicture(
  solution: CellSolution,
  pressures: ArrayLike<number>,
  lines: number,
): CellPicture | null {
  const field = flowField(solution, pressures);
  if (!field) return null;
  const { mesh, inPlane, wallAlong, wallAcross, placement, depth } = field;
  const points = new Float32Array(2 * mesh.vertexCount);
  const speed = new Float32Array(mesh.vertexCount);
  const middle = depthValues(depth, 0).inPlane;
  let fastest = 0;
  for (let i = 0; i < mesh.vertexCount; i += 1) {
    const [px, py] = toCaller(placement, mesh.x[i], mesh.y[i]);
    points[2 * i] = px;
    points[2 * i + 1] = py;
    let x = 0;
    let y = 0;
    for (let k = 0; k < depth.count; k += 1) {
      x += middle[k] * inPlane[k][i];
      y += middle[k] * inPlane[k][mesh.nodeCount + i];
    }
    speed[i] = Math.hypot(x, y);
    fastest = Math.max(fastest, speed[i]);
  }
  if (fastest > 0) for (let i = 0; i < speed.length; i += 1) speed[i] /= fastest;

  const triangles = new Int32Array(mesh.triangles.length / 2);
  for (let t = 0; t < mesh.triangles.length / 6; t += 1) {
    for (let i = 0; i < 3; i += 1) triangles[3 * t + i] = mesh.triangles[6 * t + i];
  }

  const edges: number[] = [];
  for (let e = 0; e < mesh.boundaryTag.length; e += 1) if (mesh.boundaryTag[e] === 0) edges.push(e);
  const walls = new Float32Array(6 * edges.length);
  const shear = new Float32Array(edges.length);
  const values = HEIGHTS.map((height) => depthValues(depth, height));
  edges.forEach((e, w) => {
    const [a, b] = [mesh.boundary[3 * e], mesh.boundary[3 * e + 1]];
    const [ax, ay] = toCaller(placement, mesh.x[a], mesh.y[a]);
    const [bx, by] = toCaller(placement, mesh.x[b], mesh.y[b]);
    const length = Math.hypot(bx - ax, by - ay);
    // The fluid lies to the left of a boundary edge; a mirrored copy has it to the right.
    const [ox, oy] = toCaller(
      placement,
      (mesh.x[a] + mesh.x[b]) / 2 + (mesh.y[b] - mesh.y[a]),
      (mesh.y[a] + mesh.y[b]) / 2 - (mesh.x[b] - mesh.x[a]),
    );
    const [nx, ny] = [ox - (ax + bx) / 2, oy - (ay + by) / 2];
    const size = Math.hypot(nx, ny) || length;
    walls.set([ax, ay, bx, by, nx / size, ny / size], 6 * w);
    for (const { inPlane: even, across: odd } of values) {
      let along = 0;
      let up = 0;
      for (let k = 0; k < depth.count; k += 1) along += even[k] * wallAlong[k][3 * e + 2];
      for (let m = 0; m < depth.count - 1; m += 1) up += odd[m] * wallAcross[m][3 * e + 2];
      shear[w] = Math.max(shear[w], Math.hypot(along, up));
    }
  });
  const peak = peakShear(solution, pressures);
  return {
    points,
    triangles,
    speed,
    walls,
    shear,
    lines: streamlines(solution, pressures, lines).map(({ points: steps }) => {
      const line = new Float32Array((2 * steps.length) / 3);
      for (let i = 0; i < steps.length / 3; i += 1) {
        line[2 * i] = steps[3 * i];
        line[2 * i + 1] = steps[3 * i + 1];
      }
      return line;
    }),
    peak: peak && { value: peak.value, at: peak.at, error: peak.error },
  };
}
