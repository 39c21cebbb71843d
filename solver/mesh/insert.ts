import type { Triangulation } from './triangulation.ts';

export const INSERTED = 0;
/** Too close to a boundary piece, or beyond it; `blockedBy` tells which. */
export const BLOCKED = 1;
/** Too close to a vertex, or no valid star. */
export const REFUSED = 2;

/** A point closer to a boundary piece than where it sees it under this angle (cosine) is not inserted. */
const ENCROACHING = -0.25;

/** Delaunay insertion: empties the cavity of triangles whose circle holds the point, and stars it. */
export class Inserter {
  private readonly mesh: Triangulation;
  /** Triangles that the last insertion made. */
  made: Int32Array = new Int32Array(64);
  madeCount = 0;
  /** Boundary piece that stopped the last insertion, −1 where it is not known. */
  blockedBy = -1;
  private mark: Int32Array;
  private stamp = 0;
  private cavity: Int32Array = new Int32Array(64);
  private rim: Int32Array = new Int32Array(64);
  private startAt: Int32Array;
  private from: Int32Array = new Int32Array(64);
  private to: Int32Array = new Int32Array(64);
  private out: Int32Array = new Int32Array(64);

  constructor(mesh: Triangulation) {
    this.mesh = mesh;
    this.mark = new Int32Array(mesh.vertex.length / 3);
    this.startAt = new Int32Array(mesh.x.length);
  }

  /** Triangle that holds (px, py), walking from `from`; −1 beyond the boundary (see `blockedBy`). */
  locate(from: number, px: number, py: number): number {
    const { x, y, vertex, twin } = this.mesh;
    let t = from;
    let came = -2;
    for (let step = 0; step < 10_000; step += 1) {
      let onward = -1;
      for (let i = 0; i < 3; i += 1) {
        const e = 3 * t + i;
        if (e === came) continue;
        const a = vertex[e];
        const b = vertex[i === 2 ? e - 2 : e + 1];
        if ((x[b] - x[a]) * (py - y[a]) - (y[b] - y[a]) * (px - x[a]) < 0) {
          onward = e;
          break;
        }
      }
      if (onward === -1) return t;
      came = twin[onward];
      if (came < 0) {
        this.blockedBy = -1 - came;
        return -1;
      }
      t = Math.floor(came / 3);
    }
    this.blockedBy = -1;
    return -1;
  }

  /** Inserts (px, py), which lies in triangle t, unless it comes closer than `clearance` to a vertex. */
  insert(t: number, px: number, py: number, size: number, clearance: number): number {
    const mesh = this.mesh;
    const count = this.gather(t, px, py);
    if (count <= 0) return count < 0 ? BLOCKED : REFUSED;
    const { x, y, vertex } = mesh;
    const clear2 = clearance * clearance;
    for (let k = 0; k < count; k += 1) {
      const e = this.rim[k];
      const a = vertex[e];
      const b = vertex[e % 3 === 2 ? e - 2 : e + 1];
      const dx = x[a] - px;
      const dy = y[a] - py;
      if (dx * dx + dy * dy < clear2) return REFUSED;
      const area = dx * (y[b] - py) - dy * (x[b] - px);
      if (!(area > 1e-14 * clear2)) return REFUSED;
    }
    this.star(count, mesh.addVertex(px, py, size));
    return INSERTED;
  }

