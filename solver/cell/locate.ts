import type { Mesh } from '../mesh/mesh.ts';
import { quadratic, quadraticGradient } from './triangle.ts';

/** Finds the triangle of a plan point through square bins; made once per mesh. */
export interface Locator {
  readonly mesh: Mesh;
  readonly x0: number;
  readonly y0: number;
  readonly bin: number;
  readonly columns: number;
  readonly rows: number;
  /** columns * rows + 1, into `list` */
  readonly start: Int32Array;
  readonly list: Int32Array;
}

/** Where a point lies: its triangle and the local coordinates L_a, L_b. */
export interface Place {
  triangle: number;
  la: number;
  lb: number;
}

const made = new WeakMap<Mesh, Locator>();

export function locatorOf(mesh: Mesh): Locator {
  const known = made.get(mesh);
  if (known) return known;
  const { x, y, triangles, nodeCount } = mesh;
  const count = triangles.length / 6;
  let x0 = Number.POSITIVE_INFINITY;
  let y0 = Number.POSITIVE_INFINITY;
  let x1 = Number.NEGATIVE_INFINITY;
  let y1 = Number.NEGATIVE_INFINITY;
  for (let i = 0; i < nodeCount; i += 1) {
    x0 = Math.min(x0, x[i]);
    y0 = Math.min(y0, y[i]);
    x1 = Math.max(x1, x[i]);
    y1 = Math.max(y1, y[i]);
  }
  const bin = Math.max(Math.sqrt(((x1 - x0) * (y1 - y0)) / count), 1e-6 * (x1 - x0 + y1 - y0));
  const columns = Math.floor((x1 - x0) / bin) + 1;
  const rows = Math.floor((y1 - y0) / bin) + 1;
  const start = new Int32Array(columns * rows + 1);
  const box = new Int32Array(4 * count);
  for (let t = 0; t < count; t += 1) {
    let ax = x1;
    let ay = y1;
    let bx = x0;
    let by = y0;
    for (let i = 6 * t; i < 6 * t + 6; i += 1) {
      const node = triangles[i];
      ax = Math.min(ax, x[node]);
      bx = Math.max(bx, x[node]);
      ay = Math.min(ay, y[node]);
      by = Math.max(by, y[node]);
    }
    // An arc bulges past its three nodes by at most a quarter of what they bulge past the chord.
    const margin = 0.1 * (bx - ax + by - ay);
    box[4 * t] = Math.max(0, Math.floor((ax - margin - x0) / bin));
    box[4 * t + 1] = Math.min(columns - 1, Math.floor((bx + margin - x0) / bin));
    box[4 * t + 2] = Math.max(0, Math.floor((ay - margin - y0) / bin));
    box[4 * t + 3] = Math.min(rows - 1, Math.floor((by + margin - y0) / bin));
    for (let r = box[4 * t + 2]; r <= box[4 * t + 3]; r += 1)
      for (let c = box[4 * t]; c <= box[4 * t + 1]; c += 1) start[r * columns + c + 1] += 1;
  }
  for (let i = 0; i < columns * rows; i += 1) start[i + 1] += start[i];
  const list = new Int32Array(start[columns * rows]);
  const fill = start.slice();
  for (let t = 0; t < count; t += 1)
    for (let r = box[4 * t + 2]; r <= box[4 * t + 3]; r += 1)
      for (let c = box[4 * t]; c <= box[4 * t + 1]; c += 1) list[fill[r * columns + c]++] = t;
  const locator = { mesh, x0, y0, bin, columns, rows, start, list };
  made.set(mesh, locator);
  return locator;
}

const N = new Float64Array(6);
const DA = new Float64Array(6);
const DB = new Float64Array(6);
/** Local coordinates may miss the triangle by this much and still count as inside. */
const SLACK = 1e-9;

/** Fills `place` and tells whether (px, py) lies in the mesh. `place.triangle` is tried first. */
export function locate(locator: Locator, px: number, py: number, place: Place): boolean {
  const { mesh, x0, y0, bin, columns, rows, start, list } = locator;
  if (place.triangle >= 0 && within(mesh, place.triangle, px, py, place)) return true;
  const c = Math.floor((px - x0) / bin);
  const r = Math.floor((py - y0) / bin);
  if (!(c >= 0 && c < columns && r >= 0 && r < rows)) return false;
  for (let i = start[r * columns + c]; i < start[r * columns + c + 1]; i += 1)
    if (within(mesh, list[i], px, py, place)) return true;
  return false;
}

/** Newton iteration of the quadratic map; exact in one step where the sides are straight. */
function within(mesh: Mesh, t: number, px: number, py: number, place: Place): boolean {
  const { x, y, triangles } = mesh;
  let la = 1 / 3;
  let lb = 1 / 3;
  for (let step = 0; step < 8; step += 1) {
    quadratic(la, lb, N);
    quadraticGradient(la, lb, DA, DB);
    let fx = -px;
    let fy = -py;
    let xa = 0;
    let xb = 0;
    let ya = 0;
    let yb = 0;
    for (let i = 0; i < 6; i += 1) {
      const node = triangles[6 * t + i];
      fx += N[i] * x[node];
      fy += N[i] * y[node];
      xa += DA[i] * x[node];
      xb += DB[i] * x[node];
      ya += DA[i] * y[node];
      yb += DB[i] * y[node];
    }
    const det = xa * yb - xb * ya;
    const da = (yb * fx - xb * fy) / det;
    const db = (xa * fy - ya * fx) / det;
    la -= da;
    lb -= db;
    if (Math.abs(da) + Math.abs(db) < 1e-12) break;
    if (!(Math.abs(la) + Math.abs(lb) < 10)) return false;
  }
  if (la < -SLACK || lb < -SLACK || la + lb > 1 + SLACK) return false;
  place.triangle = t;
  place.la = la;
  place.lb = lb;
  return true;
}
