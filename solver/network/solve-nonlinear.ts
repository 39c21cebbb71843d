import { accounts } from './accounts.ts';
import { conductances } from './edges.ts';
import { balancedFlows } from './flows.ts';
import { type Imposed, imposed } from './imposed.ts';
import { type DuctLaw, lawState } from './law.ts';
import { CONVERGED, newton, type Search } from './newton.ts';
import { nodesOfPart, type PreparedNetwork, prepareNetwork } from './prepare.ts';
import { solvePressures } from './pressures.ts';
import type { NetworkSolution, NetworkSpec } from './spec.ts';

export interface NonlinearSolution extends NetworkSolution {
  /** Newton steps taken, all together. */
  readonly steps: number;
  /** Worst imbalance of a node over what passes through it, by the laws alone, before flows are balanced. */
  readonly lawImbalance: number;
}

/** Where a leak is more than this share of what flows through its part, it is all that flows. */
const LEAK_MOST = 1e-3;
/** Shares of the linear law on the way to the laws asked, where Newton's method does not get there at once. */
const PATH = [0.3, 0.1, 0.03, 0.01, 3e-3, 1e-3, 1e-4, 1e-5, 1e-6, 1e-7, 0];

/**
 * Pressures and flows of a network whose ducts follow laws of their own: Σ flows into every node = 0, every
 * flow = law(pressures at its ends). Newton's method on the pressures.
 *
 * @param spec resistance: of each duct at a flow of the size expected, for the start
 * @param laws of each duct; null for one that is linear
 * @param network as for `solveNetwork`
 * @param start Pa of each node, of an earlier solution
 * @returns with a fault 'no-flow' for each part that a yield stress holds still, 'not-converged' for each whose
 *   pressures were not found to 1e-10
 */
export function solveNonlinear(
  spec: NetworkSpec,
  laws: readonly (DuctLaw | null)[],
  network: PreparedNetwork = prepareNetwork(spec),
  start?: Float64Array,
): NonlinearSolution {
  if (laws.length !== spec.resistance.length) throw new RangeError('Every duct needs a law, or null.');
  const { edges, parts, nodeOf, sound } = network;
  const drives = imposed(spec, network);
  conductances(spec, edges, network.conductance);
  const linear = network.conductance.slice();
  const coarse = drives.pressure.slice();
  const fine = new Float64Array(edges.nodes);
  solvePressures(spec.nodeCount, network, drives, coarse, fine);
  const linearCoarse = coarse.slice();
  const linearFine = fine.slice();

  const search: Search = {
    network,
    laws,
    linear,
    drives,
    coarse,
    fine,
    state: lawState(linear.length),
    worst: new Float64Array(parts.count),
    net: new Float64Array(edges.nodes),
    around: new Float64Array(edges.nodes),
    room: null,
    steps: 0,
  };
  for (let u = 0; start !== undefined && u < nodeOf.length; u += 1) {
    const i = nodeOf[u];
    if (!Number.isFinite(start[i])) continue;
    coarse[i] = start[i];
    fine[i] = 0;
  }
  if (!newton(search, 0)) {
    coarse.set(linearCoarse);
    fine.set(linearFine);
    for (const blend of PATH) newton(search, blend);
  }

  const { state, worst } = search;
  const leak = new Float64Array(parts.count);
  for (let e = 0; e < laws.length; e += 1) {
    const part = parts.of[edges.from[e]];
    if (state.leaking[e] === 1) leak[part] = Math.max(leak[part], Math.abs(state.flow[e]));
  }
  const through = throughput(network, drives, state.flow);
  const asked = new Uint8Array(parts.count);
  for (let i = 0; i < edges.nodes; i += 1) if (drives.injected[i] !== 0) asked[parts.of[i]] = 1;
  for (let part = 0; part < parts.count; part += 1) {
    if (sound[part] === 0 || drives.left[part] === 1) continue;
    const leaking = leak[part] > LEAK_MOST * through[part];
    // A given flow that only the leak balances is more than a law can give; between pressures it is a plug.
    const lost = worst[part] > CONVERGED || (leaking && asked[part] === 1);
    if (!lost && !leaking) continue;
    const nodes = nodesOfPart(spec.nodeCount, parts, part);
    drives.faults.push({ kind: lost ? 'not-converged' : 'no-flow', nodes, drives: [] });
  }
  const flow = state.flow.slice();
  const supplied = balancedFlows(network, drives.injected, flow);
  return {
    ...accounts(spec, network, { ...drives, supplied, coarse, fine, flow, lawFlow: state.flow, leak }),
    steps: search.steps,
    lawImbalance: worst.reduce((a, b) => Math.max(a, b), 0),
  };
}

/** m³/s that enter each part. */
function throughput(
  { edges, parts, fixed }: PreparedNetwork,
  drives: Imposed,
  flow: Float64Array,
): Float64Array {
  const { from, to } = edges;
  const out = new Float64Array(edges.nodes);
  for (let e = 0; e < flow.length; e += 1) {
    out[from[e]] += flow[e];
    out[to[e]] -= flow[e];
  }
  const through = new Float64Array(parts.count);
  for (let i = 0; i < edges.nodes; i += 1) {
    const enters =
      Math.max(drives.injected[i], 0) + (fixed[i] === 1 ? Math.max(out[i] - drives.injected[i], 0) : 0);
    through[parts.of[i]] += enters;
  }
  return through;
}
