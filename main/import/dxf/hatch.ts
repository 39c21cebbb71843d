import { ellipsePoints, nurbsPoints } from '../curves.ts';
import { EVEN_ODD, type Vertices } from '../drawing.ts';
import type { Entity } from './pairs.ts';
import { arcVertices, type Drawn } from './shapes.ts';

const DEGREE = Math.PI / 180;

/** Takes groups one after another, each by the code it must have. */
class Groups {
  readonly #entity: Entity;
  #k: number;

  constructor(entity: Entity, from: number) {
    this.#entity = entity;
    this.#k = from;
  }

  take(code: number): number {
    const k = this.#k;
    if (this.#entity.code(k) !== code) throw new Unlike();
    this.#k += 1;
    return this.#entity.number(k);
  }

  maybe(code: number, fallback: number): number {
    return this.at(code) ? this.take(code) : fallback;
  }

  /** Steps over groups of a code, up to so many, whatever they hold. */
  skip(code: number, most: number): void {
    for (let i = 0; i < most && this.at(code); i += 1) this.#k += 1;
  }

  /** Whether the next group has this code. */
  at(code: number): boolean {
    return this.#entity.code(this.#k) === code;
  }
}

/** The groups do not follow as a boundary's do. */
class Unlike extends Error {}

/** Boundaries of a filled area. */
export function hatch(entity: Entity): Drawn {
  const start = entity.find(91);
  if (start < 0) return { not: 'hatches without a boundary' };
  try {
    const groups = new Groups(entity, start);
    const count = groups.take(91);
    const loops: Vertices[] = [];
    for (let i = 0; i < count; i += 1) loops.push(boundary(groups));
    return { loops, how: EVEN_ODD };
  } catch (error) {
    if (error instanceof Unlike) return { not: 'hatches whose boundary is of another sort' };
    throw error;
  }
}

function boundary(groups: Groups): Vertices {
  const flags = groups.take(92);
  const out: number[] = [];
  if (flags & 2) {
    const bulges = groups.take(72) !== 0;
    groups.take(73);
    const count = groups.take(93);
    for (let i = 0; i < count; i += 1) {
      out.push(groups.take(10), groups.take(20), bulges ? groups.maybe(42, 0) : 0);
    }
  } else {
    const count = groups.take(93);
    for (let i = 0; i < count; i += 1) edge(groups, out);
  }
  // handles of what the boundary was drawn after
  groups.skip(330, groups.maybe(97, 0));
  return Float64Array.from(out);
}

/** Appends an edge without its last point, which the next one begins with. */
function edge(groups: Groups, out: number[]): void {
  const kind = groups.take(72);
  if (kind === 1) {
    out.push(groups.take(10), groups.take(20), 0);
    groups.take(11);
    groups.take(21);
    return;
  }
  if (kind === 4) {
    spline(groups, out);
    return;
  }
  if (kind !== 2 && kind !== 3) throw new Unlike();
  const [x, y] = [groups.take(10), groups.take(20)];
  const [ax, ay] = kind === 3 ? [groups.take(11), groups.take(21)] : [0, 0];
  const size = groups.take(40);
  let from = groups.take(50) * DEGREE;
  let to = groups.take(51) * DEGREE;
  const forward = groups.take(73) !== 0;
  if (to <= from) to += 2 * Math.PI;
  // A clockwise edge gives its angles mirrored.
  if (!forward) [from, to] = [-from, -to];
  if (kind === 2) out.push(...arcVertices(x, y, size, from, to - from).slice(0, -3));
  else out.push(...ellipsePoints(x, y, ax, ay, size, from, to, Math.hypot(ax, ay) * 1e-5).slice(0, -3));
}

function spline(groups: Groups, out: number[]): void {
  const degree = groups.take(94);
  const rational = groups.take(73) !== 0;
  groups.take(74);
  const [knotCount, count] = [groups.take(95), groups.take(96)];
  const knots: number[] = [];
  const [x, y, weights]: [number[], number[], number[]] = [[], [], []];
  for (let i = 0; i < knotCount; i += 1) knots.push(groups.take(40));
  for (let i = 0; i < count; i += 1) {
    x.push(groups.take(10));
    y.push(groups.take(20));
    weights.push(rational ? groups.maybe(42, 1) : 1);
  }
  // Points that it was fitted to say nothing that its control points do not. Where none follow, the number
  // is that of the boundary's sources: files of before 2010 have no such points.
  const fitted = groups.at(97) ? groups.take(97) : 0;
  if (groups.at(11)) {
    for (let i = 0; i < fitted; i += 1) {
      groups.take(11);
      groups.take(21);
    }
    for (const code of [12, 22, 13, 23]) groups.maybe(code, 0);
  } else groups.skip(330, fitted);
  const size = Math.max(...x.map((value, i) => Math.hypot(value - x[0], y[i] - y[0])));
  const points = size > 0 ? nurbsPoints({ degree, knots, x, y, weights }, size * 1e-5) : null;
  if (!points) throw new Unlike();
  out.push(...points.slice(0, -3));
}
