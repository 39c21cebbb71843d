import type { Mesh } from '../mesh/mesh.ts';
import { analyse } from '../sparse/analyse.ts';
import type { SymmetricMatrix } from '../sparse/matrix.ts';
import { type ElementPattern, patternOfElements } from '../sparse/pattern.ts';
import type { Symbolic } from '../sparse/symbolic.ts';
import type { ElementTable } from './element-table.ts';

/**
 * Stiffness on all nodes of a mesh, K = Σ ∫ ∇φᵢ·∇φⱼ, analysed once for every boundary condition: fixed
 * nodes get the identity's rows instead (`withFixed`), so that flow (zero on the wall), its dual (zero on
 * a line of symmetry) and the tangents of a non-linear solve share one symbolic factorisation.
 */
export interface Stiffness {
  readonly pattern: ElementPattern;
  readonly symbolic: Symbolic;
  /** 21 per triangle: lower triangle by rows, as `pattern.scatter` takes them. */
  readonly element: Float64Array;
}

export function stiffness(mesh: Mesh, table: ElementTable): Stiffness {
  const triangles = table.triangleCount;
  const start = new Int32Array(triangles + 1);
  for (let t = 0; t <= triangles; t += 1) start[t] = 6 * t;
  const pattern = patternOfElements(mesh.nodeCount, start, mesh.triangles);
  const element = new Float64Array(21 * triangles);
  const { weight, gx, gy } = table;
  const points = table.rule.count;
  for (let t = 0; t < triangles; t += 1) {
    for (let q = 0; q < points; q += 1) {
      const p = t * points + q;
      const w = weight[p];
      for (let i = 0, at = 21 * t; i < 6; i += 1) {
        const x = w * gx[6 * p + i];
        const y = w * gy[6 * p + i];
        for (let j = 0; j <= i; j += 1, at += 1) {
          element[at] += x * gx[6 * p + j] + y * gy[6 * p + j];
        }
      }
    }
  }
  return { pattern, symbolic: analyse(pattern.matrix), element };
}

/**
 * Adds up the elements' matrices, 21 values per triangle, into the pattern's matrix, with the identity in
 * rows and columns of fixed nodes (fixed[node] = 1). Fixed values other than zero belong on the right side.
 */
export function withFixed(
  pattern: ElementPattern,
  element: Float64Array,
  fixed: Uint8Array,
): SymmetricMatrix {
  const { matrix, scatter } = pattern;
  const { n, columnStart, row, value } = matrix;
  value.fill(0);
  for (let k = 0; k < scatter.length; k += 1) value[scatter[k]] += element[k];
  for (let j = 0; j < n; j += 1) {
    const begin = columnStart[j];
    const end = columnStart[j + 1];
    if (fixed[j]) {
      for (let p = begin; p < end; p += 1) value[p] = 0;
      value[begin] = 1;
    } else {
      for (let p = begin + 1; p < end; p += 1) if (fixed[row[p]]) value[p] = 0;
    }
  }
  return matrix;
}
