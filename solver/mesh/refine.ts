import { INSERTED, Inserter } from './insert.ts';
import type { FullSizing } from './sizing.ts';
import type { Triangulation } from './triangulation.ts';

/**
 * Frontal Delaunay refinement: triangles of the right size grow from the boundary inwards; each new
 * vertex is placed on the bisector of a finished triangle's edge, where it makes an equilateral
 * triangle of the wanted size (Rebay 1993, J. Comput. Phys. 106, 125). What is left badly shaped is
 * mended by circumcentres (Ruppert 1995, J. Algorithms 18, 548). Returns the boundary pieces that stand
 * in the way and should be cut.
 */
export function refine(mesh: Triangulation, sizing: FullSizing): Set<number> {
  return new Refiner(mesh, sizing).run();
}

/** A triangle is done when its circle is at most this many times that of the wanted equilateral one. */
const FULL_SIZE = 1.35;
/** New vertices keep this share of the wanted length from others. */
const CLEARANCE = 0.6;
/** Least angle asked for: sin² of it. */
const LEAST_ANGLE = (26 * Math.PI) / 180;
const BAD_SIN2 = Math.sin(LEAST_ANGLE) ** 2;

const OPEN = 0;
const DONE = 1;

class Refiner {
  private readonly mesh: Triangulation;
  private readonly sizing: FullSizing;
  private readonly inserter: Inserter;
  private state: Uint8Array;
  private born: Int32Array;
  private queue: Int32Array = new Int32Array(1024);
  private queueBorn: Int32Array = new Int32Array(1024);
  private head = 0;
  private tail = 0;
  private births = 0;
  private readonly blocking = new Set<number>();
  // Circumcentre and squared radius of the triangle looked at last.
  private cx = 0;
  private cy = 0;
  private r2 = 0;

  constructor(mesh: Triangulation, sizing: FullSizing) {
    this.mesh = mesh;
    this.sizing = sizing;
    this.inserter = new Inserter(mesh);
    this.state = new Uint8Array(2 * mesh.x.length);
    this.born = new Int32Array(2 * mesh.x.length);
  }

  run(): Set<number> {
    this.frontal();
    this.mend();
    return this.blocking;
  }

  private frontal(): void {
    const { mesh, inserter } = this;
    for (let t = 0; t < mesh.triangleCount; t += 1) this.judge(t);
    for (let t = 0; t < mesh.triangleCount; t += 1) {
      if (this.state[t] === OPEN && this.front(t) >= 0) this.push(t);
    }
    while (this.head < this.tail) {
      const t = this.queue[this.head];
      const fresh = this.queueBorn[this.head] === this.born[t];
      this.head += 1;
      if (!fresh || this.state[t] !== OPEN) continue;
      const e = this.front(t);
      if (e < 0) continue;
      if (this.advance(t, e)) {
        for (let k = 0; k < inserter.madeCount; k += 1) this.judge(inserter.made[k]);
        for (let k = 0; k < inserter.madeCount; k += 1) this.enter(inserter.made[k]);
      } else {
        this.state[t] = DONE;
        this.enter(t);
      }
    }
  }

  /** Marks a triangle done or not by its size. */
  private judge(t: number): void {
    if (t >= this.state.length) this.enlarge();
    this.births += 1;
    this.born[t] = this.births;
    this.circle(t);
    const s = this.sizeOf(t);
    this.state[t] = this.r2 * 3 <= FULL_SIZE * FULL_SIZE * s * s ? DONE : OPEN;
  }

  /** Puts a triangle on the front, or what a done one leaves open beside it. */
  private enter(t: number): void {
    if (this.state[t] === OPEN) {
      if (this.front(t) >= 0) this.push(t);
      return;
    }
    for (let e = 3 * t; e < 3 * t + 3; e += 1) {
      const f = this.mesh.twin[e];
      if (f >= 0 && this.state[Math.floor(f / 3)] === OPEN) this.push(Math.floor(f / 3));
    }
  }

  /** The shortest half-edge of t that borders a done triangle or the boundary; −1 if there is none. */
  private front(t: number): number {
    const { x, y, vertex, twin } = this.mesh;
    let best = -1;
    let least = Number.POSITIVE_INFINITY;
    for (let i = 0; i < 3; i += 1) {
      const e = 3 * t + i;
      const f = twin[e];
      if (f >= 0 && this.state[Math.floor(f / 3)] !== DONE) continue;
      const a = vertex[e];
      const b = vertex[i === 2 ? e - 2 : e + 1];
      const length = (x[b] - x[a]) ** 2 + (y[b] - y[a]) ** 2;
      if (length < least) {
        least = length;
        best = e;
      }
    }
    return best;
  }

  private advance(t: number, e: number): boolean {
    const { mesh } = this;
    const { x, y, vertex } = mesh;
    this.circle(t);
    const a = vertex[e];
    const b = vertex[e % 3 === 2 ? e - 2 : e + 1];
    const mx = (x[a] + x[b]) / 2;
    const my = (y[a] + y[b]) / 2;
    const half = Math.hypot(x[b] - x[a], y[b] - y[a]) / 2;
    const nx = -(y[b] - y[a]) / (2 * half);
    const ny = (x[b] - x[a]) / (2 * half);
    const radius = Math.sqrt(this.r2);
    // Circumcentre above the edge's middle; the new circle passes through the edge's ends.
    const q = (this.cx - mx) * nx + (this.cy - my) * ny;
    const s = Math.min((mesh.size[a] + mesh.size[b]) / 2, this.sizeAt(mx, my, t));
    let rho = Math.max(s / Math.sqrt(3), half);
    rho = Math.min(rho, radius);
    let height = rho + Math.sqrt(Math.max(0, rho * rho - half * half));
    // Not beyond the circumcentre of the triangle itself.
    if (height > q) height = q > 0.5 * half ? q : height;
    const px = mx + nx * height;
    const py = my + ny * height;
    const size = this.sizeAt(px, py, t);
    return this.place(t, px, py, size, CLEARANCE * Math.min(size, s));
  }

