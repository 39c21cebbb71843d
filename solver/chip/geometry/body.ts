import type { Element } from './centreline.ts';
import { type Curve, curve, distanceTo, line, meet, pointAt, tangentAt } from './curve.ts';
import { TOUCH } from './tolerance.ts';

/** Beyond this turn a mitre would reach further than two half widths from the corner: it is bevelled. */
export const MITRE_TURN = (2 * Math.PI) / 3;

/**
 * What an element covers of the plan, counter-clockwise: its centreline to half the width on both
 * sides, square at its ends, with its share of the mitred outer corners at its vertices.
 */
export interface Body {
  readonly element: Element;
  readonly minX: number;
  readonly minY: number;
  readonly maxX: number;
  readonly maxY: number;
  /** Corners x, y, x, y … of a straight element's convex polygon; empty for an arc. */
  readonly corners: readonly number[];
}

export function body(e: Element): Body {
  const c = e.curve;
  if (c.curvature !== 0) return arcBody(e);
  const corners: number[] = [];
  const { ux, uy } = c;
  // right side forth, left side back
  const right0 = e.turn0 > 0 ? mitre(e.turn0) * e.h0 : 0;
  const right1 = e.turn1 > 0 ? mitre(e.turn1) * e.h1 : 0;
  const left1 = e.turn1 < 0 ? mitre(-e.turn1) * e.h1 : 0;
  const left0 = e.turn0 < 0 ? mitre(-e.turn0) * e.h0 : 0;
  corners.push(c.x0 + uy * e.h0 - ux * right0, c.y0 - ux * e.h0 - uy * right0);
  corners.push(c.x1 + uy * e.h1 + ux * right1, c.y1 - ux * e.h1 + uy * right1);
  if (Math.abs(e.turn1) > MITRE_TURN) bevel(corners, c.x1, c.y1, ux, uy, e.h1, e.turn1);
  corners.push(c.x1 - uy * e.h1 + ux * left1, c.y1 + ux * e.h1 + uy * left1);
  corners.push(c.x0 - uy * e.h0 - ux * left0, c.y0 + ux * e.h0 - uy * left0);
  if (Math.abs(e.turn0) > MITRE_TURN) bevel(corners, c.x0, c.y0, -ux, -uy, e.h0, -e.turn0);
  let minX = Infinity;
  let minY = Infinity;
  let maxX = -Infinity;
  let maxY = -Infinity;
  for (let i = 0; i < corners.length; i += 2) {
    const x = corners[i]!;
    const y = corners[i + 1]!;
    if (x < minX) minX = x;
    if (x > maxX) maxX = x;
    if (y < minY) minY = y;
    if (y > maxY) maxY = y;
  }
  return { element: e, minX, minY, maxX, maxY, corners };
}

/** How far the mitred corner goes on along the side, in half widths. */
function mitre(turn: number): number {
  return turn > MITRE_TURN ? 0 : Math.tan(turn / 2);
}

/** Middle of the bevel's edge, which the elements on both sides share. */
function bevel(
  corners: number[],
  x: number,
  y: number,
  ux: number,
  uy: number,
  half: number,
  turn: number,
): void {
  const a = turn / 2 - Math.sign(turn) * (Math.PI / 2);
  const reach = half * Math.cos(turn / 2);
  corners.push(
    x + reach * (ux * Math.cos(a) - uy * Math.sin(a)),
    y + reach * (uy * Math.cos(a) + ux * Math.sin(a)),
  );
}

function arcBody(e: Element): Body {
  const c = e.curve;
  const h = Math.max(e.h0, e.h1);
  const sweep = Math.abs(c.curvature * c.length);
  let minX = Math.min(c.x0, c.x1);
  let maxX = Math.max(c.x0, c.x1);
  let minY = Math.min(c.y0, c.y1);
  let maxY = Math.max(c.y0, c.y1);
  // an arc rises at most its sagitta (or its radius) above the chord
  const rise =
    sweep < Math.PI ? (1 - Math.cos(sweep / 2)) / Math.abs(c.curvature) : 2 / Math.abs(c.curvature);
  minX -= rise + h;
  minY -= rise + h;
  maxX += rise + h;
  maxY += rise + h;
  return { element: e, minX, minY, maxX, maxY, corners: [] };
}

