import type { Mesh } from '../mesh/mesh.ts';
import { Problem } from '../problem/problem.ts';
import type { SymmetricMatrix } from '../sparse/matrix.ts';
import { patternOfElements } from '../sparse/pattern.ts';
import { arrays } from './arrays.ts';
import { curvedTriangle, straightTriangle, type TriangleIntegrals, triangleWorkspace } from './triangle.ts';

/** The plane operators of a mesh: quadratic velocity that vanishes on walls, linear pressure. */
export interface Plane {
  readonly mesh: Mesh;
  /** Number of velocity unknowns per component and mode. */
  readonly count: number;
  /** nodeCount: index of a node's unknown, -1 on walls. */
  readonly unknown: Int32Array;
  /** count x count; its values are scratch for stiffness + lambda mass. */
  readonly velocity: SymmetricMatrix;
  /** Values on that pattern: grad N . grad N, N N. */
  readonly stiffness: Float64Array;
  readonly mass: Float64Array;
  /** vertexCount x vertexCount; its values are scratch. */
  readonly pressure: SymmetricMatrix;
  readonly pressureStiffness: Float64Array;
  readonly pressureMass: Float64Array;
  /** Rows by corner: L_i dN_j/dx, L_i dN_j/dy, L_i N_j for the unknowns j in `column`. */
  readonly rowStart: Int32Array;
  readonly column: Int32Array;
  readonly gradX: Float64Array;
  readonly gradY: Float64Array;
  readonly mixed: Float64Array;
}

/** Where a triangle's mid-edge node must lie off its chord to count as curved, in chord lengths. */
const BEND = 1e-9;

/** Fills `work` for triangle t of the mesh. */
export function integrate(
  mesh: Mesh,
  t: number,
  work: TriangleIntegrals,
  x: Float64Array,
  y: Float64Array,
): void {
  const { triangles } = mesh;
  for (let i = 0; i < 6; i += 1) {
    x[i] = mesh.x[triangles[6 * t + i]];
    y[i] = mesh.y[triangles[6 * t + i]];
  }
  let bend = 0;
  let span = 0;
  for (let a = 0; a < 3; a += 1) {
    const b = a === 2 ? 0 : a + 1;
    bend = Math.max(bend, Math.abs(x[3 + a] - (x[a] + x[b]) / 2) + Math.abs(y[3 + a] - (y[a] + y[b]) / 2));
    span = Math.max(span, Math.abs(x[a] - x[b]) + Math.abs(y[a] - y[b]));
  }
  const good =
    bend > BEND * span
      ? curvedTriangle(x, y, work)
      : straightTriangle(x[0], y[0], x[1], y[1], x[2], y[2], work);
  if (!(good > 0))
    throw new Problem(
      'shape',
      `The plan could not be meshed: a triangle at (${x[0].toPrecision(4)}, ${y[0].toPrecision(4)}) is turned over.`,
      '',
      'Look for slivers, or for walls that nearly touch, at this place.',
    );
}

