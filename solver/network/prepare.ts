import { analyse } from '../sparse/analyse.ts';
import { emptyFactor, type Factor } from '../sparse/factorise.ts';
import { type ElementPattern, patternOfElements } from '../sparse/pattern.ts';
import { type BalanceTree, balanceTree } from './balance-tree.ts';
import { conductances, type Edges, edgesOf } from './edges.ts';
import { type Parts, partsOf } from './parts.ts';
import type { Fault, NetworkSpec } from './spec.ts';

/**
 * What a network's topology determines, whatever its values: who is connected to whom, which pressures are
 * unknown, the pattern and the symbolic factorisation of their equations. With the arrays that solving
 * needs: one solve at a time.
 */
export interface PreparedNetwork {
  readonly edges: Edges;
  readonly parts: Parts;
  /** Per part: 1 where its pressures are determined by the topology. */
  readonly sound: Uint8Array;
  /** Faults that the topology alone shows. */
  readonly faults: readonly Fault[];
  /** 1 where the pressure is given, per node. */
  readonly fixed: Uint8Array;
  /** Unknown of each node, −1 where its pressure is given or its part unsound. */
  readonly unknown: Int32Array;
  /** Node of each unknown. */
  readonly nodeOf: Int32Array;
  /** m³/(s Pa) of each edge. */
  readonly conductance: Float64Array;
  readonly pattern: ElementPattern;
  readonly factor: Factor;
  readonly tree: BalanceTree;
}

/**
 * Everything about a network that does not change with its values.
 * @throws RangeError on a spec that makes no sense (an index out of range, a resistance that is not positive)
 */
export function prepareNetwork(spec: NetworkSpec): PreparedNetwork {
  const edges = edgesOf(spec);
  const { nodes, from, to, driveNode } = edges;
  const conductance = new Float64Array(from.length);
  conductances(spec, edges, conductance);
  const parts = partsOf(edges);
  const fixed = new Uint8Array(nodes);
  spec.drives.forEach(({ kind }, d) => {
    if (kind === 'pressure') fixed[driveNode[d]] = 1;
  });

  const sound = new Uint8Array(parts.count);
  for (let i = 0; i < nodes; i += 1) if (fixed[i] === 1) sound[parts.of[i]] = 1;
  const faults = faultsOf(spec, parts, sound);

  const unknown = new Int32Array(nodes).fill(-1);
  let count = 0;
  for (let i = 0; i < nodes; i += 1) {
    if (fixed[i] === 1 || sound[parts.of[i]] === 0) continue;
    unknown[i] = count;
    count += 1;
  }
  const nodeOf = new Int32Array(count);
  for (let i = 0; i < nodes; i += 1) if (unknown[i] >= 0) nodeOf[unknown[i]] = i;

  const elementStart = new Int32Array(from.length + 1);
  const ends = new Int32Array(2 * from.length);
  for (let e = 0; e < from.length; e += 1) {
    elementStart[e + 1] = 2 * e + 2;
    const loop = from[e] === to[e];
    ends[2 * e] = loop ? -1 : unknown[from[e]];
    ends[2 * e + 1] = loop ? -1 : unknown[to[e]];
  }
  const pattern = patternOfElements(count, elementStart, ends);
  return {
    edges,
    parts,
    sound,
    faults,
    fixed,
    unknown,
    nodeOf,
    conductance,
    pattern,
    factor: emptyFactor(analyse(pattern.matrix)),
    tree: balanceTree(edges, conductance, fixed),
  };
}

/** What was prepared, for other values of the same topology: as prepared anew, without looking at the topology again. */
export function preparedFor(spec: NetworkSpec, network: PreparedNetwork): PreparedNetwork {
  const { edges, conductance, fixed } = network;
  conductances(spec, edges, conductance);
  return { ...network, tree: balanceTree(edges, conductance, fixed) };
}

/** The nodes of a part that the caller knows (no far ends of tubing), ascending. */
export function nodesOfPart(nodeCount: number, parts: Parts, part: number): Int32Array {
  const own: number[] = [];
  for (let i = 0; i < nodeCount; i += 1) if (parts.of[i] === part) own.push(i);
  return Int32Array.from(own);
}

function faultsOf(spec: NetworkSpec, parts: Parts, sound: Uint8Array): Fault[] {
  const flows = new Map<number, number[]>();
  spec.drives.forEach(({ node }, d) => {
    const part = parts.of[node];
    if (sound[part] === 1) return;
    const there = flows.get(part);
    if (there) there.push(d);
    else flows.set(part, [d]);
  });
  const nodes = new Map<number, number[]>();
  for (let i = 0; i < spec.nodeCount; i += 1) {
    const part = parts.of[i];
    if (sound[part] === 1) continue;
    const there = nodes.get(part);
    if (there) there.push(i);
    else nodes.set(part, [i]);
  }
  return [...nodes].map(([part, own]) => {
    const drives = flows.get(part) ?? [];
    return { kind: drives.length > 0 ? 'no-reference' : 'no-drive', nodes: Int32Array.from(own), drives };
  });
}
