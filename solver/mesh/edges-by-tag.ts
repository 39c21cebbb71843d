import type { Mesh } from './mesh.ts';

/**
 * Boundary edges by their tag, in boundary order (counter-clockwise round the fluid, loop by loop):
 * indices into `boundaryTag`; edge i holds the nodes boundary[3i .. 3i + 2].
 */
export function edgesByTag(mesh: Mesh): Map<number, number[]> {
  const groups = new Map<number, number[]>();
  mesh.boundaryTag.forEach((tag, i) => {
    const group = groups.get(tag);
    if (group) group.push(i);
    else groups.set(tag, [i]);
  });
  return groups;
}

/** Nodes on boundary edges of one tag, each once, in boundary order: start, middle, end, … */
export function nodesByTag(mesh: Mesh, tag: number): number[] {
  const nodes = new Set<number>();
  for (let i = 0; i < mesh.boundaryTag.length; i += 1) {
    if (mesh.boundaryTag[i] !== tag) continue;
    nodes
      .add(mesh.boundary[3 * i])
      .add(mesh.boundary[3 * i + 2])
      .add(mesh.boundary[3 * i + 1]);
  }
  return [...nodes];
}
