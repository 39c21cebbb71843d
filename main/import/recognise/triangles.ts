import type { Boundary } from '../../../solver/mesh/boundary.ts';
import { type Triangulation, triangulateBoundary } from '../../../solver/mesh/triangulation.ts';
import type { Work } from '../work.ts';
import type { Wall } from './walls.ts';

/** An area cut into triangles whose corners all lie on its walls. */
export interface Triangles {
  /** Corner and neighbour by half-edge, as `Triangulation` keeps them. */
  readonly vertex: Int32Array;
  /** The half-edge on the other side, or −1 − (piece of the boundary). */
  readonly twin: Int32Array;
  readonly count: number;
  readonly x: Float64Array;
  readonly y: Float64Array;
  /** Piece i of the boundary runs from point i to next[i]. */
  readonly next: Int32Array;
  readonly previous: Int32Array;
  /** Wall that piece i lies on. */
  readonly wall: Int32Array;
  /** 1 where point i is the first of its wall. */
  readonly corner: Uint8Array;
}

/** Rounds in which pieces longer than the gap they face are cut. */
const ROUNDS = 4;
/** Pieces of one area beyond which they are not cut further. */
const MOST = 150_000;
/** Largest piece as a share of the gap it faces, and the share it is cut to. */
const COARSE = 1.1;
const FINE = 0.6;
/** Pieces of one wall before it is known what it faces. */
const MOST_AT_FIRST = 2000;
/** Most radians of an arc in one piece. */
const ARC_STEP = 0.3;

/** Delaunay triangles of an area, its walls cut as finely as the gaps ask; null where its walls cross. */
export function triangulate(loops: readonly (readonly Wall[])[], work: Work): Triangles | null {
  const walls = loops.flat();
  let cuts = firstCuts(walls);
  for (let round = 0; ; round += 1) {
    const boundary = sample(loops, cuts);
    work.points(boundary.count >> 3, '');
    work.tick(boundary.count);
    const found = triangulateBoundary(boundary);
    if (!found) return null;
    if (round === ROUNDS || boundary.count > MOST) return asTriangles(found, boundary);
    const finer = refine(found, boundary, cuts);
    if (!finer) return asTriangles(found, boundary);
    cuts = finer;
  }
}

/** Walls cut by the mean width that area and perimeter tell; what is narrower is cut further later. */
function firstCuts(walls: readonly Wall[]): Float64Array[] {
  let [area, perimeter] = [0, 0];
  const lengths = walls.map(({ x0, y0, x1, y1, sweep, radius }) => {
    area += (x0 * y1 - x1 * y0) / 2;
    const length = sweep === 0 ? Math.hypot(x1 - x0, y1 - y0) : Math.abs(sweep) * radius;
    perimeter += length;
    return length;
  });
  const wide = (2 * Math.abs(area)) / perimeter;
  return walls.map(({ sweep }, k) => {
    const byWidth = Math.min(MOST_AT_FIRST, Math.ceil((0.9 * lengths[k]) / wide));
    return evenly(Math.max(1, byWidth, Math.ceil(Math.abs(sweep) / ARC_STEP)));
  });
}

function evenly(count: number): Float64Array {
  return Float64Array.from({ length: count + 1 }, (_, k) => k / count);
}

/** The point of a wall at a share of its length. */
export function wallPoint(wall: Wall, t: number): [number, number] {
  if (wall.sweep === 0) return [wall.x0 + t * (wall.x1 - wall.x0), wall.y0 + t * (wall.y1 - wall.y0)];
  if (t === 0) return [wall.x0, wall.y0];
  if (t === 1) return [wall.x1, wall.y1];
  const angle = Math.atan2(wall.y0 - wall.cy, wall.x0 - wall.cx) + t * wall.sweep;
  return [wall.cx + wall.radius * Math.cos(angle), wall.cy + wall.radius * Math.sin(angle)];
}

interface Sampled extends Boundary {
  readonly corner: Uint8Array;
  /** Which of its wall's pieces this is. */
  readonly piece: Int32Array;
}

function sample(loops: readonly (readonly Wall[])[], cuts: readonly Float64Array[]): Sampled {
  const count = cuts.reduce((sum, cut) => sum + cut.length - 1, 0);
  const x = new Float64Array(count);
  const y = new Float64Array(count);
  const next = new Int32Array(count);
  const previous = new Int32Array(count);
  const edge = new Int32Array(count);
  const piece = new Int32Array(count);
  const corner = new Uint8Array(count);
  let at = 0;
  let id = 0;
  for (const loop of loops) {
    const first = at;
    for (const wall of loop) {
      const cut = cuts[id];
      corner[at] = 1;
      for (let k = 0; k + 1 < cut.length; k += 1) {
        [x[at], y[at]] = wallPoint(wall, cut[k]);
        edge[at] = id;
        piece[at] = k;
        next[at] = at + 1;
        previous[at] = at - 1;
        at += 1;
      }
      id += 1;
    }
    next[at - 1] = first;
    previous[first] = at - 1;
  }
  const none = new Float64Array(0);
  return {
    count,
    x,
    y,
    next,
    previous,
    edge,
    piece,
    corner,
    size: new Float64Array(count),
    sharp: new Uint8Array(count),
    from: none,
    to: none,
    curves: [],
    tag: new Int32Array(0),
    first: new Int32Array(0),
  };
}

/** Cuts with every piece divided that is long against the height of the triangle on it; null where none is. */
function refine(
  found: Triangulation,
  boundary: Sampled,
  cuts: readonly Float64Array[],
): Float64Array[] | null {
  const { vertex, twin, triangleCount } = found;
  const { x, y, next, edge, piece } = boundary;
  const parts = new Int32Array(boundary.count).fill(1);
  let more = 0;
  for (let e = 0; e < 3 * triangleCount; e += 1) {
    if (twin[e] >= 0) continue;
    const i = -1 - twin[e];
    const apex = vertex[e - (e % 3) + ((e + 2) % 3)];
    const [ax, ay] = [x[i], y[i]];
    const [dx, dy] = [x[next[i]] - ax, y[next[i]] - ay];
    const length = Math.hypot(dx, dy);
    const height = Math.abs((x[apex] - ax) * dy - (y[apex] - ay) * dx) / length;
    if (length <= COARSE * height) continue;
    parts[i] = Math.min(4096, Math.ceil(length / (FINE * height)));
    more += parts[i] - 1;
  }
  if (more === 0 || more > MOST) return null;
  const out: number[][] = cuts.map(() => []);
  for (let i = 0; i < boundary.count; i += 1) {
    const cut = cuts[edge[i]];
    const [from, to] = [cut[piece[i]], cut[piece[i] + 1]];
    for (let k = 0; k < parts[i]; k += 1) out[edge[i]].push(from + ((to - from) * k) / parts[i]);
  }
  return out.map((cut) => Float64Array.from([...cut, 1]));
}

function asTriangles(found: Triangulation, { x, y, next, previous, edge, corner }: Sampled): Triangles {
  return {
    vertex: found.vertex,
    twin: found.twin,
    count: found.triangleCount,
    x,
    y,
    next,
    previous,
    wall: edge,
    corner,
  };
}
