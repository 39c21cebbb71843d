import type { Path64 } from 'clipper2-ts';
import type { Area } from './plane.ts';

/** A straight or round piece of the boundary of an area, the fluid on its left; nm. */
export interface Wall {
  readonly x0: number;
  readonly y0: number;
  readonly x1: number;
  readonly y1: number;
  /** Signed sweep in radians, positive counter-clockwise (the fluid within the circle); 0 is straight. */
  readonly sweep: number;
  readonly cx: number;
  readonly cy: number;
  readonly radius: number;
}

/** A vertex this close to the line between its neighbours is rounding, nm. */
const STRAIGHT = 1.5;
/** Chords of an arc lie no further off it than this, nm or share of the radius. */
const SAGITTA = 160;
const SAGITTA_SHARE = 0.012;
/** Vertices lie this close to the circle: rounding, nm, and cubic curves that stand for circles. */
const ON_CIRCLE = 2.5;
const ON_CIRCLE_SHARE = 3e-4;
const ON_CIRCLE_MOST = 150;
/** Arcs of more than this (radians) are cut, so that a gap between two has one stretch. */
const LONGEST = 4.7;
const MOST_TURN = 0.7;
const LEAST_CHORDS = 3;
/** With this many chords coarse ones are believed. */
const SURE = 6;
/** Chords of one arc differ by no more than this factor, few of them by no more than the second. */
const UNEVEN = 2.2;
const ALIKE = 1.6;

/** The boundary of an area as walls, loop by loop: chords that follow a circle are one arc again. */
export function wallsOf({ outer, holes }: Area): Wall[][] {
  return [outer, ...holes].map((path) => loopWalls(withoutStraight(path)));
}

function withoutStraight(path: Path64): Path64 {
  const out: Path64 = [];
  for (let i = 0; i < path.length; i += 1) {
    const before = out.at(-1) ?? path[path.length - 1];
    const here = path[i];
    const after = path[(i + 1) % path.length];
    const [dx, dy] = [after.x - before.x, after.y - before.y];
    const length = Math.hypot(dx, dy);
    const along = ((here.x - before.x) * dx + (here.y - before.y) * dy) / length;
    const off = Math.abs((here.x - before.x) * dy - (here.y - before.y) * dx) / length;
    if (off <= STRAIGHT && along >= 0 && along <= length) continue;
    out.push(here);
  }
  return out.length >= 3 ? out : path;
}

function loopWalls(given: Path64): Wall[] {
  const n = given.length;
  // Begun at the sharpest corner, so that no arc runs over the start.
  let start = 0;
  let most = -1;
  for (let i = 0; i < n; i += 1) {
    const turn = Math.abs(turnAt(given, i));
    if (turn > most + 1e-6) [most, start] = [turn, i];
  }
  const path = [...given.slice(start), ...given.slice(0, start)];
  const walls: Wall[] = [];
  let i = 0;
  while (i < n) {
    const run = arcRun(path, i);
    if (run) {
      walls.push(...run.walls);
      i = run.to;
    } else {
      const [a, b] = [path[i], path[(i + 1) % n]];
      walls.push({ x0: a.x, y0: a.y, x1: b.x, y1: b.y, sweep: 0, cx: 0, cy: 0, radius: 0 });
      i += 1;
    }
  }
  return walls;
}

function turnAt(path: Path64, i: number): number {
  const n = path.length;
  const [a, b, c] = [path[(i + n - 1) % n], path[i % n], path[(i + 1) % n]];
  const [ux, uy, vx, vy] = [b.x - a.x, b.y - a.y, c.x - b.x, c.y - b.y];
  return Math.atan2(ux * vy - uy * vx, ux * vx + uy * vy);
}

interface Circle {
  readonly x: number;
  readonly y: number;
  readonly r: number;
}

/** The longest run of chords from vertex `from` that follow one circle. */
function arcRun(path: Path64, from: number): { walls: Wall[]; to: number } | null {
  const n = path.length;
  const first = turnAt(path, from + 1);
  if (n < 4 || first === 0 || Math.abs(first) > MOST_TURN) return null;
  const length = (k: number): number => {
    const [a, b] = [path[k % n], path[(k + 1) % n]];
    return Math.hypot(b.x - a.x, b.y - a.y);
  };
  // The first and the last chord may be cut short, none is much longer than the others.
  const usual = length(from + 1);
  if (length(from) > UNEVEN * usual) return null;
  let end = from;
  let found: Circle | null = null;
  let sweep = 0;
  for (let j = from + 2; j <= n; j += 1) {
    const turn = turnAt(path, j - 1);
    if (turn * first <= 0 || Math.abs(turn) > MOST_TURN) break;
    if (Math.abs(sweep) + Math.abs(turn) > 2 * Math.PI) break;
    if (length(j - 1) > UNEVEN * usual || (j > from + 2 && length(j - 2) * UNEVEN < usual)) break;
    const circle = circleThrough(path[from], path[(from + j) >> 1], path[j % n]);
    const whole = j === n;
    const fit: Circle | null = whole ? found : circle;
    if (!fit || !fits(path, from, j, fit)) break;
    sweep += turn;
    if (j - from < LEAST_CHORDS) {
      found = fit;
      continue;
    }
    found = fit;
    end = j;
  }
  if (!found || end - from < LEAST_CHORDS) return null;
  if (!even(path, from, end)) return null;
  found = circleNear(path, from, end) ?? found;
  const { x: cx, y: cy, r: radius } = found;
  const sign = Math.sign(first);
  const angle = (k: number): number => Math.atan2(path[k % n].y - cy, path[k % n].x - cx);
  const between = (a: number, b: number): number => {
    let by = (angle(b) - angle(a)) * sign;
    while (by <= 0) by += 2 * Math.PI;
    return by * sign;
  };
  const pieces = Math.ceil(Math.abs(sweep) / LONGEST);
  const marks = Array.from({ length: pieces + 1 }, (_, k) => from + Math.round(((end - from) * k) / pieces));
  const walls = marks.slice(1).map((to, k) => {
    const [a, b] = [path[marks[k] % n], path[to % n]];
    return {
      x0: a.x,
      y0: a.y,
      x1: b.x,
      y1: b.y,
      sweep: between(marks[k], to),
      cx,
      cy,
      radius,
    };
  });
  return { walls, to: end };
}

