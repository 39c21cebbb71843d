import { cutCells } from './cell/cut/cut.ts';
import type { Cut } from './cell/cut/spec.ts';
import type { CellStore } from './cell/store.ts';
import type { Chip } from './chip/chip.ts';
import type { Graph } from './chip/graph.ts';
import { readGraph } from './chip/read-graph.ts';
import { type CellMemory, cellMemory } from './lump/cells.ts';
import { lawMemory } from './lump/laws.ts';
import type { Lumped, LumpMemory } from './lump/lump.ts';
import { type PreparedNetwork, preparedFor, prepareNetwork } from './network/prepare.ts';
import {
  type Gradient,
  gradients,
  gradientsBy,
  type Target,
  weightRoom,
  weightsOf,
} from './network/sensitivity.ts';
import { solveNetwork } from './network/solve-network.ts';
import { solveNonlinear } from './network/solve-nonlinear.ts';
import type { NetworkSolution, NetworkSpec } from './network/spec.ts';
import { tangentGradients } from './network/tangent.ts';

/**
 * What may be kept between two solves of a chip that is being edited. Everything here is derived: an
 * empty memory gives the same result, only later.
 */
export interface Memory {
  readonly lumps: LumpMemory;
  readonly cells: CellMemory;
  /** The last drawing's graph, and how it is cut, where nothing that they are read from has changed; else new ones. */
  graph(chip: Chip): Graph;
  cut(chip: Chip): Cut;
  /**
   * Solves, reusing the order and symbolic factorisation of a network of the same topology, and
   * its pressures as a start where ducts follow laws of their own.
   */
  network(lumped: Lumped): NetworkSolution;
  /**
   * How flows of the network that was solved last depend on its parts; null where they follow laws or have faults.
   * They hold until others are asked for.
   */
  gradients(lumped: Lumped, flow: NetworkSolution, targets: readonly Target[]): Gradient[] | null;
  /** The same where they follow laws too: for small changes. */
  slopes(lumped: Lumped, flow: NetworkSolution, targets: readonly Target[]): Gradient[] | null;
}

/** A network's order and factorisation, and pressures to start from where ducts follow laws. */
interface Prepared {
  readonly spec: NetworkSpec;
  readonly network: PreparedNetwork;
  start: Float64Array | undefined;
}
/** Weights of targets in a network of these conductances: an edit of a drive leaves them as they are. */
interface Weighed {
  readonly network: PreparedNetwork;
  readonly conductance: Float64Array;
  readonly targets: readonly Target[];
  readonly weights: readonly Float64Array[];
}
/**
 * Networks kept beside the last: one whose junctions are not solved yet has another topology, and while one
 * channel is edited the same few come by turns. Larger ones would take too much memory.
 */
const OTHERS = 3;
const MOST_NODES = 5000;

/** @param store where solved cells are kept; in memory alone if none is given */
export function emptyMemory(store?: CellStore): Memory {
  let last: { chip: Chip; graph: Graph; cut: Cut | null } | null = null;
  const drawing = (chip: Chip): { graph: Graph; cut: Cut | null } => {
    if (!last || !sameDrawing(last.chip, chip)) last = { chip, graph: readGraph(chip), cut: null };
    return last;
  };
  let prepared: Prepared | null = null;
  let others: readonly Prepared[] = [];
  let weighed: Weighed | null = null;
  const room = weightRoom();
  return {
    gradients({ spec, laws }, flow, targets) {
      if (!prepared || laws || flow.faults.length > 0) return null;
      const { network } = prepared;
      if (weighed?.network !== network || !sameWeights(weighed, targets)) {
        const conductance = network.conductance.slice();
        weighed = null;
        weighed = { network, conductance, targets, weights: weightsOf(spec, network, targets, room) };
      }
      return gradientsBy(spec, network, flow, targets, weighed.weights);
    },
    slopes({ spec, laws }, flow, targets) {
      if (!prepared || flow.faults.length > 0) return null;
      return laws
        ? tangentGradients(spec, laws, flow, targets)
        : gradients(spec, prepared.network, flow, targets);
    },
    cells: cellMemory(store),
    lumps: { ducts: new Map(), laws: lawMemory() },
    graph: (chip) => drawing(chip).graph,
    cut(chip) {
      const known = drawing(chip);
      known.cut ??= cutCells(chip, known.graph);
      return known.cut;
    },
    network({ spec, laws }) {
      if (!prepared || !sameTopology(prepared.spec, spec)) {
        const last = prepared;
        const known = others.find((other) => sameTopology(other.spec, spec));
        const network = known ? preparedFor(spec, known.network) : prepareNetwork(spec);
        prepared = { spec, network, start: undefined };
        others = [...(last ? [last] : []), ...others.filter((other) => other !== known)]
          .filter((other) => other.spec.nodeCount <= MOST_NODES)
          .slice(0, OTHERS);
      }
      if (!laws) return solveNetwork(spec, prepared.network);
      const solved = solveNonlinear(spec, laws, prepared.network, prepared.start);
      prepared.start = solved.faults.length === 0 ? solved.pressure : undefined;
      return solved;
    },
  };
}

/** Whether two chips are drawn alike: drives, fluid, targets and limits do not matter. */
function sameDrawing(a: Chip, b: Chip): boolean {
  if (
    a.layers !== b.layers ||
    a.channels !== b.channels ||
    a.chambers !== b.chambers ||
    a.vias !== b.vias ||
    a.outline !== b.outline
  ) {
    return false;
  }
  if (a.ports === b.ports) return true;
  return (
    a.ports.length === b.ports.length &&
    a.ports.every((port, index) => {
      const other = b.ports[index];
      return (
        port === other ||
        (port.id === other.id &&
          port.layer === other.layer &&
          port.diameter === other.diameter &&
          port.at[0] === other.at[0] &&
          port.at[1] === other.at[1])
      );
    })
  );
}

function sameTopology(a: NetworkSpec, b: NetworkSpec): boolean {
  return (
    a.nodeCount === b.nodeCount &&
    sameNumbers(a.ductFrom, b.ductFrom) &&
    sameNumbers(a.ductTo, b.ductTo) &&
    a.blocks.length === b.blocks.length &&
    a.blocks.every((block, index) => sameNumbers(block.nodes, b.blocks[index].nodes)) &&
    a.drives.length === b.drives.length &&
    a.drives.every((drive, index) => {
      const other = b.drives[index];
      return drive.node === other.node && drive.kind === other.kind && drive.series > 0 === other.series > 0;
    })
  );
}

function sameWeights({ network, conductance, targets }: Weighed, wanted: readonly Target[]): boolean {
  return (
    targets.length === wanted.length &&
    targets.every(({ of, index }, t) => of === wanted[t].of && index === wanted[t].index) &&
    sameNumbers(conductance, network.conductance)
  );
}

function sameNumbers<T extends Int32Array | Float64Array>(a: T, b: T): boolean {
  if (a.length !== b.length) return false;
  for (let i = 0; i < a.length; i += 1) if (a[i] !== b[i]) return false;
  return true;
}
