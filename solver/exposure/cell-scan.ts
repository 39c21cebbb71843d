import { depthValues } from '../cell/depth.ts';
import { type FlowField, HALF } from '../cell/flow-field.ts';
import { quadratic, quadraticGradient } from '../cell/triangle.ts';
import type { History } from './laws.ts';

/** What the fluid in a cell meets, for depth 1, viscosity 1 and a flow of 1 through it. */
export interface CellScan {
  readonly volume: number;
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

/** Looks through a field; a few milliseconds. */
export function scanCell(field: Omit<FlowField, 'placement'>): CellScan {
  const { mesh, depth, inPlane, across } = field;
  const { triangles, nodeCount } = mesh;
  const count = triangles.length / 6;
  const [la, lb] = count <= SMALL ? [SIDES_A, SIDES_B] : [MIDDLE, MIDDLE];
  const points = la.length;
  const stress = new Float64Array(count * points * HEIGHTS.length);
  const volumes = new Float64Array(stress.length);
  const nodal = Array.from({ length: 6 }, () => new Float64Array(nodeCount));
  const [u, v, w, us, vs, ws] = nodal;
  const n = new Float64Array(6 * points);
  const da = new Float64Array(6 * points);
  const db = new Float64Array(6 * points);
  for (let q = 0; q < points; q += 1) {
    quadraticGradient(la[q], lb[q], da.subarray(6 * q), db.subarray(6 * q));
    quadratic(la[q], lb[q], n.subarray(6 * q));
  }
  let whole = 0;
  let top = 0;
  const stretch = { rate: 0, stress: 0, x: 0, y: 0 };
  let at = 0;
  for (let level = 0; level < HEIGHTS.length; level += 1) {
    const modes = depthValues(depth, HEIGHTS[level]);
    for (const values of nodal) values.fill(0);
    for (let k = 0; k < inPlane.length; k += 1) {
      const value = modes.inPlane[k];
      const slope = modes.inPlaneSlope[k] / HALF;
      const field2 = inPlane[k];
      for (let i = 0; i < nodeCount; i += 1) {
        u[i] += value * field2[i];
        v[i] += value * field2[nodeCount + i];
        us[i] += slope * field2[i];
        vs[i] += slope * field2[nodeCount + i];
      }
    }
    for (let m = 0; m < across.length; m += 1) {
      const value = modes.across[m];
      const slope = modes.acrossSlope[m] / HALF;
      for (let i = 0; i < nodeCount; i += 1) {
        w[i] += value * across[m][i];
        ws[i] += slope * across[m][i];
      }
    }
    for (let t = 0; t < count; t += 1) {
      for (let q = 0; q < points; q += 1) {
        let [xa, xb, ya, yb, px, py] = [0, 0, 0, 0, 0, 0];
        let [u0, v0, w0, ua, ub, va, vb, wa, wb, uz, vz, wz] = [0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0];
        for (let i = 0; i < 6; i += 1) {
          const node = triangles[6 * t + i];
          const a = da[6 * q + i];
          const b = db[6 * q + i];
          const c = n[6 * q + i];
          const x = mesh.x[node];
          const y = mesh.y[node];
          px += c * x;
          py += c * y;
          xa += a * x;
          xb += b * x;
          ya += a * y;
          yb += b * y;
          u0 += c * u[node];
          v0 += c * v[node];
          w0 += c * w[node];
          ua += a * u[node];
          ub += b * u[node];
          va += a * v[node];
          vb += b * v[node];
          wa += a * w[node];
          wb += b * w[node];
          uz += c * us[node];
          vz += c * vs[node];
          wz += c * ws[node];
        }
        const det = xa * yb - xb * ya;
        const ux = (ua * yb - ub * ya) / det;
        const uy = (ub * xa - ua * xb) / det;
        const vx = (va * yb - vb * ya) / det;
        const vy = (vb * xa - va * xb) / det;
        const wx = (wa * yb - wb * ya) / det;
        const wy = (wb * xa - wa * xb) / det;
        const shear = (uy + vx) ** 2 + (uz + wx) ** 2 + (vz + wy) ** 2;
        const scalar = Math.sqrt(2 * (ux * ux + vy * vy + wz * wz) + shear);
        const volume = (2 * HALF * SHARES[level] * det) / (2 * points);
        stress[at] = scalar;
        volumes[at] = volume;
        at += 1;
        whole += volume;
        top = Math.max(top, scalar);
        const square = u0 * u0 + v0 * v0 + w0 * w0;
        if (!(square > 0)) continue;
        const along =
          u0 * (u0 * ux + v0 * (uy + vx) + w0 * (uz + wx)) + v0 * (v0 * vy + w0 * (vz + wy)) + w0 * w0 * wz;
        if (along <= stretch.rate * square) continue;
        stretch.rate = along / square;
        stretch.stress = scalar;
        stretch.x = px;
        stretch.y = py;
      }
    }
  }
  return { volume: whole, spread: binned(stress, volumes, top), stretch };
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
