import type { Crossing } from './crossing.ts';

/** What an edge of the network is a part of, for limits that hold in a part of the chip. */
export interface Element {
  /** "feed#1", "junction:2", "chamber:well"; '' for what stands in for a cell that is not solved. */
  readonly name: string;
  readonly layer: string;
  /** Channels and other ids (chambers, vias, ports) that it belongs to. */
  readonly ids: ReadonlySet<string>;
}

/**
 * The chip as paths see it: a directed network whose edges run with the flow, each with how a path crosses
 * it. At a node what comes in divides in the proportion of what goes on.
 */
export interface FlowNet {
  readonly nodes: number;
  /** Nodes where each edge starts and ends, and its flow, m³/s, above zero. */
  readonly tail: Int32Array;
  readonly head: Int32Array;
  readonly flow: Float64Array;
  readonly crossing: readonly Crossing[];
  readonly element: readonly Element[];
  /** Pa, per node. */
  readonly pressure: Float64Array;
  readonly inlets: readonly NetPort[];
  readonly outlets: readonly NetPort[];
}

export interface NetPort {
  readonly id: string;
  readonly node: number;
  /** m³/s, above zero. */
  readonly flow: number;
}

/** The network in the order of its flow. */
export interface NetOrder {
  /** Edges that leave each node: edge[start[v]] … edge[start[v + 1] − 1]. */
  readonly start: Int32Array;
  readonly edge: Int32Array;
  /** Place of each node in the order; every edge that counts runs to a later place. */
  readonly rank: Int32Array;
  /** m³/s that leave each node, by ports too. */
  readonly out: Float64Array;
  /** 1 for edges against the order, which paths do not take: flow that goes round in a circle. */
  readonly against: Uint8Array;
}

/**
 * Pressure drives flow, so it does not go round in circles, but for what little one arm of a junction may
 * drag along another: nodes come in an order in which all edges run forward; where a circle is left, by falling
 * pressure.
 */
export function orderOf(net: FlowNet): NetOrder {
  const { nodes, tail, head, flow, pressure, outlets } = net;
  const start = new Int32Array(nodes + 1);
  const waiting = new Int32Array(nodes);
  const out = new Float64Array(nodes);
  for (let e = 0; e < tail.length; e += 1) {
    start[tail[e] + 1] += 1;
    waiting[head[e]] += 1;
    out[tail[e]] += flow[e];
  }
  for (const { node, flow: q } of outlets) out[node] += q;
  for (let v = 0; v < nodes; v += 1) start[v + 1] += start[v];
  const edge = new Int32Array(tail.length);
  const fill = start.slice(0, nodes);
  for (let e = 0; e < tail.length; e += 1) {
    edge[fill[tail[e]]] = e;
    fill[tail[e]] += 1;
  }
  const rank = new Int32Array(nodes).fill(-1);
  const ready: number[] = [];
  for (let v = nodes - 1; v >= 0; v -= 1) if (waiting[v] === 0) ready.push(v);
  let placed = 0;
  const place = (v: number): void => {
    rank[v] = placed;
    placed += 1;
    for (let k = start[v]; k < start[v + 1]; k += 1) {
      const next = head[edge[k]];
      waiting[next] -= 1;
      if (waiting[next] === 0 && rank[next] < 0) ready.push(next);
    }
  };
  let left: number[] | null = null;
  for (;;) {
    while (ready.length > 0) place(ready.pop()!);
    if (placed === nodes) break;
    left ??= Array.from({ length: nodes }, (_, v) => v)
      .filter((v) => rank[v] < 0)
      .sort((a, b) => pressure[a] - pressure[b]);
    while (rank[left[left.length - 1]] >= 0) left.pop();
    place(left.pop()!);
  }
  const against = new Uint8Array(tail.length);
  if (left) {
    for (let e = 0; e < tail.length; e += 1) {
      if (rank[head[e]] > rank[tail[e]]) continue;
      against[e] = 1;
      out[tail[e]] -= flow[e];
    }
  }
  return { start, edge, rank, out, against };
}
