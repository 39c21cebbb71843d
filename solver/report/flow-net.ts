import type { Chip } from '../chip/chip.ts';
import type { Graph } from '../chip/graph.ts';
import type { CellResult, PieceResult } from '../chip/result.ts';
import { CellPaths } from '../exposure/cell-crossing.ts';
import type { Crossing } from '../exposure/crossing.ts';
import { ductCrossing } from '../exposure/duct-crossing.ts';
import type { Element, FlowNet, NetPort } from '../exposure/flow-net.ts';
import { poolCrossing } from '../exposure/pool-crossing.ts';
import { sectionExposure } from '../exposure/section-of.ts';
import type { Fluid } from '../fluid/fluid.ts';
import type { PlacedCell } from '../lump/layout.ts';
import type { Lumped } from '../lump/lump.ts';
import { channelDepth, NANOMETRES } from '../lump/stretches.ts';
import type { NetworkSolution } from '../network/spec.ts';
import type { Rheology } from '../section/rheology/local.ts';
import { chamberPools, type Pool } from './pools.ts';

/** The solved chip as paths see it, with the solved cells that have flow and fields. */
export interface ChipNet extends FlowNet {
  /** By index of the cell; null where it is not solved or nothing flows in it. */
  readonly cellPaths: readonly (CellPaths | null)[];
  readonly pools: readonly Pool[];
}

/** Flows below this share of what goes through the chip are none. */
const LEAST = 1e-9;

export function chipNet(
  chip: Chip,
  graph: Graph,
  fluid: Fluid,
  lumped: Lumped,
  flow: NetworkSolution,
  pieces: readonly PieceResult[],
  cells: readonly CellResult[],
): ChipNet {
  const rheology: Rheology = fluid.shear ? { shear: fluid.shear } : { viscosity: fluid.viscosity! };
  const least = LEAST * flow.throughput;
  const tail: number[] = [];
  const head: number[] = [];
  const flows: number[] = [];
  const crossing: Crossing[] = [];
  const element: Element[] = [];
  const add = (from: number, to: number, q: number, how: Crossing, of: Element): void => {
    tail.push(from);
    head.push(to);
    flows.push(q);
    crossing.push(how);
    element.push(of);
  };
  const own = new Map<number, ReadonlySet<string>>();
  const all = lumped.inner.length === 0 ? lumped.stretches : [...lumped.stretches, ...lumped.inner];
  for (const [index, stretch] of all.entries()) {
    const q = flow.ductFlow[index];
    const size = Math.abs(q);
    if (!(size > least)) continue;
    const piece = graph.pieces[stretch.piece];
    const layer = chip.layers[piece.layerIndex];
    const drop = Math.abs(flow.pressure[stretch.from] - flow.pressure[stretch.to]);
    const how = ductCrossing({
      profile: layer.profile,
      width: stretch.width,
      depth: channelDepth(chip, piece),
      length: stretch.length,
      flow: size,
      drop,
      volume: lumped.ducts[index].area * stretch.length,
      peakWallShear: index < pieces.length ? pieces[index].peakWallShear : null,
      rheology,
      where: piece.channel,
    });
    const name = index < pieces.length ? lumped.names[index] : '';
    let ids = own.get(piece.channelIndex);
    if (!ids) {
      ids = new Set([piece.channel]);
      own.set(piece.channelIndex, ids);
    }
    const of = { name, layer: layer.id, ids };
    // Stand-ins have no peak of their own: their cell counts as ideal.
    const known = index < pieces.length ? how : idealStandIn(how);
    if (q > 0) add(stretch.from, stretch.to, size, known, of);
    else add(stretch.to, stretch.from, size, known, of);
  }
  const cellPaths = lumped.cells.map((cell, index) => {
    const block = lumped.cellBlock[index];
    if (block < 0) return null;
    const into = flow.blockFlow[block].map((q) => (Math.abs(q) > least ? q : 0));
    const paths = pathsOf(chip, lumped, cell, index, into, cells[index].peakWallShear);
    if (!paths) return null;
    addCell(cell, into, paths, elementOf(chip, graph, cell), add);
    return paths;
  });

  const ports = netPorts(chip, lumped, flow, least);
  const pools = chamberPools(chip, graph, lumped);
  let { nodeCount: nodes } = lumped;
  for (const pool of pools) {
    // What leaves a chamber starts from a second node, with the chamber between the two.
    let through = 0;
    for (let e = 0; e < tail.length; e += 1) {
      if (tail[e] === pool.node) tail[e] = nodes;
      if (head[e] === pool.node) through += flows[e];
    }
    for (const outlet of ports.outlets) if (outlet.node === pool.node) outlet.node = nodes;
    for (const inlet of ports.inlets) if (inlet.node === pool.node) through += inlet.flow;
    if (through > 0) add(pool.node, nodes, through, poolCrossing(pool.volume / through), pool.element);
    nodes += 1;
  }
  const pressure = new Float64Array(nodes);
  for (let i = 0; i < lumped.nodeCount; i += 1) pressure[i] = flow.pressure[i] || 0;
  pools.forEach((pool, i) => {
    pressure[lumped.nodeCount + i] = flow.pressure[pool.node] || 0;
  });
  return {
    nodes,
    tail: Int32Array.from(tail),
    head: Int32Array.from(head),
    flow: Float64Array.from(flows),
    crossing,
    element,
    pressure,
    ...ports,
    cellPaths,
    pools,
  };
}

