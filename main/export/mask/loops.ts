import type { Paths64 } from 'clipper2-ts';
import { type Curve, curve, part } from '../../../solver/chip/geometry/curve.ts';
import { chordsOf } from '../../../solver/chip/plan.ts';
import type { Edge, Shape } from '../../../solver/mesh/mesh.ts';

/**
 * Closed loops of many points in packed arrays, nm: as an object each, the points of a mask would cost more than
 * all that is done with them.
 */
export class Loops {
  x: Float64Array;
  y: Float64Array;
  /** Of the edge that begins at the point; 0 is straight. */
  bulge: Float64Array;
  /** Of all loops. */
  points = 0;
  /** Where each loop's points end; those of a loop that is not closed yet come after the last end. */
  readonly ends: number[] = [];
  #bent = false;

  /** @param room points that are expected: the system provides memory for those that come, and copying is saved */
  constructor(room = 64) {
    this.x = new Float64Array(room);
    this.y = new Float64Array(room);
    this.bulge = new Float64Array(room);
  }

  get length(): number {
    return this.ends.length;
  }

  /** Where the points of a loop begin. */
  from(loop: number): number {
    return loop === 0 ? 0 : this.ends[loop - 1]!;
  }

  add(x: number, y: number, bulge: number): void {
    const at = this.points;
    if (at === this.x.length) this.#grow();
    this.x[at] = x;
    this.y[at] = y;
    this.points = at + 1;
    if (bulge !== 0) this.bend(bulge);
    else if (this.#bent) this.bulge[at] = 0;
  }

  /** Bends the edge that begins at the last point. */
  bend(bulge: number): void {
    this.bulge[this.points - 1] = bulge;
    this.#bent = true;
  }

  close(): void {
    this.ends.push(this.points);
  }

  /** Takes back the last point where it is the first of its loop again. */
  dropReturn(): void {
    const [first, last] = [this.from(this.ends.length), this.points - 1];
    if (last > first && this.x[first] === this.x[last] && this.y[first] === this.y[last]) this.points = last;
  }

  /** The loops as lists of edges. */
  edges(): Edge[][] {
    const out: Edge[][] = [];
    let at = 0;
    for (const end of this.ends) {
      const loop: Edge[] = [];
      for (; at < end; at++) loop.push({ x: this.x[at]!, y: this.y[at]!, bulge: this.bulge[at]!, tag: 0 });
      out.push(loop);
    }
    return out;
  }

  #grow(): void {
    const room = 2 * this.x.length;
    this.x = withRoom(this.x, room);
    this.y = withRoom(this.y, room);
    // memory that is never written to is never provided
    this.bulge = this.#bent ? withRoom(this.bulge, room) : new Float64Array(room);
  }
}

function withRoom(values: Float64Array, room: number): Float64Array<ArrayBuffer> {
  const more = new Float64Array(room);
  more.set(values);
  return more;
}

/** The loops of shapes, with arcs cut into equal ones of at most `most` radians. */
export function cutLoops(shapes: readonly Shape[], most: number): Loops {
  let edges = 0;
  for (const shape of shapes) for (const loop of shape) edges += loop.length;
  // of a few edges some are cut
  const out = new Loops(3 * edges + 64);
  const limit = Math.tan(most / 4) * (1 + 1e-9);
  for (const shape of shapes) {
    for (const loop of shape) {
      for (let k = 0; k < loop.length; k++) {
        const e = loop[k]!;
        if (Math.abs(e.bulge) <= limit) out.add(e.x, e.y, e.bulge);
        else addCut(out, e, loop[k + 1 === loop.length ? 0 : k + 1]!, most);
      }
      out.close();
    }
  }
  return out;
}

function addCut(out: Loops, e: Edge, next: Edge, most: number): void {
  const c = curve(e.x, e.y, next.x, next.y, e.bulge);
  const count = Math.ceil((4 * Math.atan(Math.abs(e.bulge))) / most - 1e-9);
  for (let i = 0; i < count; i++) {
    const piece = part(c, (c.length * i) / count, (c.length * (i + 1)) / count);
    out.add(piece.x0, piece.y0, piece.bulge);
  }
}

/**
 * Polygons in whole nanometres for the loops of shapes, arcs cut to chords no further than `error` from them; less
 * those that rounding leaves nothing of.
 */
export function polygonsOf(shapes: readonly Shape[], error: number): Loops {
  const out = new Loops(chordCount(shapes, error));
  for (const shape of shapes) {
    for (const loop of shape) {
      for (let k = 0; k < loop.length; k++) {
        const e = loop[k]!;
        const next = loop[k + 1 === loop.length ? 0 : k + 1]!;
        addChords(out, e.x, e.y, next.x, next.y, e.bulge, error);
      }
      closePolygon(out);
    }
  }
  return out;
}

/** How many points the polygons have at most. */
function chordCount(shapes: readonly Shape[], error: number): number {
  let count = 0;
  for (const shape of shapes) {
    for (const loop of shape) {
      for (let k = 0; k < loop.length; k++) {
        const e = loop[k]!;
        count += 1;
        if (e.bulge === 0) continue;
        const next = loop[k + 1 === loop.length ? 0 : k + 1]!;
        count += chordsOf(curve(e.x, e.y, next.x, next.y, e.bulge), error) - 1;
      }
    }
  }
  return count;
}

/** The same for loops. */
export function polygonsOfLoops(loops: Loops, error: number): Loops {
  const out = new Loops();
  const { x, y, bulge } = loops;
  for (let i = 0; i < loops.length; i++) {
    const [from, end] = [loops.from(i), loops.ends[i]!];
    for (let k = from; k < end; k++) {
      const next = k + 1 === end ? from : k + 1;
      addChords(out, x[k]!, y[k]!, x[next]!, y[next]!, bulge[k]!, error);
    }
    closePolygon(out);
  }
  return out;
}

/** The first point of an edge, and those where its chords meet. */
function addChords(
  out: Loops,
  x0: number,
  y0: number,
  x1: number,
  y1: number,
  bulge: number,
  error: number,
): void {
  addWhole(out, x0, y0);
  if (bulge === 0) return;
  const c = curve(x0, y0, x1, y1, bulge);
  const count = chordsOf(c, error);
  for (let i = 1; i < count; i++) addOnArc(out, c, (c.length * i) / count);
}

/** As `pointAt`, without a pair for each of many points. */
function addOnArc(out: Loops, c: Curve, d: number): void {
  const a = c.curvature * d;
  const sin = Math.sin(a);
  const half = Math.sin(a / 2);
  const cosm1 = -2 * half * half;
  const r = 1 / c.curvature;
  addWhole(out, c.x0 + r * (sin * c.ux + cosm1 * c.uy), c.y0 + r * (sin * c.uy - cosm1 * c.ux));
}

/** A point in whole nanometres, unless it is the one before. */
function addWhole(out: Loops, x: number, y: number): void {
  const [px, py] = [Math.round(x), Math.round(y)];
  const last = out.points - 1;
  if (last >= out.from(out.length) && out.x[last] === px && out.y[last] === py) return;
  out.add(px, py, 0);
}

function closePolygon(out: Loops): void {
  out.dropReturn();
  const from = out.from(out.length);
  if (out.points - from > 2) out.close();
  else out.points = from;
}

/** Polygons as the polygon library has them. */
export function pathsOf(polygons: Loops): Paths64 {
  const { x, y, ends } = polygons;
  const out: Paths64 = [];
  let k = 0;
  for (const end of ends) {
    const path: Paths64[number] = [];
    for (; k < end; k++) path.push({ x: x[k]!, y: y[k]! });
    out.push(path);
  }
  return out;
}
