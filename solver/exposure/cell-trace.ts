import { HALF, type VelocityField } from '../cell/flow-field.ts';
import type { Mesh } from '../mesh/mesh.ts';
import { CellReader } from './cell-reader.ts';
import type { History } from './laws.ts';

/** A path through a cell of depth 1, viscosity 1 and a flow of 1 through it. */
export interface Trace {
  /** Face (from 0) by which it leaves; −1 where it came to rest inside. */
  readonly to: number;
  readonly history: History;
  readonly time: number;
  readonly peak: number;
}

/** Steps of a path, in sizes of the triangle that it is in. */
const STEP = 1;
const SHORTEST = 0.01;
const LONGEST = 1;
const MOST_STEPS = 3000;
/** What a start is moved in from its face. */
const INSIDE = 1e-4;

/**
 * Paths of a ball's centre that enters through a face one radius (in depths) off its walls: along floor and
 * lid at five places across, along both side walls at two heights. The field is followed as fluid follows
 * it; only floor and lid keep the ball at its distance.
 */
export function huggingTraces(field: VelocityField, face: number, radius: number): Trace[] {
  const length = faceLine(field.mesh, face + 1).length;
  if (length < 2 * radius || radius > HALF) return [];
  const low = 1 - radius / HALF;
  const starts: Start[] = [];
  for (const along of [radius, length / 4, length / 2, (3 * length) / 4, length - radius]) {
    starts.push([along, low]);
  }
  for (const along of [radius, length - radius]) starts.push([along, 0], [along, low / 2]);
  return tracesFrom(field, face, starts, radius).filter((trace) => trace !== null);
}

/** Distance along a face from its first end, in depths, and height from half depth (−1 floor, 1 lid). */
export type Start = readonly [along: number, s: number];

/** Paths from places of a face (from 0), whose centres stay a radius off floor and lid; null where nothing moves. */
export function tracesFrom(
  field: VelocityField,
  face: number,
  starts: readonly Start[],
  radius: number,
): (Trace | null)[] {
  const walk = walker(field, radius);
  const line = faceLine(field.mesh, face + 1);
  return starts.map(([along, s]) => walk(...line.at(along), s));
}

/** A face as a line on the plan, moved in a hair. */
function faceLine(mesh: Mesh, tag: number): { readonly length: number; at(along: number): [number, number] } {
  const from: number[] = [];
  const chords: [ax: number, ay: number, bx: number, by: number][] = [];
  let length = 0;
  const edges = Array.from(mesh.boundaryTag.keys()).filter((e) => mesh.boundaryTag[e] === tag);
  // Boundary edges follow one another; a face that wraps round the start of the list begins after its gap.
  const gap = edges.findIndex((e, i) => {
    const before = edges[(i + edges.length - 1) % edges.length];
    return mesh.boundary[3 * before + 1] !== mesh.boundary[3 * e];
  });
  const ordered = gap > 0 ? [...edges.slice(gap), ...edges.slice(0, gap)] : edges;
  for (const e of ordered) {
    const [a, b, middle] = mesh.boundary.subarray(3 * e, 3 * e + 3);
    for (const [p, q] of [
      [a, middle],
      [middle, b],
    ]) {
      from.push(length);
      chords.push([mesh.x[p], mesh.y[p], mesh.x[q], mesh.y[q]]);
      length += Math.hypot(mesh.x[q] - mesh.x[p], mesh.y[q] - mesh.y[p]);
    }
  }
  return {
    length,
    at(along) {
      let i = chords.length - 1;
      while (i > 0 && from[i] > along) i -= 1;
      const [ax, ay, bx, by] = chords[i];
      const size = Math.hypot(bx - ax, by - ay);
      const share = (along - from[i]) / size;
      const nx = (-(by - ay) / size) * INSIDE;
      const ny = ((bx - ax) / size) * INSIDE;
      return [ax + share * (bx - ax) + nx, ay + share * (by - ay) + ny];
    },
  };
}

/**
 * Follows the field by fourth-order Runge-Kutta steps in path length; the time of a step by Simpson's rule on
 * the slowness.
 */
