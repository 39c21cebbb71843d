import type { NetworkSolution } from '../network/spec.ts';
import type { Lumped } from './lump.ts';

/** Rounds of giving junctions the viscosity of the channels around them. */
const ROUNDS = 8;
/** Relative change of a junction's viscosity that ends them. */
const SETTLED = 1e-6;

/**
 * A shear-thinning fluid in solved junctions: each takes one viscosity, the mean of what the channels at
 * its faces would need as Newtonian ones to drop the pressure they do, weighted by their flow. An
 * approximation, exact where the fluid does not thin; the report says so.
 *
 * @param network solves a network, as often as it takes
 */
export function settleThinning(
  lumped: Lumped,
  network: (lumped: Lumped) => NetworkSolution,
): { readonly lumped: Lumped; readonly flow: NetworkSolution } {
  let flow = network(lumped);
  if (!lumped.laws || lumped.spec.blocks.length === 0 || !lumped.thins) return { lumped, flow };
  let viscosity = lumped.spec.blocks.map(() => lumped.viscosity);
  for (let round = 0; round < ROUNDS; round += 1) {
    const next = blockViscosities(lumped, flow, viscosity);
    const change = next.reduce((most, value, i) => Math.max(most, Math.abs(value / viscosity[i] - 1)), 0);
    viscosity = next;
    const blocks = lumped.spec.blocks.map(({ nodes, matrix }, i) => ({
      nodes,
      matrix: matrix.map((entry) => (entry * lumped.viscosity) / next[i]),
    }));
    const thinned: Lumped = { ...lumped, spec: { ...lumped.spec, blocks } };
    flow = network(thinned);
    if (change < SETTLED || round === ROUNDS - 1) return { lumped: thinned, flow };
  }
  return { lumped, flow };
}

function blockViscosities(lumped: Lumped, flow: NetworkSolution, before: readonly number[]): number[] {
  const { spec, stretches, ducts } = lumped;
  const weight = new Float64Array(spec.nodeCount);
  const weighted = new Float64Array(spec.nodeCount);
  stretches.forEach((stretch, index) => {
    const size = Math.abs(flow.ductFlow[index]);
    const drop = Math.abs(flow.pressure[stretch.from] - flow.pressure[stretch.to]);
    if (!(size > 0 && drop > 0)) return;
    const apparent = drop / (size * ducts[index].resistance * stretch.length);
    for (const node of [stretch.from, stretch.to]) {
      weight[node] += size;
      weighted[node] += size * apparent;
    }
  });
  return spec.blocks.map(({ nodes }, i) => {
    let sum = 0;
    let total = 0;
    for (const node of nodes) {
      sum += weighted[node];
      total += weight[node];
    }
    return total > 0 ? sum / total : before[i];
  });
}
