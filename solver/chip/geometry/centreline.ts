import type { Finding } from '../../problem/finding.ts';
import type { Channel, Point } from '../chip.ts';
import { type Curve, curve, line } from './curve.ts';
import {
  BULGE,
  CURVATURE,
  CX,
  CY,
  type Elements,
  H0,
  H1,
  LENGTH,
  S0,
  S1,
  STRIDE,
  TURN0,
  TURN1,
  UX,
  UY,
  X0,
  X1,
  Y0,
  Y1,
} from './elements.ts';
import { TOUCH } from './tolerance.ts';

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

/** Tapered arcs are cut into pieces no longer than this, so that their edges are arcs to 1e-4 of the change in width. */
const TAPERED_ARC = Math.PI / 12;
/** A corner flatter than this (radians) is drawn straight through, however the bend radius stands. */
const STRAIGHT = 1e-9;

/**
 * Adds the centreline of a channel, with its rounded bends, to `elements`; radii that do not fit are
 * taken as large as they can be, with a finding.
 */
export function addCentreline(
  elements: Elements,
  channel: Channel,
  index: number,
  findings: Finding[],
): void {
  const start = elements.count;
  const points = distinct(channel.path);
  const tapered = channel.width[0] !== channel.width[1];
  if (channel.bendRadius > 0 && points.length > 2) {
    const curves: Curve[] = [];
    rounded(channel, points, curves, findings);
    for (const c of curves) {
      if (tapered && c.curvature !== 0) for (const part of split(c)) addCurve(elements, index, part);
      else addCurve(elements, index, c);
    }
  } else {
    for (let i = 1; i < points.length; i++) {
      const p = points[i - 1]!;
      const q = points[i]!;
      addLine(elements, index, p[0], p[1], q[0], q[1]);
    }
  }
  elements.first[index + 1] = elements.count;
  const d = elements.data;
  let length = 0;
  for (let id = start; id < elements.count; id++) length += d[id * STRIDE + LENGTH]!;
  const half = channel.width[0] / 2;
  const slope = (channel.width[1] - channel.width[0]) / 2 / length;
  let s = 0;
  for (let id = start; id < elements.count; id++) {
    const k = id * STRIDE;
    d[k + S0] = s;
    d[k + H0] = half + slope * s;
    s += d[k + LENGTH]!;
    d[k + S1] = s;
    d[k + H1] = half + slope * s;
    d[k + TURN0] = 0;
    d[k + TURN1] = 0;
    const before = k - STRIDE;
    if (id > start && d[k + CURVATURE] === 0 && d[before + CURVATURE] === 0) {
      const ax = d[before + UX]!;
      const ay = d[before + UY]!;
      const bx = d[k + UX]!;
      const by = d[k + UY]!;
      const turn = Math.atan2(ax * by - ay * bx, ax * bx + ay * by);
      d[before + TURN1] = turn;
      d[k + TURN0] = turn;
    }
  }
}

function addLine(elements: Elements, channel: number, x0: number, y0: number, x1: number, y1: number): void {
  const k = elements.add(channel);
  const d = elements.data;
  const dx = x1 - x0;
  const dy = y1 - y0;
  const length = Math.sqrt(dx * dx + dy * dy);
  d[k + X0] = x0;
  d[k + Y0] = y0;
  d[k + X1] = x1;
  d[k + Y1] = y1;
  d[k + UX] = dx / length;
  d[k + UY] = dy / length;
  d[k + LENGTH] = length;
  d[k + BULGE] = 0;
  d[k + CURVATURE] = 0;
  d[k + CX] = x0;
  d[k + CY] = y0;
}

function addCurve(elements: Elements, channel: number, c: Curve): void {
  const k = elements.add(channel);
  const d = elements.data;
  d[k + X0] = c.x0;
  d[k + Y0] = c.y0;
  d[k + X1] = c.x1;
  d[k + Y1] = c.y1;
  d[k + UX] = c.ux;
  d[k + UY] = c.uy;
  d[k + LENGTH] = c.length;
  d[k + BULGE] = c.bulge;
  d[k + CURVATURE] = c.curvature;
  d[k + CX] = c.cx;
  d[k + CY] = c.cy;
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
    if (!(fits > TOUCH)) {
      push(curves, x, y, vx, vy);
      x = vx;
      y = vy;
      continue;
    }
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
