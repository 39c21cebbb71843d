import {
  Clipper64,
  ClipType,
  FillRule,
  type Path64,
  type Paths64,
  type PolyPath64,
  PolyTree64,
} from 'clipper2-ts';
import type { Shape } from '../../mesh/mesh.ts';
import { flipped, type Patch } from './patch.ts';
import { restoreLoop, TrueEdges } from './restore.ts';

/** Coordinates scaled to at most this stay clear of the library's slow exact products. */
const WIDEST = 2 ** 26;
const FINEST = 1024;

/** The grid that bodies are united on: whole multiples of 1/scale nm from an origin. */
export interface Grid {
  readonly x: number;
  readonly y: number;
  readonly scale: number;
}

function gridFor(patches: readonly Patch[]): Grid {
  let minX = Infinity;
  let minY = Infinity;
  let maxX = -Infinity;
  let maxY = -Infinity;
  for (const p of patches) {
    for (let k = 0; k < p.x.length; k++) {
      minX = Math.min(minX, p.x[k]!);
      maxX = Math.max(maxX, p.x[k]!);
      minY = Math.min(minY, p.y[k]!);
      maxY = Math.max(maxY, p.y[k]!);
    }
  }
  const x = Math.round((minX + maxX) / 2);
  const y = Math.round((minY + maxY) / 2);
  const reach = Math.max(maxX - minX, maxY - minY, 1);
  let scale = FINEST;
  while (scale > 1 && reach * scale > WIDEST) scale /= 2;
  return { x, y, scale };
}

function toGrid(patch: Patch, grid: Grid): Path64 {
  const path: Path64 = [];
  for (let k = 0; k < patch.x.length; k++) {
    path.push({
      x: Math.round((patch.x[k]! - grid.x) * grid.scale),
      y: Math.round((patch.y[k]! - grid.y) * grid.scale),
    });
  }
  return path;
}

/**
 * The union of bodies, less those of `minus`, as shapes of lines and true arcs: one shape per connected
 * part, outer boundary counter-clockwise first, then its holes. The union itself is done on polygons; each side of the
 * outcome is then led back to the edge it was drawn from, so arcs survive whole and corners are exact.
 */
export function unite(patches: readonly Patch[], minus: readonly Patch[] = []): Shape[] {
  if (patches.length === 0) return [];
  const grid = gridFor(patches);
  const clipper = new Clipper64();
  clipper.addSubject(patches.map((p) => toGrid(p, grid)));
  if (minus.length > 0) clipper.addClip(minus.map((p) => toGrid(p, grid)));
  const tree = new PolyTree64();
  clipper.execute(minus.length > 0 ? ClipType.Difference : ClipType.Union, FillRule.NonZero, tree);
  // what bounds the fluid from within runs the other way round
  const all = [...patches, ...minus.map(flipped)];
  const edges = new TrueEdges([...new Set(all.flatMap((p) => p.source))]);
  const shapes: Shape[] = [];
  collect(tree, (outer, holes) => {
    const loops = [outer, ...holes].map((path) => restoreLoop(path, grid, edges)).filter((l) => l.length > 0);
    if (loops.length > 0) shapes.push(loops);
  });
  return shapes;
}

/** Calls `found` for every outer polygon with its holes. */
function collect(tree: PolyPath64, found: (outer: Path64, holes: Paths64) => void): void {
  for (let i = 0; i < tree.count; i++) {
    const outer = tree.child(i);
    const holes: Paths64 = [];
    for (let k = 0; k < outer.count; k++) {
      const hole = outer.child(k);
      holes.push(hole.poly!);
      collect(hole, found);
    }
    found(outer.poly!, holes);
  }
}
