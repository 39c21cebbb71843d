import { toCaller } from './canonical.ts';
import type { CellSolution } from './cell.ts';
import { depthValues } from './depth.ts';
import { type FlowField, flowField, HALF } from './flow-field.ts';
import { emptySample, type Sample, type Sampler, sampler } from './sample.ts';

/** A path with the flow, step by step. */
export interface Streamline {
  /** Per step: x, y in the coordinates of the shape, s from half depth. */
  readonly points: Float64Array;
  /** Per step: time since the start for viscosity 1; with pressures in Pa multiply by the viscosity for s. */
  readonly time: Float64Array;
  /** Per step: scalar of the strain rate for viscosity 1, which is the scalar stress. */
  readonly stress: Float64Array;
  /** Index of the face where it starts and ends (from 0); -1 where it stopped inside. */
  readonly from: number;
  readonly to: number;
}

/** A path is given up beyond this many steps. */
const MOST_STEPS = 4000;
/** Of a short stretch of face. */
const INSIDE = 1e-4;

/**
 * Streamlines at half depth from the faces where flow comes in, spaced so that each stands for an equal
 * share of the flow there at half depth. Half depth is a plane of symmetry, so they stay in it.
 */
export function streamlines(
  solution: CellSolution,
  pressures: ArrayLike<number>,
  count: number,
): Streamline[] {
  const field = flowField(solution, pressures);
  if (!field) return [];
  const starts = inflow(field);
  let total = 0;
  for (const start of starts) total += start.flux;
  const out: Streamline[] = [];
  let passed = 0;
  let next = 0.5;
  const spots: [number, number, number][] = [];
  for (const start of starts) {
    const end = passed + (start.flux / total) * count;
    while (next < end) {
      const share = (next - passed) / (end - passed);
      spots.push([
        start.x0 + share * (start.x1 - start.x0),
        start.y0 + share * (start.y1 - start.y0),
        start.face,
      ]);
      next += 1;
    }
    passed = end;
  }
  for (const [x, y, face] of spots) {
    const [px, py] = toCaller(field.placement, x, y);
    const line = streamline(solution, field, px, py, 0);
    if (line) out.push({ ...line, from: field.placement.face[face] });
  }
  return out;
}

const speedOf = ({ velocity }: Sample): number => Math.hypot(velocity[0], velocity[1], velocity[2]);

interface Start {
  readonly x0: number;
  readonly y0: number;
  readonly x1: number;
  readonly y1: number;
  readonly flux: number;
  readonly face: number;
}

/** Short stretches of the faces where flow comes in at half depth, in the solved copy's coordinates. */
function inflow(field: FlowField): Start[] {
  const { mesh, inPlane, depth } = field;
  const { inPlane: phi } = depthValues(depth, 0);
  const out: Start[] = [];
  const pieces = 8;
  for (let e = 0; e < mesh.boundaryTag.length; e += 1) {
    if (mesh.boundaryTag[e] === 0) continue;
    const nodes = mesh.boundary.subarray(3 * e, 3 * e + 3);
    const at = (s: number): [number, number, number, number] => {
      const n = [(2 * s - 1) * (s - 1), s * (2 * s - 1), 4 * s * (1 - s)];
      const sum = [0, 0, 0, 0] as [number, number, number, number];
      for (let i = 0; i < 3; i += 1) {
        sum[0] += n[i] * mesh.x[nodes[i]];
        sum[1] += n[i] * mesh.y[nodes[i]];
        for (let k = 0; k < inPlane.length; k += 1) {
          sum[2] += n[i] * phi[k] * inPlane[k][nodes[i]];
          sum[3] += n[i] * phi[k] * inPlane[k][mesh.nodeCount + nodes[i]];
        }
      }
      return sum;
    };
    for (let i = 0; i < pieces; i += 1) {
      const [x0, y0] = at(i / pieces);
      const [x1, y1] = at((i + 1) / pieces);
      const [, , u, v] = at((i + 0.5) / pieces);
      const flux = v * (x1 - x0) - u * (y1 - y0);
      if (flux <= 0) continue;
      // A hair inside, so that the start is not lost to rounding.
      const nx = -(y1 - y0) * INSIDE;
      const ny = (x1 - x0) * INSIDE;
      out.push({ x0: x0 + nx, y0: y0 + ny, x1: x1 + nx, y1: y1 + ny, flux, face: mesh.boundaryTag[e] - 1 });
    }
  }
  return out;
}

/**
 * One path through a point (caller's coordinates, s from half depth), with the flow, to the face where it
 * leaves: fourth-order Runge-Kutta in path length. Null where the point is not in the cell.
 */
