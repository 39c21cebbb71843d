import { toCaller } from './canonical.ts';
import type { CellFields, CellSolution } from './cell.ts';
import { depthValues } from './depth.ts';
import { type FlowField, flowField, HALF, mixFields } from './flow-field.ts';

/** The largest wall shear in a cell. */
export interface PeakShear {
  /** In the unit of the face pressures (Pa for Pa). */
  readonly value: number;
  /** In the coordinates of the shape. */
  readonly at: readonly [number, number];
  readonly place: 'side wall' | 'floor and lid';
  /** Distance from half depth, 0 to 1 at floor and lid. */
  readonly height: number;
  /** Bound of the relative error. */
  readonly error: number;
}

/** Places over the half depth where side-wall shear is looked at. */
const LEVELS = 16;

/**
 * Peak wall shear for the given face pressures, over side walls, floor and lid. Peaks don't add, so each
 * combination is looked through anew. Null where a corner is sharp (shear has no bound there) or fields
 * were not kept.
 */
export function peakShear(solution: CellSolution, pressures: ArrayLike<number>): PeakShear | null {
  if (solution.sharp || solution.peakError === null) return null;
  let best: PeakShear | null = null;
  for (const placement of solution.placements) {
    const field = flowField(solution, pressures, placement);
    if (!field) return null;
    const found = largestWallShear(field);
    if (best && found.value <= best.value) continue;
    best = {
      value: found.value,
      at: toCaller(placement, found.x, found.y),
      place: found.place,
      height: found.height,
      error: solution.peakError,
    };
  }
  return best;
}

/** The same on one field, in the coordinates of the solved copy. */
export function largestWallShear(field: Omit<FlowField, 'placement'>): {
  value: number;
  x: number;
  y: number;
  place: PeakShear['place'];
  height: number;
} {
  const { mesh, depth, inPlane, wallAlong, wallAcross } = field;
  const N = depth.count;
  let most = 0;
  let node = 0;
  let place: PeakShear['place'] = 'floor and lid';
  let height = 1;

  const { inPlaneSlope } = depthValues(depth, 1);
  for (let i = 0; i < mesh.nodeCount; i += 1) {
    let x = 0;
    let y = 0;
    for (let k = 0; k < N; k += 1) {
      x += inPlaneSlope[k] * inPlane[k][i];
      y += inPlaneSlope[k] * inPlane[k][mesh.nodeCount + i];
    }
    const square = (x * x + y * y) / (HALF * HALF);
    if (square > most) {
      most = square;
      node = i;
    }
  }
  for (let level = 0; level < LEVELS; level += 1) {
    const s = level / LEVELS;
    const values = depthValues(depth, s);
    // Middles of edges: they scatter least.
    for (let e = 2; e < wallAlong[0].length; e += 3) {
      let along = 0;
      let up = 0;
      for (let k = 0; k < N; k += 1) along += values.inPlane[k] * wallAlong[k][e];
      for (let m = 0; m < N - 1; m += 1) up += values.across[m] * wallAcross[m][e];
      const square = along * along + up * up;
      if (square > most) {
        most = square;
        node = mesh.boundary[e];
        place = 'side wall';
        height = s;
      }
    }
  }
  return { value: Math.sqrt(most), x: mesh.x[node], y: mesh.y[node], place, height };
}

/** Peak for unit pressure on one face (from 0, of the solved copy) and none on the others. */
export function peakOfFields(fields: CellFields, face: number): number {
  const faces = fields.pressure.length / (fields.modes * fields.mesh.vertexCount) + 1;
  const pressures = new Float64Array(faces);
  pressures[face] = 1;
  return largestWallShear(mixFields(fields, pressures)).value;
}
