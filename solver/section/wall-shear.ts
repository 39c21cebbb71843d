import type { Mesh } from '../mesh/mesh.ts';
import { analyse } from '../sparse/analyse.ts';
import { factorise } from '../sparse/factorise.ts';
import { patternOfElements } from '../sparse/pattern.ts';
import { solve } from '../sparse/solve.ts';
import { edgeGradients, edgeValues } from './basis.ts';
import { LINE_POINTS, LINE_WEIGHTS } from './quadrature.ts';

/**
 * Wall shear −∂u/∂n per unit G by the consistent boundary flux: the λ on the wall, quadratic along its
 * edges, for which ∫λφ ds = ∫fφ − ∫∇u·∇φ for every function φ of a wall node. It balances the driving
 * force to rounding, ∫λ ds = area, and is an order better than the gradient of u itself.
 *
 * @param edges boundary edges of the mesh that are wall
 * @param residual load minus stiffness times u, at every node
 * @param still nodes where the shear is known to be zero: convex corners (1)
 * @param shear overwritten at wall nodes, metres in the mesh's unit
 */
export function wallShear(
  mesh: Mesh,
  edges: Int32Array,
  residual: Float64Array,
  still: Uint8Array,
  shear: Float64Array,
): void {
  const number = new Int32Array(mesh.nodeCount).fill(-2);
  const nodes: number[] = [];
  const start = new Int32Array(edges.length + 1);
  const unknowns = new Int32Array(3 * edges.length);
  for (let k = 0; k < edges.length; k += 1) {
    start[k + 1] = 3 * (k + 1);
    // Start, middle, end: a band along the wall.
    for (const [slot, i] of [0, 2, 1].entries()) {
      const node = mesh.boundary[3 * edges[k] + i];
      if (still[node]) {
        unknowns[3 * k + slot] = -1;
        shear[node] = 0;
        continue;
      }
      if (number[node] === -2) {
        number[node] = nodes.length;
        nodes.push(node);
      }
      unknowns[3 * k + slot] = number[node];
    }
  }
  const { matrix, scatter, scatterStart } = patternOfElements(nodes.length, start, unknowns);
  const mass = new Float64Array(6);
  for (let k = 0; k < edges.length; k += 1) {
    edgeMass(mesh, edges[k], mass);
    for (let i = 0; i < 6; i += 1) {
      const at = scatter[scatterStart[k] + i];
      if (at >= 0) matrix.value[at] += mass[i];
    }
  }
  const right = Float64Array.from(nodes, (node) => residual[node]);
  solve(factorise(analyse(matrix), matrix), right);
  nodes.forEach((node, i) => {
    shear[node] = right[i];
  });
}

/** ∫φₐφ_b ds on one boundary edge, lower triangle by rows in the order start, middle, end. */
function edgeMass(mesh: Mesh, edge: number, out: Float64Array): void {
  const a = mesh.boundary[3 * edge];
  const b = mesh.boundary[3 * edge + 1];
  const m = mesh.boundary[3 * edge + 2];
  out.fill(0);
  for (let q = 0; q < 3; q += 1) {
    edgeValues(LINE_POINTS[q], values);
    edgeGradients(LINE_POINTS[q], gradients);
    const dx = gradients[0] * mesh.x[a] + gradients[1] * mesh.x[b] + gradients[2] * mesh.x[m];
    const dy = gradients[0] * mesh.y[a] + gradients[1] * mesh.y[b] + gradients[2] * mesh.y[m];
    const w = LINE_WEIGHTS[q] * Math.hypot(dx, dy);
    const [va, vb, vm] = values;
    out[0] += w * va * va;
    out[1] += w * vm * va;
    out[2] += w * vm * vm;
    out[3] += w * vb * va;
    out[4] += w * vb * vm;
    out[5] += w * vb * vb;
  }
}

const values = new Float64Array(3);
const gradients = new Float64Array(3);

/** load − K u at every node, from the elements' matrices (21 per triangle, lower triangle by rows). */
export function residualOf(
  mesh: Mesh,
  element: Float64Array,
  load: Float64Array,
  u: Float64Array,
): Float64Array {
  const residual = load.slice();
  const { triangles } = mesh;
  for (let t = 0, at = 0; t < triangles.length; t += 6) {
    for (let i = 0; i < 6; i += 1) {
      const row = triangles[t + i];
      for (let j = 0; j < i; j += 1, at += 1) {
        const column = triangles[t + j];
        residual[row] -= element[at] * u[column];
        residual[column] -= element[at] * u[row];
      }
      residual[row] -= element[at] * u[row];
      at += 1;
    }
  }
  return residual;
}
