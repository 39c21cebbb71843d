import type { Chip, KeepOut } from './chip.ts';
import { areasOverlap, inArea, polygon } from './geometry/area.ts';
import { elementSolid, narrowest, otherSolids, type Solid } from './plan-gaps.ts';
import { drawingOf } from './read-graph-drawing.ts';

/** One part of the drawing that comes near a keep-out or into it. */
export interface Near {
  readonly keepOut: KeepOut;
  readonly kind: 'channel' | 'chamber' | 'via' | 'port';
  readonly id: string;
  /** Index of the layer on which it comes nearest. */
  readonly layer: number;
  /** Least distance between the two outlines, nm; 0 where they overlap or touch. */
  readonly distance: number;
  /** Where that is, nm. */
  readonly at: readonly [number, number];
}

/**
 * Every channel, chamber, via and port that lies less than the clearance of a keep-out, and `extra(layer)` nm
 * more, away from it: exact between lines and true arcs, channels found by the drawing's own index. Of each
 * part and keep-out the nearest place.
 */
export function nearKeepOuts(chip: Chip, extra: (layer: number) => number): Near[] {
  const { keepOuts } = chip;
  if (!keepOuts) return [];
  const drawing = drawingOf(chip);
  const others = otherSolids(chip);
  const most = Math.max(0, ...chip.layers.map((_, layer) => extra(layer)));
  const kinds = new Map<string, Near['kind']>([
    ...chip.chambers.map(({ id }) => [id, 'chamber'] as const),
    ...chip.vias.map(({ id }) => [id, 'via'] as const),
    ...chip.ports.map(({ id }) => [id, 'port'] as const),
  ]);
  return keepOuts.flatMap((keepOut) => {
    const area = polygon(keepOut.outline);
    const only = chip.layers.findIndex(({ id }) => id === keepOut.layer);
    const reach = keepOut.clearance + most;
    const nearest = new Map<string, Near>();
    const see = ({ id, layer, area: body }: Solid, kind: Near['kind']): void => {
      if (only >= 0 && layer !== only) return;
      const within = keepOut.clearance + extra(layer);
      let [distance, x, y] = [0, body.edges[0]!.x0, body.edges[0]!.y0];
      if (areasOverlap(area, body)) {
        const inside = body.edges.find((edge) => inArea(area, edge.x0, edge.y0));
        if (inside) [x, y] = [inside.x0, inside.y0];
      } else {
        const found = narrowest(body.edges, area.edges, within, () => true);
        if (!found) return;
        ({ width: distance, x, y } = found);
      }
      const known = nearest.get(id);
      if (!known || distance < known.distance) {
        nearest.set(id, { keepOut, kind, id, layer, distance, at: [x, y] });
      }
    };
    const box = [area.minX - reach, area.minY - reach, area.maxX + reach, area.maxY + reach] as const;
    for (const element of drawing.index?.search(...box) ?? []) {
      see(elementSolid(chip, drawing, element), 'channel');
    }
    for (const solid of others) {
      const { minX, minY, maxX, maxY } = solid.area;
      if (minX <= box[2] && minY <= box[3] && maxX >= box[0] && maxY >= box[1]) {
        see(solid, kinds.get(solid.id)!);
      }
    }
    return [...nearest.values()];
  });
}
