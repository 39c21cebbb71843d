import type { Mesh } from '../mesh/mesh.ts';
import { edgeGradients, edgeValues } from './basis.ts';
import { LINE_POINTS, LINE_WEIGHTS } from './quadrature.ts';
import type { Place } from './section.ts';
import { WALL } from './section-shape.ts';

/**
 * Wall shear along the wall of a solved section, from the stress function: the shear is −σ·n =
 * −(σ₀·n + ∂ψ/∂s), which balances the driving force exactly and is most accurate at the two Gauss points
 * of each boundary edge; in between it is interpolated by cubics, stretch by stretch between corners.
 */
export interface WallCurve {
  /** Points in boundary order, counter-clockwise: place and distance along the wall. */
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly s: Float64Array;
  /** Shear per unit G, in the unit of length of the mesh. */
  readonly shear: Float64Array;
  /** Consistent flux minus shear, mean over the point's edge: the error estimate. */
  readonly doubt: Float64Array;
  /** Stretches between corners: points start[i] … start[i + 1] − 1, from `from[i]` to `to[i]` along the wall. */
  readonly start: Int32Array;
  readonly from: Float64Array;
  readonly to: Float64Array;
  /** What lies at a stretch's two ends. */
  readonly ends: readonly (readonly [StretchEnd, StretchEnd])[];
  readonly endsAt: readonly (readonly [Place, Place])[];
}

/** A convex corner, where the shear is zero; a mirror line; or a bend that interpolation must not cross. */
export type StretchEnd = 'still' | 'mirror' | 'bend';

/** Turns beyond this (radians) end a stretch; beyond the second the corner is taken as one of zero shear. */
const BEND = Math.PI / 6;
export const STILL = Math.PI / 4;

const GAUSS = [0.5 - Math.sqrt(3) / 6, 0.5 + Math.sqrt(3) / 6] as const;
const value = new Float64Array(3);
const gradient = new Float64Array(3);

/** Wall edges in boundary order, starting where a mirror line ends or, on a closed wall, at edge 0. */
export function wallEdges(mesh: Mesh): Int32Array {
  const { boundaryTag } = mesh;
  const count = boundaryTag.length;
  let first = 0;
  for (let i = 0; i < count; i += 1) {
    if (boundaryTag[i] === WALL && boundaryTag[(i + count - 1) % count] !== WALL) first = i;
  }
  const edges: number[] = [];
  for (let k = 0; k < count; k += 1) {
    const i = (first + k) % count;
    if (boundaryTag[i] === WALL) edges.push(i);
  }
  return Int32Array.from(edges);
}

/**
 * Left turns (radians) of the wall: turns[k] from edge k into the next one, turns[edges.length] into edge
 * 0. Where a mirror line x = 0 cuts the wall, from the wall into its image or back.
 */
export function wallTurns(mesh: Mesh, edges: Int32Array): Float64Array {
  const count = edges.length;
  const turns = new Float64Array(count + 1);
  const open = mirrored(mesh, edges);
  for (let k = 0; k < count; k += 1) {
    const [ax, ay] = tangent(mesh, edges[k], 1);
    const [bx, by] = open && k === count - 1 ? [ax, -ay] : tangent(mesh, edges[(k + 1) % count], 0);
    turns[k] = Math.atan2(ax * by - ay * bx, ax * bx + ay * by);
  }
  const [bx, by] = tangent(mesh, edges[0], 0);
  turns[count] = open ? Math.atan2(2 * bx * by, bx * bx - by * by) : turns[count - 1];
  return turns;
}

/** Whether the wall is an open line that ends on a mirror line. */
export function mirrored(mesh: Mesh, edges: Int32Array): boolean {
  return mesh.boundary[3 * edges[edges.length - 1] + 1] !== mesh.boundary[3 * edges[0]];
}

function tangent(mesh: Mesh, edge: number, t: number): Place {
  edgeGradients(t, gradient);
  let [dx, dy] = [0, 0];
  for (let i = 0; i < 3; i += 1) {
    const node = mesh.boundary[3 * edge + i];
    dx += gradient[i] * mesh.x[node];
    dy += gradient[i] * mesh.y[node];
  }
  return [dx, dy];
}

