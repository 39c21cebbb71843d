import type { Edges } from './edges.ts';
import { findRoot } from './parts.ts';

/**
 * A spanning forest of best conductors, rooted at the nodes of given pressure. Its flows are not taken from
 * pressure differences but from the balance of the node below: then nothing is lost anywhere, dead ends carry
 * exactly nothing, and the best conductors, whose pressure differences drown in round-off, get their flow
 * from the others.
 */
export interface BalanceTree {
  /** Nodes below a root, each before the one it hangs from. */
  readonly node: Int32Array;
  /** Edge from each of these to the one it hangs from. */
  readonly edge: Int32Array;
}

/**
 * @param conductance of each edge; by a quarter of a binary order of magnitude, the largest first
 * @param fixed 1 where a node's pressure is given
 */
export function balanceTree(edges: Edges, conductance: Float64Array, fixed: Uint8Array): BalanceTree {
  const { nodes, from, to } = edges;
  const count = from.length;
  // The top bits of a positive double order as the double does: exponent and two bits of the mantissa.
  const high = new Int32Array(conductance.buffer, conductance.byteOffset, 2 * count);
  const BUCKETS = 1 << 13;
  const start = new Int32Array(BUCKETS + 1);
  const bucket = (e: number) => BUCKETS - 1 - ((high[2 * e + 1] >>> 18) & (BUCKETS - 1));
  for (let e = 0; e < count; e += 1) {
    const b = bucket(e) + 1;
    start[b] += 1;
  }
  for (let b = 0; b < BUCKETS; b += 1) start[b + 1] += start[b];
  const sorted = new Int32Array(count);
  for (let e = 0; e < count; e += 1) {
    const b = bucket(e);
    sorted[start[b]] = e;
    start[b] += 1;
  }

  const parent = new Int32Array(nodes);
  const fixedRoot = fixed.indexOf(1);
  for (let i = 0; i < nodes; i += 1) parent[i] = fixed[i] === 1 ? fixedRoot : i;
  const degree = new Int32Array(nodes + 1);
  let kept = 0;
  for (let k = 0; k < count; k += 1) {
    const e = sorted[k];
    const a = findRoot(parent, from[e]);
    const b = findRoot(parent, to[e]);
    if (a === b) continue;
    parent[a] = b;
    sorted[kept] = e;
    kept += 1;
    degree[from[e] + 1] += 1;
    degree[to[e] + 1] += 1;
  }
  for (let i = 0; i < nodes; i += 1) degree[i + 1] += degree[i];
  const fill = degree.slice(0, nodes);
  const incident = new Int32Array(2 * kept);
  for (let k = 0; k < kept; k += 1) {
    const e = sorted[k];
    for (const i of [from[e], to[e]]) {
      incident[fill[i]] = e;
      fill[i] += 1;
    }
  }
  // Breadth first from the roots; reversed, each node comes before the one it hangs from.
  const queue = new Int32Array(nodes);
  const by = new Int32Array(nodes).fill(-1);
  const seen = fixed.slice();
  let end = 0;
  for (let i = 0; i < nodes; i += 1) {
    if (fixed[i] !== 1) continue;
    queue[end] = i;
    end += 1;
  }
  const roots = end;
  for (let k = 0; k < end; k += 1) {
    const i = queue[k];
    for (let p = degree[i]; p < degree[i + 1]; p += 1) {
      const e = incident[p];
      const other = from[e] === i ? to[e] : from[e];
      if (seen[other] === 1) continue;
      seen[other] = 1;
      by[other] = e;
      queue[end] = other;
      end += 1;
    }
  }
  const node = queue.slice(roots, end).reverse();
  return { node, edge: node.map((i) => by[i]) };
}
