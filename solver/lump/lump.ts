import type { CellSolution } from '../cell/cell.ts';
import type { Chip } from '../chip/chip.ts';
import type { Graph } from '../chip/graph.ts';
import type { Fluid } from '../fluid/fluid.ts';
import type { Block, Drive, NetworkSpec } from '../network/spec.ts';
import type { Profile } from '../section/profile.ts';
import { type DuctFlowLaw, ordinaryViscosity } from '../section/rheology/duct-law.ts';
import type { Rheology } from '../section/rheology/local.ts';
import { driveOf } from './drives.ts';
import { type Duct, ductOf } from './duct.ts';
import { chipLaws, type LawMemory } from './laws.ts';
import type { Layout } from './layout.ts';
import { channelDepth, type Stretch } from './stretches.ts';

/** The chip lumped into a network of hydraulic resistances, with the way back to the drawing. */
export interface Lumped extends Layout {
  readonly spec: NetworkSpec;
  /** Of each stretch. The network has these first, then those that stand in for cells, then tubing. */
  readonly ducts: readonly Duct[];
  /** Block of the network that each cell is; -1 where it is not solved. */
  readonly cellBlock: Int32Array;
  /** Of every duct of the network, tubing included; null where all are linear. */
  readonly laws: readonly DuctFlowLaw[] | null;
  /** Whether the fluid is shear-thinning. */
  readonly thins: boolean;
  /** Pa s: the fluid's own, or for a shear-thinning one what its linear start is made with. */
  readonly viscosity: number;
  /** Drive of each port in the network, -1 where closed, in the chip's order of ports. */
  readonly portDrive: Int32Array;
}

/** What is kept between solves: ducts by layer and widths, laws by fluid. */
export interface LumpMemory {
  readonly ducts: Map<string, Duct>;
  readonly laws: LawMemory;
}
/** The map of ducts is cleared when it grows beyond what a chip can need. */
const MOST_DUCTS = 500_000;

/** The network of a layout: a resistance for every duct, a port matrix for every solved cell, the drives. */
export function lump(chip: Chip, graph: Graph, layout: Layout, fluid: Fluid, memory: LumpMemory): Lumped {
  if (memory.ducts.size > MOST_DUCTS) memory.ducts.clear();
  const rheology: Rheology = fluid.shear ? { shear: fluid.shear } : { viscosity: fluid.viscosity! };
  const viscosity = ordinaryViscosity(rheology);
  const all = layout.inner.length === 0 ? layout.stretches : [...layout.stretches, ...layout.inner];
  const ducts = all.map((stretch) => stretchDuct(chip, graph, stretch, memory.ducts));
  const from = all.map((stretch) => stretch.from);
  const to = all.map((stretch) => stretch.to);
  const resistance = all.map((stretch, index) => viscosity * ducts[index].resistance * stretch.length);
  const laws = chipLaws(chip, graph, rheology, all, memory.laws);

  const blocks: Block[] = [];
  const cellBlock = new Int32Array(layout.cells.length).fill(-1);
  layout.cells.forEach(({ spec, solution }, index) => {
    if (!solution) return;
    cellBlock[index] = blocks.length;
    blocks.push({
      nodes: Int32Array.from(spec.faces, (face) => face.node),
      // The shape is in metres and was solved with viscosity 1.
      matrix: matrixOf(solution, viscosity),
    });
  });
  const drives: Drive[] = [];
  const portDrive = new Int32Array(chip.ports.length).fill(-1);
  let { nodeCount } = layout;
  chip.ports.forEach((port, index) => {
    const drive = driveOf(port, viscosity, fluid.density);
    if (!drive) return;
    portDrive[index] = drives.length;
    let node = layout.portNode[index];
    if (!laws) {
      drives.push({ node, ...drive });
      return;
    }
    // The fluid thins in the tubing too: each tube is a duct of its own, from the outside to the chip.
    for (const { bore, length } of [...port.tubing].reverse()) {
      from.push(nodeCount);
      to.push(node);
      resistance.push((viscosity * 128 * length) / (Math.PI * bore ** 4));
      laws.push(
        memory.laws.of(rheology).law({ profile: CIRCLE, width: [bore, bore], depth: bore, length }, port.id),
      );
      node = nodeCount;
      nodeCount += 1;
    }
    drives.push({ node, kind: drive.kind, value: drive.value, series: 0 });
  });
  return {
    spec: {
      nodeCount,
      ductFrom: Int32Array.from(from),
      ductTo: Int32Array.from(to),
      resistance: Float64Array.from(resistance),
      blocks,
      drives,
    },
    ...layout,
    ducts,
    cellBlock,
    laws,
    thins: fluid.shear !== undefined,
    viscosity,
    portDrive,
  };
}

const matrices = new WeakMap<CellSolution, { readonly viscosity: number; readonly matrix: Float64Array }>();

/** A cell's port matrix for a viscosity, made once while the fluid stays as it is; never changed. */
function matrixOf(solution: CellSolution, viscosity: number): Float64Array {
  let known = matrices.get(solution);
  if (known?.viscosity !== viscosity) {
    known = { viscosity, matrix: solution.portMatrix.map((entry) => entry / viscosity) };
    matrices.set(solution, known);
  }
  return known.matrix;
}

const CIRCLE: Profile = { kind: 'circle' };

function stretchDuct(chip: Chip, graph: Graph, stretch: Stretch, memory: Map<string, Duct>): Duct {
  const piece = graph.pieces[stretch.piece];
  const layer = chip.layers[piece.layerIndex];
  const depth = channelDepth(chip, piece);
  const key = `${profileKey(layer.profile)} ${depth} ${stretch.width[0]} ${stretch.width[1]}`;
  let duct = memory.get(key);
  if (!duct) {
    duct = ductOf(layer.profile, stretch.width, depth, piece.channel);
    memory.set(key, duct);
  }
  return duct;
}

const profileKeys = new WeakMap<Profile, string>();

/** A measured polygon may have thousands of points: its text is made once. */
function profileKey(profile: Profile): string {
  let key = profileKeys.get(profile);
  if (key === undefined) {
    key = JSON.stringify(profile);
    profileKeys.set(profile, key);
  }
  return key;
}
