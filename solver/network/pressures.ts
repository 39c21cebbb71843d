import { factorise } from '../sparse/factorise.ts';
import { solve } from '../sparse/solve.ts';
import type { PreparedNetwork } from './prepare.ts';

/**
 * Σ over edges at i of g (pᵢ − pⱼ) = flow driven into i, at every node of unknown pressure.
 *
 * The answer comes as two numbers, p = coarse + fine: the second is what one step of iterative refinement
 * adds. Kept apart, their differences resolve far smaller pressure drops than p itself could.
 *
 * Unknowns of a part in `left` are left at zero.
 *
 * @param left 1 for each part to leave out
 * @param injected m³/s driven into each node
 * @param coarse given pressures at the fixed nodes on entry; receives the others
 * @param fine receives the correction, 0 at the fixed nodes
 * @throws SingularMatrix with the number of the unknown
 */
export function solvePressures(
  network: PreparedNetwork,
  left: Uint8Array,
  injected: Float64Array,
  coarse: Float64Array,
  fine: Float64Array,
): void {
  const { unknown, nodeOf, parts, factor } = network;
  assemble(network, left);
  factorise(factor.symbolic, network.pattern.matrix, factor);
  const count = nodeOf.length;
  const right = new Float64Array(count);
  const keep = () => {
    for (let u = 0; u < count; u += 1) if (left[parts.of[nodeOf[u]]] === 1) right[u] = 0;
  };
  for (let u = 0; u < count; u += 1) coarse[nodeOf[u]] = 0;
  imbalance(network, injected, coarse, right);
  keep();
  solve(factor, right);
  for (let u = 0; u < count; u += 1) coarse[nodeOf[u]] = right[u];
  imbalance(network, injected, coarse, right);
  keep();
  solve(factor, right);
  for (let i = 0; i < unknown.length; i += 1) fine[i] = unknown[i] < 0 ? 0 : right[unknown[i]];
}

/** The matrix of the unknown pressures from `network.conductance`; the identity in parts that are left out. */
export function assemble(network: PreparedNetwork, left: Uint8Array): void {
  const { edges, parts, nodeOf, conductance, pattern } = network;
  const { scatter, matrix } = pattern;
  const { value } = matrix;
  value.fill(0);
  for (let e = 0, s = 0; e < conductance.length; e += 1, s += 3) {
    const g = conductance[e];
    const first = scatter[s];
    const between = scatter[s + 1];
    const second = scatter[s + 2];
    if (first >= 0) value[first] += g;
    if (between >= 0) value[between] -= g;
    if (second >= 0) value[second] += g;
  }
  if (!left.includes(1)) return;
  for (let e = 0, s = 0; e < conductance.length; e += 1, s += 3) {
    const between = scatter[s + 1];
    if (between >= 0 && left[parts.of[edges.from[e]]] === 1) value[between] = 0;
  }
  for (let u = 0; u < nodeOf.length; u += 1) {
    if (left[parts.of[nodeOf[u]]] === 1) value[matrix.columnStart[u]] = 1;
  }
}

/** What is driven into each unknown's node less what flows off it along the edges. */
function imbalance(
  network: PreparedNetwork,
  injected: Float64Array,
  pressure: Float64Array,
  out: Float64Array,
): void {
  const { edges, unknown, nodeOf, conductance } = network;
  const { from, to } = edges;
  for (let u = 0; u < nodeOf.length; u += 1) out[u] = injected[nodeOf[u]];
  for (let e = 0; e < conductance.length; e += 1) {
    const a = unknown[from[e]];
    const b = unknown[to[e]];
    const q = conductance[e] * (pressure[from[e]] - pressure[to[e]]);
    if (a >= 0) out[a] -= q;
    if (b >= 0) out[b] += q;
  }
}