  /** Cavity and its rim of half-edges; returns the length of the rim, −1 where a piece blocks, 0 where it is no ring. */
  private gather(t: number, px: number, py: number): number {
    const { x, y, vertex, twin, triangleCount } = this.mesh;
    if (this.mark.length < triangleCount) this.mark = enlarged(this.mark, 2 * triangleCount);
    const mark = this.mark;
    this.stamp += 1;
    const stamp = this.stamp;
    let cavity = this.cavity;
    let count = 1;
    let rims = 0;
    cavity[0] = t;
    mark[t] = stamp;
    for (let k = 0; k < count; k += 1) {
      const base = 3 * cavity[k];
      for (let e = base; e < base + 3; e += 1) {
        const f = twin[e];
        if (f < 0) {
          const a = vertex[e];
          const b = vertex[e % 3 === 2 ? e - 2 : e + 1];
          const ax = x[a] - px;
          const ay = y[a] - py;
          const bx = x[b] - px;
          const by = y[b] - py;
          const dot = ax * bx + ay * by;
          if (dot < 0 && dot < ENCROACHING * Math.sqrt((ax * ax + ay * ay) * (bx * bx + by * by))) {
            this.blockedBy = -1 - f;
            return -1;
          }
          continue;
        }
        const n = Math.floor(f / 3);
        if (mark[n] === stamp) continue;
        if (inCircle(x, y, vertex, 3 * n, px, py)) {
          mark[n] = stamp;
          if (count === cavity.length) {
            this.cavity = enlarged(cavity, 2 * count);
            cavity = this.cavity;
          }
          cavity[count] = n;
          count += 1;
        }
      }
    }
    if (this.rim.length < count + 2) this.rim = enlarged(this.rim, 2 * count + 2);
    for (let k = 0; k < count; k += 1) {
      const base = 3 * cavity[k];
      for (let e = base; e < base + 3; e += 1) {
        const f = twin[e];
        if (f >= 0 && mark[Math.floor(f / 3)] === stamp) continue;
        // A rim longer than cavity + 2 is no single ring: no star.
        if (rims === count + 2) return 0;
        this.rim[rims] = e;
        rims += 1;
      }
    }
    return rims;
  }

  private star(rims: number, v: number): void {
    const mesh = this.mesh;
    const { vertex, twin } = mesh;
    if (this.startAt.length < mesh.x.length) this.startAt = enlarged(this.startAt, mesh.x.length);
    if (this.made.length < rims) this.made = enlarged(this.made, 2 * rims);
    const { startAt, made, rim, cavity } = this;
    // Rim ends before the slots of the cavity are reused.
    if (this.from.length < rims) {
      this.from = new Int32Array(2 * rims);
      this.to = new Int32Array(2 * rims);
      this.out = new Int32Array(2 * rims);
    }
    const { from, to, out } = this;
    for (let k = 0; k < rims; k += 1) {
      const e = rim[k];
      from[k] = vertex[e];
      to[k] = vertex[e % 3 === 2 ? e - 2 : e + 1];
      out[k] = twin[e];
    }
    for (let k = 0; k < rims; k += 1) {
      const t = k < rims - 2 ? cavity[k] : mesh.triangleCount + (k - rims + 2);
      made[k] = t;
      startAt[from[k]] = t;
      vertex[3 * t] = from[k];
      vertex[3 * t + 1] = to[k];
      vertex[3 * t + 2] = v;
      twin[3 * t] = out[k];
      if (out[k] >= 0) twin[out[k]] = 3 * t;
    }
    for (let k = 0; k < rims; k += 1) {
      const t = made[k];
      const onward = startAt[to[k]];
      twin[3 * t + 1] = 3 * onward + 2;
      twin[3 * onward + 2] = 3 * t + 1;
    }
    mesh.triangleCount += 2;
    this.madeCount = rims;
  }
}

function enlarged(array: Int32Array, length: number): Int32Array {
  const next = new Int32Array(length);
  next.set(array);
  return next;
}

/** Whether p lies inside the circle through the triangle at half-edge `base`, rounding left out. */
export function inCircle(
  x: Float64Array,
  y: Float64Array,
  vertex: Int32Array,
  base: number,
  px: number,
  py: number,
): boolean {
  const a = vertex[base];
  const b = vertex[base + 1];
  const c = vertex[base + 2];
  const ax = x[a] - px;
  const ay = y[a] - py;
  const bx = x[b] - px;
  const by = y[b] - py;
  const cx = x[c] - px;
  const cy = y[c] - py;
  const a2 = ax * ax + ay * ay;
  const b2 = bx * bx + by * by;
  const c2 = cx * cx + cy * cy;
  const bc = bx * cy - cx * by;
  const ca = cx * ay - ax * cy;
  const ab = ax * by - bx * ay;
  const det = a2 * bc + b2 * ca + c2 * ab;
  return det > 1e-12 * (a2 * Math.abs(bc) + b2 * Math.abs(ca) + c2 * Math.abs(ab));
}
