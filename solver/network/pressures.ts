import { factorise } from '../sparse/factorise.ts';
import { SingularMatrix } from '../sparse/singular.ts';
import { solve } from '../sparse/solve.ts';
import type { Imposed } from './imposed.ts';
import { nodesOfPart, type PreparedNetwork } from './prepare.ts';

/**
 * Σ over edges at i of g (pᵢ − pⱼ) = flow driven into i, at every node of unknown pressure, with the
 * conductances of `network`.
 *
 * The answer comes as two numbers, p = coarse + fine: the second is what one step of iterative refinement
 * adds. Kept apart, their differences resolve far smaller pressure drops than p itself could.
 *
 * Parts that prove singular are added to those left out, with a fault each; their unknowns stay zero.
 *
 * @param coarse receives the pressures; those given are its own already
 * @param fine receives the correction, 0 where a pressure is given
 */
export function solvePressures(
  nodeCount: number,
  network: PreparedNetwork,
  drives: Imposed,
  coarse: Float64Array,
  fine: Float64Array,
): void {
  const { nodeOf, factor } = network;
  factoriseDetermined(nodeCount, network, drives);
  const right = new Float64Array(nodeOf.length);
  imbalance(network, drives, coarse, right);
  solve(factor, right);
  for (let u = 0; u < nodeOf.length; u += 1) coarse[nodeOf[u]] = right[u];
  imbalance(network, drives, coarse, right);
  solve(factor, right);
  fine.fill(0);
  for (let u = 0; u < nodeOf.length; u += 1) fine[nodeOf[u]] = right[u];
}

/** Factors the matrix of the unknown pressures; parts that are singular are left out and named. */
function factoriseDetermined(nodeCount: number, network: PreparedNetwork, drives: Imposed): void {
  const { parts, nodeOf, pattern, factor } = network;
  for (;;) {
    assemble(network, drives.left);
    try {
      factorise(factor.symbolic, pattern.matrix, factor);
      return;
    } catch (error) {
      if (!(error instanceof SingularMatrix)) throw error;
      const part = parts.of[nodeOf[error.column]];
      if (drives.left[part] === 1) throw error;
      drives.left[part] = 1;
      drives.faults.push({ kind: 'singular', nodes: nodesOfPart(nodeCount, parts, part), drives: [] });
    }
  }
}

/** The matrix of the unknown pressures from `network.conductance`; the identity in parts that are left out. */
export function assemble(network: PreparedNetwork, left: Uint8Array): void {
  const { conductance, pattern } = network;
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
  leaveOut(network, left, value);
}

/** Makes the rows of parts that are left out those of the identity. */
export function leaveOut(network: PreparedNetwork, left: Uint8Array, value: Float64Array): void {
  if (!left.includes(1)) return;
  const { edges, parts, nodeOf, pattern } = network;
  for (let e = 0; e < edges.from.length; e += 1) {
    const between = pattern.scatter[3 * e + 1];
    if (between >= 0 && left[parts.of[edges.from[e]]] === 1) value[between] = 0;
  }
  for (let u = 0; u < nodeOf.length; u += 1) {
    if (left[parts.of[nodeOf[u]]] === 1) value[pattern.matrix.columnStart[u]] = 1;
  }
}

/** What is driven into each unknown's node less what flows off it; 0 in parts that are left out. */
function imbalance(
  network: PreparedNetwork,
  { injected, left }: Imposed,
  pressure: Float64Array,
  out: Float64Array,
): void {
  const { edges, parts, unknown, nodeOf, conductance } = network;
  const { from, to } = edges;
  for (let u = 0; u < nodeOf.length; u += 1) out[u] = injected[nodeOf[u]];
  for (let e = 0; e < conductance.length; e += 1) {
    const a = unknown[from[e]];
    const b = unknown[to[e]];
    const q = conductance[e] * (pressure[from[e]] - pressure[to[e]]);
    if (a >= 0) out[a] -= q;
    if (b >= 0) out[b] += q;
  }
  if (!left.includes(1)) return;
  for (let u = 0; u < nodeOf.length; u += 1) if (left[parts.of[nodeOf[u]]] === 1) out[u] = 0;
}
