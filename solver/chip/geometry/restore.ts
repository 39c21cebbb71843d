import type { Path64 } from 'clipper2-ts';
import Flatbush from 'flatbush';
import type { Edge } from '../../mesh/mesh.ts';
import { alongArc, type Curve, nearest, pointAt, tangentAt } from './curve.ts';
import { type Source, sagitta } from './patch.ts';
import type { Grid } from './union.ts';

/** Two true edges on the same line or circle, to this, nm. */
const SAME = 0.05;

/**
 * The loop of lines and arcs that a polygon of the union stands for: each side is led back to the true
 * edge under it, sides of one edge become one, and the corners are where neighbouring edges truly meet.
 */
export function restoreLoop(path: Path64, grid: Grid, edges: TrueEdges): Edge[] {
  const n = path.length;
  const { scale } = grid;
  const slack = 1.5 / scale;
  let runs: Run[] = [];
  let last: Run | undefined;
  let x1 = path[0]!.x / scale + grid.x;
  let y1 = path[0]!.y / scale + grid.y;
  for (let k = 0; k < n; k++) {
    const to = path[k + 1 === n ? 0 : k + 1]!;
    const x0 = x1;
    const y0 = y1;
    x1 = to.x / scale + grid.x;
    y1 = to.y / scale + grid.y;
    if (last && !edges.labelled && staysOn(last.source.curve, x0, y0, x1, y1)) {
      last.x1 = x1;
      last.y1 = y1;
      continue;
    }
    const source = sourceUnder(edges.near(x0, y0, x1, y1), x0, y0, x1, y1, slack);
    if (last && sameEdge(last.source, source)) {
      last.x1 = x1;
      last.y1 = y1;
    } else {
      last = { source, x0, y0, x1, y1 };
      runs.push(last);
    }
  }
  runs = joinRound(dropSlivers(joinRound(runs), slack));
  if (runs.length === 1) return wholeCircle(runs[0]!);
  return fromLeast(corners(runs));
}

/**
 * Whether a side that follows one of an arc is the next of its chords: it lies on the circle, runs the same
 * way and ends before the arc does. Most sides are; they need no search.
 */
function staysOn(c: Curve, x0: number, y0: number, x1: number, y1: number): boolean {
  if (c.curvature === 0) return false;
  const r = Math.abs(1 / c.curvature);
  const free = 2 * sagitta(r);
  if (arcOff(c, r, free, x1, y1) > 0 || arcOff(c, r, free, (x0 + x1) / 2, (y0 + y1) / 2) > 0) return false;
  const d = alongArc(c, x1, y1);
  if (d < 0 || d > c.length) return false;
  return runsAlong(c, d, x1 - x0, y1 - y0);
}

/** Whether a direction is forward on an arc at a distance along it. */
function runsAlong(c: Curve, d: number, dx: number, dy: number): boolean {
  const a = c.curvature * d;
  const cos = Math.cos(a);
  const sin = Math.sin(a);
  return dx * (c.ux * cos - c.uy * sin) + dy * (c.uy * cos + c.ux * sin) > 0;
}

/** The true edges of all bodies, with an index where there are many. */
export class TrueEdges {
  readonly #all: readonly Source[];
  /** Whether any arc bears a label, which the outcome must keep. */
  readonly labelled: boolean;
  readonly #index: Flatbush | undefined;

  constructor(all: readonly Source[]) {
    this.#all = all;
    let labelled = false;
    for (const { tag, curve: c } of all) if (tag !== 0 && c.curvature !== 0) labelled = true;
    this.labelled = labelled;
    if (all.length <= 48) return;
    const index = new Flatbush(all.length);
    for (const { curve: c } of all) {
      const bend = c.curvature === 0 ? 0 : Math.min(2 / Math.abs(c.curvature), c.length);
      index.add(
        Math.min(c.x0, c.x1) - bend,
        Math.min(c.y0, c.y1) - bend,
        Math.max(c.x0, c.x1) + bend,
        Math.max(c.y0, c.y1) + bend,
      );
    }
    index.finish();
    this.#index = index;
  }

