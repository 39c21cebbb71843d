import { Problem } from '../problem/problem.ts';
import { type Curve, curveOf, directionAt, pointAt } from './arc.ts';
import { type EdgeWish, relaxed, wishAt } from './edge-wish.ts';
import { gapWishes } from './gaps.ts';
import type { Shape } from './mesh.ts';
import type { FullSizing } from './sizing.ts';

/** The boundary cut into pieces; piece i runs from point i to point next[i], fluid on its left. */
export interface Boundary {
  readonly count: number;
  readonly x: Float64Array;
  readonly y: Float64Array;
  /** Edge length wanted at each point. */
  readonly size: Float64Array;
  readonly next: Int32Array;
  readonly previous: Int32Array;
  /** Edge of the shape (counted through all loops) that piece i lies on, and its share of it. */
  readonly edge: Int32Array;
  readonly from: Float64Array;
  readonly to: Float64Array;
  /** 1 where point i is a corner too sharp for well-shaped triangles. */
  readonly sharp: Uint8Array;
  readonly curves: readonly Curve[];
  readonly tag: Int32Array;
  /** Share 0 starts: the point where each edge of the shape starts. */
  readonly first: Int32Array;
}

/** Corners below this interior angle are meshed by a tip triangle and a cone of sizes. */
const SHARP = (65 * Math.PI) / 180;
const CUSP = (0.5 * Math.PI) / 180;
/** Share of the shorter side that a tip triangle may take. */
const TIP_SHARE = 0.25;

export function cutBoundary(shape: Shape, sizing: FullSizing, extra: readonly EdgeWish[]): Boundary {
  const loops = shape.map((loop) => loop.length);
  const total = loops.reduce((sum, n) => sum + n, 0);
  const curves: Curve[] = [];
  const previous = new Int32Array(total);
  const following = new Int32Array(total);
  const tag = new Int32Array(total);
  const size = new Float64Array(total);
  for (const loop of shape) {
    const base = curves.length;
    for (let i = 0; i < loop.length; i += 1) {
      const a = loop[i];
      const b = loop[(i + 1) % loop.length];
      const curve = curveOf(a.x, a.y, b.x, b.y, a.bulge);
      const e = base + i;
      previous[e] = base + ((i + loop.length - 1) % loop.length);
      following[e] = base + ((i + 1) % loop.length);
      tag[e] = a.tag;
      const quarters = Math.abs(curve.sweep) / (Math.PI / 2);
      let least = Math.max(1, Math.ceil(quarters * sizing.perQuarter - 1e-6));
      if (loop.length === 2) least = Math.max(2, least);
      size[e] = Math.min(sizing.size, sizing.wallSize(a.tag), curve.length / least);
      curves.push(curve);
    }
  }

  const wishes: EdgeWish[] = [...extra, ...gapWishes(curves, previous, size, sizing.size, sizing.across)];
  const corner = corners(curves, previous, size);
  const vertexSize = vertexSizes(curves, previous, following, size, wishes, corner, sizing.growth);
  const wishesOf: EdgeWish[][] = [];
  for (let e = 0; e < total; e += 1) wishesOf.push([]);
  for (const wish of wishes) wishesOf[wish.edge].push(wish);

  const pieces: { edge: number; from: number; to: number; size: number }[] = [];
  const first = new Int32Array(total);
  const point = [0, 0];
  for (let e = 0; e < total; e += 1) {
    const curve = curves[e];
    const f = following[e];
    const wished = relaxed(wishesOf[e], sizing.growth * curve.length);
    const tip0 = corner.tip[e];
    const tip1 = corner.tip[f];
    const along: Along = {
      curve,
      size: size[e],
      growth: sizing.growth,
      tip0,
      tip1,
      slope0: tip0 ? corner.cone[e] : vertexSize[e],
      slope1: tip1 ? corner.cone[f] : vertexSize[f],
      wished,
      points: sizing.points,
      point,
    };
    first[e] = pieces.length;
    const start = tip0 / curve.length;
    const end = 1 - tip1 / curve.length;
    const shares = spread(along, start, end);
    if (tip0) shares.unshift(0);
    if (tip1) shares.push(1);
    for (let k = 0; k + 1 < shares.length; k += 1) {
      pieces.push({ edge: e, from: shares[k], to: shares[k + 1], size: wanted(along, shares[k]) });
    }
    if (pieces.length > sizing.maxTriangles) throw tooFine(sizing.maxTriangles);
  }
  return assemble(pieces, curves, tag, first, following, corner.tip);
}