/** Edges of the covered area, counter-clockwise. */
export function outline(b: Body): Curve[] {
  const n = b.corners.length;
  const edges: Curve[] = [];
  if (n > 0) {
    for (let i = 0; i < n; i += 2) {
      const j = (i + 2) % n;
      edges.push(line(b.corners[i]!, b.corners[i + 1]!, b.corners[j]!, b.corners[j + 1]!));
    }
    return edges;
  }
  return sector(b.element.curve, b.element.h0, b.element.h1);
}

/**
 * A bent strip: two arcs and two square ends, counter-clockwise. Where the half width exceeds the
 * radius the inner side shrinks to the centre.
 */
export function sector(c: Curve, h0: number, h1: number): Curve[] {
  const radius = Math.abs(1 / c.curvature);
  const inner0 = Math.min(h0, radius);
  const inner1 = Math.min(h1, radius);
  const left = c.curvature > 0;
  const [vx, vy] = tangentAt(c, c.length);
  const r0 = left ? h0 : inner0;
  const r1 = left ? h1 : inner1;
  const l0 = left ? inner0 : h0;
  const l1 = left ? inner1 : h1;
  const ax = c.x0 + c.uy * r0;
  const ay = c.y0 - c.ux * r0;
  const bx = c.x1 + vy * r1;
  const by = c.y1 - vx * r1;
  const dx = c.x1 - vy * l1;
  const dy = c.y1 + vx * l1;
  const ex = c.x0 - c.uy * l0;
  const ey = c.y0 + c.ux * l0;
  const edges: Curve[] = [];
  const add = (px: number, py: number, qx: number, qy: number, bulge: number) => {
    if (Math.hypot(qx - px, qy - py) > 1e-6) edges.push(curve(px, py, qx, qy, bulge));
  };
  add(ax, ay, bx, by, c.bulge);
  add(bx, by, dx, dy, 0);
  add(dx, dy, ex, ey, -c.bulge);
  add(ex, ey, ax, ay, 0);
  return edges;
}

/** Whether (x, y) lies in the covered area or within TOUCH of it. */
export function covers(b: Body, x: number, y: number): boolean {
  if (x < b.minX - TOUCH || x > b.maxX + TOUCH || y < b.minY - TOUCH || y > b.maxY + TOUCH) return false;
  const { corners } = b;
  const n = corners.length;
  if (n > 0) {
    for (let i = 0; i < n; i += 2) {
      const j = i + 2 === n ? 0 : i + 2;
      const dx = corners[j]! - corners[i]!;
      const dy = corners[j + 1]! - corners[i + 1]!;
      const length = Math.sqrt(dx * dx + dy * dy);
      const cross = dx * (y - corners[i + 1]!) - dy * (x - corners[i]!);
      if (cross < -TOUCH * length) return false;
    }
    return true;
  }
  return inSector(b.element, x, y);
}

function inSector(e: Element, x: number, y: number): boolean {
  const c = e.curve;
  const radius = Math.abs(1 / c.curvature);
  const rho = Math.hypot(x - c.cx, y - c.cy);
  const h = Math.max(e.h0, e.h1);
  if (rho > radius + h + TOUCH || rho < radius - h - TOUCH) return false;
  const edges = outline({ element: e, minX: 0, minY: 0, maxX: 0, maxY: 0, corners: [] });
  return inLoop(edges, x, y) || edges.some((edge) => distanceTo(edge, x, y) <= TOUCH);
}

