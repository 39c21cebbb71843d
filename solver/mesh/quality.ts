import type { Mesh } from './mesh.ts';

/** Least angle between straight sides of any triangle, degrees. */
export function leastAngle(mesh: Mesh): number {
  const { x, y, triangles } = mesh;
  let least = 180;
  for (let t = 0; t < triangles.length; t += 6) {
    for (let i = 0; i < 3; i += 1) {
      const a = triangles[t + i];
      const b = triangles[t + ((i + 1) % 3)];
      const c = triangles[t + ((i + 2) % 3)];
      const ux = x[b] - x[a];
      const uy = y[b] - y[a];
      const vx = x[c] - x[a];
      const vy = y[c] - y[a];
      const angle = Math.atan2(ux * vy - uy * vx, ux * vx + uy * vy);
      least = Math.min(least, (angle * 180) / Math.PI);
    }
  }
  return least;
}

/**
 * Least Jacobian determinant of the quadratic map of the triangle at offset t of `triangles`, at its
 * corners and mid-edge nodes, relative to that of the straight triangle; 1 where it is straight. The
 * determinant is quadratic, so that positive values at these six nodes all but prove it positive.
 */
export function leastJacobian(mesh: Mesh, t: number): number {
  const { x, y, triangles } = mesh;
  const a = triangles[t];
  const b = triangles[t + 1];
  const c = triangles[t + 2];
  const straight = (x[b] - x[a]) * (y[c] - y[a]) - (y[b] - y[a]) * (x[c] - x[a]);
  let least = Number.POSITIVE_INFINITY;
  for (const [u, v] of NODES) {
    const det =
      alongU(x, triangles, t, u, v) * alongV(y, triangles, t, u, v) -
      alongU(y, triangles, t, u, v) * alongV(x, triangles, t, u, v);
    least = Math.min(least, det / straight);
  }
  return straight > 0 ? least : -1;
}

/** Derivatives of a coordinate at the local place (u, v) of the triangle at offset t. */
function alongU(c: Float64Array, triangles: Int32Array, t: number, u: number, v: number): number {
  const w = 1 - u - v;
  return (
    (1 - 4 * w) * c[triangles[t]] +
    (4 * u - 1) * c[triangles[t + 1]] +
    4 * (w - u) * c[triangles[t + 3]] +
    4 * v * (c[triangles[t + 4]] - c[triangles[t + 5]])
  );
}

function alongV(c: Float64Array, triangles: Int32Array, t: number, u: number, v: number): number {
  const w = 1 - u - v;
  return (
    (1 - 4 * w) * c[triangles[t]] +
    (4 * v - 1) * c[triangles[t + 2]] +
    4 * u * (c[triangles[t + 4]] - c[triangles[t + 3]]) +
    4 * (w - v) * c[triangles[t + 5]]
  );
}

const NODES = [
  [0, 0],
  [1, 0],
  [0, 1],
  [0.5, 0],
  [0.5, 0.5],
  [0, 0.5],
] as const;
