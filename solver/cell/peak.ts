import { toCaller } from './canonical.ts';
import type { CellFields, CellSolution } from './cell.ts';
import { depthValues, standardModes } from './depth.ts';
import { HALF } from './flow-field.ts';
import { rimPressures } from './rim.ts';

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
  const { fields, peakError } = solution;
  if (solution.sharp || peakError === null || !fields) return null;
  const rims = Float64Array.from(rimPressures(solution, pressures), (p) => p * solution.peakScale);
  let best: PeakShear | null = null;
  for (const placement of solution.placements) {
    const found = largestWallShear(
      fields,
      Float64Array.from(placement.face, (face) => rims[face]),
    );
    if (best && found.value <= best.value) continue;
    best = {
      value: found.value,
      at: toCaller(placement, found.x, found.y),
      place: found.place,
      height: found.height,
      error: peakError,
    };
  }
  return best;
}

/** Shear of each face pattern at all places that are looked at; made once per shape. */
interface WallTable {
  /** patterns x 2 x nodeCount: along x and y, at floor and lid. */
  readonly lid: Float32Array;
  /** patterns x 2 x (LEVELS x edges): along the wall and up, at the middles of edges (they scatter least), level by level. */
  readonly sides: Float32Array;
}
const tables = new WeakMap<CellFields, WallTable>();

function tableOf(fields: CellFields, patterns: number): WallTable {
  let table = tables.get(fields);
  if (table) return table;
  const { mesh, modes, inPlane, wallAlong, wallAcross } = fields;
  const { nodeCount } = mesh;
  const depth = standardModes(modes);
  const edges = mesh.boundaryTag.length;
  const lid = new Float32Array(patterns * 2 * nodeCount);
  const sides = new Float32Array(patterns * 2 * LEVELS * edges);
  const { inPlaneSlope } = depthValues(depth, 1);
  const levels: ReturnType<typeof depthValues>[] = [];
  for (let level = 0; level < LEVELS; level += 1) levels.push(depthValues(depth, level / LEVELS));
  for (let c = 0; c < patterns; c += 1) {
    for (let i = 0; i < 2 * nodeCount; i += 1) {
      let sum = 0;
      for (let k = 0; k < modes; k += 1)
        sum += inPlaneSlope[k] * inPlane[(c * modes + k) * 2 * nodeCount + i];
      lid[c * 2 * nodeCount + i] = sum / HALF;
    }
    for (let level = 0; level < LEVELS; level += 1) {
      const values = levels[level];
      const at = c * 2 * LEVELS * edges + level * edges;
      for (let e = 0; e < edges; e += 1) {
        let along = 0;
        let up = 0;
        for (let k = 0; k < modes; k += 1)
          along += values.inPlane[k] * wallAlong[(c * modes + k) * 3 * edges + 3 * e + 2];
        for (let m = 0; m < modes - 1; m += 1)
          up += values.across[m] * wallAcross[(c * (modes - 1) + m) * 3 * edges + 3 * e + 2];
        sides[at + e] = along;
        sides[at + LEVELS * edges + e] = up;
      }
    }
  }
  table = { lid, sides };
  tables.set(fields, table);
  return table;
}

/** @param pressures on the faces of the solved copy, in whose coordinates the place is */
function largestWallShear(
  fields: CellFields,
  pressures: ArrayLike<number>,
): { value: number; x: number; y: number; place: PeakShear['place']; height: number } {
  const { mesh } = fields;
  const { nodeCount } = mesh;
  const patterns = pressures.length - 1;
  const { lid, sides } = tableOf(fields, patterns);
  const weights = new Float64Array(patterns);
  for (let c = 0; c < patterns; c += 1) weights[c] = pressures[c] - pressures[patterns];
  const floor = strongest(lid, nodeCount, weights);
  const edges = mesh.boundaryTag.length;
  const wall = strongest(sides, LEVELS * edges, weights);
  const onWall = wall.square > floor.square;
  const node = onWall ? mesh.boundary[3 * (wall.at % edges) + 2] : floor.at;
  return {
    value: Math.sqrt(onWall ? wall.square : floor.square),
    x: mesh.x[node],
    y: mesh.y[node],
    place: onWall ? 'side wall' : 'floor and lid',
    height: onWall ? Math.floor(wall.at / edges) / LEVELS : 1,
  };
}

/** The place of the longest sum of two-component vectors by pattern, and its square. */
function strongest(
  table: Float32Array,
  places: number,
  weights: Float64Array,
): { readonly square: number; readonly at: number } {
  let square = 0;
  let at = 0;
  for (let i = 0; i < places; i += 1) {
    let x = 0;
    let y = 0;
    for (let c = 0; c < weights.length; c += 1) {
      x += weights[c] * table[2 * c * places + i];
      y += weights[c] * table[(2 * c + 1) * places + i];
    }
    const here = x * x + y * y;
    if (here > square) {
      square = here;
      at = i;
    }
  }
  return { square, at };
}

/** Peak for unit pressure on one face (from 0, of the solved copy) and none on the others. */
export function peakOfFields(fields: CellFields, face: number): number {
  const faces = fields.pressure.length / (fields.modes * fields.mesh.vertexCount) + 1;
  const pressures = new Float64Array(faces);
  pressures[face] = 1;
  return largestWallShear(fields, pressures).value;
}
