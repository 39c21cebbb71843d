import type { NetworkSpec } from '../network/spec.ts';
import { joinedEdges } from './joined.ts';

/**
 * Ducts that carry nothing because of how the network is joined, not of its values: dead ends, those
 * behind cells included. Found by taking away leaf after leaf, so it does not depend on rounding.
 *
 * @returns 1 for each still duct
 */
export function stillDucts(spec: NetworkSpec): Uint8Array {
  const { nodes, from, to } = joinedEdges(spec);
  const degree = new Int32Array(nodes);
  const held = new Uint8Array(nodes);
  for (const { node } of spec.drives) held[node] = 1;
  // The last edge left at a node is the sum of its edges' numbers, minus those taken away.
  const sum = new Float64Array(nodes);
  for (let e = 0; e < from.length; e += 1) {
    degree[from[e]] += 1;
    degree[to[e]] += 1;
    sum[from[e]] += e;
    sum[to[e]] += e;
  }
  const still = new Uint8Array(from.length);
  const leaves: number[] = [];
  for (let node = 0; node < nodes; node += 1) if (degree[node] === 1 && held[node] === 0) leaves.push(node);
  while (leaves.length > 0) {
    const leaf = leaves.pop()!;
    if (degree[leaf] !== 1) continue;
    const e = sum[leaf];
    still[e] = 1;
    for (const node of [from[e], to[e]]) {
      degree[node] -= 1;
      sum[node] -= e;
      if (degree[node] === 1 && held[node] === 0) leaves.push(node);
    }
  }
  return still.subarray(0, spec.ductFrom.length);
}