  near(x0: number, y0: number, x1: number, y1: number): readonly Source[] {
    if (!this.#index) return this.#all;
    const x = (x0 + x1) / 2;
    const y = (y0 + y1) / 2;
    for (let reach = 40; ; reach *= 8) {
      const found = this.#index.search(x - reach, y - reach, x + reach, y + reach);
      if (found.length === 0 && reach <= 1e10) continue;
      found.sort(ascending);
      const near: Source[] = [];
      for (const i of found) near.push(this.#all[i]!);
      return near;
    }
  }
}

const ascending = (a: number, b: number): number => a - b;

/** The loop from its leftmost, then lowest corner on, so that equal outlines are equal lists. */
function fromLeast(loop: Edge[]): Edge[] {
  let k = 0;
  for (let i = 1; i < loop.length; i++) {
    const dx = loop[i]!.x - loop[k]!.x;
    if (dx < -SAME || (dx <= SAME && loop[i]!.y < loop[k]!.y)) k = i;
  }
  return k === 0 ? loop : [...loop.slice(k), ...loop.slice(0, k)];
}

interface Run {
  source: Source;
  x0: number;
  y0: number;
  x1: number;
  y1: number;
}

/** First and last run of a loop are neighbours too. */
function joinRound(runs: Run[]): Run[] {
  const merged: Run[] = [];
  for (const r of runs) {
    const last = merged[merged.length - 1];
    if (last && sameEdge(last.source, r.source)) {
      last.x1 = r.x1;
      last.y1 = r.y1;
    } else merged.push(r);
  }
  if (merged.length > 1) {
    const first = merged[0]!;
    const last = merged[merged.length - 1]!;
    if (sameEdge(first.source, last.source)) {
      first.x0 = last.x0;
      first.y0 = last.y0;
      merged.pop();
    }
  }
  return merged;
}

/** Sides left by rounding, or by the chords of an arc beside them, stand for no edge. */
function dropSlivers(runs: Run[], slack: number): Run[] {
  const n = runs.length;
  if (n < 3) return runs;
  const kept: Run[] = [];
  for (let k = 0; k < n; k++) {
    const r = runs[k]!;
    const length = Math.hypot(r.x1 - r.x0, r.y1 - r.y0);
    const before = runs[(k + n - 1) % n]!.source.curve;
    const after = runs[(k + 1) % n]!.source.curve;
    if (length > 4 * slack + chordError(before) + chordError(after)) kept.push(r);
  }
  return kept.length > 1 ? kept : runs;
}

function chordError(c: Curve): number {
  return c.curvature === 0 ? 0 : 4 * sagitta(Math.abs(1 / c.curvature));
}

/** The true edge under a side: the one nearest to both its ends and its middle that runs the same way. */
function sourceUnder(
  sources: readonly Source[],
  x0: number,
  y0: number,
  x1: number,
  y1: number,
  slack: number,
): Source {
  const dx = x1 - x0;
  const dy = y1 - y0;
  const mx = (x0 + x1) / 2;
  const my = (y0 + y1) / 2;
  let best = sources[0]!;
  let least = Infinity;
  for (const s of sources) {
    const c = s.curve;
    let off = 0;
    if (c.curvature === 0) {
      if (dx * c.ux + dy * c.uy <= 0) continue;
      const a = (x0 - c.x0) * c.uy - (y0 - c.y0) * c.ux;
      const b = (x1 - c.x0) * c.uy - (y1 - c.y0) * c.ux;
      const m = (mx - c.x0) * c.ux + (my - c.y0) * c.uy;
      const beyond = m < 0 ? -m : m > c.length ? m - c.length : 0;
      off = Math.abs(a) + Math.abs(b) + beyond;
    } else {
      const d = nearest(c, mx, my);
      if (!runsAlong(c, d, dx, dy)) continue;
      const r = Math.abs(1 / c.curvature);
      const free = sagitta(r) * 2;
      off = arcOff(c, r, free, x0, y0) + arcOff(c, r, free, x1, y1) + arcOff(c, r, free, mx, my);
      const [px, py] = pointAt(c, d);
      off += Math.max(0, Math.hypot(px - mx, py - my) - free);
    }
    // a labelled edge wins where it coincides with an unlabelled one
    if (off < least - slack || (off < least + slack && s.tag > best.tag)) {
      least = Math.min(off, least);
      best = s;
    }
  }
  return best;
}

function arcOff(c: Curve, r: number, free: number, x: number, y: number): number {
  return Math.max(0, Math.abs(Math.hypot(x - c.cx, y - c.cy) - r) - free);
}

function sameEdge(a: Source, b: Source): boolean {
  if (a === b) return true;
  if (a.tag !== b.tag) return false;
  const p = a.curve;
  const q = b.curve;
  if (p.curvature === 0 && q.curvature === 0) {
    if (p.ux * q.ux + p.uy * q.uy <= 0) return false;
    return lineOff(p, q.x0, q.y0) <= SAME && lineOff(p, q.x1, q.y1) <= SAME && lineOff(q, p.x0, p.y0) <= SAME;
  }
  if (p.curvature * q.curvature <= 0) return false;
  const r = Math.abs(1 / p.curvature);
  const s = Math.abs(1 / q.curvature);
  return Math.abs(r - s) <= SAME && Math.hypot(p.cx - q.cx, p.cy - q.cy) <= SAME;
}

function lineOff(c: Curve, x: number, y: number): number {
  return Math.abs((x - c.x0) * c.uy - (y - c.y0) * c.ux);
}

/** Distance of a point from the line or circle that an edge lies on. */
function supportOff(c: Curve, x: number, y: number): number {
  if (c.curvature === 0) return lineOff(c, x, y);
  return Math.abs(Math.hypot(x - c.cx, y - c.cy) - Math.abs(1 / c.curvature));
}

function corners(runs: readonly Run[]): Edge[] {
  const n = runs.length;
  const at = { x: 0, y: 0 };
  const px = new Float64Array(n);
  const py = new Float64Array(n);
  for (let k = 0; k < n; k++) {
    const before = runs[k === 0 ? n - 1 : k - 1]!;
    const after = runs[k]!;
    const reach = Math.hypot(after.x0 - before.x1, after.y0 - before.y1);
    at.x = (before.x1 + after.x0) / 2;
    at.y = (before.y1 + after.y0) / 2;
    moveToCorner(before.source.curve, after.source.curve, at, reach);
    px[k] = at.x;
    py[k] = at.y;
  }
  const edges: Edge[] = [];
  for (let k = 0; k < n; k++) {
    const j = k + 1 === n ? 0 : k + 1;
    const { curve: c, tag } = runs[k]!.source;
    let bulge = 0;
    if (c.curvature !== 0) {
      const a0 = Math.atan2(py[k]! - c.cy, px[k]! - c.cx);
      const a1 = Math.atan2(py[j]! - c.cy, px[j]! - c.cx);
      let sweep = a1 - a0;
      if (c.curvature > 0 && sweep < 0) sweep += 2 * Math.PI;
      if (c.curvature < 0 && sweep > 0) sweep -= 2 * Math.PI;
      bulge = Math.tan(sweep / 4);
    }
    edges.push({ x: px[k]!, y: py[k]!, bulge, tag });
  }
  return edges;
}

/** The best of the places offered for a corner near (nearX, nearY): the nearest, less than `off` from it. */
interface Offer {
  readonly nearX: number;
  readonly nearY: number;
  x: number;
  y: number;
  off: number;
  made: boolean;
}

const noOffer = (nearX: number, nearY: number, within: number): Offer => ({
  nearX,
  nearY,
  x: 0,
  y: 0,
  off: within,
  made: false,
});

function offer(best: Offer, x: number, y: number): void {
  const off = Math.hypot(x - best.nearX, y - best.nearY);
  if (!(off < best.off)) return;
  best.off = off;
  best.x = x;
  best.y = y;
  best.made = true;
}

/** Moves a point to where two true edges meet near it. */
function moveToCorner(a: Curve, b: Curve, at: { x: number; y: number }, reach: number): void {
  const error = chordError(a) + chordError(b);
  const within = 40 * error + 4 * reach + 20;
  const crossing = noOffer(at.x, at.y, within);
  crossSupports(a, b, crossing);
  if (crossing.made && !shallow(a, b, crossing.x, crossing.y)) {
    at.x = crossing.x;
    at.y = crossing.y;
    return;
  }
  // tangent edges meet at a shared end point better than at a computed crossing
  const shared = noOffer(at.x, at.y, within);
  offerShared(a, b, a.x0, a.y0, shared);
  offerShared(a, b, a.x1, a.y1, shared);
  offerShared(a, b, b.x0, b.y0, shared);
  offerShared(a, b, b.x1, b.y1, shared);
  const best = shared.made ? shared : crossing;
  if (!best.made) return;
  at.x = best.x;
  at.y = best.y;
}

function offerShared(a: Curve, b: Curve, x: number, y: number, best: Offer): void {
  if (supportOff(a, x, y) <= SAME && supportOff(b, x, y) <= SAME) offer(best, x, y);
}

function shallow(a: Curve, b: Curve, x: number, y: number): boolean {
  const [ax, ay] = directionAt(a, x, y);
  const [bx, by] = directionAt(b, x, y);
  return Math.abs(ax * by - ay * bx) < 0.02;
}

function directionAt(c: Curve, x: number, y: number): [number, number] {
  return c.curvature === 0 ? [c.ux, c.uy] : tangentAt(c, alongArc(c, x, y));
}

function crossSupports(a: Curve, b: Curve, best: Offer): void {
  if (a.curvature === 0 && b.curvature === 0) {
    const sine = a.ux * b.uy - a.uy * b.ux;
    if (Math.abs(sine) < 1e-12) return;
    const t = ((b.x0 - a.x0) * b.uy - (b.y0 - a.y0) * b.ux) / sine;
    offer(best, a.x0 + a.ux * t, a.y0 + a.uy * t);
    return;
  }
  if (a.curvature === 0 || b.curvature === 0) {
    if (a.curvature === 0) crossLineCircle(a, b, best);
    else crossLineCircle(b, a, best);
    return;
  }
  const ra = Math.abs(1 / a.curvature);
  const rb = Math.abs(1 / b.curvature);
  const dx = b.cx - a.cx;
  const dy = b.cy - a.cy;
  const d = Math.hypot(dx, dy);
  if (d === 0) return;
  const along = (d * d + (ra - rb) * (ra + rb)) / (2 * d);
  const half = Math.sqrt(Math.max(0, (ra - along) * (ra + along)));
  for (let side = -1; side <= 1; side += 2) {
    const s = side * half;
    offer(best, a.cx + (dx * along - dy * s) / d, a.cy + (dy * along + dx * s) / d);
  }
}

function crossLineCircle(a: Curve, b: Curve, best: Offer): void {
  const r = Math.abs(1 / b.curvature);
  const along = (b.cx - a.x0) * a.ux + (b.cy - a.y0) * a.uy;
  const off = Math.abs((b.cx - a.x0) * a.uy - (b.cy - a.y0) * a.ux);
  const half = Math.sqrt(Math.max(0, (r - off) * (r + off)));
  offer(best, a.x0 + a.ux * (along - half), a.y0 + a.uy * (along - half));
  offer(best, a.x0 + a.ux * (along + half), a.y0 + a.uy * (along + half));
}

/** A loop that is one circle all round, as two halves. */
function wholeCircle(run: Run): Edge[] {
  const c = run.source.curve;
  if (c.curvature === 0) return [];
  const r = Math.abs(1 / c.curvature);
  const bulge = c.curvature > 0 ? 1 : -1;
  return [
    { x: c.cx - r, y: c.cy, bulge, tag: run.source.tag },
    { x: c.cx + r, y: c.cy, bulge, tag: run.source.tag },
  ];
}
