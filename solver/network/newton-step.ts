import { factorise } from '../sparse/factorise.ts';
import { gmres } from '../sparse/gmres.ts';
import { solve } from '../sparse/solve.ts';
import type { LawState } from './law.ts';
import type { PreparedNetwork } from './prepare.ts';
import { assemble } from './pressures.ts';

/** ‖J δ − r‖ / ‖r‖, each node over what passes through it, asked for where J is not symmetric; steps at most. */
const STEP_ACCURACY = 1e-6;
const STEP_MOST = 80;

/**
 * δ with J δ = r, where J is the change of every node's outflow with the pressures.
 *
 * Where flows depend on pressure differences only, J is the matrix of a linear network. Where they depend on
 * both pressures (a roof that gives), an edge's slopes at its two ends differ, byFrom ≠ byTo, and J is not
 * symmetric. Then scaling its columns by d, with byFrom d_from = byTo d_to along the balance tree, makes it
 * symmetric on a tree and nearly so with loops; the network with the mean of both sides preconditions GMRES.
 *
 * @param left parts to leave out
 * @param passing m³/s through each unknown's node
 * @param right what each unknown's node has too much, m³/s
 * @param step receives δ, Pa
 */
export function newtonStep(
  network: PreparedNetwork,
  { byFrom, byTo }: LawState,
  left: Uint8Array,
  passing: Float64Array,
  right: Float64Array,
  step: Float64Array,
): void {
  const { edges, unknown, nodeOf, conductance, tree, pattern, factor } = network;
  const { from, to } = edges;
  let symmetric = true;
  for (let e = 0; symmetric && e < byFrom.length; e += 1) {
    symmetric = Math.abs(byFrom[e] - byTo[e]) <= 1e-12 * byFrom[e];
  }
  const scale = new Float64Array(edges.nodes).fill(1);
  if (!symmetric) {
    for (let k = tree.node.length - 1; k >= 0; k -= 1) {
      const i = tree.node[k];
      const e = tree.edge[k];
      const ratio = from[e] === i ? byTo[e] / byFrom[e] : byFrom[e] / byTo[e];
      scale[i] = scale[from[e] === i ? to[e] : from[e]] * Math.min(1e3, Math.max(1e-3, ratio));
    }
  }
  for (let e = 0; e < byFrom.length; e += 1) {
    conductance[e] = symmetric ? byFrom[e] : (byFrom[e] * scale[from[e]] + byTo[e] * scale[to[e]]) / 2;
  }
  assemble(network, left);
  factorise(factor.symbolic, pattern.matrix, factor);
  if (symmetric) {
    step.set(right);
    solve(factor, step);
    return;
  }
  // Unknowns in units of d, rows over what passes: a node of small flow counts as much as one of large.
  const count = right.length;
  const precondition = (x: Float64Array, y: Float64Array) => {
    for (let u = 0; u < count; u += 1) y[u] = x[u] * passing[u];
    solve(factor, y);
    for (let u = 0; u < count; u += 1) y[u] *= scale[nodeOf[u]];
  };
  const apply = (x: Float64Array, y: Float64Array) => {
    y.fill(0);
    for (let e = 0; e < byFrom.length; e += 1) {
      const a = unknown[from[e]];
      const b = unknown[to[e]];
      const q = (a >= 0 ? byFrom[e] * x[a] : 0) - (b >= 0 ? byTo[e] * x[b] : 0);
      if (a >= 0) y[a] += q;
      if (b >= 0) y[b] -= q;
    }
    for (let u = 0; u < count; u += 1) y[u] /= passing[u];
  };
  const relative = right.map((r, u) => r / passing[u]);
  gmres(apply, precondition, relative, step, STEP_ACCURACY, STEP_MOST);
}