/** What the sizes along one edge depend on. */
interface Along {
  readonly curve: Curve;
  /** Of the edge as a whole. */
  readonly size: number;
  readonly growth: number;
  /** Lengths of the tip pieces at its ends, 0 where there is none. */
  readonly tip0: number;
  readonly tip1: number;
  /** Of the cone at a sharp end; else the size at that end. */
  readonly slope0: number;
  readonly slope1: number;
  readonly wished: readonly EdgeWish[];
  readonly points: FullSizing['points'];
  /** To write over. */
  readonly point: number[];
}

/** Edge length wanted at share t. Of the module, not of the edge: it is compiled once for all of them. */
function wanted(along: Along, t: number): number {
  const { curve, growth, tip0, tip1, points, point } = along;
  const d0 = t * curve.length;
  const d1 = curve.length - d0;
  let s = along.size;
  s = Math.min(s, tip0 ? cone(along.slope0, tip0, d0, growth) : along.slope0 + growth * d0);
  s = Math.min(s, tip1 ? cone(along.slope1, tip1, d1, growth) : along.slope1 + growth * d1);
  s = Math.min(s, wishAt(along.wished, t, growth * curve.length));
  if (points.length > 0) {
    pointAt(curve, t, point);
    for (const at of points) {
      s = Math.min(s, at.size + at.growth * Math.hypot(point[0] - at.x, point[1] - at.y));
    }
  }
  return s;
}

export function tooFine(limit: number): Problem {
  return new Problem(
    'too-many',
    `The shape would need more than ${limit} triangles.`,
    '',
    'Ask for less accuracy, or remove details far smaller than the rest of the shape.',
  );
}

function cone(slope: number, tip: number, distance: number, growth: number): number {
  return Math.min(slope * Math.max(distance, tip), slope * tip + growth * Math.max(0, distance - tip));
}

/** Sharp corners: length of the tip piece on both sides (0 elsewhere) and width per distance. */
function corners(curves: readonly Curve[], previous: Int32Array, size: Float64Array) {
  const tip = new Float64Array(curves.length);
  const slope = new Float64Array(curves.length);
  for (let e = 0; e < curves.length; e += 1) {
    const before = curves[previous[e]];
    const after = curves[e];
    const turn = directionAt(after, 0) - directionAt(before, 1);
    const inside = Math.PI - Math.atan2(Math.sin(turn), Math.cos(turn));
    if (inside >= SHARP) continue;
    if (inside < CUSP) {
      throw new Problem(
        'shape',
        'The outline doubles back on itself.',
        '',
        'Remove the spike, or give it a width.',
      );
    }
    slope[e] = 2 * Math.tan(inside / 2);
    tip[e] = Math.min(
      TIP_SHARE * Math.min(before.length, after.length),
      1.2 * Math.min(size[e], size[previous[e]]),
    );
  }
  return { tip, cone: slope };
}

/** Edge length at each edge's start: by its neighbours' lengths and wishes, growing no faster than allowed. */
function vertexSizes(
  curves: readonly Curve[],
  previous: Int32Array,
  following: Int32Array,
  size: Float64Array,
  wishes: readonly EdgeWish[],
  corner: { tip: Float64Array; cone: Float64Array },
  growth: number,
): Float64Array {
  const count = curves.length;
  const at = new Float64Array(count);
  for (let e = 0; e < count; e += 1) {
    const p = previous[e];
    at[e] = Math.min(size[e], size[p], curves[e].length, curves[p].length);
    // A sharp corner passes its width on, at the end of its tip.
    if (corner.tip[e] > 0) at[e] = Math.min(at[e], corner.cone[e] * corner.tip[e]);
  }
  for (const { edge, t, size: wish } of wishes) {
    const f = following[edge];
    at[edge] = Math.min(at[edge], wish + growth * t * curves[edge].length);
    at[f] = Math.min(at[f], wish + growth * (1 - t) * curves[edge].length);
  }
  for (let pass = 0; pass < 2; pass += 1) {
    for (let e = 0; e < count; e += 1) {
      const f = following[e];
      at[f] = Math.min(at[f], at[e] + growth * curves[e].length);
    }
    for (let e = count - 1; e >= 0; e -= 1) {
      at[e] = Math.min(at[e], at[following[e]] + growth * curves[e].length);
    }
  }
  return at;
}

