import type { Edge } from '../../mesh/mesh.ts';
import { type Curve, curve, nearest, pointAt, tangentAt } from './curve.ts';

/** A corner that could not be given the whole radius. */
export interface Reduced {
  readonly x: number;
  readonly y: number;
  readonly radius: number;
}

/** Corners that turn less than this into the wall (radians) are left alone. */
const FLAT = 0.01;

/**
 * The loop with every re-entrant corner between walls (tag 0; the wall pokes into the fluid, to the left)
 * rounded by an arc of the radius, tangent to both edges; where two roundings would overlap on the
 * edge between them, or one reaches beyond its edge, they get the largest radius that fits.
 */
export function filletLoop(loop: readonly Edge[], radius: number, reduced: Reduced[]): Edge[] {
  const n = loop.length;
  if (radius <= 0 || n < 2) return [...loop];
  const edges = loop.map((e, k) => {
    const next = loop[(k + 1) % n]!;
    return curve(e.x, e.y, next.x, next.y, e.bulge);
  });
  // radius at the start corner of every edge; 0 where it is not rounded
  const radii = new Float64Array(n);
  for (let k = 0; k < n; k++) {
    const before = edges[(k + n - 1) % n]!;
    const [ax, ay] = tangentAt(before, before.length);
    const { ux, uy } = edges[k]!;
    const turn = Math.atan2(ax * uy - ay * ux, ax * ux + ay * uy);
    if (turn < -FLAT && loop[k]!.tag === 0 && loop[(k + n - 1) % n]!.tag === 0) radii[k] = radius;
  }
  const cuts: (Rounding | undefined)[] = [];
  for (let pass = 0; pass < 60; pass++) {
    for (let k = 0; k < n; k++) {
      cuts[k] = radii[k]! > 0 ? round(edges[(k + n - 1) % n]!, edges[k]!, radii[k]!) : undefined;
      // too large for a curved edge: no tangent circle exists
      while (radii[k]! > 0 && !cuts[k]) {
        radii[k] = radii[k]! < radius * 1e-3 ? 0 : radii[k]! * 0.8;
        if (radii[k]! > 0) cuts[k] = round(edges[(k + n - 1) % n]!, edges[k]!, radii[k]!);
      }
    }
    let fits = true;
    const factor = new Float64Array(n).fill(1);
    for (let k = 0; k < n; k++) {
      const j = (k + 1) % n;
      const used = (cuts[k]?.after ?? 0) + (cuts[j]?.before ?? 0);
      const { length } = edges[k]!;
      if (used <= length * (1 + 1e-9)) continue;
      fits = false;
      const f = (length / used) * (1 - 1e-12);
      factor[k] = Math.min(factor[k]!, f);
      factor[j] = Math.min(factor[j]!, f);
    }
    if (fits) break;
    for (let k = 0; k < n; k++) radii[k]! *= factor[k]!;
  }
  const out: Edge[] = [];
  for (let k = 0; k < n; k++) {
    const cut = cuts[k];
    const e = edges[k]!;
    const next = cuts[(k + 1) % n];
    if (cut) {
      out.push({ x: cut.x0, y: cut.y0, bulge: cut.bulge, tag: 0 });
      if (cut.radius < radius * (1 - 1e-6)) reduced.push({ x: e.x0, y: e.y0, radius: cut.radius });
    }
    const from = cut?.after ?? 0;
    const to = e.length - (next?.before ?? 0);
    if (to - from <= 1e-6 * e.length) continue;
    const bulge = e.curvature === 0 ? 0 : Math.tan((e.curvature * (to - from)) / 4);
    out.push({ x: cut ? cut.x1 : e.x0, y: cut ? cut.y1 : e.y0, bulge, tag: loop[k]!.tag });
  }
  return out;
}

interface Rounding {
  readonly radius: number;
  /** Tangent points on the edge before and the edge after, and how much of each is taken off. */
  readonly x0: number;
  readonly y0: number;
  readonly x1: number;
  readonly y1: number;
  readonly before: number;
  readonly after: number;
  readonly bulge: number;
}