const idealStandIn = (how: Crossing): Crossing => ({
  time: how.time,
  get fast() {
    return how.fast;
  },
  get slow() {
    return how.slow;
  },
  peakWallShear: 0,
  stretch: null,
  dose: how.dose,
  history: how.history,
  hugging: how.hugging,
});

function pathsOf(
  chip: Chip,
  lumped: Lumped,
  { spec, solution }: PlacedCell,
  index: number,
  into: Float64Array,
  peakWallShear: number | null,
): CellPaths | null {
  if (!solution) return null;
  const { matrix } = lumped.spec.blocks[lumped.cellBlock[index]];
  const widest = spec.faces.reduce((most, face) => Math.max(most, face.width), 0) / NANOMETRES;
  const layer = chip.layers[spec.layerIndex];
  const { depth } = spec.shape;
  // Rims have no cross-section: any width serves to spread times as a channel does.
  const around = sectionExposure(
    layer.profile,
    layer.profile.kind === 'circle' ? depth : widest,
    depth,
    spec.name,
  );
  return CellPaths.of({
    solution,
    flow: into,
    // The network may give each cell a viscosity of its own.
    viscosity: solution.portMatrix[0] / matrix[0],
    origin: [spec.origin[0] / NANOMETRES, spec.origin[1] / NANOMETRES],
    faceWidth: spec.faces.map(({ width }) => width / NANOMETRES),
    peakWallShear,
    slow: around.slow,
    fast: around.fast,
  });
}

/** Every way in with every way out: what comes in by a face leaves in the proportion of the flows out. */
function addCell(
  { spec }: PlacedCell,
  into: Float64Array,
  paths: CellPaths,
  of: Element,
  add: (from: number, to: number, q: number, how: Crossing, of: Element) => void,
): void {
  let through = 0;
  for (const q of into) through += Math.max(0, q);
  for (let i = 0; i < into.length; i += 1) {
    if (!(into[i] > 0)) continue;
    for (let j = 0; j < into.length; j += 1) {
      if (!(into[j] < 0)) continue;
      add(spec.faces[i].node, spec.faces[j].node, (into[i] * -into[j]) / through, paths.crossing(i, j), of);
    }
  }
}

export function elementOf(chip: Chip, graph: Graph, { spec }: PlacedCell): Element {
  const ids = new Set<string>();
  for (const site of spec.sites) {
    const { chambers, ports, vias } = graph.sites[site];
    for (const id of [...chambers, ...ports, ...vias]) ids.add(id);
  }
  for (const face of spec.faces) if (face.piece >= 0) ids.add(graph.pieces[face.piece].channel);
  return { name: spec.name, layer: chip.layers[spec.layerIndex].id, ids };
}

type MutablePort = { -readonly [K in keyof NetPort]: NetPort[K] };

function netPorts(
  chip: Chip,
  lumped: Lumped,
  flow: NetworkSolution,
  least: number,
): { readonly inlets: MutablePort[]; readonly outlets: MutablePort[] } {
  const inlets: MutablePort[] = [];
  const outlets: MutablePort[] = [];
  chip.ports.forEach(({ id }, index) => {
    const drive = lumped.portDrive[index];
    const q = drive < 0 ? 0 : flow.driveFlow[drive];
    if (!(Math.abs(q) > least)) return;
    (q > 0 ? inlets : outlets).push({ id, node: lumped.portNode[index], flow: Math.abs(q) });
  });
  return { inlets, outlets };
}
