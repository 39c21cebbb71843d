import { accounts } from './accounts.ts';
import { conductances } from './edges.ts';
import { balancedFlows, linearFlows } from './flows.ts';
import { imposed } from './imposed.ts';
import { type PreparedNetwork, prepareNetwork } from './prepare.ts';
import { solvePressures } from './pressures.ts';
import type { NetworkSolution, NetworkSpec } from './spec.ts';

/**
 * Pressures and flows of a network of linear resistances: Σ flows into every node = 0, every flow =
 * conductance × pressure difference.
 *
 * @param network what `prepareNetwork` made of a spec with the same ducts, blocks and drives (and tubing where
 *   there is some); only values may differ. Left with the factor at hand for `gradients`.
 * @throws RangeError on values that make no sense, or another topology
 */
export function solveNetwork(
  spec: NetworkSpec,
  network: PreparedNetwork = prepareNetwork(spec),
): NetworkSolution {
  const drives = imposed(spec, network);
  conductances(spec, network.edges, network.conductance);
  const coarse = drives.pressure.slice();
  const fine = new Float64Array(coarse.length);
  solvePressures(spec.nodeCount, network, drives, coarse, fine);
  const lawFlow = linearFlows(network, coarse, fine);
  const flow = lawFlow.slice();
  const supplied = balancedFlows(network, drives.injected, flow);
  return accounts(spec, network, { ...drives, supplied, coarse, fine, flow, lawFlow });
}
