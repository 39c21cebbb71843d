/**
 * Integration rules on the reference triangle 0 ≤ u, v, u + v ≤ 1: points (u, v) and weights that add
 * up to 1/2. All points lie inside and all weights are positive.
 */
export interface TriangleRule {
  readonly count: number;
  readonly u: Float64Array;
  readonly v: Float64Array;
  readonly weight: Float64Array;
}

/** Orbits (weight, a): the three points with two barycentric coordinates a; (weight, a, b): all six of a, b. */
function rule(
  orbits: readonly (readonly [number, number] | readonly [number, number, number])[],
): TriangleRule {
  const points: [number, number, number][] = [];
  for (const [weight, a, given] of orbits) {
    const b = given ?? a;
    const c = 1 - a - b;
    points.push([weight, a, b], [weight, b, c], [weight, c, a]);
    if (given !== undefined) points.push([weight, b, a], [weight, c, b], [weight, a, c]);
  }
  return {
    count: points.length,
    u: Float64Array.from(points, ([, u]) => u),
    v: Float64Array.from(points, ([, , v]) => v),
    weight: Float64Array.from(points, ([weight]) => weight / 2),
  };
}

/** Six points, exact to degree 4 (D.A. Dunavant 1985, Int. J. Numer. Methods Eng. 21, 1129). */
export const DEGREE_4 = rule([
  [0.223381589678011, 0.445948490915965],
  [0.109951743655322, 0.091576213509771],
]);

/** Twelve points, exact to degree 6 (same source). */
export const DEGREE_6 = rule([
  [0.116786275726379, 0.24928674517091],
  [0.050844906370207, 0.063089014491502],
  [0.082851075618374, 0.053145049844817, 0.310352451033784],
]);

/** Three-point Gauss–Legendre on [0, 1], exact to degree 5. */
export const LINE_POINTS = [0.5 - Math.sqrt(0.15), 0.5, 0.5 + Math.sqrt(0.15)] as const;
export const LINE_WEIGHTS = [5 / 18, 8 / 18, 5 / 18] as const;
