/**
 * The six quadratic functions of a triangle on its reference 0 ≤ u, v, u + v ≤ 1, w = 1 − u − v: corners
 * a (w = 1), b (u = 1), c (v = 1), then mid-edge ab, bc, ca, as `solver/mesh` orders its nodes. They give
 * the map of a curved triangle as well (isoparametric).
 */

/** Values at (u, v) into out[at .. at + 5]. */
export function shapeValues(u: number, v: number, out: Float64Array, at = 0): void {
  const w = 1 - u - v;
  out[at] = w * (2 * w - 1);
  out[at + 1] = u * (2 * u - 1);
  out[at + 2] = v * (2 * v - 1);
  out[at + 3] = 4 * w * u;
  out[at + 4] = 4 * u * v;
  out[at + 5] = 4 * v * w;
}

/** Derivatives by u and by v at (u, v) into du, dv[at .. at + 5]. */
export function shapeGradients(u: number, v: number, du: Float64Array, dv: Float64Array, at = 0): void {
  const w = 1 - u - v;
  du[at] = 1 - 4 * w;
  dv[at] = 1 - 4 * w;
  du[at + 1] = 4 * u - 1;
  dv[at + 1] = 0;
  du[at + 2] = 0;
  dv[at + 2] = 4 * v - 1;
  du[at + 3] = 4 * (w - u);
  dv[at + 3] = -4 * u;
  du[at + 4] = 4 * v;
  dv[at + 4] = 4 * u;
  du[at + 5] = -4 * v;
  dv[at + 5] = 4 * (w - v);
}

/** The three quadratic functions of an edge at the share t of it: start, end, middle. */
export function edgeValues(t: number, out: Float64Array): void {
  out[0] = (1 - t) * (1 - 2 * t);
  out[1] = t * (2 * t - 1);
  out[2] = 4 * t * (1 - t);
}

/** Their derivatives by t. */
export function edgeGradients(t: number, out: Float64Array): void {
  out[0] = 4 * t - 3;
  out[1] = 4 * t - 1;
  out[2] = 4 - 8 * t;
}
