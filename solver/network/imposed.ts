import { nodesOfPart, type PreparedNetwork } from './prepare.ts';
import type { Fault, NetworkSpec } from './spec.ts';

/** What the drives impose, and which parts that leaves without an answer. */
export interface Imposed {
  /** m³/s driven into each node. */
  readonly injected: Float64Array;
  /** Pa, the given pressures at their nodes, 0 elsewhere. */
  readonly pressure: Float64Array;
  /** Per part: 1 where it has no answer for a reason that its values show. */
  readonly left: Uint8Array;
  readonly faults: Fault[];
}

/** @throws RangeError where the spec has another topology than the one prepared */
export function imposed(spec: NetworkSpec, network: PreparedNetwork): Imposed {
  const { edges, parts } = network;
  const { nodeCount, resistance, blocks, drives } = spec;
  const same =
    resistance.length === edges.blockStart[0] &&
    blocks.length === edges.blockStart.length - 1 &&
    drives.length === edges.driveNode.length &&
    drives.every(({ node, kind, series }, d) =>
      kind === 'pressure' && series > 0 ? edges.driveNode[d] >= nodeCount : edges.driveNode[d] === node,
    );
  if (!same) throw new RangeError('The network is not the one prepared.');

  const injected = new Float64Array(edges.nodes);
  const pressure = new Float64Array(edges.nodes);
  const left = new Uint8Array(parts.count);
  const first = new Int32Array(edges.nodes).fill(-1);
  const against = new Map<number, number[]>();
  drives.forEach(({ kind, value }, d) => {
    const node = edges.driveNode[d];
    if (kind === 'flow') {
      injected[node] += value;
      return;
    }
    pressure[node] = value;
    const before = first[node];
    if (before < 0) first[node] = d;
    else if (drives[before].value !== value) against.set(node, [...(against.get(node) ?? [before]), d]);
  });
  const faults: Fault[] = [...network.faults];
  for (const [node, those] of against) {
    const part = parts.of[node];
    left[part] = 1;
    faults.push({ kind: 'contradiction', nodes: nodesOfPart(nodeCount, parts, part), drives: those });
  }
  return { injected, pressure, left, faults };
}