/**
 * @param edges,turns from `wallEdges` and `wallTurns`
 * @param psi stress function at the nodes
 * @param flux consistent boundary flux at the wall's nodes
 */
export function wallCurve(
  mesh: Mesh,
  edges: Int32Array,
  turns: Float64Array,
  psi: Float64Array,
  flux: Float64Array,
): WallCurve {
  const count = 2 * edges.length;
  const x = new Float64Array(count);
  const y = new Float64Array(count);
  const s = new Float64Array(count);
  const shear = new Float64Array(count);
  const doubt = new Float64Array(count);
  const start = [0];
  const from = [0];
  const to: number[] = [];
  const ends: [StretchEnd, StretchEnd][] = [];
  const endsAt: [Place, Place][] = [];
  const nodeAt = (edge: number, end: 0 | 1): Place => {
    const node = mesh.boundary[3 * edge + end];
    return [mesh.x[node], mesh.y[node]];
  };
  let openingAt = nodeAt(edges[0], 0);
  const open = mirrored(mesh, edges);
  let opening = endOf(turns[edges.length], open);
  let along = 0;
  for (let k = 0; k < edges.length; k += 1) {
    const edge = edges[k];
    let [length, flow, force] = [0, 0, 0];
    for (let q = 0; q < 3; q += 1) {
      const speed = at(mesh, edge, LINE_POINTS[q], psi, flux);
      length += LINE_WEIGHTS[q] * speed;
      flow += LINE_WEIGHTS[q] * speed * here.flux;
      force += LINE_WEIGHTS[q] * speed * here.shear;
    }
    for (let g = 0; g < 2; g += 1) {
      at(mesh, edge, GAUSS[g], psi, flux);
      const p = 2 * k + g;
      x[p] = here.x;
      y[p] = here.y;
      s[p] = along + GAUSS[g] * length;
      shear[p] = here.shear;
      doubt[p] = (flow - force) / length;
    }
    along += length;
    const last = k === edges.length - 1;
    if (last || Math.abs(turns[k]) > BEND) {
      const end = endOf(turns[k], open && last);
      start.push(2 * (k + 1));
      to.push(along);
      ends.push([opening, end]);
      endsAt.push([openingAt, nodeAt(edge, 1)]);
      opening = end;
      openingAt = nodeAt(edge, 1);
      if (!last) from.push(along);
    }
  }
  return {
    x,
    y,
    s,
    shear,
    doubt,
    start: Int32Array.from(start),
    from: Float64Array.from(from),
    to: Float64Array.from(to),
    ends,
    endsAt,
  };
}

function endOf(turn: number, mirror: boolean): StretchEnd {
  if (turn > STILL) return 'still';
  return mirror && Math.abs(turn) < BEND ? 'mirror' : 'bend';
}

const here = { x: 0, y: 0, shear: 0, flux: 0 };

/** Fills `here` for the share t of a boundary edge; returns the speed ds/dt. */
function at(mesh: Mesh, edge: number, t: number, psi: Float64Array, flux: Float64Array): number {
  edgeValues(t, value);
  edgeGradients(t, gradient);
  let [px, py, dx, dy, dpsi, lambda] = [0, 0, 0, 0, 0, 0];
  for (let i = 0; i < 3; i += 1) {
    const node = mesh.boundary[3 * edge + i];
    px += value[i] * mesh.x[node];
    py += value[i] * mesh.y[node];
    lambda += value[i] * flux[node];
    dx += gradient[i] * mesh.x[node];
    dy += gradient[i] * mesh.y[node];
    dpsi += gradient[i] * psi[node];
  }
  const speed = Math.hypot(dx, dy);
  here.x = px;
  here.y = py;
  here.flux = lambda;
  // Outward normal (dy, −dx)/speed; σ₀ = −(x, y)/2.
  here.shear = ((px * dy - py * dx) / 2 - dpsi) / speed;
  return speed;
}
