import type { Mesh } from '../mesh/mesh.ts';
import { type ElementTable, elementTable } from './element-table.ts';
import { type PlaneFlow, planeFlow } from './plane-flow.ts';
import { DEGREE_4 } from './quadrature.ts';
import { type SectionShape, SYMMETRY } from './section-shape.ts';
import { type Stiffness, stiffness } from './stiffness.ts';

/** The flow through a section on one mesh and how well it is known, in the shape's unit. */
export interface BoundedFlow {
  readonly mesh: Mesh;
  readonly table: ElementTable;
  readonly system: Stiffness;
  readonly flow: PlaneFlow;
  /** Of the whole section: the middle of its two bounds. */
  readonly conductance: number;
  /** Half the distance of the bounds and what curved edges may add, relative: a finer mesh makes it smaller. */
  readonly meshError: number;
  /** The part of it that is due to curved edges. */
  readonly geometry: number;
}

/** The curved triangles' area differs from the true one; the flow differs by at most about this times as much. */
const GEOMETRY = 4;

export function boundedFlow(shape: SectionShape, mesh: Mesh): BoundedFlow {
  const wall = new Uint8Array(mesh.nodeCount);
  const mirror = new Uint8Array(mesh.nodeCount);
  for (let i = 0; i < mesh.boundaryTag.length; i += 1) {
    const flags = mesh.boundaryTag[i] === SYMMETRY ? mirror : wall;
    for (let k = 0; k < 3; k += 1) flags[mesh.boundary[3 * i + k]] = 1;
  }
  const table = elementTable(mesh, DEGREE_4);
  const system = stiffness(mesh, table);
  const flow = planeFlow(mesh, table, system, wall, mirror);
  const halves = shape.symmetric ? 2 : 1;
  let area = 0;
  for (const weight of table.weight) area += halves * weight;
  const geometry = GEOMETRY * Math.abs(area / shape.area - 1);
  return {
    mesh,
    table,
    system,
    flow,
    conductance: (halves * (flow.lower + flow.upper)) / 2,
    meshError: (flow.upper - flow.lower) / (flow.upper + flow.lower) + geometry,
    geometry,
  };
}