export function streamline(
  solution: CellSolution,
  field: FlowField,
  x: number,
  y: number,
  s: number,
): Streamline | null {
  const probe: Sampler = sampler(field);
  const sample: Sample = emptySample();
  const { scale } = solution.placements[0];
  // In depths: a thirtieth of the least of depth and mean gap of the plan.
  const step = 0.03 * Math.min(1, meanGap(field));
  if (!probe.at(x, y, s, sample)) return null;
  const points: number[] = [];
  const time: number[] = [];
  const stress: number[] = [];
  let t = 0;
  let position = [x, y, s];
  let ended = -1;
  const k = [0, 1, 2, 3].map(() => [0, 0, 0]);
  for (let count = 0; count < MOST_STEPS; count += 1) {
    if (!probe.at(position[0], position[1], position[2], sample)) break;
    const speed = speedOf(sample);
    points.push(position[0], position[1], position[2]);
    time.push(t);
    stress.push(sample.strainRate);
    if (!(speed > 0)) break;
    let length = step;
    let next: number[] | null = null;
    let mean = speed;
    for (let halving = 0; halving < 5 && !next; halving += 1) {
      next = advance(probe, sample, position, length, scale, k);
      if (next) {
        probe.at(next[0], next[1], next[2], sample);
        mean = (speed + speedOf(sample)) / 2;
      } else length /= 2;
    }
    if (!next) {
      ended = faceNear(field, position[0], position[1], scale, 3 * step);
      break;
    }
    t += length / mean;
    position = next;
  }
  return {
    points: Float64Array.from(points),
    time: Float64Array.from(time),
    stress: Float64Array.from(stress),
    from: -1,
    to: ended < 0 ? -1 : field.placement.face[ended],
  };
}

/** One step of the given path length in depths; null where it leaves the cell. */
function advance(
  probe: Sampler,
  sample: Sample,
  from: readonly number[],
  length: number,
  scale: number,
  k: number[][],
): number[] | null {
  for (let stage = 0; stage < 4; stage += 1) {
    const share = stage === 0 ? 0 : stage === 3 ? 1 : 0.5;
    const before = k[Math.max(0, stage - 1)];
    const at = from.map((value, i) => value + share * length * (stage ? before[i] : 0));
    if (Math.abs(at[2]) > 1 || !probe.at(at[0], at[1], at[2], sample)) return null;
    const speed = speedOf(sample);
    if (!(speed > 0)) return null;
    k[stage][0] = (scale * sample.velocity[0]) / speed;
    k[stage][1] = (scale * sample.velocity[1]) / speed;
    k[stage][2] = sample.velocity[2] / HALF / speed;
  }
  const to = from.map((value, i) => value + (length / 6) * (k[0][i] + 2 * k[1][i] + 2 * k[2][i] + k[3][i]));
  return Math.abs(to[2]) <= 1 && probe.at(to[0], to[1], to[2], sample) ? to : null;
}

/** Twice the area over the length of the boundary, in depths. */
function meanGap(field: FlowField): number {
  const { mesh } = field;
  let area = 0;
  let length = 0;
  for (let e = 0; e < mesh.boundaryTag.length; e += 1) {
    const a = mesh.boundary[3 * e];
    const b = mesh.boundary[3 * e + 1];
    area += (mesh.x[a] * mesh.y[b] - mesh.x[b] * mesh.y[a]) / 2;
    length += Math.hypot(mesh.x[b] - mesh.x[a], mesh.y[b] - mesh.y[a]);
  }
  return (2 * area) / length;
}

/** Face (of the solved copy, from 0) whose boundary passes within `reach` depths of the point; -1 where none does. */
function faceNear(field: FlowField, x: number, y: number, scale: number, reach: number): number {
  const { mesh, placement } = field;
  let nearest = reach * scale;
  let face = -1;
  for (let e = 0; e < mesh.boundaryTag.length; e += 1) {
    if (mesh.boundaryTag[e] === 0) continue;
    const [ax, ay] = toCaller(placement, mesh.x[mesh.boundary[3 * e]], mesh.y[mesh.boundary[3 * e]]);
    const [bx, by] = toCaller(placement, mesh.x[mesh.boundary[3 * e + 1]], mesh.y[mesh.boundary[3 * e + 1]]);
    const square = (bx - ax) ** 2 + (by - ay) ** 2;
    const share = Math.min(1, Math.max(0, ((x - ax) * (bx - ax) + (y - ay) * (by - ay)) / square));
    const distance = Math.hypot(x - ax - share * (bx - ax), y - ay - share * (by - ay));
    if (distance < nearest) {
      nearest = distance;
      face = mesh.boundaryTag[e] - 1;
    }
  }
  return face;
}
