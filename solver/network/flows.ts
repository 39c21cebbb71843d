import type { PreparedNetwork } from './prepare.ts';

/**
 * Flow of every edge, such that every node balances to round-off: edges off the balance tree carry
 * g (p from − p to), those on it what the node below them leaves over.
 *
 * @param injected m³/s driven into each node
 * @param flow receives m³/s from the first to the second node of each edge
 * @returns m³/s into the network at each node whose pressure is given, besides what is injected there
 */
export function balancedFlows(
  network: PreparedNetwork,
  injected: Float64Array,
  coarse: Float64Array,
  fine: Float64Array,
  flow: Float64Array,
): Float64Array {
  const { edges, conductance, tree } = network;
  const { from, to } = edges;
  // What each node has still to pass on.
  const over = injected.slice();
  for (let e = 0; e < flow.length; e += 1) flow[e] = edgeFlow(conductance, from, to, coarse, fine, e);
  for (let k = 0; k < tree.edge.length; k += 1) flow[tree.edge[k]] = 0;
  for (let e = 0; e < flow.length; e += 1) {
    const q = flow[e];
    over[from[e]] -= q;
    over[to[e]] += q;
  }
  for (let k = 0; k < tree.node.length; k += 1) {
    const i = tree.node[k];
    const e = tree.edge[k];
    const q = over[i];
    const away = from[e] === i;
    flow[e] = away ? q : -q;
    over[away ? to[e] : from[e]] += q;
    over[i] = 0;
  }
  for (let i = 0; i < over.length; i += 1) over[i] = -over[i];
  return over;
}

/** g (p from − p to) with both parts of the pressures. */
export function edgeFlow(
  conductance: Float64Array,
  from: Int32Array,
  to: Int32Array,
  coarse: Float64Array,
  fine: Float64Array,
  e: number,
): number {
  const a = from[e];
  const b = to[e];
  return conductance[e] * (coarse[a] - coarse[b] + (fine[a] - fine[b]));
}
