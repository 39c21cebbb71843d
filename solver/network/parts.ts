import type { Edges } from './edges.ts';

/** Root of the set of i, with the path halved on the way. */
export function findRoot(parent: Int32Array, i: number): number {
  while (parent[i] !== i) {
    const up = parent[parent[i]];
    parent[i] = up;
    i = up;
  }
  return i;
}

/** Connected parts of the network. */
export interface Parts {
  readonly count: number;
  /** Part of each node (far ends of tubing included). */
  readonly of: Int32Array;
}

export function partsOf(edges: Edges): Parts {
  const { nodes, from, to } = edges;
  const parent = new Int32Array(nodes);
  for (let i = 0; i < nodes; i += 1) parent[i] = i;
  for (let e = 0; e < from.length; e += 1) {
    const a = findRoot(parent, from[e]);
    const b = findRoot(parent, to[e]);
    if (a < b) parent[b] = a;
    else parent[a] = b;
  }
  const of = new Int32Array(nodes);
  let count = 0;
  // A root is the smallest node of its set, so that it is numbered before the others ask.
  for (let i = 0; i < nodes; i += 1) {
    const root = findRoot(parent, i);
    if (root === i) {
      of[i] = count;
      count += 1;
    } else {
      of[i] = of[root];
    }
  }
  return { count, of };
}
