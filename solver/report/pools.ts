import type { Chamber, Chip } from '../chip/chip.ts';
import type { Graph } from '../chip/graph.ts';
import type { Element } from '../exposure/flow-net.ts';
import type { Lumped } from '../lump/lump.ts';
import type { Stretch } from '../lump/stretches.ts';
import { depthOf, NANOMETRES } from '../lump/stretches.ts';

/** A chamber that is not solved, and so stands at one pressure. */
export interface Pool {
  readonly node: number;
  readonly site: number;
  readonly chambers: readonly Chamber[];
  /** m³ */
  readonly volume: number;
  readonly element: Element;
}

/** Every chamber site that lies in no solved cell, with its node. */
export function chamberPools(chip: Chip, graph: Graph, lumped: Lumped): Pool[] {
  const solved = new Set<number>();
  for (const { spec, solution } of lumped.cells)
    if (solution) for (const site of spec.sites) solved.add(site);
  const pools: Pool[] = [];
  let nodes: Map<number, number> | null = null;
  graph.sites.forEach((site, index) => {
    if (site.kind !== 'chamber' || solved.has(index)) return;
    nodes ??= siteNodes(graph, lumped);
    const node = nodes.get(index);
    if (node === undefined) return;
    const chambers = chip.chambers.filter(({ id }) => site.chambers.includes(id));
    let volume = 0;
    for (const chamber of chambers) {
      const layerIndex = chip.layers.findIndex(({ id }) => id === chamber.layer);
      volume += areaOf(chamber) * depthOf(chip, layerIndex);
    }
    pools.push({
      node,
      site: index,
      chambers,
      volume,
      element: {
        name: site.name,
        layer: site.layers[0],
        ids: new Set([...site.chambers, ...site.ports, ...site.vias]),
      },
    });
  });
  return pools;
}

/** m² */
export function areaOf({ outline }: Chamber): number {
  let sum = 0;
  outline.forEach(([x, y], i) => {
    const [nx, ny] = outline[(i + 1) % outline.length];
    sum += x * ny - nx * y;
  });
  return Math.abs(sum) / 2 / NANOMETRES ** 2;
}

/** Node of each site that a stretch begins or ends at: where its piece does. */
function siteNodes(graph: Graph, lumped: Lumped): Map<number, number> {
  const byPiece = new Map<number, Stretch[]>();
  for (const stretch of [...lumped.stretches, ...lumped.inner]) {
    const list = byPiece.get(stretch.piece);
    if (list) list.push(stretch);
    else byPiece.set(stretch.piece, [stretch]);
  }
  const nodes = new Map<number, number>();
  for (const [index, own] of byPiece) {
    const { from, to } = graph.pieces[index];
    const ends = new Set(own.map((stretch) => stretch.to));
    const starts = new Set(own.map((stretch) => stretch.from));
    for (const stretch of own) {
      if (!ends.has(stretch.from)) nodes.set(from, stretch.from);
      if (!starts.has(stretch.to)) nodes.set(to, stretch.to);
    }
  }
  return nodes;
}
