import type { Mesh } from '../../mesh/mesh.ts';
import { edgeGradients } from '../basis.ts';
import { type ElementTable, elementTable } from '../element-table.ts';
import { DEGREE_4, LINE_POINTS, LINE_WEIGHTS } from '../quadrature.ts';
import { type Stiffness, stiffness } from '../stiffness.ts';

/**
 * A section, or a mirror part of it, discretised once for many non-linear solves. Lengths in the mesh's
 * own unit.
 */
export interface SectionElements {
  readonly mesh: Mesh;
  readonly table: ElementTable;
  readonly system: Stiffness;
  readonly area: number;
  /** Of the wall alone; lines of symmetry do not count. */
  readonly perimeter: number;
  /** 1 for nodes on the wall; nodeCount */
  readonly wall: Uint8Array;
  /** Boundary edges of the mesh that are wall, by number. */
  readonly wallEdges: Int32Array;
  /** Integral of each function; nodeCount */
  readonly load: Float64Array;
}

/** @param isWall whether a boundary edge of this tag is wall; others are lines of symmetry. */
export function sectionElements(mesh: Mesh, isWall: (tag: number) => boolean = () => true): SectionElements {
  const table = elementTable(mesh, DEGREE_4);
  const wall = new Uint8Array(mesh.nodeCount);
  const edges: number[] = [];
  let perimeter = 0;
  mesh.boundaryTag.forEach((tag, e) => {
    if (!isWall(tag)) return;
    edges.push(e);
    const edge = mesh.boundary.subarray(3 * e, 3 * e + 3);
    for (const node of edge) wall[node] = 1;
    perimeter += edgeLength(mesh, edge);
  });
  const load = new Float64Array(mesh.nodeCount);
  let area = 0;
  const { count } = table.rule;
  for (let p = 0; p < table.weight.length; p += 1) {
    area += table.weight[p];
    const t = Math.floor(p / count);
    for (let i = 0; i < 6; i += 1) {
      load[mesh.triangles[6 * t + i]] += table.weight[p] * table.value[6 * (p % count) + i];
    }
  }
  return {
    mesh,
    table,
    system: stiffness(mesh, table),
    area,
    perimeter,
    wall,
    wallEdges: Int32Array.from(edges),
    load,
  };
}

/** Length of a boundary edge (its start, end and middle node), straight or curved. */
function edgeLength(mesh: Mesh, edge: ArrayLike<number>): number {
  const slopes = new Float64Array(3);
  let length = 0;
  LINE_POINTS.forEach((t, q) => {
    edgeGradients(t, slopes);
    let dx = 0;
    let dy = 0;
    for (let k = 0; k < 3; k += 1) {
      dx += slopes[k] * mesh.x[edge[k]];
      dy += slopes[k] * mesh.y[edge[k]];
    }
    length += LINE_WEIGHTS[q] * Math.hypot(dx, dy);
  });
  return length;
}
