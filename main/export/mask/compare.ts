import { curve, part } from '../../../solver/chip/geometry/curve.ts';
import { chordsOf } from '../../../solver/chip/plan.ts';
import type { Edge, Shape } from '../../../solver/mesh/mesh.ts';
import { differenceOf } from './difference.ts';
import { flatPaths, perimeterOf } from './shapes.ts';

/** What was read back against what was to be drawn, nm². */
export interface Comparison {
  /** Area of the symmetric difference, or a bound on it where outlines agree point by point. */
  readonly difference: number;
  /** Chord error times perimeter. */
  readonly allowed: number;
}

/**
 * Compares loops as read with the shapes they stand for. Where every outline has the same corners and
 * arcs, the difference is bounded by how far these lie off each other; else it is computed.
 *
 * @param most arcs of `shapes` are cut to this sweep, radians, as the file has them
 * @param offArc how far curves in the file may lie off the arcs given
 */
export function compare(
  shapes: readonly Shape[],
  loops: readonly (readonly Edge[])[],
  chordError: number,
  most: number,
  offArc: number,
): Comparison {
  const perimeter = perimeterOf(shapes);
  const allowed = chordError * perimeter;
  const apart = furthestApart(
    shapes.flatMap((shape) => shape.map((loop) => cutArcs(loop, most))),
    loops,
  );
  const bound = 2 * perimeter * (apart + offArc);
  if (bound <= allowed) return { difference: bound, allowed };
  // the file's own arcs lose as much to chords as the drawing's: both are cut finer
  const curved = loops.some((loop) => loop.some(({ bulge }) => bulge !== 0));
  const error = curved ? Math.max(1, chordError / 8) : chordError;
  const wanted = shapes.flatMap((shape) => flatPaths(shape, error));
  const found = loops.flatMap((loop) => flatPaths([loop], error));
  // what the chords take off the arcs is known; what they and the file lie apart is looked at
  const cut = shapes.reduce((sum, shape) => sum + chordLoss(shape, error), 0);
  const known = (curved ? 2 : 1) * cut + perimeter * (offArc + ROUNDING);
  return { difference: differenceOf(wanted, found) + known, allowed };
}

/** Corners of chords are rounded to whole nanometres. */
const ROUNDING = Math.SQRT1_2;

/** Area between the arcs of a shape and the chords that they are cut to. */
function chordLoss(shape: Shape, chordError: number): number {
  let sum = 0;
  for (const loop of shape) {
    loop.forEach((e, k) => {
      if (e.bulge === 0) return;
      const next = loop[k + 1 === loop.length ? 0 : k + 1]!;
      const c = curve(e.x, e.y, next.x, next.y, e.bulge);
      const radius = Math.abs(1 / c.curvature);
      const count = chordsOf(c, chordError);
      const sweep = c.length / radius / count;
      sum += (count * radius * radius * (sweep - Math.sin(sweep))) / 2;
    });
  }
  return sum;
}

/** The furthest that corners and arcs of two lists of loops lie apart; infinite where the lists differ in form. */
function furthestApart(a: readonly (readonly Edge[])[], b: readonly (readonly Edge[])[]): number {
  if (a.length !== b.length) return Infinity;
  let most = 0;
  for (let i = 0; i < a.length; i++) {
    const p = a[i]!;
    const q = b[i]!;
    if (p.length !== q.length) return Infinity;
    for (let k = 0; k < p.length; k++) {
      const { x, y, bulge } = p[k]!;
      const other = q[k]!;
      const next = p[k + 1 === p.length ? 0 : k + 1]!;
      const corner = Math.hypot(x - other.x, y - other.y);
      const sagitta = (Math.hypot(next.x - x, next.y - y) / 2) * Math.abs(bulge - other.bulge);
      most = Math.max(most, corner + sagitta);
    }
  }
  return most;
}

/** The loop with arcs cut into equal ones of at most `most` radians. */
export function cutArcs(loop: readonly Edge[], most: number): readonly Edge[] {
  const limit = Math.tan(most / 4) * (1 + 1e-9);
  if (loop.every(({ bulge }) => Math.abs(bulge) <= limit)) return loop;
  const out: Edge[] = [];
  loop.forEach((e, k) => {
    if (Math.abs(e.bulge) <= limit) {
      out.push(e);
      return;
    }
    const next = loop[(k + 1) % loop.length]!;
    const c = curve(e.x, e.y, next.x, next.y, e.bulge);
    const count = Math.ceil((4 * Math.atan(Math.abs(e.bulge))) / most - 1e-9);
    for (let i = 0; i < count; i++) {
      const piece = part(c, (c.length * i) / count, (c.length * (i + 1)) / count);
      out.push({ x: piece.x0, y: piece.y0, bulge: piece.bulge, tag: e.tag });
    }
  });
  return out;
}
