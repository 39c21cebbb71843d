import Delaunator from 'delaunator';
import type { Boundary } from './boundary.ts';
import { BoundedConstraints } from './bounded-constraints.ts';

/**
 * Triangles by half-edges: half-edge e = 3t + i of triangle t starts at vertex[e] and runs
 * counter-clockwise; twin[e] is the same edge seen from the other side, −1 − (boundary piece) on the
 * boundary. Vertices 0..boundaryCount−1 are the boundary's points, in its order.
 */
export class Triangulation {
  readonly boundaryCount: number;
  vertexCount: number;
  triangleCount: number;
  x: Float64Array;
  y: Float64Array;
  /** Edge length wanted at each vertex. */
  size: Float64Array;
  vertex: Int32Array;
  twin: Int32Array;
  /** Vertices in acute corners of the boundary, where a small angle is the shape's own. */
  readonly sharp: Uint8Array;

  constructor(boundary: Boundary, vertex: Int32Array, twin: Int32Array) {
    const room = 4 * boundary.count + 64;
    this.boundaryCount = boundary.count;
    this.vertexCount = boundary.count;
    this.triangleCount = vertex.length / 3;
    this.x = new Float64Array(room);
    this.y = new Float64Array(room);
    this.size = new Float64Array(room);
    this.x.set(boundary.x);
    this.y.set(boundary.y);
    this.size.set(boundary.size);
    this.sharp = boundary.sharp;
    this.vertex = new Int32Array(6 * room);
    this.twin = new Int32Array(6 * room);
    this.vertex.set(vertex);
    this.twin.set(twin);
  }

  addVertex(x: number, y: number, size: number): number {
    if (this.vertexCount === this.x.length) {
      this.x = grown(this.x);
      this.y = grown(this.y);
      this.size = grown(this.size);
      const vertex = new Int32Array(2 * this.vertex.length);
      const twin = new Int32Array(2 * this.twin.length);
      vertex.set(this.vertex);
      twin.set(this.twin);
      this.vertex = vertex;
      this.twin = twin;
    }
    const v = this.vertexCount;
    this.x[v] = x;
    this.y[v] = y;
    this.size[v] = size;
    this.vertexCount += 1;
    return v;
  }
}

function grown(array: Float64Array): Float64Array {
  const next = new Float64Array(2 * array.length);
  next.set(array);
  return next;
}

/**
 * Constrained Delaunay triangulation of the boundary's points, with all that is not fluid cut away.
 * null where the boundary crosses or touches itself.
 */
export function triangulateBoundary(boundary: Boundary): Triangulation | null {
  for (const turn of TURNS) {
    const found = triangulateTurned(boundary, Math.cos(turn), Math.sin(turn));
    if (found) return found;
  }
  return null;
}

/** Vertices next to each other may defeat the triangulation by rounding; turned, they hardly do so again. */
const TURNS = [0, 0.7, 1.9];

function triangulateTurned(boundary: Boundary, cos: number, sin: number): Triangulation | null {
  const { count, next } = boundary;
  const x = new Float64Array(count);
  const y = new Float64Array(count);
  for (let i = 0; i < count; i += 1) {
    x[i] = cos * boundary.x[i] - sin * boundary.y[i];
    y[i] = cos * boundary.y[i] + sin * boundary.x[i];
  }
  const coordinates = new Float64Array(2 * count + 8);
  let [x0, y0, x1, y1] = [Infinity, Infinity, -Infinity, -Infinity];
  for (let i = 0; i < count; i += 1) {
    coordinates[2 * i] = x[i];
    coordinates[2 * i + 1] = y[i];
    [x0, y0, x1, y1] = [Math.min(x0, x[i]), Math.min(y0, y[i]), Math.max(x1, x[i]), Math.max(y1, y[i])];
  }
  // Four points far around: points on a straight side, collinear but for rounding, then lie inside the
  // hull, where they are triangulated soundly. What they add is cut away with the rest.
  const far = x1 - x0 + (y1 - y0);
  const around = [x0 - far, y0 - 0.9 * far, x1 + far, y0 - far, x1 + 0.9 * far, y1 + far, x0 - far, y1 + far];
  coordinates.set(around, 2 * count);
  const delaunay = new Delaunator(coordinates);
  const edges: [number, number][] = [];
  for (let i = 0; i < count; i += 1) edges.push([i, next[i]]);
  try {
    new BoundedConstraints(delaunay).constrainAll(edges);
  } catch {
    return null;
  }
  return carve(boundary, delaunay.triangles, delaunay.halfedges);
}

function carve(boundary: Boundary, triangles: Uint32Array, halfedges: Int32Array): Triangulation | null {
  const { next, previous, count } = boundary;
  // Delaunator's triangles turn clockwise in axes with y up: edge e runs from triangles[e] to the next
  // one clockwise, so that a boundary piece i → next[i] with its fluid on the left runs against it.
  const kept = new Int32Array(triangles.length / 3).fill(-1);
  const stack: number[] = [];
  const after = (e: number): number => (e % 3 === 2 ? e - 2 : e + 1);
  let found = 0;
  for (let e = 0; e < triangles.length; e += 1) {
    const a = triangles[after(e)];
    if (next[a] === triangles[e]) {
      found += 1;
      stack.push(Math.floor(e / 3));
    }
  }
  if (found !== count) return null;
  let inside = 0;
  while (stack.length > 0) {
    const t = stack.pop()!;
    if (kept[t] !== -1) continue;
    kept[t] = inside;
    inside += 1;
    for (let e = 3 * t; e < 3 * t + 3; e += 1) {
      const a = triangles[after(e)];
      const b = triangles[e];
      if (next[a] === b) continue;
      // Fluid reaches a piece from its outer side: loops nest wrongly.
      if (previous[a] === b || halfedges[e] < 0) return null;
      stack.push(Math.floor(halfedges[e] / 3));
    }
  }
  // Corner i of a kept triangle: the old corners in the opposite order 0, 2, 1.
  const vertex = new Int32Array(3 * inside);
  const twin = new Int32Array(3 * inside);
  const place = (e: number): number => 3 * kept[Math.floor(e / 3)] + (2 - (e % 3));
  for (let t = 0; t < kept.length; t += 1) {
    if (kept[t] === -1) continue;
    for (let e = 3 * t; e < 3 * t + 3; e += 1) {
      const here = place(e);
      const a = triangles[after(e)];
      vertex[here] = a;
      twin[here] = next[a] === triangles[e] ? -1 - a : place(halfedges[e]);
    }
  }
  return new Triangulation(boundary, vertex, twin);
}
