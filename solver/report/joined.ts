import type { NetworkSolution, NetworkSpec } from '../network/spec.ts';

/**
 * The network with every block as a node of its own, joined to the nodes of its faces: what is connected
 * to what, and what flows where, without a case for cells.
 */
export interface Joined {
  readonly nodes: number;
  /** Ducts first, in the order of the network, then the faces of each block (from the face into the block). */
  readonly from: Int32Array;
  readonly to: Int32Array;
}

export function joinedEdges({ nodeCount, ductFrom, ductTo, blocks }: NetworkSpec): Joined {
  let faces = 0;
  for (const { nodes } of blocks) faces += nodes.length;
  const from = new Int32Array(ductFrom.length + faces);
  const to = new Int32Array(ductFrom.length + faces);
  from.set(ductFrom);
  to.set(ductTo);
  let e = ductFrom.length;
  blocks.forEach(({ nodes }, block) => {
    for (const node of nodes) {
      from[e] = node;
      to[e] = nodeCount + block;
      e += 1;
    }
  });
  return { nodes: nodeCount + blocks.length, from, to };
}

/** Flow of each of these edges, m^3/s; what is below a billionth of the throughput counts as none. */
export function joinedFlows(flow: NetworkSolution, edges: number): Float64Array {
  const flows = new Float64Array(edges);
  flows.set(flow.ductFlow);
  let e = flow.ductFlow.length;
  for (const block of flow.blockFlow) {
    flows.set(block, e);
    e += block.length;
  }
  const least = 1e-9 * flow.throughput;
  for (let i = 0; i < edges; i += 1) if (!(Math.abs(flows[i]) > least)) flows[i] = 0;
  return flows;
}
