import type { Mesh } from '../mesh/mesh.ts';
import type { Placement } from './canonical.ts';
import type { CellFields, CellSolution } from './cell.ts';
import { type DepthModes, standardModes } from './depth.ts';
import { rimPressures } from './rim.ts';

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

/** Velocity alone, without its place. */
export type VelocityField = Pick<FlowField, 'mesh' | 'depth' | 'inPlane' | 'across'>;

/** Sums of patterns, `count` arrays of `size`, by the pressures less that of the last face. */
function mix(pressures: ArrayLike<number>, from: Float32Array, count: number, size: number): Float64Array[] {
  const patterns = pressures.length - 1;
  return Array.from({ length: count }, (_, k) => {
    const out = new Float64Array(size);
    for (let c = 0; c < patterns; c += 1) {
      const weight = pressures[c] - pressures[patterns];
      const start = (c * count + k) * size;
      for (let i = 0; i < size; i += 1) out[i] += weight * from[start + i];
    }
    return out;
  });
}

/** @param pressures on the faces of the solved copy */
export function mixVelocity(
  { mesh, modes, inPlane, across }: CellFields,
  pressures: ArrayLike<number>,
): VelocityField {
  return {
    mesh,
    depth: standardModes(modes),
    inPlane: mix(pressures, inPlane, modes, 2 * mesh.nodeCount),
    across: mix(pressures, across, modes - 1, mesh.nodeCount),
  };
}

/** The field alone, without its place: pressures on the faces of the solved copy. */
export function mixFields(fields: CellFields, pressures: ArrayLike<number>): Omit<FlowField, 'placement'> {
  const { mesh, modes } = fields;
  const edges = mesh.boundaryTag.length;
  const pressure = mix(pressures, fields.pressure, modes, mesh.vertexCount);
  const last = pressures[pressures.length - 1];
  for (let i = 0; i < mesh.vertexCount; i += 1) pressure[0][i] += last;
  return {
    ...mixVelocity(fields, pressures),
    pressure,
    wallAlong: mix(pressures, fields.wallAlong, modes, 3 * edges),
    wallAcross: mix(pressures, fields.wallAcross, modes - 1, 3 * edges),
  };
}

/** @param pressures on the caller's faces, beyond holes @param placement of a symmetric shape's several, default the first */
export function flowField(
  solution: CellSolution,
  pressures: ArrayLike<number>,
  placement: Placement = solution.placements[0],
): FlowField | null {
  if (!solution.fields) return null;
  const rims = rimPressures(solution, pressures);
  const turned = Float64Array.from(placement.face, (face) => rims[face]);
  return { ...mixFields(solution.fields, turned), placement };
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
