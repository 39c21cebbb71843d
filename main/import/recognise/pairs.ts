import type { Wall } from './walls.ts';

/**
 * The centreline that two walls facing each other have between them: straight, or an arc run through
 * counter-clockwise. Places on it are given by `s`: nm along a straight one, radians on an arc.
 */
export type Axis =
  | {
      readonly kind: 'line';
      /** Point at s = 0, and unit direction. */
      readonly x: number;
      readonly y: number;
      readonly ux: number;
      readonly uy: number;
      /** Width at s = 0 and its growth per nm. */
      readonly width: number;
      readonly slope: number;
    }
  | {
      readonly kind: 'arc';
      readonly x: number;
      readonly y: number;
      readonly radius: number;
      /** Width at s = 0 and its growth per radian. */
      readonly width: number;
      readonly slope: number;
    };

export interface Pair {
  readonly axis: Axis;
  /** Where both walls are there. */
  readonly from: number;
  readonly to: number;
  /** How much further the longer of two straight walls goes at either end, nm. */
  readonly beyond: readonly [number, number];
}

/** Walls that open by more than this (radians) are no taper of a channel. */
const WIDEST_TAPER = 0.9;
/** Below this they are taken as parallel, and the longer wall says the direction. */
const PARALLEL = 1e-3;
/** A bend's walls go round one another where their centres lie this close, as a share of the gap: a taper parts them a little. */
const CONCENTRIC = 0.12;

/** A corner that an outer wall turns about lies this close to its centre, as a share of the radius. */
const ON_CORNER = 0.02;

/** The axis between two walls, null where they do not face each other as those of a channel do. */
export function pairOf(e: Wall, f: Wall): Pair | null {
  if (e.sweep === 0 && f.sweep === 0) return linePair(e, f);
  if (e.sweep > 0 && f.sweep < 0) return arcPair(e, f);
  if (e.sweep < 0 && f.sweep > 0) return arcPair(f, e);
  return null;
}

function linePair(e: Wall, f: Wall): Pair | null {
  const [ex, ey, fx, fy] = [e.x1 - e.x0, e.y1 - e.y0, f.x1 - f.x0, f.y1 - f.y0];
  const [le, lf] = [Math.hypot(ex, ey), Math.hypot(fx, fy)];
  const sine = (ex * fy - ey * fx) / (le * lf);
  const cosine = (ex * fx + ey * fy) / (le * lf);
  if (cosine >= 0 || Math.abs(Math.asin(Math.max(-1, Math.min(1, sine)))) > WIDEST_TAPER) return null;
  const parallel = Math.abs(sine) < PARALLEL;
  const [a, b] = parallel ? [1, 1] : [1 / le, 1 / lf];
  let [ux, uy] = [a * ex - b * fx, a * ey - b * fy];
  const length = Math.hypot(ux, uy);
  ux /= length;
  uy /= length;
  const along = (x: number, y: number): number => (x - e.x0) * ux + (y - e.y0) * uy;
  const starts = [e, f].map((w) => Math.min(along(w.x0, w.y0), along(w.x1, w.y1)));
  const ends = [e, f].map((w) => Math.max(along(w.x0, w.y0), along(w.x1, w.y1)));
  const from = Math.max(...starts);
  const to = Math.min(...ends);
  if (!(to > from)) return null;
  const offset = (w: Wall, s: number): number => {
    const [s0, s1] = [along(w.x0, w.y0), along(w.x1, w.y1)];
    const across = (x: number, y: number): number => (y - e.y0) * ux - (x - e.x0) * uy;
    const [o0, o1] = [across(w.x0, w.y0), across(w.x1, w.y1)];
    return o0 + ((o1 - o0) * (s - s0)) / (s1 - s0);
  };
  const wide = (s: number): number => offset(f, s) - offset(e, s);
  const [w0, w1] = [wide(from), wide(to)];
  if (!(w0 > 0 && w1 > 0) && !(Math.max(w0, w1) > 0 && Math.min(w0, w1) > -1)) return null;
  const middle = (from + to) / 2;
  const off = (offset(e, middle) + offset(f, middle)) / 2;
  const slope = (w1 - w0) / (to - from);
  const even = isEven(w0, w1);
  return {
    axis: {
      kind: 'line',
      x: e.x0 - off * uy,
      y: e.y0 + off * ux,
      ux,
      uy,
      width: even ? (w0 + w1) / 2 : w0 - slope * from,
      slope: even ? 0 : slope,
    },
    from,
    to,
    beyond: [from - Math.min(...starts), Math.max(...ends) - to],
  };
}

