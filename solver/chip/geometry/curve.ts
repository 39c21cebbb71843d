import { TOUCH } from './tolerance.ts';

/**
 * A straight line or a circular arc in the plan, nm, with what is asked of it often computed once.
 * Distances along it run from its first point, 0 to `length`.
 */
export interface Curve {
  readonly x0: number;
  readonly y0: number;
  readonly x1: number;
  readonly y1: number;
  /** Tangent of a quarter of the sweep, positive counter-clockwise; 0 is straight. */
  readonly bulge: number;
  readonly length: number;
  /** Unit tangent at the first point. */
  readonly ux: number;
  readonly uy: number;
  /** Signed curvature, 1/nm, positive counter-clockwise; 0 is straight. */
  readonly curvature: number;
  /** Centre of the arc (first point where straight). */
  readonly cx: number;
  readonly cy: number;
}

export function line(x0: number, y0: number, x1: number, y1: number): Curve {
  const dx = x1 - x0;
  const dy = y1 - y0;
  const length = Math.sqrt(dx * dx + dy * dy);
  const k = length > 0 ? 1 / length : 0;
  return { x0, y0, x1, y1, bulge: 0, length, ux: dx * k, uy: dy * k, curvature: 0, cx: x0, cy: y0 };
}

/** Line or arc from its end points and bulge. */
export function curve(x0: number, y0: number, x1: number, y1: number, bulge: number): Curve {
  if (bulge === 0) return line(x0, y0, x1, y1);
  const dx = x1 - x0;
  const dy = y1 - y0;
  const chord = Math.sqrt(dx * dx + dy * dy);
  const sweep = 4 * Math.atan(bulge);
  const curvature = (2 * Math.sin(sweep / 2)) / chord;
  // the tangent leaves the chord by half the sweep, clockwise for a counter-clockwise arc
  const c = Math.cos(sweep / 2);
  const s = Math.sin(sweep / 2);
  const ux = (dx * c + dy * s) / chord;
  const uy = (dy * c - dx * s) / chord;
  const length = sweep / curvature;
  return {
    x0,
    y0,
    x1,
    y1,
    bulge,
    length,
    ux,
    uy,
    curvature,
    cx: x0 - uy / curvature,
    cy: y0 + ux / curvature,
  };
}

/** Length of the same, where nothing else of it is asked. */
export function lengthOf(x0: number, y0: number, x1: number, y1: number, bulge: number): number {
  const dx = x1 - x0;
  const dy = y1 - y0;
  const chord = Math.sqrt(dx * dx + dy * dy);
  if (bulge === 0) return chord;
  const sweep = 4 * Math.atan(bulge);
  return sweep / ((2 * Math.sin(sweep / 2)) / chord);
}

export function reversed(c: Curve): Curve {
  return curve(c.x1, c.y1, c.x0, c.y0, -c.bulge);
}

/** The part of `c` between two distances along it, from < to. */
export function part(c: Curve, from: number, to: number): Curve {
  let { x0, y0, x1, y1 } = c;
  if (from > 0) [x0, y0] = pointAt(c, from);
  if (to < c.length) [x1, y1] = pointAt(c, to);
  const sweep = c.curvature * (Math.min(to, c.length) - Math.max(from, 0));
  return curve(x0, y0, x1, y1, c.bulge === 0 ? 0 : Math.tan(sweep / 4));
}

/** Point at a distance along; beyond the ends a line goes on straight, an arc round its circle. */
export function pointAt(c: Curve, d: number): [number, number] {
  if (c.curvature === 0) return [c.x0 + c.ux * d, c.y0 + c.uy * d];
  const a = c.curvature * d;
  const sin = Math.sin(a);
  const half = Math.sin(a / 2);
  const cosm1 = -2 * half * half;
  const r = 1 / c.curvature;
  return [c.x0 + r * (sin * c.ux + cosm1 * c.uy), c.y0 + r * (sin * c.uy - cosm1 * c.ux)];
}

/** Unit tangent at a distance along. */
export function tangentAt(c: Curve, d: number): [number, number] {
  if (c.curvature === 0) return [c.ux, c.uy];
  const a = c.curvature * d;
  const cos = Math.cos(a);
  const sin = Math.sin(a);
  return [c.ux * cos - c.uy * sin, c.uy * cos + c.ux * sin];
}

/**
 * Distance along an arc of the point of its circle in the direction of (x, y) from the centre;
 * outside the arc it comes as the nearer continuation: negative before the start, above `length` after the end.
 */
export function alongArc(c: Curve, x: number, y: number): number {
  const sign = c.curvature > 0 ? 1 : -1;
  const r = Math.abs(1 / c.curvature);
  const ax = (c.x0 - c.cx) / r;
  const ay = (c.y0 - c.cy) / r;
  const bx = x - c.cx;
  const by = y - c.cy;
  let angle = Math.atan2(sign * (ax * by - ay * bx), ax * bx + ay * by);
  if (angle < 0) angle += 2 * Math.PI;
  const d = angle * r;
  const turn = 2 * Math.PI * r;
  return d > c.length && turn - d < d - c.length ? d - turn : d;
}

