import type { DuctLaw } from './law.ts';
import { prepareNetwork } from './prepare.ts';
import { type Gradient, gradients, type Target } from './sensitivity.ts';
import { solveNetwork } from './solve-network.ts';
import type { NetworkSolution, NetworkSpec } from './spec.ts';

/** A duct passes at least this share of what it would as a linear one: a plug has no slope of its own. */
const LEAST = 1e-9;

/** m³/(s Pa) of each duct at a solution, the mean of how its flow answers to the pressures of its two ends. */
export function ductSlopes(
  spec: NetworkSpec,
  laws: readonly (DuctLaw | null)[],
  { pressure }: NetworkSolution,
): Float64Array {
  const out = new Float64Array(3);
  return Float64Array.from(spec.resistance, (resistance, e) => {
    const law = laws[e];
    if (!law) return 1 / resistance;
    const [from, to] = [pressure[spec.ductFrom[e]], pressure[spec.ductTo[e]]];
    law.flow(from - to, to, out);
    return Math.max((out[1] - out[2]) / 2, LEAST / resistance);
  });
}

/**
 * How flows of a network of laws depend on its parts, for small changes: `gradients` of the linear network that
 * answers to them as this one does. `byResistance` is then per relative fall of a duct's flow at its own pressure
 * drop. A roof that gives lets a duct answer a little more to one end than to the other; the mean is taken.
 */
export function tangentGradients(
  spec: NetworkSpec,
  laws: readonly (DuctLaw | null)[],
  solution: NetworkSolution,
  targets: readonly Target[],
): Gradient[] {
  const tangent = { ...spec, resistance: ductSlopes(spec, laws, solution).map((slope) => 1 / slope) };
  const network = prepareNetwork(tangent);
  // For the factor: its own flows are of no use.
  solveNetwork(tangent, network);
  return gradients(tangent, network, solution, targets);
}
