import { inCircle } from './insert.ts';
import type { Triangulation } from './triangulation.ts';

/**
 * Moves each inner vertex towards the middle of its neighbours where that makes the worst triangle
 * around it better, then flips edges that are no longer Delaunay; `passes` times over.
 */
export function smooth(mesh: Triangulation, passes: number): void {
  const start = new Int32Array(mesh.vertexCount);
  for (let pass = 0; pass < passes; pass += 1) {
    startOf(mesh, start);
    for (let v = mesh.boundaryCount; v < mesh.vertexCount; v += 1) move(mesh, start, v);
    flip(mesh);
  }
}

/** For each vertex one half-edge that starts there. */
function startOf(mesh: Triangulation, start: Int32Array): void {
  const { vertex } = mesh;
  for (let e = 0; e < 3 * mesh.triangleCount; e += 1) start[vertex[e]] = e;
}

const previous = (e: number): number => (e % 3 === 0 ? e + 2 : e - 1);
const following = (e: number): number => (e % 3 === 2 ? e - 2 : e + 1);

function move(mesh: Triangulation, start: Int32Array, v: number): void {
  const { x, y, vertex, twin } = mesh;
  const first = start[v];
  let sx = 0;
  let sy = 0;
  let n = 0;
  let e = first;
  do {
    const w = vertex[following(e)];
    sx += x[w];
    sy += y[w];
    n += 1;
    e = twin[previous(e)];
  } while (e !== first);
  const oldX = x[v];
  const oldY = y[v];
  const before = worst(mesh, first);
  x[v] = sx / n;
  y[v] = sy / n;
  if (worst(mesh, first) > before) return;
  x[v] = (oldX + x[v]) / 2;
  y[v] = (oldY + y[v]) / 2;
  if (worst(mesh, first) > before) return;
  x[v] = oldX;
  y[v] = oldY;
}

/** Least quality (area over the sum of squared sides) of the triangles around the start of `first`. */
function worst(mesh: Triangulation, first: number): number {
  const { x, y, vertex, twin } = mesh;
  const v = vertex[first];
  const px = x[v];
  const py = y[v];
  let least = Number.POSITIVE_INFINITY;
  let e = first;
  do {
    const a = vertex[following(e)];
    const b = vertex[previous(e)];
    const ax = x[a] - px;
    const ay = y[a] - py;
    const bx = x[b] - px;
    const by = y[b] - py;
    const area = ax * by - ay * bx;
    const sides = ax * ax + ay * ay + bx * bx + by * by + (bx - ax) ** 2 + (by - ay) ** 2;
    const quality = area / sides;
    if (quality < least) least = quality;
    e = twin[previous(e)];
  } while (e !== first);
  return least;
}

/** Lawson's flips until all inner edges are Delaunay (or a bound of rounds, against rounding loops). */
function flip(mesh: Triangulation): void {
  const { x, y, vertex, twin } = mesh;
  for (let round = 0; round < 10; round += 1) {
    let flips = 0;
    for (let e = 0; e < 3 * mesh.triangleCount; e += 1) {
      const f = twin[e];
      if (f < e) continue;
      const d = vertex[previous(f)];
      if (!inCircle(x, y, vertex, 3 * Math.floor(e / 3), x[d], y[d])) continue;
      if (!convex(mesh, e, f)) continue;
      turn(vertex, twin, e, f);
      flips += 1;
    }
    if (flips === 0) return;
  }
}

function convex(mesh: Triangulation, e: number, f: number): boolean {
  const { x, y, vertex } = mesh;
  const c = vertex[previous(e)];
  const d = vertex[previous(f)];
  const dx = x[d] - x[c];
  const dy = y[d] - y[c];
  const side = (v: number): number => dx * (y[v] - y[c]) - dy * (x[v] - x[c]);
  const least = 1e-12 * (dx * dx + dy * dy);
  return side(vertex[f]) > least && side(vertex[e]) < -least;
}

/** Replaces the edge of half-edges e and f by the other diagonal of their quadrilateral. */
function turn(vertex: Int32Array, twin: Int32Array, e: number, f: number): void {
  const e2 = previous(e);
  const f2 = previous(f);
  const outE = twin[f2];
  const outF = twin[e2];
  vertex[e] = vertex[f2];
  vertex[f] = vertex[e2];
  twin[e] = outE;
  if (outE >= 0) twin[outE] = e;
  twin[f] = outF;
  if (outF >= 0) twin[outF] = f;
  twin[e2] = f2;
  twin[f2] = e2;
}
