import type { NetworkSpec } from '../network/spec.ts';

/**
 * Ducts that carry nothing because of how the network is joined, not of its values: dead ends, and
 * parts that no drive reaches. Found by taking away leaf after leaf, so it does not depend on rounding.
 *
 * @returns 1 for each still duct
 */
export function stillDucts(spec: NetworkSpec): Uint8Array {
  const { nodeCount, ductFrom, ductTo, blocks, drives } = spec;
  const count = ductFrom.length;
  const degree = new Int32Array(nodeCount);
  const held = new Uint8Array(nodeCount);
  for (const { node } of drives) held[node] = 1;
  // A block passes flow between its faces: its nodes are never leaves by themselves.
  for (const block of blocks) for (const node of block.nodes) held[node] = 1;
  const sum = new Int32Array(nodeCount);
  for (let e = 0; e < count; e += 1) {
    degree[ductFrom[e]] += 1;
    degree[ductTo[e]] += 1;
    // The last duct left at a node is the sum of its ducts' numbers, minus those taken away.
    sum[ductFrom[e]] += e;
    sum[ductTo[e]] += e;
  }
  const still = new Uint8Array(count);
  const leaves: number[] = [];
  for (let node = 0; node < nodeCount; node += 1)
    if (degree[node] === 1 && held[node] === 0) leaves.push(node);
  while (leaves.length > 0) {
    const leaf = leaves.pop()!;
    if (degree[leaf] !== 1) continue;
    const e = sum[leaf];
    still[e] = 1;
    for (const node of [ductFrom[e], ductTo[e]]) {
      degree[node] -= 1;
      sum[node] -= e;
      if (degree[node] === 1 && held[node] === 0) leaves.push(node);
    }
  }
  return still;
}
