import type { Edge } from '../../mesh/mesh.ts';
import type { Point } from '../chip.ts';
import { signedArea } from './area.ts';
import { MITRE_TURN } from './body.ts';
import type { Element } from './centreline.ts';
import { type Curve, curve, line, part, pointAt, tangentAt } from './curve.ts';

/** A true edge of the plan, with the caller's label. */
export interface Source {
  readonly curve: Curve;
  readonly tag: number;
}

/**
 * One body to be united with others: a closed counter-clockwise polygon with arcs cut to chords, and
 * the true edge that each of its sides was drawn from. Where bodies only meet, their polygons overlap
 * by LAP, so that rounding opens no crack between them; the true edges know nothing of that.
 */
export interface Patch {
  readonly x: number[];
  readonly y: number[];
  /** Per side, from its start point. */
  readonly source: Source[];
}

/** Overlap of neighbouring polygons, nm. */
const LAP = 2;
/** Chords stay within this of their arc, nm, or within the share of its radius. */
const SAGITTA = 10;
const SAGITTA_SHARE = 2e-5;

/** Distance that chords may lie off an arc of this radius. */
export function sagitta(radius: number): number {
  return Math.max(SAGITTA, SAGITTA_SHARE * radius);
}

function newPatch(): Patch {
  return { x: [], y: [], source: [] };
}

/** Adds a side along the whole of `source.curve`, as chords; its end is the next side's start. */
function side(patch: Patch, source: Source): void {
  const c = source.curve;
  patch.x.push(c.x0);
  patch.y.push(c.y0);
  patch.source.push(source);
  if (c.curvature === 0) return;
  const radius = Math.abs(1 / c.curvature);
  const step = 2 * Math.acos(1 - sagitta(radius) / radius);
  const count = Math.ceil((c.length / radius / step) * (1 - 1e-9));
  for (let k = 1; k < count; k++) {
    const [x, y] = pointAt(c, (c.length * k) / count);
    patch.x.push(x);
    patch.y.push(y);
    patch.source.push(source);
  }
}

function lap(patch: Patch, x: number, y: number, source: Source): void {
  patch.x.push(x);
  patch.y.push(y);
  patch.source.push(source);
}

/** Part of an element's body between two distances along its channel. */
export interface Stretch {
  readonly element: Element;
  readonly from: number;
  readonly to: number;
  /** Labels of the square ends; undefined where the body goes on there without a corner. */
  readonly tagFrom: number | undefined;
  readonly tagTo: number | undefined;
}

/** The strip that a stretch of an element covers, square at both ends. */
export function stripPatch(s: Stretch): Patch {
  const e = s.element;
  const whole = e.curve;
  const c = part(whole, s.from - e.s0, s.to - e.s0);
  const slope = (e.h1 - e.h0) / (e.s1 - e.s0);
  const h0 = e.h0 + slope * (s.from - e.s0);
  const h1 = e.h0 + slope * (s.to - e.s0);
  const [vx, vy] = tangentAt(c, c.length);
  const radius = c.curvature === 0 ? Infinity : Math.abs(1 / c.curvature);
  const right0 = c.curvature > 0 ? h0 : Math.min(h0, radius);
  const right1 = c.curvature > 0 ? h1 : Math.min(h1, radius);
  const left0 = c.curvature < 0 ? h0 : Math.min(h0, radius);
  const left1 = c.curvature < 0 ? h1 : Math.min(h1, radius);
  const ax = c.x0 + c.uy * right0;
  const ay = c.y0 - c.ux * right0;
  const bx = c.x1 + vy * right1;
  const by = c.y1 - vx * right1;
  const dx = c.x1 - vy * left1;
  const dy = c.y1 + vx * left1;
  const ex = c.x0 - c.uy * left0;
  const ey = c.y0 + c.ux * left0;
  const patch = newPatch();
  const right = { curve: curve(ax, ay, bx, by, c.bulge), tag: 0 };
  const end = { curve: line(bx, by, dx, dy), tag: s.tagTo ?? 0 };
  const left = { curve: curve(dx, dy, ex, ey, -c.bulge), tag: 0 };
  const start = { curve: line(ex, ey, ax, ay), tag: s.tagFrom ?? 0 };
  if (right.curve.length > 0) side(patch, right);
  if (s.tagTo === undefined) {
    lap(patch, bx, by, right);
    lap(patch, bx + vx * LAP, by + vy * LAP, end);
    lap(patch, dx + vx * LAP, dy + vy * LAP, left);
  } else side(patch, end);
  if (left.curve.length > 0) side(patch, left);
  if (s.tagFrom === undefined) {
    lap(patch, ex, ey, left);
    lap(patch, ex - c.ux * LAP, ey - c.uy * LAP, start);
    lap(patch, ax - c.ux * LAP, ay - c.uy * LAP, right);
  } else side(patch, start);
  return patch;
}

/** A direction of travel through a corner, unit, with the half width there. */
export interface Way {
  readonly ux: number;
  readonly uy: number;
  readonly half: number;
}

/**
 * The outer corner between a strip that arrives at (x, y) and one that leaves it: mitred, or bevelled
 * where the mitre would reach beyond two half widths; undefined where the strips go straight on.
 */