/** Whether a stretch with these widths at its ends counts as one of even width. */
const isEven = (w0: number, w1: number): boolean => Math.abs(w1 - w0) <= 3 + 1e-3 * Math.max(w0, w1);

function arcPair(outer: Wall, inner: Wall): Pair | null {
  const gap = outer.radius - inner.radius;
  if (!(gap > 0)) return null;
  if (Math.hypot(outer.cx - inner.cx, outer.cy - inner.cy) > CONCENTRIC * gap + 5) return null;
  const start = Math.atan2(outer.y0 - outer.cy, outer.x0 - outer.cx);
  // The inner wall is run through clockwise: it begins, counter-clockwise, at its end.
  let begin = Math.atan2(inner.y1 - inner.cy, inner.x1 - inner.cx);
  const [long, short] = [outer.sweep, -inner.sweep];
  while (begin < start - Math.PI) begin += 2 * Math.PI;
  while (begin > start + Math.PI) begin -= 2 * Math.PI;
  let from = Math.max(start, begin);
  let to = Math.min(start + long, begin + short);
  if (to <= from) {
    begin += begin < start ? 2 * Math.PI : -2 * Math.PI;
    from = Math.max(start, begin);
    to = Math.min(start + long, begin + short);
  }
  if (!(to > from)) return null;
  const [x, y] = [(outer.cx + inner.cx) / 2, (outer.cy + inner.cy) / 2];
  const radius = (outer.radius + inner.radius) / 2;
  const wide = (s: number): number =>
    gap + (outer.cx - inner.cx) * Math.cos(s) + (outer.cy - inner.cy) * Math.sin(s);
  const [w0, w1] = [wide(from), wide(to)];
  if (!(Math.min(w0, w1) > 0)) return null;
  const even = isEven(w0, w1);
  const slope = even ? 0 : (w1 - w0) / (to - from);
  const width = even ? gap : w0 - slope * from;
  return { axis: { kind: 'arc', x, y, radius, width, slope }, from, to, beyond: [0, 0] };
}

/** The axis of a bend whose inner wall is one corner: the outer wall turns about it. */
export function cornerPair(outer: Wall, x: number, y: number): Pair | null {
  if (!(outer.sweep > 0)) return null;
  if (Math.hypot(outer.cx - x, outer.cy - y) > ON_CORNER * outer.radius + 5) return null;
  const from = Math.atan2(outer.y0 - outer.cy, outer.x0 - outer.cx);
  const axis = { kind: 'arc', x, y, radius: outer.radius / 2, width: outer.radius, slope: 0 } as const;
  return { axis, from, to: from + outer.sweep, beyond: [0, 0] };
}

export function pointOn(axis: Axis, s: number): [number, number] {
  if (axis.kind === 'line') return [axis.x + s * axis.ux, axis.y + s * axis.uy];
  return [axis.x + axis.radius * Math.cos(s), axis.y + axis.radius * Math.sin(s)];
}

/** Unit direction in which `s` grows. */
export function directionOn(axis: Axis, s: number): [number, number] {
  return axis.kind === 'line' ? [axis.ux, axis.uy] : [-Math.sin(s), Math.cos(s)];
}

export function widthOn(axis: Axis, s: number): number {
  return axis.width + axis.slope * s;
}

/** Length in nm between two places. */
export function lengthOn(axis: Axis, from: number, to: number): number {
  return axis.kind === 'line' ? to - from : (to - from) * axis.radius;
}

/** Place on the axis next to a point; an angle within half a turn of `near`. */
export function placeOn(axis: Axis, x: number, y: number, near: number): number {
  if (axis.kind === 'line') return (x - axis.x) * axis.ux + (y - axis.y) * axis.uy;
  let angle = Math.atan2(y - axis.y, x - axis.x);
  while (angle < near - Math.PI) angle += 2 * Math.PI;
  while (angle > near + Math.PI) angle -= 2 * Math.PI;
  return angle;
}
