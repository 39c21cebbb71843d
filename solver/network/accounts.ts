import type { PreparedNetwork } from './prepare.ts';
import type { Fault, NetworkSolution, NetworkSpec } from './spec.ts';

/** A flow below this share of what flows through its part is not resolved. */
const RESOLVED = 1e-9;

const ANSWERED = 0;
const AT_REST = 1;
const UNKNOWN = 2;

interface Solved {
  readonly injected: Float64Array;
  /** m³/s that each given pressure makes flow in, per node. */
  readonly supplied: Float64Array;
  /** Pa, in two parts whose differences are taken apart. */
  readonly coarse: Float64Array;
  readonly fine: Float64Array;
  /** m³/s of each edge; those without an answer are overwritten. */
  readonly flow: Float64Array;
  /** m³/s of each edge by its law at these pressures. */
  readonly lawFlow: Float64Array;
  /** m³/s of the largest leak through a plug, per part: what is not clearly above it is not resolved. */
  readonly leak?: Float64Array;
  readonly faults: readonly Fault[];
}

/** The solution as the caller sees it; its balances are drawn up anew from the flows reported. */
export function accounts(spec: NetworkSpec, network: PreparedNetwork, solved: Solved): NetworkSolution {
  const { edges, parts } = network;
  const { nodes, from, to, blockStart, driveNode } = edges;
  const { injected, supplied, coarse, fine, flow, lawFlow, faults } = solved;
  const state = new Uint8Array(parts.count);
  for (const { kind, nodes: own } of faults)
    state[parts.of[own[0]]] = kind === 'no-drive' || kind === 'no-flow' ? AT_REST : UNKNOWN;

  const pressure = new Float64Array(nodes);
  for (let i = 0; i < nodes; i += 1) {
    pressure[i] = state[parts.of[i]] === ANSWERED ? coarse[i] + fine[i] : Number.NaN;
  }
  const sharing = new Int32Array(nodes);
  spec.drives.forEach(({ kind }, d) => {
    if (kind === 'pressure') sharing[driveNode[d]] += 1;
  });
  const through = new Float64Array(parts.count);
  const driveFlow = new Float64Array(spec.drives.length);
  const drivePressure = new Float64Array(spec.drives.length);
  let powerIn = 0;
  let dissipation = 0;
  spec.drives.forEach(({ kind, node, value, series }, d) => {
    const at = driveNode[d];
    const part = parts.of[at];
    // Equal pressures given twice at one node share its flow.
    const given =
      state[part] === ANSWERED ? supplied[at] / sharing[at] : state[part] === AT_REST ? 0 : Number.NaN;
    const q = kind === 'flow' ? value : given;
    const p = kind === 'flow' ? pressure[node] + series * q : value;
    driveFlow[d] = q;
    drivePressure[d] = p;
    if (state[part] !== ANSWERED) return;
    if (q > 0) through[part] += q;
    powerIn += p * q;
    if (kind === 'flow') dissipation += series * q * q;
  });

  const net = new Float64Array(nodes);
  /** Half the magnitudes of all flows at a node: what passes through it. */
  const passing = new Float64Array(nodes);
  for (let i = 0; i < nodes; i += 1) {
    net[i] = injected[i] + supplied[i];
    passing[i] = Math.abs(net[i]) / 2;
  }
  for (let e = 0; e < flow.length; e += 1) {
    const a = from[e];
    const b = to[e];
    const status = state[parts.of[a]];
    if (status !== ANSWERED) {
      flow[e] = status === AT_REST ? 0 : Number.NaN;
      continue;
    }
    const q = flow[e];
    net[a] -= q;
    net[b] += q;
    passing[a] += Math.abs(q) / 2;
    passing[b] += Math.abs(q) / 2;
    // By the law's flow, so that an error in either flow or pressure upsets the balance of power.
    dissipation += lawFlow[e] * (coarse[a] - coarse[b] + (fine[a] - fine[b]));
  }
  let conservationResidual = 0;
  for (let i = 0; i < nodes; i += 1) {
    const part = parts.of[i];
    if (state[part] !== ANSWERED || through[part] === 0) continue;
    const over = Math.abs(net[i]) / Math.max(passing[i], RESOLVED * through[part]);
    conservationResidual = Math.max(conservationResidual, over);
  }
  let lawResidual = 0;
  for (let e = 0; e < flow.length; e += 1) {
    const part = parts.of[from[e]];
    if (state[part] !== ANSWERED || through[part] === 0) continue;
    const off = Math.abs(flow[e] - lawFlow[e]);
    const scale = Math.max(passing[from[e]], passing[to[e]], RESOLVED * through[part]);
    lawResidual = Math.max(lawResidual, off / scale);
  }

  const floor = through.map((q, part) => Math.max(RESOLVED * q, 10 * (solved.leak?.[part] ?? 0)));
  const ductFlow = flow.slice(0, blockStart[0]);
  const ductUnresolved = new Uint8Array(ductFlow.length);
  for (let e = 0; e < ductFlow.length; e += 1) {
    if (unresolved(ductFlow[e], floor[parts.of[from[e]]])) ductUnresolved[e] = 1;
  }
  const driveUnresolved = new Uint8Array(driveFlow.length);
  for (let d = 0; d < driveFlow.length; d += 1) {
    if (unresolved(driveFlow[d], floor[parts.of[driveNode[d]]])) driveUnresolved[d] = 1;
  }
  return {
    pressure: pressure.slice(0, spec.nodeCount),
    ductFlow,
    blockFlow: spec.blocks.map(({ nodes: faces }, b) => faceFlows(faces.length, blockStart[b], flow)),
    driveFlow,
    drivePressure,
    ductUnresolved,
    driveUnresolved,
    throughput: through.reduce((sum, q) => sum + q, 0),
    conservationResidual,
    lawResidual,
    powerIn,
    dissipation,
    faults,
  };
}

/** A flow that is exactly zero (a dead end) is known, not lost in round-off. */
function unresolved(flow: number, floor: number): boolean {
  return flow !== 0 && Math.abs(flow) < floor;
}

/** m³/s into a block at each face, from the flows of its edges, which run from the later face to the earlier. */
function faceFlows(faces: number, firstEdge: number, flow: Float64Array): Float64Array {
  const into = new Float64Array(faces);
  let e = firstEdge;
  for (let i = 1; i < faces; i += 1) {
    for (let j = 0; j < i; j += 1, e += 1) {
      into[i] += flow[e];
      into[j] -= flow[e];
    }
  }
  return into;
}
