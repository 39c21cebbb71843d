import { depthValues } from '../cell/depth.ts';
import { HALF, type VelocityField } from '../cell/flow-field.ts';
import { quadratic, quadraticGradient } from '../cell/triangle.ts';
import type { Mesh } from '../mesh/mesh.ts';
import type { History } from './laws.ts';

/** What the fluid in a cell meets, for depth 1, viscosity 1 and a flow of 1 through it. */
export interface CellScan {
  /** Volumes by their stress: ∫ stress^γ dV is the dose of this times the flow. */
  readonly spread: History;
  /** Largest rate at which a line along the flow grows, the scalar stress there, and where on the plan. */
  readonly stretch: {
    readonly rate: number;
    readonly stress: number;
    readonly x: number;
    readonly y: number;
  };
}

/** Gauss-Legendre on [0, 1], five points: heights from half depth. */
const HEIGHTS = [0.046910077030668, 0.230765344947158, 0.5, 0.769234655052842, 0.953089922969332];
const SHARES = [
  0.118463442528095, 0.239314335249683, 0.284444444444444, 0.239314335249683, 0.118463442528095,
];
/** Small meshes are looked at in the middles of the three sides of each triangle, large ones in its middle. */
const SIDES_A = [0.5, 0, 0.5];
const SIDES_B = [0.5, 0.5, 0];
const MIDDLE = [1 / 3];
const SMALL = 700;

const BINS = 256;
/** Stresses below e^−14 of the largest are one. */
const SPAN = 14;

/** Volume of a cell of depth 1: the area of its plan. */
export function planArea({ x, y, triangles }: Mesh): number {
  const da = new Float64Array(6);
  const db = new Float64Array(6);
  let area = 0;
  for (let t = 0; t < triangles.length / 6; t += 1) {
    for (let q = 0; q < SIDES_A.length; q += 1) {
      quadraticGradient(SIDES_A[q], SIDES_B[q], da, db);
      let xa = 0;
      let xb = 0;
      let ya = 0;
      let yb = 0;
      for (let i = 0; i < 6; i += 1) {
        const node = triangles[6 * t + i];
        xa += da[i] * x[node];
        xb += db[i] * x[node];
        ya += da[i] * y[node];
        yb += db[i] * y[node];
      }
      area += Math.abs(xa * yb - xb * ya) / (2 * SIDES_A.length);
    }
  }
  return area;
}

