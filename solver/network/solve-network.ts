import { SingularMatrix } from '../sparse/singular.ts';
import { accounts } from './accounts.ts';
import { conductances } from './edges.ts';
import { balancedFlows } from './flows.ts';
import { nodesOfPart, type PreparedNetwork, prepareNetwork } from './prepare.ts';
import { solvePressures } from './pressures.ts';
import type { Fault, NetworkSolution, NetworkSpec } from './spec.ts';

/**
 * Pressures and flows of a network of linear resistances: Σ flows into every node = 0, every flow =
 * conductance × pressure difference.
 *
 * @param spec values; its topology is the one prepared (same ducts, blocks, drives, and tubing where there was some)
 * @throws RangeError on values that make no sense, or another topology
 */
export function solveNetwork(
  spec: NetworkSpec,
  network: PreparedNetwork = prepareNetwork(spec),
): NetworkSolution {
  const { edges, parts, conductance } = network;
  sameTopology(spec, network);
  conductances(spec, edges, conductance);

  const injected = new Float64Array(edges.nodes);
  const coarse = new Float64Array(edges.nodes);
  const fine = new Float64Array(edges.nodes);
  const left = new Uint8Array(parts.count);
  const faults: Fault[] = [...network.faults, ...contradictions(spec, network, left)];
  spec.drives.forEach(({ node, kind, value }, d) => {
    if (kind === 'flow') injected[node] += value;
    else coarse[edges.driveNode[d]] = value;
  });
  for (;;) {
    try {
      solvePressures(network, left, injected, coarse, fine);
      break;
    } catch (error) {
      if (!(error instanceof SingularMatrix)) throw error;
      const part = parts.of[network.nodeOf[error.column]];
      if (left[part] === 1) throw error;
      left[part] = 1;
      faults.push({ kind: 'singular', nodes: nodesOfPart(spec.nodeCount, parts, part), drives: [] });
    }
  }
  const flow = new Float64Array(conductance.length);
  const supplied = balancedFlows(network, injected, coarse, fine, flow);
  return accounts(spec, network, { injected, supplied, coarse, fine, flow, faults });
}

/** Parts where one node has two different pressures; marked in `left`. */
function contradictions(spec: NetworkSpec, network: PreparedNetwork, left: Uint8Array): Fault[] {
  const { edges, parts } = network;
  const first = new Int32Array(edges.nodes).fill(-1);
  const against = new Map<number, number[]>();
  spec.drives.forEach(({ kind, value }, d) => {
    if (kind !== 'pressure') return;
    const node = edges.driveNode[d];
    const before = first[node];
    if (before < 0) first[node] = d;
    else if (spec.drives[before].value !== value) against.set(node, [...(against.get(node) ?? [before]), d]);
  });
  const faults: Fault[] = [];
  for (const [node, drives] of against) {
    const part = parts.of[node];
    left[part] = 1;
    faults.push({ kind: 'contradiction', nodes: nodesOfPart(spec.nodeCount, parts, part), drives });
  }
  return faults;
}

function sameTopology(spec: NetworkSpec, { edges }: PreparedNetwork): void {
  const { nodeCount, resistance, blocks, drives } = spec;
  const same =
    resistance.length === edges.blockStart[0] &&
    blocks.length === edges.blockStart.length - 1 &&
    drives.length === edges.driveNode.length &&
    drives.every(({ node, kind, series }, d) =>
      kind === 'pressure' && series > 0 ? edges.driveNode[d] >= nodeCount : edges.driveNode[d] === node,
    );
  if (!same) throw new RangeError('The network is not the one prepared.');
}