/** Whether a closed loop of lines and arcs encloses a point (even-odd, no tolerance). */
export function inLoop(edges: readonly Curve[], x: number, y: number): boolean {
  let inside = false;
  for (const e of edges) {
    if (e.y0 > y !== e.y1 > y) {
      const t = (y - e.y0) / (e.y1 - e.y0);
      if (e.x0 + t * (e.x1 - e.x0) > x) inside = !inside;
    }
    // the sliver between an arc and its chord is taken in or out of the polygon of chords
    if (e.curvature !== 0 && inSegment(e, x, y)) inside = !inside;
  }
  return inside;
}

function inSegment(e: Curve, x: number, y: number): boolean {
  const r = Math.abs(1 / e.curvature);
  if (Math.hypot(x - e.cx, y - e.cy) > r) return false;
  const dx = e.x1 - e.x0;
  const dy = e.y1 - e.y0;
  let side = dx * (y - e.y0) - dy * (x - e.x0);
  // a point on the chord counts to the side that the crossing count gives it to
  if (side === 0) side = dy === 0 ? dx : -dy;
  return e.curvature > 0 ? side < 0 : side > 0;
}

/** Whether the covered areas of two elements overlap or touch, to TOUCH. */
export function overlap(a: Body, b: Body): boolean {
  if (
    a.minX > b.maxX + TOUCH ||
    b.minX > a.maxX + TOUCH ||
    a.minY > b.maxY + TOUCH ||
    b.minY > a.maxY + TOUCH
  ) {
    return false;
  }
  if (a.corners.length > 0 && b.corners.length > 0) {
    return !apart(a.corners, b.corners) && !apart(b.corners, a.corners);
  }
  const ea = outline(a);
  const eb = outline(b);
  return loopsOverlap(ea, eb);
}

/** Whether two closed loops touch, cross, or one lies within the other. */
export function loopsOverlap(ea: readonly Curve[], eb: readonly Curve[]): boolean {
  let hit = false;
  for (const p of ea) {
    for (const q of eb) {
      meet(p, q, () => {
        hit = true;
      });
      if (hit) return true;
    }
  }
  return inLoop(ea, eb[0]!.x0, eb[0]!.y0) || inLoop(eb, ea[0]!.x0, ea[0]!.y0);
}

/** Whether an edge of convex p has all of q beyond it by more than TOUCH. */
function apart(p: readonly number[], q: readonly number[]): boolean {
  for (let i = 0; i < p.length; i += 2) {
    const j = i + 2 === p.length ? 0 : i + 2;
    const dx = p[j]! - p[i]!;
    const dy = p[j + 1]! - p[i + 1]!;
    const limit = -TOUCH * Math.sqrt(dx * dx + dy * dy);
    let beyond = true;
    for (let k = 0; k < q.length; k += 2) {
      if (dx * (q[k + 1]! - p[i + 1]!) - dy * (q[k]! - p[i]!) >= limit) {
        beyond = false;
        break;
      }
    }
    if (beyond) return true;
  }
  return false;
}

/** The two corners of the square end at the start or the end of an element. */
export function endCorners(e: Element, atEnd: boolean): [number, number, number, number] {
  const c = e.curve;
  const [x, y] = atEnd ? [c.x1, c.y1] : [c.x0, c.y0];
  const [ux, uy] = atEnd ? tangentAt(c, c.length) : [c.ux, c.uy];
  const h = atEnd ? e.h1 : e.h0;
  return [x + uy * h, y - ux * h, x - uy * h, y + ux * h];
}

/** Place on an element at a distance along its channel. */
export function placeAt(e: Element, s: number): [number, number] {
  return pointAt(e.curve, s - e.s0);
}

/** Half width at a distance along the channel, constant beyond the element's ends. */
export function halfAt(e: Element, s: number): number {
  const t = (s - e.s0) / (e.s1 - e.s0);
  return t <= 0 ? e.h0 : t >= 1 ? e.h1 : e.h0 + (e.h1 - e.h0) * t;
}