  private place(t: number, px: number, py: number, size: number, clearance: number): boolean {
    const { inserter, mesh } = this;
    if (mesh.triangleCount > this.sizing.maxTriangles) return false;
    const at = inserter.locate(t, px, py);
    return at >= 0 && inserter.insert(at, px, py, size, clearance) === INSERTED;
  }

  /** Circumcentres for triangles with too small an angle, worst first in rounds. */
  private mend(): void {
    const { mesh, inserter } = this;
    const limit = mesh.vertexCount + Math.ceil(mesh.vertexCount / 2) + 50;
    for (let round = 0; round < 8; round += 1) {
      let mended = 0;
      for (let t = 0; t < mesh.triangleCount; t += 1) {
        if (!isBad(mesh, t) || mesh.vertexCount > limit) continue;
        this.circle(t);
        const size = this.sizeAt(this.cx, this.cy, t);
        inserter.blockedBy = -1;
        if (this.place(t, this.cx, this.cy, size, 0.95 * Math.sqrt(this.r2))) mended += 1;
        else if (inserter.blockedBy >= 0) this.blocking.add(inserter.blockedBy);
      }
      if (mended === 0) break;
    }
  }

  private circle(t: number): void {
    const { x, y, vertex } = this.mesh;
    const a = vertex[3 * t];
    const b = vertex[3 * t + 1];
    const c = vertex[3 * t + 2];
    const bx = x[b] - x[a];
    const by = y[b] - y[a];
    const cx = x[c] - x[a];
    const cy = y[c] - y[a];
    const d = 2 * (bx * cy - by * cx);
    const b2 = bx * bx + by * by;
    const c2 = cx * cx + cy * cy;
    const ux = (cy * b2 - by * c2) / d;
    const uy = (bx * c2 - cx * b2) / d;
    this.cx = x[a] + ux;
    this.cy = y[a] + uy;
    this.r2 = ux * ux + uy * uy;
  }

  private sizeOf(t: number): number {
    const { size, vertex } = this.mesh;
    const { cx, cy } = this;
    const mean = (size[vertex[3 * t]] + size[vertex[3 * t + 1]] + size[vertex[3 * t + 2]]) / 3;
    return Math.max(mean, Math.min(this.sizeAt(cx, cy, t), 2 * mean));
  }

  /** Wanted size at a place in or near triangle t: what its corners allow, growing from them. */
  private sizeAt(px: number, py: number, t: number): number {
    const { x, y, size, vertex } = this.mesh;
    const growth = this.sizing.growth;
    let s = this.sizing.size;
    for (let e = 3 * t; e < 3 * t + 3; e += 1) {
      const v = vertex[e];
      const dx = x[v] - px;
      const dy = y[v] - py;
      s = Math.min(s, size[v] + growth * Math.sqrt(dx * dx + dy * dy));
    }
    for (const at of this.sizing.points) {
      s = Math.min(s, at.size + at.growth * Math.hypot(at.x - px, at.y - py));
    }
    return s;
  }

  private push(t: number): void {
    if (this.tail === this.queue.length) {
      if (this.head > this.tail / 2) {
        this.queue.copyWithin(0, this.head, this.tail);
        this.queueBorn.copyWithin(0, this.head, this.tail);
        this.tail -= this.head;
        this.head = 0;
      } else {
        const length = 2 * this.queue.length;
        this.queue = enlarged(this.queue, length);
        this.queueBorn = enlarged(this.queueBorn, length);
      }
    }
    this.queue[this.tail] = t;
    this.queueBorn[this.tail] = this.born[t];
    this.tail += 1;
  }

  private enlarge(): void {
    const length = 2 * this.mesh.x.length;
    const state = new Uint8Array(length);
    state.set(this.state);
    this.state = state;
    this.born = enlarged(this.born, length);
  }
}

function enlarged(array: Int32Array, length: number): Int32Array {
  const next = new Int32Array(length);
  next.set(array);
  return next;
}

/** sin² of the least angle of triangle t, 0 where it is turned over. */
export function leastSin2(mesh: Triangulation, t: number): number {
  const { x, y, vertex } = mesh;
  const a = vertex[3 * t];
  const b = vertex[3 * t + 1];
  const c = vertex[3 * t + 2];
  const abx = x[b] - x[a];
  const aby = y[b] - y[a];
  const acx = x[c] - x[a];
  const acy = y[c] - y[a];
  const area = abx * acy - aby * acx;
  if (area <= 0) return 0;
  const ab = abx * abx + aby * aby;
  const ac = acx * acx + acy * acy;
  const bc = (x[c] - x[b]) ** 2 + (y[c] - y[b]) ** 2;
  // sin of the angle opposite the shortest side: twice the area over the other two sides.
  return (area * area * Math.min(ab, ac, bc)) / (ab * ac * bc);
}

/** Whether t is badly shaped by the mesher's fault: the shape's own sharp corners are excused. */
export function isBad(mesh: Triangulation, t: number): boolean {
  if (leastSin2(mesh, t) >= BAD_SIN2) return false;
  const { vertex, sharp, boundaryCount } = mesh;
  for (let e = 3 * t; e < 3 * t + 3; e += 1) {
    const v = vertex[e];
    if (v < boundaryCount && sharp[v]) return false;
  }
  return true;
}
