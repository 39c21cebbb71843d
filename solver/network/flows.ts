import type { PreparedNetwork } from './prepare.ts';

/**
 * Flow of every edge, such that every node balances to round-off: edges off the balance tree carry what their
 * law gives, those on it what the node below them leaves over.
 *
 * @param injected m³/s driven into each node
 * @param flow m³/s from the first to the second node of each edge by its law; overwritten on the tree
 * @returns m³/s into the network at each node whose pressure is given, besides what is injected there
 */
export function balancedFlows(
  network: PreparedNetwork,
  injected: Float64Array,
  flow: Float64Array,
): Float64Array {
  const { edges, tree } = network;
  const { from, to } = edges;
  // What each node has still to pass on.
  const over = injected.slice();
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

/** g (p from − p to) of every edge, with both parts of the pressures. */
export function linearFlows(
  network: PreparedNetwork,
  coarse: Float64Array,
  fine: Float64Array,
): Float64Array {
  const { edges, conductance } = network;
  const { from, to } = edges;
  const flow = new Float64Array(conductance.length);
  for (let e = 0; e < flow.length; e += 1) {
    const a = from[e];
    const b = to[e];
    flow[e] = conductance[e] * (coarse[a] - coarse[b] + (fine[a] - fine[b]));
  }
  return flow;
}