/** Distance along `c`, 0 to length, of the point of `c` nearest to (x, y). */
export function nearest(c: Curve, x: number, y: number): number {
  const d = c.curvature === 0 ? (x - c.x0) * c.ux + (y - c.y0) * c.uy : alongArc(c, x, y);
  return d < 0 ? 0 : Math.min(d, c.length);
}

export function distanceTo(c: Curve, x: number, y: number): number {
  const [px, py] = pointAt(c, nearest(c, x, y));
  return Math.hypot(x - px, y - py);
}

/** Receives distances along a and along b of one common point. */
export type Meeting = (a: number, b: number) => void;

/**
 * Every common point of two curves, to TOUCH: crossings, tangencies and ends that lie on the other.
 * A common stretch comes as its two ends.
 */
export function meet(a: Curve, b: Curve, found: Meeting): void {
  if (a.curvature === 0 && b.curvature === 0) {
    if (crossLines(a, b, found)) return;
  } else if (a.curvature === 0) crossLineArc(a, b, found);
  else if (b.curvature === 0) crossLineArc(b, a, (sb, sa) => found(sa, sb));
  else crossArcs(a, b, found);
  endOn(0, a.x0, a.y0, b, found);
  endOn(a.length, a.x1, a.y1, b, found);
  endOn(0, b.x0, b.y0, a, (sb, sa) => found(sa, sb));
  endOn(b.length, b.x1, b.y1, a, (sb, sa) => found(sa, sb));
}

function endOn(s: number, x: number, y: number, b: Curve, found: Meeting): void {
  let d = 0;
  if (b.curvature === 0) {
    const off = (x - b.x0) * b.uy - (y - b.y0) * b.ux;
    if (off > TOUCH || off < -TOUCH) return;
    d = (x - b.x0) * b.ux + (y - b.y0) * b.uy;
  } else {
    const r = 1 / b.curvature;
    if (Math.abs(Math.hypot(x - b.cx, y - b.cy) - Math.abs(r)) > TOUCH) return;
    d = alongArc(b, x, y);
  }
  if (d >= -TOUCH && d <= b.length + TOUCH) found(s, clamp(d, b.length));
}

function clamp(d: number, length: number): number {
  return d < 0 ? 0 : Math.min(d, length);
}

/** Lines that are not parallel: true where they cross (then nothing else need be looked at). */
function crossLines(a: Curve, b: Curve, found: Meeting): boolean {
  const sine = a.ux * b.uy - a.uy * b.ux;
  if (sine < 1e-9 && sine > -1e-9) return false;
  const dx = b.x0 - a.x0;
  const dy = b.y0 - a.y0;
  const s = (dx * b.uy - dy * b.ux) / sine;
  if (s < -TOUCH || s > a.length + TOUCH) return false;
  const t = (dx * a.uy - dy * a.ux) / sine;
  if (t < -TOUCH || t > b.length + TOUCH) return false;
  found(clamp(s, a.length), clamp(t, b.length));
  return true;
}

function crossLineArc(a: Curve, b: Curve, found: Meeting): void {
  const r = Math.abs(1 / b.curvature);
  const mx = b.cx - a.x0;
  const my = b.cy - a.y0;
  const along = mx * a.ux + my * a.uy;
  const off = Math.abs(mx * a.uy - my * a.ux);
  if (off > r + TOUCH) return;
  const half = off >= r - TOUCH ? 0 : Math.sqrt((r - off) * (r + off));
  for (let side = -1; side <= 1; side += 2) {
    const s = along + side * half;
    if (s >= -TOUCH && s <= a.length + TOUCH) {
      const t = alongArc(b, a.x0 + a.ux * s, a.y0 + a.uy * s);
      if (t >= -TOUCH && t <= b.length + TOUCH) found(clamp(s, a.length), clamp(t, b.length));
    }
    if (half === 0) return;
  }
}

function crossArcs(a: Curve, b: Curve, found: Meeting): void {
  const ra = Math.abs(1 / a.curvature);
  const rb = Math.abs(1 / b.curvature);
  const dx = b.cx - a.cx;
  const dy = b.cy - a.cy;
  const d = Math.hypot(dx, dy);
  if (d > ra + rb + TOUCH || d < Math.abs(ra - rb) - TOUCH || d < TOUCH) return;
  const along = (d * d + (ra - rb) * (ra + rb)) / (2 * d);
  const half = Math.abs(along) >= ra - TOUCH ? 0 : Math.sqrt((ra - along) * (ra + along));
  for (let side = -1; side <= 1; side += 2) {
    const x = a.cx + (dx * along - dy * side * half) / d;
    const y = a.cy + (dy * along + dx * side * half) / d;
    const s = alongArc(a, x, y);
    const t = alongArc(b, x, y);
    if (s >= -TOUCH && s <= a.length + TOUCH && t >= -TOUCH && t <= b.length + TOUCH) {
      found(clamp(s, a.length), clamp(t, b.length));
    }
    if (half === 0) return;
  }
}
