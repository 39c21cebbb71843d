import { multiply } from '../sparse/multiply.ts';
import type { CellChecks } from './cell.ts';
import type { DepthModes } from './depth.ts';
import type { Plane } from './plane.ts';
import type { StokesFields } from './stokes.ts';

/**
 * Y, faces x faces by rows, from the n - 1 patterns solved: Y_ij = 2 H sum over k of m_k f_i u_k(j), the
 * flow into the cell through face i for unit pressure on face j. The last row and column follow from
 * zero sums. What was measured before that, and before averaging with the transpose, is in `checks`.
 */
export function portMatrix(
  plane: Plane,
  depth: DepthModes,
  halfDepth: number,
  loads: readonly Float64Array[],
  flow: StokesFields,
): { matrix: Float64Array; checks: CellChecks } {
  const faces = loads.length;
  const n = flow.patterns;
  const size = 2 * plane.count;
  const raw = new Float64Array(faces * n);
  for (let k = 0; k < depth.count; k += 1)
    for (let i = 0; i < faces; i += 1)
      for (let c = 0; c < n; c += 1) {
        let sum = 0;
        for (let a = 0; a < size; a += 1) sum += loads[i][a] * flow.inPlane[k][c * size + a];
        raw[i * n + c] += 2 * halfDepth * depth.coupling[k] * sum;
      }

  let norm = 0;
  let reciprocity = 0;
  let conservation = 0;
  let dissipation = 0;
  for (const value of raw) norm = Math.max(norm, Math.abs(value));
  const spent = dissipated(plane, depth, halfDepth, flow);
  for (let c = 0; c < n; c += 1) {
    let sum = 0;
    for (let i = 0; i < faces; i += 1) sum += raw[i * n + c];
    conservation = Math.max(conservation, Math.abs(sum));
    for (let i = 0; i < n; i += 1)
      reciprocity = Math.max(reciprocity, Math.abs(raw[i * n + c] - raw[c * n + i]));
    dissipation = Math.max(dissipation, Math.abs(spent[c] - raw[c * n + c]) / raw[c * n + c]);
  }

  const matrix = new Float64Array(faces * faces);
  for (let i = 0; i < n; i += 1)
    for (let j = 0; j < n; j += 1) {
      const value = (raw[i * n + j] + raw[j * n + i]) / 2;
      matrix[i * faces + j] = value;
      matrix[i * faces + n] -= value;
      matrix[n * faces + j] -= value;
      matrix[n * faces + n] += value;
    }
  return {
    matrix,
    checks: { reciprocity: reciprocity / norm, conservation: conservation / norm, dissipation },
  };
}

/** Viscous dissipation of each pattern: the integral of grad u : grad u over the whole depth. */
function dissipated(plane: Plane, depth: DepthModes, halfDepth: number, flow: StokesFields): Float64Array {
  const out = new Float64Array(flow.patterns);
  for (let k = 0; k < flow.inPlane.length; k += 1)
    addPower(plane, halfDepth, depth.inPlaneLambda[k], flow.inPlane[k], 2, out);
  for (let m = 0; m < flow.across.length; m += 1)
    addPower(plane, halfDepth, depth.acrossLambda[m], flow.across[m], 1, out);
  return out;
}

/** Adds that of one mode, whose field has `parts` components for each pattern. */
function addPower(
  plane: Plane,
  halfDepth: number,
  lambda: number,
  field: Float64Array,
  parts: number,
  out: Float64Array,
): void {
  const { count, velocity, stiffness, mass } = plane;
  const shift = lambda / halfDepth ** 2;
  for (let e = 0; e < stiffness.length; e += 1) velocity.value[e] = stiffness[e] + shift * mass[e];
  const y = new Float64Array(count);
  for (let column = 0; column < out.length * parts; column += 1) {
    const x = field.subarray(column * count, (column + 1) * count);
    multiply(velocity, x, y);
    let sum = 0;
    for (let i = 0; i < count; i += 1) sum += x[i] * y[i];
    out[Math.floor(column / parts)] += 2 * halfDepth * sum;
  }
}
