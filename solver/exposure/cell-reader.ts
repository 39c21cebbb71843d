import { type DepthValues, depthValues, emptyDepthValues } from '../cell/depth.ts';
import { HALF, type VelocityField } from '../cell/flow-field.ts';
import { type Locator, locate, locatorOf, type Place } from '../cell/locate.ts';
import { quadratic, quadraticGradient } from '../cell/triangle.ts';
import type { Mesh } from '../mesh/mesh.ts';

/** Triangles of a mesh as paths step through them; made once per mesh. */
interface Steps {
  /** Root of the area of each triangle. */
  readonly size: Float64Array;
  /** 1 where the sides are straight: then local coordinates are linear in place. */
  readonly straight: Uint8Array;
  /** Of each straight triangle: la = [0] + [1] x + [2] y, lb = [3] + [4] x + [5] y. */
  readonly linear: Float64Array;
}

const made = new WeakMap<Mesh, Steps>();
/** Middle nodes off the middle by this share of the side make it curved. */
const STRAIGHT = 1e-9;
const SLACK = 1e-9;

function stepsOf(mesh: Mesh): Steps {
  let steps = made.get(mesh);
  if (steps) return steps;
  const { x, y, triangles } = mesh;
  const count = triangles.length / 6;
  steps = {
    size: new Float64Array(count),
    straight: new Uint8Array(count),
    linear: new Float64Array(6 * count),
  };
  const n = new Float64Array(6);
  for (let t = 0; t < count; t += 1) {
    const [a, b, c] = triangles.subarray(6 * t, 6 * t + 3);
    const det = (x[a] - x[c]) * (y[b] - y[c]) - (x[b] - x[c]) * (y[a] - y[c]);
    steps.size[t] = Math.sqrt(Math.abs(det) / 2);
    // Where the map is affine, the middle nodes lie where their local coordinates say.
    const places = [
      [0.5, 0],
      [0.5, 0.5],
      [0, 0.5],
    ];
    let off = 0;
    for (const [la, lb] of places) {
      quadratic(la, lb, n);
      let px = 0;
      let py = 0;
      for (let i = 0; i < 6; i += 1) {
        px += n[i] * x[triangles[6 * t + i]];
        py += n[i] * y[triangles[6 * t + i]];
      }
      const lc = 1 - la - lb;
      off = Math.max(
        off,
        Math.abs(px - la * x[a] - lb * x[b] - lc * x[c]) + Math.abs(py - la * y[a] - lb * y[b] - lc * y[c]),
      );
    }
    if (off > STRAIGHT * steps.size[t]) continue;
    steps.straight[t] = 1;
    const [xa, xb, ya, yb] = [x[a] - x[c], x[b] - x[c], y[a] - y[c], y[b] - y[c]];
    steps.linear.set(
      [
        (-yb * x[c] + xb * y[c]) / det,
        yb / det,
        -xb / det,
        (ya * x[c] - xa * y[c]) / det,
        -ya / det,
        xa / det,
      ],
      6 * t,
    );
  }
  made.set(mesh, steps);
  return steps;
}

/** Reads velocity and strain of a field in the frame of the solved copy, from place to neighbouring place. */
export class CellReader {
  u = 0;
  v = 0;
  w = 0;
  readonly #field: VelocityField;
  readonly #steps: Steps;
  readonly #locator: Locator;
  readonly #place: Place = { triangle: -1, la: 0, lb: 0 };
  readonly #modes: DepthValues;
  /** Of `modes`. */
  #height = Number.NaN;
  readonly #n = new Float64Array(6);
  readonly #da = new Float64Array(6);
  readonly #db = new Float64Array(6);

  constructor(field: VelocityField) {
    this.#field = field;
    this.#steps = stepsOf(field.mesh);
    this.#locator = locatorOf(field.mesh);
    this.#modes = emptyDepthValues(field.depth);
  }

  /** Size of the triangle of the place that was read last. */
  get size(): number {
    return this.#steps.size[this.#place.triangle];
  }

  get speed(): number {
    return Math.sqrt(this.u * this.u + this.v * this.v + this.w * this.w);
  }

