import type { Mesh } from '../mesh/mesh.ts';
import type { Placement } from './canonical.ts';
import type { CellSolution } from './cell.ts';
import { type DepthModes, depthModes } from './depth.ts';

/**
 * Velocity, pressure and wall shear in a cell for one set of face pressures: per mode of the depth,
 * values at the nodes of the copy that was solved (depth 1, viscosity 1). For pressures in Pa, a
 * viscosity mu and a depth d in metres: velocity times d / mu, stresses and pressures as they are,
 * dissipation per volume over mu.
 */
export interface FlowField {
  readonly mesh: Mesh;
  readonly depth: DepthModes;
  readonly placement: Placement;
  /** Per in-plane mode, all x then all y: 2 x nodeCount. */
  readonly inPlane: readonly Float64Array[];
  /** Per mode across: nodeCount. */
  readonly across: readonly Float64Array[];
  /** Per pressure mode: vertexCount. */
  readonly pressure: readonly Float64Array[];
  /** Per in-plane mode, per mode across: boundary edges x 3. */
  readonly wallAlong: readonly Float64Array[];
  readonly wallAcross: readonly Float64Array[];
}

/** Half of depth 1. */
export const HALF = 0.5;

const known = new Map<number, DepthModes>();
/** The standard modes for N, made once. */
export function standardModes(count: number): DepthModes {
  let modes = known.get(count);
  if (!modes) {
    modes = depthModes(count);
    known.set(count, modes);
  }
  return modes;
}

/** @param pressures on the caller's faces @param placement of a symmetric shape's several, default the first */
export function flowField(
  solution: CellSolution,
  pressures: ArrayLike<number>,
  placement: Placement = solution.placements[0],
): FlowField | null {
  const { fields, faces } = solution;
  if (!fields) return null;
  const { mesh, modes } = fields;
  const last = pressures[placement.face[faces - 1]];
  const weights = Array.from({ length: faces - 1 }, (_, c) => pressures[placement.face[c]] - last);
  const mix = (from: Float32Array, count: number, size: number): Float64Array[] =>
    Array.from({ length: count }, (_, k) => {
      const out = new Float64Array(size);
      weights.forEach((weight, c) => {
        const start = (c * count + k) * size;
        for (let i = 0; i < size; i += 1) out[i] += weight * from[start + i];
      });
      return out;
    });
  const edges = mesh.boundaryTag.length;
  const pressure = mix(fields.pressure, modes, mesh.vertexCount);
  for (let i = 0; i < mesh.vertexCount; i += 1) pressure[0][i] += last;
  return {
    mesh,
    depth: standardModes(modes),
    placement,
    inPlane: mix(fields.inPlane, modes, 2 * mesh.nodeCount),
    across: mix(fields.across, modes - 1, mesh.nodeCount),
    pressure,
    wallAlong: mix(fields.wallAlong, modes, 3 * edges),
    wallAcross: mix(fields.wallAcross, modes - 1, 3 * edges),
  };
}

/**
 * Face pressures (the last face's being 0) that drive the given flows into the cell, which must sum to
 * zero. Flows in the unit of the port matrix.
 */
export function pressuresOf(portMatrix: Float64Array, faces: number, flows: ArrayLike<number>): Float64Array {
  const n = faces - 1;
  const a = new Float64Array(n * n);
  const x = new Float64Array(faces);
  for (let i = 0; i < n; i += 1) {
    x[i] = flows[i];
    for (let j = 0; j < n; j += 1) a[i * n + j] = portMatrix[i * faces + j];
  }
  // Positive definite: elimination needs no pivots.
  for (let k = 0; k < n; k += 1)
    for (let i = k + 1; i < n; i += 1) {
      const factor = a[i * n + k] / a[k * n + k];
      for (let j = k; j < n; j += 1) a[i * n + j] -= factor * a[k * n + j];
      x[i] -= factor * x[k];
    }
  for (let k = n - 1; k >= 0; k -= 1) {
    for (let j = k + 1; j < n; j += 1) x[k] -= a[k * n + j] * x[j];
    x[k] /= a[k * n + k];
  }
  return x;
}

/** Values and slopes of all modes at one s in [-1, 1]. */
export interface DepthValues {
  /** N each: Phi_k and its derivative. */
  readonly inPlane: Float64Array;
  readonly inPlaneSlope: Float64Array;
  /** N - 1 each: X_m and its derivative. */
  readonly across: Float64Array;
  readonly acrossSlope: Float64Array;
  /** N: psi_j */
  readonly pressure: Float64Array;
}

export function depthValues(depth: DepthModes, s: number): DepthValues {
  const N = depth.count;
  const A = depth.acrossLambda.length;
  const out: DepthValues = {
    inPlane: new Float64Array(N),
    inPlaneSlope: new Float64Array(N),
    across: new Float64Array(A),
    acrossSlope: new Float64Array(A),
    pressure: new Float64Array(N),
  };
  const add = (
    basis: Float64Array,
    n: number,
    power: number,
    l: number,
    value: Float64Array,
    slope: Float64Array,
  ) => {
    const phi = s ** power - s ** (power + 2);
    const dphi = (power ? power * s ** (power - 1) : 0) - (power + 2) * s ** (power + 1);
    for (let k = 0; k < n; k += 1) {
      value[k] += basis[l * n + k] * phi;
      slope[k] += basis[l * n + k] * dphi;
    }
  };
  for (let l = 0; l < N; l += 1) {
    add(depth.inPlaneBasis, N, 2 * l, l, out.inPlane, out.inPlaneSlope);
    for (let j = 0; j < N; j += 1) out.pressure[j] += depth.pressureBasis[l * N + j] * s ** (2 * l);
  }
  for (let l = 0; l < A; l += 1) add(depth.acrossBasis, A, 2 * l + 1, l, out.across, out.acrossSlope);
  return out;
}