export function cornerPatch(x: number, y: number, into: Way, out: Way): Patch | undefined {
  const cross = into.ux * out.uy - into.uy * out.ux;
  const dot = into.ux * out.ux + into.uy * out.uy;
  const turn = Math.atan2(cross, dot);
  if (Math.abs(turn) < 1e-9) return undefined;
  const s = turn > 0 ? 1 : -1;
  // outer side: right for a turn to the left
  const ax = x + s * into.uy * into.half;
  const ay = y - s * into.ux * into.half;
  const bx = x + s * out.uy * out.half;
  const by = y - s * out.ux * out.half;
  const patch = newPatch();
  const corner = tip(x, y, ax, ay, into, bx, by, out, turn);
  const back = LAP;
  const px = x - s * (into.uy + out.uy) * back;
  const py = y + s * (into.ux + out.ux) * back;
  const a2x = ax - into.ux * back;
  const a2y = ay - into.uy * back;
  const b2x = bx + out.ux * back;
  const b2y = by + out.uy * back;
  const edges: Source[] = corner
    ? [wall(ax, ay, corner[0], corner[1]), wall(corner[0], corner[1], bx, by)]
    : [wall(ax, ay, bx, by)];
  const inner = [wall(x, y, ax, ay), wall(bx, by, x, y)];
  lap(patch, px, py, inner[0]!);
  lap(patch, a2x, a2y, edges[0]!);
  if (!corner) lap(patch, ax, ay, edges[0]!);
  else lap(patch, corner[0], corner[1], edges[1]!);
  if (!corner) lap(patch, bx, by, edges[0]!);
  lap(patch, b2x, b2y, inner[1]!);
  return s > 0 ? patch : flipped(patch);
}

function wall(x0: number, y0: number, x1: number, y1: number): Source {
  return { curve: line(x0, y0, x1, y1), tag: 0 };
}

/** Where the outer sides meet, or undefined where the corner is to be bevelled. */
function tip(
  x: number,
  y: number,
  ax: number,
  ay: number,
  into: Way,
  bx: number,
  by: number,
  out: Way,
  turn: number,
): [number, number] | undefined {
  if (Math.abs(turn) > MITRE_TURN + 1e-9) return undefined;
  const sine = into.ux * out.uy - into.uy * out.ux;
  if (Math.abs(sine) < 1e-9) return undefined;
  const t = ((bx - ax) * out.uy - (by - ay) * out.ux) / sine;
  const u = ((bx - ax) * into.uy - (by - ay) * into.ux) / sine;
  // both sides must be lengthened to meet, or the widths differ too much for a mitre
  if (t < 0 || u > 0) return undefined;
  const tx = ax + into.ux * t;
  const ty = ay + into.uy * t;
  if (Math.hypot(tx - x, ty - y) > 2 * Math.max(into.half, out.half) * (1 + 1e-9)) return undefined;
  return [tx, ty];
}

/** The same polygon the other way round; each side keeps its true edge, turned too. */
export function flipped(p: Patch): Patch {
  const n = p.x.length;
  const out = newPatch();
  const turned = new Map<Source, Source>();
  for (let k = n - 1; k >= 0; k--) {
    const s = p.source[(k + n - 1) % n]!;
    let t = turned.get(s);
    if (!t) {
      const c = s.curve;
      t = { curve: curve(c.x1, c.y1, c.x0, c.y0, -c.bulge), tag: s.tag };
      turned.set(s, t);
    }
    lap(out, p.x[k]!, p.y[k]!, t);
  }
  return out;
}

export function discPatch(x: number, y: number, radius: number, tag: number): Patch {
  const patch = newPatch();
  for (let k = 0; k < 4; k++) {
    const [x0, y0] = quarter(x, y, radius, k);
    const [x1, y1] = quarter(x, y, radius, k + 1);
    side(patch, { curve: curve(x0, y0, x1, y1, Math.tan(Math.PI / 8)), tag });
  }
  return patch;
}

function quarter(x: number, y: number, r: number, k: number): [number, number] {
  const corner = k % 4;
  return [x + (corner === 0 ? r : corner === 2 ? -r : 0), y + (corner === 1 ? r : corner === 3 ? -r : 0)];
}

/** A closed loop of lines and arcs as one body. */
export function patchOf(loop: readonly Edge[]): Patch {
  const patch = newPatch();
  for (let k = 0; k < loop.length; k++) {
    const { x, y, bulge, tag } = loop[k]!;
    const next = loop[(k + 1) % loop.length]!;
    side(patch, { curve: curve(x, y, next.x, next.y, bulge), tag });
  }
  return patch;
}

export function polygonPatch(points: readonly Point[], tag: number): Patch {
  const forward = signedArea(points) >= 0 ? points : [...points].reverse();
  const patch = newPatch();
  for (let i = 0; i < forward.length; i++) {
    const [x0, y0] = forward[i]!;
    const [x1, y1] = forward[(i + 1) % forward.length]!;
    if (x0 !== x1 || y0 !== y1) side(patch, { curve: line(x0, y0, x1, y1), tag });
  }
  return patch;
}