  /** Velocity at a plan point and a height s from half depth (−1 floor, 1 lid); false outside of the cell. */
  read(x: number, y: number, s: number): boolean {
    if (!this.#locate(x, y)) return false;
    const { mesh, depth, inPlane, across } = this.#field;
    const { triangles, nodeCount } = mesh;
    const { triangle, la, lb } = this.#place;
    if (s !== this.#height) {
      depthValues(depth, s, this.#modes);
      this.#height = s;
    }
    const modes = this.#modes;
    const n = this.#n;
    quadratic(la, lb, n);
    let u = 0;
    let v = 0;
    let w = 0;
    for (let k = 0; k < inPlane.length; k += 1) {
      const values = inPlane[k];
      let a = 0;
      let b = 0;
      for (let i = 0; i < 6; i += 1) {
        const node = triangles[6 * triangle + i];
        a += n[i] * values[node];
        b += n[i] * values[nodeCount + node];
      }
      u += modes.inPlane[k] * a;
      v += modes.inPlane[k] * b;
    }
    for (let m = 0; m < across.length; m += 1) {
      const values = across[m];
      let a = 0;
      for (let i = 0; i < 6; i += 1) a += n[i] * values[triangles[6 * triangle + i]];
      w += modes.across[m] * a;
    }
    this.u = u;
    this.v = v;
    this.w = w;
    return true;
  }

  /** Scalar of the rate of strain, √(2 e:e), at the place that was read last. */
  strain(): number {
    const { mesh, inPlane, across } = this.#field;
    const { x, y, triangles, nodeCount } = mesh;
    const { triangle, la, lb } = this.#place;
    const n = this.#n;
    const da = this.#da;
    const db = this.#db;
    const modes = this.#modes;
    quadraticGradient(la, lb, da, db);
    let xa = 0;
    let xb = 0;
    let ya = 0;
    let yb = 0;
    for (let i = 0; i < 6; i += 1) {
      const node = triangles[6 * triangle + i];
      xa += da[i] * x[node];
      xb += db[i] * x[node];
      ya += da[i] * y[node];
      yb += db[i] * y[node];
    }
    const det = xa * yb - xb * ya;
    let ux = 0;
    let uy = 0;
    let uz = 0;
    let vx = 0;
    let vy = 0;
    let vz = 0;
    let wx = 0;
    let wy = 0;
    let wz = 0;
    for (let i = 0; i < 6; i += 1) {
      const node = triangles[6 * triangle + i];
      const gx = (da[i] * yb - db[i] * ya) / det;
      const gy = (db[i] * xa - da[i] * xb) / det;
      let u = 0;
      let v = 0;
      let us = 0;
      let vs = 0;
      let w = 0;
      let ws = 0;
      for (let k = 0; k < inPlane.length; k += 1) {
        u += modes.inPlane[k] * inPlane[k][node];
        v += modes.inPlane[k] * inPlane[k][nodeCount + node];
        us += modes.inPlaneSlope[k] * inPlane[k][node];
        vs += modes.inPlaneSlope[k] * inPlane[k][nodeCount + node];
      }
      for (let m = 0; m < across.length; m += 1) {
        w += modes.across[m] * across[m][node];
        ws += modes.acrossSlope[m] * across[m][node];
      }
      ux += gx * u;
      uy += gy * u;
      uz += (n[i] * us) / HALF;
      vx += gx * v;
      vy += gy * v;
      vz += (n[i] * vs) / HALF;
      wx += gx * w;
      wy += gy * w;
      wz += (n[i] * ws) / HALF;
    }
    const shear = (uy + vx) ** 2 + (uz + wx) ** 2 + (vz + wy) ** 2;
    return Math.sqrt(2 * (ux * ux + vy * vy + wz * wz) + shear);
  }

  #locate(x: number, y: number): boolean {
    const place = this.#place;
    if (place.triangle >= 0 && this.#inStraight(place.triangle, x, y)) return true;
    const { x0, y0, bin, columns, rows, start, list } = this.#locator;
    const c = Math.floor((x - x0) / bin);
    const r = Math.floor((y - y0) / bin);
    if (!(c >= 0 && c < columns && r >= 0 && r < rows)) return false;
    for (let i = start[r * columns + c]; i < start[r * columns + c + 1]; i += 1) {
      if (this.#inStraight(list[i], x, y)) return true;
    }
    return locate(this.#locator, x, y, place);
  }

  #inStraight(t: number, x: number, y: number): boolean {
    const { straight, linear } = this.#steps;
    if (straight[t] === 0) return false;
    const at = 6 * t;
    const la = linear[at] + linear[at + 1] * x + linear[at + 2] * y;
    const lb = linear[at + 3] + linear[at + 4] * x + linear[at + 5] * y;
    if (la < -SLACK || lb < -SLACK || la + lb > 1 + SLACK) return false;
    this.#place.triangle = t;
    this.#place.la = la;
    this.#place.lb = lb;
    return true;
  }
}
