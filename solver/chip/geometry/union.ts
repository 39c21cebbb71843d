import {
  Clipper64,
  ClipType,
  FillRule,
  type Path64,
  type Paths64,
  type PolyPath64,
  PolyTree64,
} from 'clipper2-ts';
import type { Edge, Shape } from '../../mesh/mesh.ts';
import { flipped, type Patch, type Source } from './patch.ts';
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
  const sources = new Set<Source>();
  const subject: Paths64 = [];
  for (const p of patches) {
    subject.push(toGrid(p, grid));
    for (const source of p.source) sources.add(source);
  }
  clipper.addSubject(subject);
  if (minus.length > 0) clipper.addClip(minus.map((p) => toGrid(p, grid)));
  // what bounds the fluid from within runs the other way round
  for (const p of minus) for (const source of flipped(p).source) sources.add(source);
  const tree = new PolyTree64();
  clipper.execute(minus.length > 0 ? ClipType.Difference : ClipType.Union, FillRule.NonZero, tree);
  const shapes: Shape[] = [];
  addShapes(tree, grid, new TrueEdges([...sources]), shapes);
  return shapes;
}

/** Every outer polygon with its holes, led back to true edges. */
function addShapes(tree: PolyPath64, grid: Grid, edges: TrueEdges, shapes: Shape[]): void {
  for (let i = 0; i < tree.count; i++) {
    const outer = tree.child(i);
    const loops: Edge[][] = [];
    addLoop(outer, grid, edges, loops);
    for (let k = 0; k < outer.count; k++) {
      const hole = outer.child(k);
      addLoop(hole, grid, edges, loops);
      addShapes(hole, grid, edges, shapes);
    }
    if (loops.length > 0) shapes.push(loops);
  }
}

function addLoop(polygon: PolyPath64, grid: Grid, edges: TrueEdges, loops: Edge[][]): void {
  const loop = restoreLoop(polygon.poly!, grid, edges);
  if (loop.length > 0) loops.push(loop);
}
