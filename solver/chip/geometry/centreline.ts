import type { Finding } from '../../problem/finding.ts';
import type { Channel, Point } from '../chip.ts';
import { type Curve, curve, line } from './curve.ts';

/** One straight or round stretch of a channel: its centreline, where it lies along the channel, and its half widths. */
export interface Element {
  /** Index of the channel in the chip. */
  readonly channel: number;
  /** Index of the element in its channel. */
  readonly index: number;
  readonly curve: Curve;
  /** Distance along the channel at its start and end, nm. */
  readonly s0: number;
  readonly s1: number;
  /** Half the mask width there, nm. */
  readonly h0: number;
  readonly h1: number;
  /** Signed turn, radians, of the mitred corner at its start and end; 0 where there is none. */
  readonly turn0: number;
  readonly turn1: number;
}

export interface Centreline {
  readonly elements: readonly Element[];
  /** nm */
  readonly length: number;
}

/** Tapered arcs are cut into pieces no longer than this, so that their edges are arcs to 1e-4 of the change in width. */
const TAPERED_ARC = Math.PI / 12;
/** A corner flatter than this (radians) is drawn straight through, however the bend radius stands. */
const STRAIGHT = 1e-9;

/** The centreline of a channel with its rounded bends; radii that do not fit are taken as large as they can be. */
export function centreline(channel: Channel, index: number, findings: Finding[]): Centreline {
  const points = distinct(channel.path);
  const count = points.length;
  const curves: Curve[] = [];
  if (channel.bendRadius > 0 && count > 2) rounded(channel, points, curves, findings);
  else for (let i = 1; i < count; i++) curves.push(between(points[i - 1]!, points[i]!));
  let length = 0;
  for (const c of curves) length += c.length;
  const tapered = channel.width[0] !== channel.width[1];
  const parts = tapered ? curves.flatMap(split) : curves;
  const half = channel.width[0] / 2;
  const slope = (channel.width[1] - channel.width[0]) / 2 / length;
  const elements: Element[] = [];
  let s = 0;
  let turn = 0;
  for (let i = 0; i < parts.length; i++) {
    const c = parts[i]!;
    const next = i + 1 < parts.length ? parts[i + 1]! : undefined;
    const turn1 = next && c.curvature === 0 && next.curvature === 0 ? turnBetween(c, next) : 0;
    const s1 = s + c.length;
    elements.push({
      channel: index,
      index: i,
      curve: c,
      s0: s,
      s1,
      h0: half + slope * s,
      h1: half + slope * s1,
      turn0: turn,
      turn1,
    });
    s = s1;
    turn = turn1;
  }
  return { elements, length };
}

function distinct(path: readonly Point[]): readonly Point[] {
  for (let i = 1; i < path.length; i++) {
    if (path[i]![0] === path[i - 1]![0] && path[i]![1] === path[i - 1]![1]) {
      return path.filter((p, k) => k === 0 || p[0] !== path[k - 1]![0] || p[1] !== path[k - 1]![1]);
    }
  }
  return path;
}

function between(a: Point, b: Point): Curve {
  return line(a[0], a[1], b[0], b[1]);
}

function turnBetween(a: Curve, b: Curve): number {
  return Math.atan2(a.ux * b.uy - a.uy * b.ux, a.ux * b.ux + a.uy * b.uy);
}

function split(c: Curve): Curve[] {
  const sweep = Math.abs(c.curvature * c.length);
  const count = Math.ceil(sweep / TAPERED_ARC - 1e-9);
  if (count <= 1) return [c];
  const bulge = Math.tan((c.curvature * c.length) / (4 * count));
  const radius = 1 / c.curvature;
  const parts: Curve[] = [];
  let x = c.x0;
  let y = c.y0;
  for (let i = 1; i <= count; i++) {
    const a = (c.curvature * c.length * i) / count;
    const last = i === count;
    const x1 = last ? c.x1 : c.cx + radius * (c.uy * Math.cos(a) + c.ux * Math.sin(a));
    const y1 = last ? c.y1 : c.cy + radius * (c.uy * Math.sin(a) - c.ux * Math.cos(a));
    parts.push(curve(x, y, x1, y1, bulge));
    x = x1;
    y = y1;
  }
  return parts;
}

/**
 * Every inner vertex becomes an arc of the bend radius, tangent to both sides. Where the tangents of
 * two neighbouring bends would overlap on the side between them, both get the radius at which they meet.
 */
function rounded(channel: Channel, points: readonly Point[], curves: Curve[], findings: Finding[]): void {
  const count = points.length;
  const sides: Curve[] = [];
  for (let i = 1; i < count; i++) sides.push(between(points[i - 1]!, points[i]!));
  const turns = new Float64Array(count);
  const tans = new Float64Array(count);
  for (let i = 1; i < count - 1; i++) {
    const turn = turnBetween(sides[i - 1]!, sides[i]!);
    turns[i] = Math.abs(turn) < STRAIGHT ? 0 : turn;
    tans[i] = Math.tan(Math.abs(turns[i]!) / 2);
  }
  let x = points[0]![0];
  let y = points[0]![1];
  let worst = channel.bendRadius;
  let reduced = 0;
  let place = points[0]!;
  for (let i = 1; i < count; i++) {
    const side = sides[i - 1]!;
    if (turns[i] === 0) {
      const p = points[i]!;
      push(curves, x, y, p[0], p[1]);
      x = p[0];
      y = p[1];
      continue;
    }
    const next = sides[i]!;
    const fits = Math.min(
      side.length / (tans[i - 1]! + tans[i]!),
      next.length / (tans[i]! + tans[i + 1]!),
      channel.bendRadius,
    );
    if (fits < channel.bendRadius * (1 - 1e-9)) {
      reduced++;
      if (fits < worst) {
        worst = fits;
        place = points[i]!;
      }
    }
    const t = fits * tans[i]!;
    const [vx, vy] = points[i]!;
    push(curves, x, y, vx - side.ux * t, vy - side.uy * t);
    x = vx + next.ux * t;
    y = vy + next.uy * t;
    curves.push(curve(vx - side.ux * t, vy - side.uy * t, x, y, Math.tan(turns[i]! / 4)));
  }
  if (reduced > 0) {
    findings.push({
      kind: 'bend-reduced',
      severity: 'warn',
      where: channel.id,
      says: `The bend radius of ${um(channel.bendRadius)} does not fit between neighbouring vertices at ${reduced} of its bends; the largest that fits was taken, ${um(worst)} at the tightest.`,
      do: 'Move the vertices further apart or give a smaller bend radius.',
      at: [place[0] * 1e-9, place[1] * 1e-9],
    });
  }
}

/** A side that the bends at both its ends use up is left out. */
function push(curves: Curve[], x0: number, y0: number, x1: number, y1: number): void {
  if (Math.hypot(x1 - x0, y1 - y0) > 1e-3) curves.push(line(x0, y0, x1, y1));
}

/** A length in nm as people read it, micrometres to four digits. */
export function um(nm: number): string {
  return `${Number((nm / 1000).toPrecision(4))} um`;
}
