import { fromCaller } from './canonical.ts';
import { type DepthValues, depthValues } from './depth.ts';
import { type FlowField, HALF } from './flow-field.ts';
import { locate, locatorOf, type Place } from './locate.ts';
import { quadratic, quadraticGradient } from './triangle.ts';

/** Flow at a point, directions and lengths in the caller's frame but depth 1 and viscosity 1 (see flow-field.ts). */
export interface Sample {
  /** Velocity x, y, z. */
  readonly velocity: Float64Array;
  /** 9: d(velocity i)/d(axis j) at [3 i + j]. */
  readonly gradient: Float64Array;
  pressure: number;
  /** Scalar of the strain rate, sqrt(2 e : e); times the viscosity it is the stress, squared the dissipation. */
  strainRate: number;
}

export interface Sampler {
  /**
   * Fills `out` for a plan point of the caller's and a height s from half depth (-1 floor, 1 lid); false
   * where the point is not in the cell.
   */
  at(x: number, y: number, s: number, out: Sample): boolean;
}

export const emptySample = (): Sample => ({
  velocity: new Float64Array(3),
  gradient: new Float64Array(9),
  pressure: 0,
  strainRate: 0,
});

export function sampler(field: FlowField): Sampler {
  const locator = locatorOf(field.mesh);
  const place: Place = { triangle: -1, la: 0, lb: 0 };
  let height = Number.NaN;
  let modes: DepthValues;
  const { placement } = field;
  return {
    at(x, y, s, out) {
      const [px, py] = fromCaller(placement, x, y);
      if (!locate(locator, px, py, place)) return false;
      if (s !== height) {
        modes = depthValues(field.depth, s);
        height = s;
      }
      sampleAt(field, place, modes, out);
      return true;
    },
  };
}

const N = new Float64Array(6);
const DA = new Float64Array(6);
const DB = new Float64Array(6);

/** As `at`, at a place already found. */
export function sampleAt(field: FlowField, place: Place, modes: DepthValues, out: Sample): void {
  const { mesh, inPlane, across, pressure, placement } = field;
  const { triangles, nodeCount } = mesh;
  const { triangle: t, la, lb } = place;
  quadratic(la, lb, N);
  quadraticGradient(la, lb, DA, DB);
  let xa = 0;
  let xb = 0;
  let ya = 0;
  let yb = 0;
  for (let i = 0; i < 6; i += 1) {
    const node = triangles[6 * t + i];
    xa += DA[i] * mesh.x[node];
    xb += DB[i] * mesh.x[node];
    ya += DA[i] * mesh.y[node];
    yb += DB[i] * mesh.y[node];
  }
  const det = xa * yb - xb * ya;
  V.fill(0);
  G.fill(0);
  for (let i = 0; i < 6; i += 1) {
    const node = triangles[6 * t + i];
    const gx = (DA[i] * yb - DB[i] * ya) / det;
    const gy = (DB[i] * xa - DA[i] * xb) / det;
    let u = 0;
    let v = 0;
    let w = 0;
    let us = 0;
    let vs = 0;
    let ws = 0;
    for (let k = 0; k < inPlane.length; k += 1) {
      const a = inPlane[k][node];
      const b = inPlane[k][nodeCount + node];
      u += modes.inPlane[k] * a;
      v += modes.inPlane[k] * b;
      us += modes.inPlaneSlope[k] * a;
      vs += modes.inPlaneSlope[k] * b;
    }
    for (let m = 0; m < across.length; m += 1) {
      w += modes.across[m] * across[m][node];
      ws += modes.acrossSlope[m] * across[m][node];
    }
    V[0] += N[i] * u;
    V[1] += N[i] * v;
    V[2] += N[i] * w;
    G[0] += gx * u;
    G[1] += gy * u;
    G[2] += (N[i] * us) / HALF;
    G[3] += gx * v;
    G[4] += gy * v;
    G[5] += (N[i] * vs) / HALF;
    G[6] += gx * w;
    G[7] += gy * w;
    G[8] += (N[i] * ws) / HALF;
  }
  out.pressure = 0;
  const linear = [la, lb, 1 - la - lb];
  for (let j = 0; j < pressure.length; j += 1)
    for (let i = 0; i < 3; i += 1)
      out.pressure += modes.pressure[j] * linear[i] * pressure[j][triangles[6 * t + i]];

  let square = 0;
  for (let i = 0; i < 3; i += 1)
    for (let j = 0; j < 3; j += 1) square += (G[3 * i + j] + G[3 * j + i]) ** 2 / 2;
  out.strainRate = Math.sqrt(square);

  // Turn into the caller's frame: R = turn times mirror, v' = R v, G' = R G R^T.
  const flip = placement.mirrored ? -1 : 1;
  R[0] = placement.cos;
  R[1] = -placement.sin * flip;
  R[3] = placement.sin;
  R[4] = placement.cos * flip;
  for (let i = 0; i < 3; i += 1) {
    out.velocity[i] = R[3 * i] * V[0] + R[3 * i + 1] * V[1] + R[3 * i + 2] * V[2];
    for (let j = 0; j < 3; j += 1) {
      let sum = 0;
      for (let a = 0; a < 3; a += 1)
        for (let b = 0; b < 3; b += 1) sum += R[3 * i + a] * G[3 * a + b] * R[3 * j + b];
      out.gradient[3 * i + j] = sum;
    }
  }
}

const V = new Float64Array(3);
const G = new Float64Array(9);
const R = Float64Array.of(1, 0, 0, 0, 1, 0, 0, 0, 1);
