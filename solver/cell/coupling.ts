import type { Plane } from './plane.ts';

/**
 * The coupling of pressure and velocity, on `n` patterns one after the other. Layouts: pressure
 * q[r * corners + corner], in-plane velocity u[(2r + (0 | 1)) * count + unknown], velocity across
 * w[r * count + unknown].
 */

/** u = B^T q: (q, div v) for all v. */
export function gradient(plane: Plane, q: Float64Array, n: number, u: Float64Array): void {
  const { rowStart, column, gradX, gradY, count } = plane;
  const corners = rowStart.length - 1;
  u.fill(0);
  for (let r = 0; r < n; r += 1) {
    const ux = 2 * r * count;
    const uy = ux + count;
    for (let v = 0; v < corners; v += 1) {
      const value = q[r * corners + v];
      const end = rowStart[v + 1];
      for (let e = rowStart[v]; e < end; e += 1) {
        const i = column[e];
        u[ux + i] += gradX[e] * value;
        u[uy + i] += gradY[e] * value;
      }
    }
  }
}

/** q = scale B u: (L, div u) for all corner functions L. */
export function divergence(plane: Plane, u: Float64Array, n: number, scale: number, q: Float64Array): void {
  const { rowStart, column, gradX, gradY, count } = plane;
  const corners = rowStart.length - 1;
  for (let r = 0; r < n; r += 1) {
    const ux = 2 * r * count;
    const uy = ux + count;
    for (let v = 0; v < corners; v += 1) {
      let sum = 0;
      const end = rowStart[v + 1];
      for (let e = rowStart[v]; e < end; e += 1) {
        const i = column[e];
        sum += gradX[e] * u[ux + i] + gradY[e] * u[uy + i];
      }
      q[r * corners + v] = scale * sum;
    }
  }
}

/** w = M^T q: (q, v) for all v. */
export function spread(plane: Plane, q: Float64Array, n: number, w: Float64Array): void {
  const { rowStart, column, mixed, count } = plane;
  const corners = rowStart.length - 1;
  w.fill(0);
  for (let r = 0; r < n; r += 1)
    for (let v = 0; v < corners; v += 1) {
      const value = q[r * corners + v];
      const end = rowStart[v + 1];
      for (let e = rowStart[v]; e < end; e += 1) w[r * count + column[e]] += mixed[e] * value;
    }
}

/** q = scale M w: (L, w) for all corner functions L. */
export function gather(plane: Plane, w: Float64Array, n: number, scale: number, q: Float64Array): void {
  const { rowStart, column, mixed, count } = plane;
  const corners = rowStart.length - 1;
  for (let r = 0; r < n; r += 1)
    for (let v = 0; v < corners; v += 1) {
      let sum = 0;
      const end = rowStart[v + 1];
      for (let e = rowStart[v]; e < end; e += 1) sum += mixed[e] * w[r * count + column[e]];
      q[r * corners + v] = scale * sum;
    }
}
