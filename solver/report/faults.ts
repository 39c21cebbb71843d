import type { Graph } from '../chip/graph.ts';
import type { Fault, NetworkSolution } from '../network/spec.ts';
import type { Finding } from '../problem/finding.ts';
import { Problem } from '../problem/problem.ts';

/**
 * What the network could not answer, in words of the drawing: a part held still by a yield stress is a
 * finding; pressures that were not found stop the solve (Problem 'not-converged'). Parts without drives
 * or reference were dealt with before.
 */
export function faultFindings(graph: Graph, flow: NetworkSolution): Finding[] {
  const findings: Finding[] = [];
  for (const fault of flow.faults) {
    if (fault.kind === 'no-flow') findings.push(heldFinding(graph, fault));
    if (fault.kind === 'not-converged' || fault.kind === 'singular') {
      throw new Problem(
        'not-converged',
        `The pressures around ${placeOf(graph, fault)} were not found: ${
          fault.kind === 'singular'
            ? 'resistances there differ too much for one answer'
            : 'the flow there depends too steeply on the pressure'
        }.`,
        placeOf(graph, fault),
        'Check the widths and the fluid there, and the pressures that drive that part.',
      );
    }
  }
  return findings;
}

/** Nodes beyond the drawing's sites are the far ends of tubing. */
function placeOf(graph: Graph, fault: Fault): string {
  const site = fault.nodes.find((node) => node < graph.sites.length);
  return site === undefined ? 'the tubing' : graph.sites[site].name;
}

function heldFinding(graph: Graph, fault: Fault): Finding {
  return {
    kind: 'no-flow',
    severity: 'stop',
    where: placeOf(graph, fault),
    says: `The fluid does not move around ${placeOf(graph, fault)}: its yield stress is above the wall shear that the drives can make there.`,
    do: 'Drive it harder, or widen and shorten the channels on its way.',
  };
}