/** Stretches of an edge, each no longer than about what is wanted there: where it ends, and how many pieces to there. */
interface Stretches {
  readonly ends: number[];
  readonly sums: number[];
}

function visit(along: Along, a: number, b: number, depth: number, stretches: Stretches): void {
  const { ends, sums } = stretches;
  const middle = (a + b) / 2;
  const s = wanted(along, middle);
  const { length } = along.curve;
  if ((b - a) * length > 0.6 * s && depth < 60) {
    visit(along, a, middle, depth + 1, stretches);
    visit(along, middle, b, depth + 1, stretches);
    return;
  }
  ends.push(b);
  sums.push((sums.length > 0 ? sums[sums.length - 1] : 0) + ((b - a) * length) / s);
}

/** Shares from `start` to `end` such that each piece is about as long as wanted there. */
function spread(along: Along, start: number, end: number): number[] {
  const stretches: Stretches = { ends: [], sums: [] };
  visit(along, start, end, 0, stretches);
  const { ends, sums } = stretches;
  const sum = sums[sums.length - 1];
  const n = Math.max(1, Math.ceil(sum - 0.2));
  const shares = [start];
  let k = 0;
  for (let i = 1; i < n; i += 1) {
    const goal = (sum * i) / n;
    while (sums[k] < goal) k += 1;
    const low = k === 0 ? 0 : sums[k - 1];
    const a = k === 0 ? start : ends[k - 1];
    shares.push(a + ((ends[k] - a) * (goal - low)) / (sums[k] - low));
  }
  shares.push(end);
  return shares;
}

function assemble(
  pieces: readonly { edge: number; from: number; to: number; size: number }[],
  curves: readonly Curve[],
  tag: Int32Array,
  first: Int32Array,
  following: Int32Array,
  tip: Float64Array,
): Boundary {
  const count = pieces.length;
  const boundary = {
    count,
    x: new Float64Array(count),
    y: new Float64Array(count),
    size: new Float64Array(count),
    next: new Int32Array(count),
    previous: new Int32Array(count),
    edge: new Int32Array(count),
    from: new Float64Array(count),
    to: new Float64Array(count),
    sharp: new Uint8Array(count),
    curves,
    tag,
    first,
  };
  const point = [0, 0];
  for (let i = 0; i < count; i += 1) {
    const piece = pieces[i];
    pointAt(curves[piece.edge], piece.from, point);
    boundary.x[i] = point[0];
    boundary.y[i] = point[1];
    boundary.edge[i] = piece.edge;
    boundary.from[i] = piece.from;
    boundary.to[i] = piece.to;
    const last = i + 1 === count || pieces[i + 1].edge !== piece.edge;
    boundary.next[i] = last ? first[following[piece.edge]] : i + 1;
    if (piece.from === 0 && tip[piece.edge] > 0) boundary.sharp[i] = 1;
  }
  for (let i = 0; i < count; i += 1) boundary.previous[boundary.next[i]] = i;
  const pieceLength = (i: number): number => {
    const j = boundary.next[i];
    return Math.hypot(boundary.x[j] - boundary.x[i], boundary.y[j] - boundary.y[i]);
  };
  for (let i = 0; i < count; i += 1) {
    // What the pieces really are; a tip piece is long on purpose.
    const before = boundary.previous[i];
    const a = boundary.sharp[before] ? Number.POSITIVE_INFINITY : pieceLength(before);
    const b = boundary.sharp[boundary.next[i]] ? Number.POSITIVE_INFINITY : pieceLength(i);
    const real = Number.isFinite(a) && Number.isFinite(b) ? (a + b) / 2 : Math.min(a, b);
    boundary.size[i] = boundary.sharp[i] || !Number.isFinite(real) ? pieces[i].size : real;
  }
  return boundary;
}