function walker(field: VelocityField, radius: number): (x: number, y: number, s: number) => Trace | null {
  const { mesh } = field;
  const reader = new CellReader(field);
  const most = Math.max(0, 1 - radius / HALF);
  const slope = [new Float64Array(3), new Float64Array(3), new Float64Array(3), new Float64Array(3)];
  /** Direction of the field at a place, into slope[k]; its speed, 0 where there is none. */
  const direction = (x: number, y: number, s: number, k: number): number => {
    if (!reader.read(x, y, Math.min(most, Math.max(-most, s)))) return 0;
    const { speed } = reader;
    slope[k][0] = reader.u / speed;
    slope[k][1] = reader.v / speed;
    slope[k][2] = reader.w / speed / HALF;
    return speed;
  };
  const next = new Float64Array(3);
  /** From p to `next`; the speed in the middle, 0 where the path leaves the cell. */
  const step = (p: Float64Array, length: number): number => {
    const [a, b, c, d] = slope;
    const half = length / 2;
    if (!direction(p[0] + half * a[0], p[1] + half * a[1], p[2] + half * a[2], 1)) return 0;
    const middle = direction(p[0] + half * b[0], p[1] + half * b[1], p[2] + half * b[2], 2);
    if (!middle) return 0;
    if (!direction(p[0] + length * c[0], p[1] + length * c[1], p[2] + length * c[2], 3)) return 0;
    for (let i = 0; i < 3; i += 1) next[i] = p[i] + (length / 6) * (a[i] + 2 * b[i] + 2 * c[i] + d[i]);
    next[2] = Math.min(most, Math.max(-most, next[2]));
    return middle;
  };
  return (x, y, s) => {
    const p = Float64Array.of(x, y, Math.min(most, s));
    let speed = direction(p[0], p[1], p[2], 0);
    if (!speed) return null;
    const stress: number[] = [];
    const time: number[] = [];
    let before = reader.strain();
    let whole = 0;
    let peak = before;
    let reach = 0;
    // What the step left off at before may be larger than what is left to the face.
    const start = slope[0].slice();
    for (let count = 0; count < MOST_STEPS; count += 1) {
      let length = Math.min(LONGEST, Math.max(SHORTEST, STEP * reader.size));
      reach = length;
      let middle = 0;
      let now = 0;
      start.set(slope[0]);
      for (let halving = 0; halving < 6 && !now; halving += 1) {
        middle = step(p, length);
        if (middle) now = direction(next[0], next[1], next[2], 0);
        if (now) break;
        slope[0].set(start);
        length /= 2;
      }
      if (!now) break;
      const dt = (length / 6) * (1 / speed + 4 / middle + 1 / now);
      const strain = reader.strain();
      whole += dt;
      time.push(dt);
      stress.push((before + strain) / 2);
      peak = Math.max(peak, strain);
      before = strain;
      speed = now;
      p.set(next);
    }
    return {
      to: faceNear(mesh, p[0], p[1], 2 * reach),
      history: { stress: Float64Array.from(stress), time: Float64Array.from(time) },
      time: whole,
      peak,
    };
  };
}

/** Face (from 0) within reach of a place; −1 where there is none. */
function faceNear(mesh: Mesh, x: number, y: number, reach: number): number {
  let nearest = reach;
  let face = -1;
  for (let e = 0; e < mesh.boundaryTag.length; e += 1) {
    if (mesh.boundaryTag[e] === 0) continue;
    const [a, b] = mesh.boundary.subarray(3 * e, 3 * e + 2);
    const dx = mesh.x[b] - mesh.x[a];
    const dy = mesh.y[b] - mesh.y[a];
    const share = ((x - mesh.x[a]) * dx + (y - mesh.y[a]) * dy) / (dx * dx + dy * dy);
    const at = Math.min(1, Math.max(0, share));
    const distance = Math.hypot(x - mesh.x[a] - at * dx, y - mesh.y[a] - at * dy);
    if (distance < nearest) {
      nearest = distance;
      face = mesh.boundaryTag[e] - 1;
    }
  }
  return face;
}