/** Looks through a field: at each place of the plan the modes once, then level by level. */
export function scanCell(field: VelocityField): CellScan {
  const { mesh, depth, inPlane, across } = field;
  const { triangles, nodeCount } = mesh;
  const count = triangles.length / 6;
  const [la, lb] = count <= SMALL ? [SIDES_A, SIDES_B] : [MIDDLE, MIDDLE];
  const places = la.length;
  const levels = HEIGHTS.map((height) => depthValues(depth, height));
  const stress = new Float64Array(count * places * HEIGHTS.length);
  const volumes = new Float64Array(stress.length);
  const n = la.map((_, q) => {
    const values = new Float64Array(6);
    quadratic(la[q], lb[q], values);
    return values;
  });
  const alongA = la.map(() => new Float64Array(6));
  const alongB = la.map(() => new Float64Array(6));
  for (let q = 0; q < places; q += 1) quadraticGradient(la[q], lb[q], alongA[q], alongB[q]);
  /** By mode: u, its slopes along x and y, v, its slopes; then w and its slopes. */
  const plane = new Float64Array(6 * inPlane.length);
  const up = new Float64Array(3 * across.length);
  const [gx, gy] = [new Float64Array(6), new Float64Array(6)];
  let top = 0;
  let at = 0;
  const stretch = { rate: 0, stress: 0, x: 0, y: 0 };
  for (let t = 0; t < count; t += 1) {
    for (let q = 0; q < places; q += 1) {
      const da = alongA[q];
      const db = alongB[q];
      let xa = 0;
      let xb = 0;
      let ya = 0;
      let yb = 0;
      let px = 0;
      let py = 0;
      for (let i = 0; i < 6; i += 1) {
        const node = triangles[6 * t + i];
        const x = mesh.x[node];
        const y = mesh.y[node];
        px += n[q][i] * x;
        py += n[q][i] * y;
        xa += da[i] * x;
        xb += db[i] * x;
        ya += da[i] * y;
        yb += db[i] * y;
      }
      const det = xa * yb - xb * ya;
      for (let i = 0; i < 6; i += 1) {
        gx[i] = (da[i] * yb - db[i] * ya) / det;
        gy[i] = (db[i] * xa - da[i] * xb) / det;
      }
      gather(inPlane, nodeCount, triangles, t, n[q], gx, gy, plane);
      gather(across, 0, triangles, t, n[q], gx, gy, up);
      for (let level = 0; level < levels.length; level += 1) {
        const modes = levels[level];
        let u = 0;
        let v = 0;
        let w = 0;
        let ux = 0;
        let uy = 0;
        let uz = 0;
        let vx = 0;
        let vy = 0;
        let vz = 0;
        let wx = 0;
        let wy = 0;
        let wz = 0;
        for (let k = 0; k < inPlane.length; k += 1) {
          const value = modes.inPlane[k];
          const slope = modes.inPlaneSlope[k] / HALF;
          u += value * plane[6 * k];
          ux += value * plane[6 * k + 1];
          uy += value * plane[6 * k + 2];
          uz += slope * plane[6 * k];
          v += value * plane[6 * k + 3];
          vx += value * plane[6 * k + 4];
          vy += value * plane[6 * k + 5];
          vz += slope * plane[6 * k + 3];
        }
        for (let m = 0; m < across.length; m += 1) {
          const value = modes.across[m];
          w += value * up[3 * m];
          wx += value * up[3 * m + 1];
          wy += value * up[3 * m + 2];
          wz += (modes.acrossSlope[m] / HALF) * up[3 * m];
        }
        const shear = (uy + vx) ** 2 + (uz + wx) ** 2 + (vz + wy) ** 2;
        const scalar = Math.sqrt(2 * (ux * ux + vy * vy + wz * wz) + shear);
        stress[at] = scalar;
        volumes[at] = (2 * HALF * SHARES[level] * Math.abs(det)) / (2 * places);
        at += 1;
        top = Math.max(top, scalar);
        const square = u * u + v * v + w * w;
        if (!(square > 0)) continue;
        const along =
          u * u * ux + v * v * vy + w * w * wz + u * v * (uy + vx) + u * w * (uz + wx) + v * w * (vz + wy);
        if (along > stretch.rate * square) {
          stretch.rate = along / square;
          stretch.stress = scalar;
          stretch.x = px;
          stretch.y = py;
        }
      }
    }
  }
  return { spread: binned(stress, volumes, top), stretch };
}

/** Of each mode at a place of a triangle: its value and slopes, and those of its second component where `second` > 0. */
function gather(
  modes: readonly Float64Array[],
  second: number,
  triangles: Int32Array,
  t: number,
  n: Float64Array,
  gx: Float64Array,
  gy: Float64Array,
  out: Float64Array,
): void {
  const stride = second > 0 ? 6 : 3;
  for (let k = 0; k < modes.length; k += 1) {
    const values = modes[k];
    let a = 0;
    let ax = 0;
    let ay = 0;
    let b = 0;
    let bx = 0;
    let by = 0;
    for (let i = 0; i < 6; i += 1) {
      const node = triangles[6 * t + i];
      const value = values[node];
      a += n[i] * value;
      ax += gx[i] * value;
      ay += gy[i] * value;
      if (second === 0) continue;
      const other = values[second + node];
      b += n[i] * other;
      bx += gx[i] * other;
      by += gy[i] * other;
    }
    out[stride * k] = a;
    out[stride * k + 1] = ax;
    out[stride * k + 2] = ay;
    if (second === 0) continue;
    out[stride * k + 3] = b;
    out[stride * k + 4] = bx;
    out[stride * k + 5] = by;
  }
}

/** Volumes gathered by the logarithm of their stress, each bin with the mean of its own. */
function binned(stress: Float64Array, volumes: Float64Array, top: number): History {
  const volume = new Float64Array(BINS);
  const moment = new Float64Array(BINS);
  for (let i = 0; i < stress.length; i += 1) {
    const below = stress[i] > 0 ? Math.log(top / stress[i]) : SPAN;
    const bin = Math.min(BINS - 1, Math.floor((below * BINS) / SPAN));
    volume[bin] += volumes[i];
    moment[bin] += volumes[i] * stress[i];
  }
  const full = Array.from(volume.keys()).filter((bin) => volume[bin] > 0);
  return {
    stress: Float64Array.from(full, (bin) => moment[bin] / volume[bin]),
    time: Float64Array.from(full, (bin) => volume[bin]),
  };
}
