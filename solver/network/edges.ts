import type { NetworkSpec } from './spec.ts';

/**
 * The network as a plain graph: every duct is an edge; a block is one edge between each two of its faces
 * (its matrix has zero row sums, so it is that), some of them with negative conductance; tubing before a
 * driven pressure is an edge to a node of its own beyond the others.
 */
export interface Edges {
  /** Nodes with those at the far ends of tubing. */
  readonly nodes: number;
  readonly from: Int32Array;
  readonly to: Int32Array;
  /** First edge of each block, blocks + 1; ducts lie before the first, tubing after the last. */
  readonly blockStart: Int32Array;
  /** Node at which each drive acts: its own, or the far end of its tubing. */
  readonly driveNode: Int32Array;
}

/** @throws RangeError where an index is out of range */
export function edgesOf(spec: NetworkSpec): Edges {
  const { nodeCount, ductFrom, ductTo, blocks, drives } = spec;
  const ducts = ductFrom.length;
  if (ductTo.length !== ducts) throw new RangeError('Ducts need a first and a second node each.');
  const blockStart = new Int32Array(blocks.length + 1);
  blockStart[0] = ducts;
  blocks.forEach(({ nodes }, b) => {
    blockStart[b + 1] = blockStart[b] + (nodes.length * (nodes.length - 1)) / 2;
  });
  const tubes = drives.filter(({ kind, series }) => kind === 'pressure' && series > 0).length;
  const total = blockStart[blocks.length] + tubes;
  const from = new Int32Array(total);
  const to = new Int32Array(total);
  from.set(ductFrom);
  to.set(ductTo);
  blocks.forEach(({ nodes }, b) => {
    let e = blockStart[b];
    for (let i = 1; i < nodes.length; i += 1) {
      for (let j = 0; j < i; j += 1, e += 1) {
        from[e] = nodes[i];
        to[e] = nodes[j];
      }
    }
  });
  const driveNode = new Int32Array(drives.length);
  let tube = blockStart[blocks.length];
  let outer = nodeCount;
  drives.forEach(({ node, kind, series }, d) => {
    if (!(node >= 0 && node < nodeCount)) throw new RangeError(`Drive ${d} acts at node ${node}.`);
    driveNode[d] = node;
    if (kind !== 'pressure' || !(series > 0)) return;
    from[tube] = outer;
    to[tube] = node;
    driveNode[d] = outer;
    tube += 1;
    outer += 1;
  });
  for (let e = 0; e < total; e += 1) {
    const a = from[e];
    const b = to[e];
    if (!(a >= 0 && a < outer && b >= 0 && b < outer))
      throw new RangeError(`Edge ${e} joins nodes ${a} and ${b}.`);
  }
  return { nodes: outer, from, to, blockStart, driveNode };
}

/** How far a block's matrix may be from symmetric with zero row sums, of its largest entry. */
const BLOCK_SLACK = 1e-6;

/**
 * Conductance of every edge, m³/(s Pa), into `g`.
 * @throws RangeError where a resistance is not positive and finite, or a block is not what it must be
 */
export function conductances(spec: NetworkSpec, edges: Edges, g: Float64Array): void {
  const { resistance, blocks, drives } = spec;
  for (let e = 0; e < resistance.length; e += 1) {
    const r = resistance[e];
    if (!(r > 0 && r < Number.POSITIVE_INFINITY)) throw new RangeError(`Duct ${e} has the resistance ${r}.`);
    g[e] = 1 / r;
  }
  blocks.forEach(({ nodes, matrix }, b) => {
    const n = nodes.length;
    let largest = 0;
    for (let k = 0; k < n * n; k += 1) largest = Math.max(largest, Math.abs(matrix[k]));
    let e = edges.blockStart[b];
    for (let i = 0; i < n; i += 1) {
      let sum = 0;
      for (let j = 0; j < n; j += 1) sum += matrix[i * n + j];
      if (!(Math.abs(sum) <= BLOCK_SLACK * largest) || matrix[i * n + i] < 0) {
        throw new RangeError(
          `Block ${b}: row ${i} sums to ${sum}, with ${matrix[i * n + i]} on the diagonal.`,
        );
      }
      for (let j = 0; j < i; j += 1, e += 1) {
        const one = matrix[i * n + j];
        const two = matrix[j * n + i];
        if (!(Math.abs(one - two) <= BLOCK_SLACK * largest)) {
          throw new RangeError(`Block ${b} is not symmetric at ${i}, ${j}: ${one} and ${two}.`);
        }
        g[e] = -(one + two) / 2;
      }
    }
  });
  let tube = edges.blockStart[blocks.length];
  drives.forEach(({ kind, series, value }, d) => {
    if (!(series >= 0 && Number.isFinite(value) && series < Number.POSITIVE_INFINITY)) {
      throw new RangeError(`Drive ${d} has the value ${value} behind the resistance ${series}.`);
    }
    if (kind !== 'pressure' || series === 0) return;
    g[tube] = 1 / series;
    tube += 1;
  });
}
