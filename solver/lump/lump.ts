import type { Chip } from '../chip/chip.ts';
import type { Graph } from '../chip/graph.ts';
import type { Drive, NetworkSpec } from '../network/spec.ts';
import type { Profile } from '../section/profile.ts';
import { driveOf } from './drives.ts';
import { type Duct, ductOf } from './duct.ts';
import { depthOf, idealStretches, type Stretch } from './stretches.ts';

/** The chip lumped into a network of hydraulic resistances, with the way back to the drawing. */
export interface Lumped {
  readonly spec: NetworkSpec;
  /** In the order of the network's ducts. */
  readonly stretches: readonly Stretch[];
  readonly ducts: readonly Duct[];
  /** Node of each port, and its drive in the network (-1 where closed), in the chip's order of ports. */
  readonly portNode: Int32Array;
  readonly portDrive: Int32Array;
}

/** Ducts by layer and widths, kept between solves; cleared when it grows beyond what a chip can need. */
export type DuctMemory = Map<string, Duct>;
const MOST_DUCTS = 500_000;

/**
 * The network with ideal junctions.
 * @param viscosity Pa s, @param density kg/m^3
 */
export function lump(
  chip: Chip,
  graph: Graph,
  viscosity: number,
  density: number,
  memory: DuctMemory,
): Lumped {
  if (memory.size > MOST_DUCTS) memory.clear();
  const stretches = idealStretches(graph);
  const ducts = stretches.map((stretch) => stretchDuct(chip, graph, stretch, memory));
  const resistance = new Float64Array(stretches.length);
  const ductFrom = new Int32Array(stretches.length);
  const ductTo = new Int32Array(stretches.length);
  stretches.forEach((stretch, index) => {
    ductFrom[index] = stretch.from;
    ductTo[index] = stretch.to;
    resistance[index] = viscosity * ducts[index].resistance * stretch.length;
  });
  const drives: Drive[] = [];
  const portDrive = new Int32Array(chip.ports.length).fill(-1);
  chip.ports.forEach((port, index) => {
    const drive = driveOf(port, viscosity, density);
    if (!drive) return;
    portDrive[index] = drives.length;
    drives.push({ node: graph.portSite[index], ...drive });
  });
  return {
    spec: { nodeCount: graph.sites.length, ductFrom, ductTo, resistance, blocks: [], drives },
    stretches,
    ducts,
    portNode: graph.portSite,
    portDrive,
  };
}

function stretchDuct(chip: Chip, graph: Graph, stretch: Stretch, memory: DuctMemory): Duct {
  const piece = graph.pieces[stretch.piece];
  const layer = chip.layers[piece.layerIndex];
  const key = `${profileKey(layer.profile)} ${layer.depth} ${stretch.width[0]} ${stretch.width[1]}`;
  let duct = memory.get(key);
  if (!duct) {
    duct = ductOf(layer.profile, stretch.width, depthOf(chip, piece.layerIndex), piece.channel);
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