/** Assembles all plane operators of the mesh. `isWall` tells which boundary tags hold the velocity at zero. */
export function assemblePlane(mesh: Mesh, isWall: (tag: number) => boolean = (tag) => tag === 0): Plane {
  const { nodeCount, vertexCount, triangles, boundary, boundaryTag } = mesh;
  const triangleCount = triangles.length / 6;
  const unknown = new Int32Array(nodeCount);
  for (let e = 0; e < boundaryTag.length; e += 1)
    if (isWall(boundaryTag[e])) for (let i = 0; i < 3; i += 1) unknown[boundary[3 * e + i]] = -1;
  let count = 0;
  for (let i = 0; i < nodeCount; i += 1) if (unknown[i] === 0) unknown[i] = count++;

  const sixes = new Int32Array(triangleCount + 1);
  const threes = new Int32Array(triangleCount + 1);
  const unknowns = new Int32Array(6 * triangleCount);
  const corners = new Int32Array(3 * triangleCount);
  for (let t = 0; t < triangleCount; t += 1) {
    sixes[t + 1] = 6 * (t + 1);
    threes[t + 1] = 3 * (t + 1);
    for (let i = 0; i < 6; i += 1) unknowns[6 * t + i] = unknown[triangles[6 * t + i]];
    for (let i = 0; i < 3; i += 1) corners[3 * t + i] = triangles[6 * t + i];
  }
  const velocity = patternOfElements(count, sixes, unknowns);
  const pressure = patternOfElements(vertexCount, threes, corners);
  const rows = couplingPattern(vertexCount, count, corners, unknowns);

  const stiffness = new Float64Array(velocity.matrix.value.length);
  const mass = new Float64Array(stiffness.length);
  const pressureStiffness = new Float64Array(pressure.matrix.value.length);
  const pressureMass = new Float64Array(pressureStiffness.length);
  const gradX = new Float64Array(rows.column.length);
  const gradY = new Float64Array(rows.column.length);
  const mixed = new Float64Array(rows.column.length);
  const work = triangleWorkspace();
  const x = new Float64Array(6);
  const y = new Float64Array(6);
  for (let t = 0; t < triangleCount; t += 1) {
    integrate(mesh, t, work, x, y);
    let at = velocity.scatterStart[t];
    for (let i = 0; i < 6; i += 1)
      for (let j = 0; j <= i; j += 1, at += 1) {
        const to = velocity.scatter[at];
        if (to < 0) continue;
        stiffness[to] += work.stiffness[6 * i + j];
        mass[to] += work.mass[6 * i + j];
      }
    at = pressure.scatterStart[t];
    for (let i = 0; i < 3; i += 1)
      for (let j = 0; j <= i; j += 1, at += 1) {
        const to = pressure.scatter[at];
        pressureStiffness[to] += work.linearStiffness[3 * i + j];
        pressureMass[to] += work.linearMass[3 * i + j];
      }
    for (let i = 0; i < 18; i += 1) {
      const to = rows.scatter[18 * t + i];
      if (to < 0) continue;
      gradX[to] += work.gradX[i];
      gradY[to] += work.gradY[i];
      mixed[to] += work.mixed[i];
    }
  }
  return {
    mesh,
    count,
    unknown,
    velocity: velocity.matrix,
    stiffness,
    mass,
    pressure: pressure.matrix,
    pressureStiffness,
    pressureMass,
    rowStart: rows.rowStart,
    column: rows.column,
    gradX,
    gradY,
    mixed,
  };
}

/** Rows by corner of the pressure-velocity coupling, and where each triangle's 3 x 6 entries go. */
function couplingPattern(
  vertexCount: number,
  count: number,
  corners: Int32Array,
  unknowns: Int32Array,
): { rowStart: Int32Array; column: Int32Array; scatter: Int32Array } {
  const triangleCount = corners.length / 3;
  const around = new Int32Array(vertexCount + 1);
  for (const corner of corners) around[corner + 1] += 1;
  for (let v = 0; v < vertexCount; v += 1) around[v + 1] += around[v];
  const fill = around.slice();
  const use = new Int32Array(corners.length);
  for (let c = 0; c < corners.length; c += 1) use[fill[corners[c]]++] = c;

  const rowStart = new Int32Array(vertexCount + 1);
  const column = new Int32Array(6 * corners.length);
  const scatter = new Int32Array(18 * triangleCount).fill(-1);
  const where = new Int32Array(count).fill(-1);
  let end = 0;
  for (let v = 0; v < vertexCount; v += 1) {
    const start = end;
    for (let u = around[v]; u < around[v + 1]; u += 1) {
      const t = Math.floor(use[u] / 3);
      const local = use[u] % 3;
      for (let j = 0; j < 6; j += 1) {
        const unknown = unknowns[6 * t + j];
        if (unknown < 0) continue;
        if (where[unknown] < start) {
          where[unknown] = end;
          column[end++] = unknown;
        }
        scatter[18 * t + 6 * local + j] = where[unknown];
      }
    }
    rowStart[v + 1] = end;
  }
  return { rowStart, column: column.slice(0, end), scatter };
}

/** Integrals over each face of N_j n, n the unit normal into the fluid: by face, all x then all y. */
export function faceLoads(plane: Plane, faces: number): Float64Array[] {
  const { mesh, unknown, count } = plane;
  const loads = arrays(faces, 2 * count);
  for (let e = 0; e < mesh.boundaryTag.length; e += 1) {
    const tag = mesh.boundaryTag[e];
    if (tag < 1 || tag > faces) continue;
    const load = loads[tag - 1];
    for (let i = 0; i < 3; i += 1) {
      const at = unknown[mesh.boundary[3 * e + i]];
      if (at < 0) continue;
      for (let j = 0; j < 3; j += 1) {
        const node = mesh.boundary[3 * e + j];
        // n ds = (-dy, dx) into the fluid, which lies to the left
        load[at] -= EDGE[3 * i + j] * mesh.y[node];
        load[count + at] += EDGE[3 * i + j] * mesh.x[node];
      }
    }
  }
  return loads;
}

/** Integrals of N_i N_j' along a quadratic edge with nodes start, end, middle. */
const EDGE = [-1 / 2, -1 / 6, 2 / 3, 1 / 6, 1 / 2, -2 / 3, -2 / 3, 2 / 3, 0] as const;