/**
 * Inner chords of a true arc are alike; those of the corner of a polygon mostly are not. One inner chord alone is like
 * itself: then one of those at the ends has to be whole too, or a long wall between two short ones would do.
 */
function even(path: Path64, from: number, to: number): boolean {
  if (to - from > 6) return true;
  const lengths: number[] = [];
  for (let k = from; k < to; k += 1) {
    const [a, b] = [path[k], path[(k + 1) % path.length]];
    lengths.push(Math.hypot(b.x - a.x, b.y - a.y));
  }
  const inner = lengths.slice(1, -1);
  if (inner.length === 1) inner.push(Math.max(lengths[0], lengths[lengths.length - 1]));
  return Math.max(...inner) <= ALIKE * Math.min(...inner);
}

function fits(path: Path64, from: number, to: number, { x, y, r }: Circle): boolean {
  const n = path.length;
  const tolerance = Math.max(ON_CIRCLE, Math.min(r * ON_CIRCLE_SHARE, ON_CIRCLE_MOST));
  // Few coarse chords may be the sides of a polygon: any even trapezoid has a circle around it.
  const sagitta = to - from < SURE ? SAGITTA : Math.max(SAGITTA, r * SAGITTA_SHARE);
  // The newest chords are looked at each time, the older ones in samples.
  const step = Math.max(1, (to - from) >> 4);
  for (let k = from; k <= to; k += k >= to - 2 ? 1 : step) {
    const p = path[k % n];
    if (Math.abs(Math.hypot(p.x - x, p.y - y) - r) > tolerance) return false;
  }
  for (const k of [from, from + 1, to - 2, to - 1]) {
    const [a, b] = [path[k % n], path[(k + 1) % n]];
    const half = Math.hypot(b.x - a.x, b.y - a.y) / 2;
    if (!(half < r && r - Math.sqrt(r * r - half * half) <= sagitta)) return false;
  }
  return true;
}

/** The circle with the least squares of its equation over the vertices of a run. */
export function circleNear(path: Path64, from: number, to: number): Circle | null {
  const n = path.length;
  const [ox, oy] = [path[from % n].x, path[from % n].y];
  let [count, sx, sy, sxx, sxy, syy, sxz, syz, sz] = [0, 0, 0, 0, 0, 0, 0, 0, 0];
  for (let k = from; k <= to; k += 1) {
    const [x, y] = [path[k % n].x - ox, path[k % n].y - oy];
    const z = x * x + y * y;
    count += 1;
    sx += x;
    sy += y;
    sxx += x * x;
    sxy += x * y;
    syy += y * y;
    sxz += x * z;
    syz += y * z;
    sz += z;
  }
  const [a, b, c] = [sxx - (sx * sx) / count, sxy - (sx * sy) / count, syy - (sy * sy) / count];
  const [d, e] = [(sxz - (sx * sz) / count) / 2, (syz - (sy * sz) / count) / 2];
  const det = a * c - b * b;
  if (!(det > 1e-12 * a * c)) return null;
  const [x, y] = [(d * c - e * b) / det, (a * e - b * d) / det];
  const r = Math.sqrt(sz / count - (2 * (x * sx + y * sy)) / count + x * x + y * y);
  return { x: x + ox, y: y + oy, r };
}

function circleThrough(
  a: { x: number; y: number },
  b: { x: number; y: number },
  c: { x: number; y: number },
): Circle | null {
  const [bx, by, cx, cy] = [b.x - a.x, b.y - a.y, c.x - a.x, c.y - a.y];
  const d = 2 * (bx * cy - by * cx);
  if (d === 0) return null;
  const [bb, cc] = [bx * bx + by * by, cx * cx + cy * cy];
  const [ux, uy] = [(cy * bb - by * cc) / d, (bx * cc - cx * bb) / d];
  return { x: a.x + ux, y: a.y + uy, r: Math.hypot(ux, uy) };
}
