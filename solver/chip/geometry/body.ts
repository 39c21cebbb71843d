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

/** The two corners of the square end at the start or the end of an element. */
export function endCorners(e: Element, atEnd: boolean): [number, number, number, number] {
  const c = e.curve;
  const [x, y] = atEnd ? [c.x1, c.y1] : [c.x0, c.y0];
  const [ux, uy] = atEnd ? tangentAt(c, c.length) : [c.ux, c.uy];
  const h = atEnd ? e.h1 : e.h0;
  return [x + uy * h, y - ux * h, x - uy * h, y + ux * h];
}

/** Half width at a distance along the channel, constant beyond the element's ends. */
export function halfAt(e: Element, s: number): number {
  const t = (s - e.s0) / (e.s1 - e.s0);
  return t <= 0 ? e.h0 : t >= 1 ? e.h1 : e.h0 + (e.h1 - e.h0) * t;
}

/** Corners of the ground that two elements have in common; none where they only touch in less than TOUCH. */
export function commonCorners(a: Body, b: Body): [number, number][] {
  const points: [number, number][] = [];
  const ea = outline(a);
  const eb = outline(b);
  for (const e of ea) if (covers(b, e.x0, e.y0)) points.push([e.x0, e.y0]);
  for (const e of eb) if (covers(a, e.x0, e.y0)) points.push([e.x0, e.y0]);
  for (const p of ea) for (const q of eb) meet(p, q, (s) => points.push(pointAt(p, s)));
  return points;
}
