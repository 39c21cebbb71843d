import type { Mesh } from '../mesh/mesh.ts';
import { shapeGradients, shapeValues } from './basis.ts';
import type { TriangleRule } from './quadrature.ts';

/**
 * Everything that integrals over a mesh of quadratic triangles need, at every integration point, straight
 * and curved triangles alike: point p = t · rule.count + q of triangle t.
 *
 * A linear or non-linear section solve loops over triangles and points and adds weight[p] times products
 * of gx, gy (physical gradients of the six functions) and `value` (their values, the same for every
 * triangle): the stiffness of −∇·(k∇u) is Σ weight k (gxᵢ gxⱼ + gyᵢ gyⱼ).
 */
export interface ElementTable {
  readonly rule: TriangleRule;
  readonly triangleCount: number;
  /** Weight times Jacobian, one per point: adds up to the area. */
  readonly weight: Float64Array;
  /** Place of each point. */
  readonly x: Float64Array;
  readonly y: Float64Array;
  /** 6 per point: derivatives of the six functions by x and by y. */
  readonly gx: Float64Array;
  readonly gy: Float64Array;
  /** 6 per point of the rule. */
  readonly value: Float64Array;
}

export function elementTable(mesh: Mesh, rule: TriangleRule): ElementTable {
  const { count } = rule;
  const value = new Float64Array(6 * count);
  const du = new Float64Array(6 * count);
  const dv = new Float64Array(6 * count);
  for (let q = 0; q < count; q += 1) {
    shapeValues(rule.u[q], rule.v[q], value, 6 * q);
    shapeGradients(rule.u[q], rule.v[q], du, dv, 6 * q);
  }
  const { triangles } = mesh;
  const triangleCount = triangles.length / 6;
  const points = triangleCount * count;
  const weight = new Float64Array(points);
  const x = new Float64Array(points);
  const y = new Float64Array(points);
  const gx = new Float64Array(6 * points);
  const gy = new Float64Array(6 * points);
  for (let t = 0; t < triangleCount; t += 1) {
    for (let q = 0; q < count; q += 1) {
      let [px, py, xu, xv, yu, yv] = [0, 0, 0, 0, 0, 0];
      for (let i = 0; i < 6; i += 1) {
        const node = triangles[6 * t + i];
        const k = 6 * q + i;
        const nx = mesh.x[node];
        const ny = mesh.y[node];
        px += value[k] * nx;
        py += value[k] * ny;
        xu += du[k] * nx;
        xv += dv[k] * nx;
        yu += du[k] * ny;
        yv += dv[k] * ny;
      }
      const det = xu * yv - xv * yu;
      const p = t * count + q;
      weight[p] = rule.weight[q] * det;
      x[p] = px;
      y[p] = py;
      for (let i = 0; i < 6; i += 1) {
        const k = 6 * q + i;
        gx[6 * p + i] = (du[k] * yv - dv[k] * yu) / det;
        gy[6 * p + i] = (dv[k] * xu - du[k] * xv) / det;
      }
    }
  }
  return { rule, triangleCount, weight, x, y, gx, gy, value };
}