/** The circle in the wall (to the right) tangent to both edges near their common corner. */
function round(a: Curve, b: Curve, radius: number): Rounding | undefined {
  const pa = offset(a, radius);
  const pb = offset(b, radius);
  if (!pa || !pb) return undefined;
  let best: [number, number] | undefined;
  let least = Infinity;
  const offer = (x: number, y: number) => {
    const d = Math.hypot(x - b.x0, y - b.y0);
    if (d < least) {
      least = d;
      best = [x, y];
    }
  };
  crossOffsets(pa, pb, offer);
  if (!best) return undefined;
  const [cx, cy] = best;
  const da = nearest(a, cx, cy);
  const db = nearest(b, cx, cy);
  const [x0, y0] = pointAt(a, da);
  const [x1, y1] = pointAt(b, db);
  // the foot must be a true tangent point, not an end of the edge
  const slack = 1e-6 * radius + 1e-6;
  const beyond =
    Math.abs(Math.hypot(x0 - cx, y0 - cy) - radius) > slack ||
    Math.abs(Math.hypot(x1 - cx, y1 - cy) - radius) > slack;
  const [ax, ay] = tangentAt(a, da);
  const [bx, by] = tangentAt(b, db);
  const turn = Math.atan2(ax * by - ay * bx, ax * bx + ay * by);
  if (beyond && a.curvature === 0 && b.curvature === 0) {
    // straight edges: tell how far beyond it would reach, so that it is scaled to fit
    const full = Math.tan(Math.abs(Math.atan2(a.ux * b.uy - a.uy * b.ux, a.ux * b.ux + a.uy * b.uy)) / 2);
    return { radius, x0, y0, x1, y1, before: radius * full, after: radius * full, bulge: 0 };
  }
  if (beyond || turn >= 0) return undefined;
  return { radius, x0, y0, x1, y1, before: a.length - da, after: db, bulge: Math.tan(turn / 4) };
}

/** A line or circle as what lies at `radius` to the right of an edge. */
interface Offset {
  readonly edge: Curve;
  readonly x: number;
  readonly y: number;
  /** 0 for a line. */
  readonly r: number;
}

function offset(e: Curve, radius: number): Offset | undefined {
  if (e.curvature === 0) return { edge: e, x: e.x0 + e.uy * radius, y: e.y0 - e.ux * radius, r: 0 };
  const r = 1 / e.curvature + radius;
  const size = e.curvature > 0 ? r : -r;
  return size <= 0 ? undefined : { edge: e, x: e.cx, y: e.cy, r: size };
}

function crossOffsets(p: Offset, q: Offset, offer: (x: number, y: number) => void): void {
  if (p.r === 0 && q.r === 0) {
    const { ux, uy } = p.edge;
    const sine = ux * q.edge.uy - uy * q.edge.ux;
    if (Math.abs(sine) < 1e-9) return;
    const t = ((q.x - p.x) * q.edge.uy - (q.y - p.y) * q.edge.ux) / sine;
    offer(p.x + ux * t, p.y + uy * t);
    return;
  }
  if (p.r === 0 || q.r === 0) {
    const [l, c] = p.r === 0 ? [p, q] : [q, p];
    const { ux, uy } = l.edge;
    const along = (c.x - l.x) * ux + (c.y - l.y) * uy;
    const off = Math.abs((c.x - l.x) * uy - (c.y - l.y) * ux);
    if (off > c.r) return;
    const half = Math.sqrt((c.r - off) * (c.r + off));
    for (const s of [along - half, along + half]) offer(l.x + ux * s, l.y + uy * s);
    return;
  }
  const dx = q.x - p.x;
  const dy = q.y - p.y;
  const d = Math.hypot(dx, dy);
  if (d === 0 || d > p.r + q.r || d < Math.abs(p.r - q.r)) return;
  const along = (d * d + (p.r - q.r) * (p.r + q.r)) / (2 * d);
  const half = Math.sqrt(Math.max(0, (p.r - along) * (p.r + along)));
  for (const s of [-half, half]) offer(p.x + (dx * along - dy * s) / d, p.y + (dy * along + dx * s) / d);
}
