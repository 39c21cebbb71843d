import type { Edge, Mesh } from '../mesh/mesh.ts';
import { meshShape } from '../mesh/mesh-shape.ts';
import { faceWidths } from './equivalent.ts';
import { type CellShape, sharpCorners } from './shape.ts';

/**
 * Mesh of a cell of depth 1. `coarseness` 1 gives port matrices right to 0.1 to 0.3 %, and the error goes
 * with about its power 3.5: edges grow with distance from walls and corners at a rate in proportion to it;
 * along walls, where flow in a shallow cell changes over one depth, they follow the depth; at a
 * sharp corner, where the flow's error goes with the size to the power 1.09, its third power.
 *
 * @param arcs edges on a quarter circle; the port matrix needs 3 / coarseness, a peak on a fillet more
 */
export function planMesh(
  shape: CellShape,
  coarseness: number,
  where: string,
  maxTriangles: number,
  arcs = 6 / coarseness,
): Mesh {
  const { loops } = shape;
  const outer = loops[0];
  let extent = 0;
  for (const edge of outer) extent = Math.max(extent, Math.hypot(edge.x - outer[0].x, edge.y - outer[0].y));
  const width = Math.min(...faceWidths(shape));
  // Wall layers are a share depth / width of the whole: where that is small they may be coarser.
  const wall = 0.75 * coarseness * Math.max(1, width / 5) ** 0.25;
  return meshShape(
    loops,
    {
      size: extent,
      growth: 0.35 * coarseness,
      across: Math.max(2, Math.round(3 / coarseness)),
      points: sharpCorners(loops).map(([x, y]) => ({
        x,
        y,
        size: 0.03 * coarseness ** 3 * clearance(loops, x, y, extent),
      })),
      wallSize: (tag) => (tag === 0 ? wall : Number.POSITIVE_INFINITY),
      perQuarter: Math.max(2, Math.round(arcs)),
      maxTriangles,
    },
    where,
  );
}

/** Distance from a corner to the nearest edge that does not start or end there. */
function clearance(loops: readonly (readonly Edge[])[], x: number, y: number, extent: number): number {
  let least = extent;
  for (const loop of loops)
    loop.forEach((edge, i) => {
      const next = loop[(i + 1) % loop.length];
      if ((edge.x === x && edge.y === y) || (next.x === x && next.y === y)) return;
      const dx = next.x - edge.x;
      const dy = next.y - edge.y;
      const share = ((x - edge.x) * dx + (y - edge.y) * dy) / (dx * dx + dy * dy);
      const t = Math.min(1, Math.max(0, share));
      least = Math.min(least, Math.hypot(edge.x + t * dx - x, edge.y + t * dy - y));
    });
  return least;
}
