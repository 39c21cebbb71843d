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
  const n = (i: number): number => triangles[t + i];
  const at = (c: Float64Array, u: number, v: number, du: boolean): number => {
    const w = 1 - u - v;
    return du
      ? (1 - 4 * w) * c[n(0)] + (4 * u - 1) * c[n(1)] + 4 * (w - u) * c[n(3)] + 4 * v * (c[n(4)] - c[n(5)])
      : (1 - 4 * w) * c[n(0)] + (4 * v - 1) * c[n(2)] + 4 * u * (c[n(4)] - c[n(3)]) + 4 * (w - v) * c[n(5)];
  };
  const straight = (x[n(1)] - x[n(0)]) * (y[n(2)] - y[n(0)]) - (y[n(1)] - y[n(0)]) * (x[n(2)] - x[n(0)]);
  let least = Number.POSITIVE_INFINITY;
  for (const [u, v] of NODES) {
    const det = at(x, u, v, true) * at(y, u, v, false) - at(y, u, v, true) * at(x, u, v, false);
    least = Math.min(least, det / straight);
  }
  return straight > 0 ? least : -1;
}

const NODES = [
  [0, 0],
  [1, 0],
  [0, 1],
  [0.5, 0],
  [0.5, 0.5],
  [0, 0.5],
] as const;
