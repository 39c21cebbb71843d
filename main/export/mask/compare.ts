import { curve } from '../../../solver/chip/geometry/curve.ts';
import { chordsOf } from '../../../solver/chip/plan.ts';
import type { Shape } from '../../../solver/mesh/mesh.ts';
import { differenceOf } from './difference.ts';
import { cutLoops, type Loops, polygonsOf, polygonsOfLoops } from './loops.ts';
import { perimeterOf } from './shapes.ts';

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
  loops: Loops,
  chordError: number,
  most: number,
  offArc: number,
): Comparison {
  const perimeter = perimeterOf(shapes);
  const allowed = chordError * perimeter;
  const apart = sameForm(shapes, loops) ? furthestApart(cutLoops(shapes, most), loops) : Infinity;
  const bound = 2 * perimeter * (apart + offArc);
  if (bound <= allowed) return { difference: bound, allowed };
  // the file's own arcs lose as much to chords as the drawing's: both are cut finer
  const curved = isCurved(loops);
  const error = curved ? Math.max(1, chordError / 8) : chordError;
  const wanted = polygonsOf(shapes, error);
  const found = curved || !isWhole(loops) ? polygonsOfLoops(loops, error) : loops;
  // what the chords take off the arcs is known; what they and the file lie apart is looked at
  let cut = 0;
  for (const shape of shapes) cut += chordLoss(shape, error);
  const known = (curved ? 2 : 1) * cut + perimeter * (offArc + ROUNDING);
  return { difference: differenceOf(wanted, found) + known, allowed };
}

/** Corners of chords are rounded to whole nanometres. */
const ROUNDING = Math.SQRT1_2;

function isCurved({ bulge, points }: Loops): boolean {
  for (let k = 0; k < points; k++) if (bulge[k] !== 0) return true;
  return false;
}

/** Whether all points lie at whole nanometres. */
function isWhole({ x, y, points }: Loops): boolean {
  for (let k = 0; k < points; k++) if (!Number.isInteger(x[k]) || !Number.isInteger(y[k])) return false;
  return true;
}

/** Area between the arcs of a shape and the chords that they are cut to. */
function chordLoss(shape: Shape, chordError: number): number {
  let sum = 0;
  for (const loop of shape) {
    for (let k = 0; k < loop.length; k++) {
      const e = loop[k]!;
      if (e.bulge === 0) continue;
      const next = loop[k + 1 === loop.length ? 0 : k + 1]!;
      const c = curve(e.x, e.y, next.x, next.y, e.bulge);
      const radius = Math.abs(1 / c.curvature);
      const count = chordsOf(c, chordError);
      const sweep = c.length / radius / count;
      sum += (count * radius * radius * (sweep - Math.sin(sweep))) / 2;
    }
  }
  return sum;
}

function sameForm(shapes: readonly Shape[], loops: Loops): boolean {
  let count = 0;
  for (const shape of shapes) count += shape.length;
  return count === loops.length;
}

/** The furthest that corners and arcs of two lists of loops lie apart; infinite where the lists differ in form. */
function furthestApart(a: Loops, b: Loops): number {
  if (a.length !== b.length) return Infinity;
  for (let i = 0; i < a.length; i++) if (a.ends[i] !== b.ends[i]) return Infinity;
  let most = 0;
  for (let i = 0, from = 0; i < a.length; i++) {
    const end = a.ends[i]!;
    for (let k = from; k < end; k++) {
      const x = a.x[k]!;
      const y = a.y[k]!;
      const next = k + 1 === end ? from : k + 1;
      const corner = length(x - b.x[k]!, y - b.y[k]!);
      const chord = length(a.x[next]! - x, a.y[next]! - y);
      const sagitta = (chord / 2) * Math.abs(a.bulge[k]! - b.bulge[k]!);
      // a number that is none lies infinitely far off
      const off = corner + sagitta;
      most = off <= most ? most : off >= most ? off : Infinity;
    }
    from = end;
  }
  return most;
}

const length = (x: number, y: number): number => Math.sqrt(x * x + y * y);
