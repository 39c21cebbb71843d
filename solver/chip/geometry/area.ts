import Flatbush from 'flatbush';
import type { Point } from '../chip.ts';
import { type Body, covers, inLoop, outline } from './body.ts';
import { byPair } from './by-pair.ts';
import { type Curve, curve, distanceTo, line, meet, pointAt } from './curve.ts';
import { TOUCH } from './tolerance.ts';

/** A closed piece of the plan that is not a channel: a chamber's outline, or the disc of a hole. */
export interface Area {
  /** Counter-clockwise. */
  readonly edges: readonly Curve[];
  readonly minX: number;
  readonly minY: number;
  readonly maxX: number;
  readonly maxY: number;
  /** Over the edges, where there are many. */
  readonly index: Flatbush | undefined;
}

const FEW = 32;

export function disc(x: number, y: number, radius: number): Area {
  const edges = [curve(x - radius, y, x + radius, y, 1), curve(x + radius, y, x - radius, y, 1)];
  return { edges, minX: x - radius, minY: y - radius, maxX: x + radius, maxY: y + radius, index: undefined };
}

const discs = new WeakMap<object, Area>();

/** What the hole of a port or via covers: the same object for the same hole, which never changes in place. */
export function discOf(hole: { readonly at: Point; readonly diameter: number }): Area {
  let area = discs.get(hole);
  if (!area) {
    area = disc(hole.at[0], hole.at[1], hole.diameter / 2);
    discs.set(hole, area);
  }
  return area;
}

const polygons = new WeakMap<readonly Point[], Area>();

/** What a chamber covers: the same object for the same outline, which never changes in place. */
export function areaOf(outline: readonly Point[]): Area {
  let area = polygons.get(outline);
  if (!area) {
    area = polygon(outline);
    polygons.set(outline, area);
  }
  return area;
}

/** Twice the signed area of a polygon, positive counter-clockwise. */
export function signedArea(points: readonly Point[]): number {
  const [ox, oy] = points[0]!;
  let sum = 0;
  for (let i = 0; i < points.length; i++) {
    const [ax, ay] = points[i]!;
    const [bx, by] = points[(i + 1) % points.length]!;
    sum += (ax - ox) * (by - oy) - (bx - ox) * (ay - oy);
  }
  return sum;
}

export function polygon(points: readonly Point[]): Area {
  const forward = signedArea(points) >= 0 ? points : [...points].reverse();
  const edges: Curve[] = [];
  let minX = Infinity;
  let minY = Infinity;
  let maxX = -Infinity;
  let maxY = -Infinity;
  for (let i = 0; i < forward.length; i++) {
    const [x, y] = forward[i]!;
    const [x1, y1] = forward[(i + 1) % forward.length]!;
    if (x !== x1 || y !== y1) edges.push(line(x, y, x1, y1));
    minX = Math.min(minX, x);
    minY = Math.min(minY, y);
    maxX = Math.max(maxX, x);
    maxY = Math.max(maxY, y);
  }
  let index: Flatbush | undefined;
  if (edges.length > FEW) {
    index = new Flatbush(edges.length);
    for (const e of edges) {
      index.add(
        Math.min(e.x0, e.x1) - TOUCH,
        Math.min(e.y0, e.y1) - TOUCH,
        Math.max(e.x0, e.x1) + TOUCH,
        Math.max(e.y0, e.y1) + TOUCH,
      );
    }
    index.finish();
  }
  return { edges, minX, minY, maxX, maxY, index };
}

/** Edges whose boxes meet a box. */
export function edgesNear(
  area: Area,
  minX: number,
  minY: number,
  maxX: number,
  maxY: number,
): readonly Curve[] {
  if (!area.index) return area.edges;
  return area.index.search(minX, minY, maxX, maxY).map((i) => area.edges[i]!);
}

/** Whether a point lies in the area or within TOUCH of it. */
export function inArea(area: Area, x: number, y: number): boolean {
  if (x < area.minX - TOUCH || x > area.maxX + TOUCH || y < area.minY - TOUCH || y > area.maxY + TOUCH) {
    return false;
  }
  // only edges level with the point, to one side of it, are crossed by a ray from it
  const level = edgesNear(area, x - TOUCH, y - TOUCH, area.maxX + TOUCH, y + TOUCH);
  if (inLoop(level, x, y)) return true;
  for (const e of level) if (distanceTo(e, x, y) <= TOUCH) return true;
  return false;
}

/** Distances along a curve at which it meets the outline, sorted. */
export function cuts(area: Area, c: Curve): number[] {
  const found: number[] = [];
  const r = c.curvature === 0 ? 0 : 2 / Math.abs(c.curvature);
  const near = edgesNear(
    area,
    Math.min(c.x0, c.x1) - r - TOUCH,
    Math.min(c.y0, c.y1) - r - TOUCH,
    Math.max(c.x0, c.x1) + r + TOUCH,
    Math.max(c.y0, c.y1) + r + TOUCH,
  );
  for (const e of near) meet(c, e, (s) => found.push(s));
  return found.sort((p, q) => p - q);
}

/** Point of the outline nearest to (x, y). */
export function nearestEdge(area: Area, x: number, y: number): { edge: Curve; distance: number } {
  let edge = area.edges[0]!;
  let best = Infinity;
  for (const e of area.edges) {
    const d = distanceTo(e, x, y);
    if (d < best) {
      best = d;
      edge = e;
    }
  }
  return { edge, distance: best };
}

/** Whether two areas touch, cross, or one lies within the other. */
export function areasOverlap(a: Area, b: Area): boolean {
  const [few, many] = a.edges.length <= b.edges.length ? [a, b] : [b, a];
  for (const e of few.edges) if (cuts(many, e).length > 0) return true;
  const p = few.edges[0]!;
  const q = many.edges[0]!;
  return inArea(many, p.x0, p.y0) || inArea(few, q.x0, q.y0);
}

const overlapping = byPair<Area, boolean>();

/** As `areasOverlap`, remembered: for areas that an edit elsewhere leaves the same objects. */
export function areasOverlapOnce(a: Area, b: Area): boolean {
  return overlapping(a, b, areasOverlap);
}

/** Centre of gravity of a polygon; the mean of its corners where it encloses nothing. */
export function centroid(points: readonly Point[]): Point {
  const [ox, oy] = points[0]!;
  let area = 0;
  let x = 0;
  let y = 0;
  let mx = 0;
  let my = 0;
  for (let i = 0; i < points.length; i++) {
    const ax = points[i]![0] - ox;
    const ay = points[i]![1] - oy;
    const bx = points[(i + 1) % points.length]![0] - ox;
    const by = points[(i + 1) % points.length]![1] - oy;
    const cross = ax * by - ay * bx;
    area += cross;
    x += (ax + bx) * cross;
    y += (ay + by) * cross;
    mx += ax / points.length;
    my += ay / points.length;
  }
  return area === 0 ? [ox + mx, oy + my] : [ox + x / (3 * area), oy + y / (3 * area)];
}

const common = byPair<Area, readonly (readonly [number, number])[], Body>();

/** As `commonGround`, remembered: for areas and bodies that an edit elsewhere leaves the same objects. */
export function commonGroundOnce(area: Area, b: Body): readonly (readonly [number, number])[] {
  return common(area, b, commonGround);
}

/** Corners of the ground that an area and an element have in common; none where they only touch in less than TOUCH. */
export function commonGround(area: Area, b: Body): [number, number][] {
  const points: [number, number][] = [];
  for (const e of outline(b)) {
    if (inArea(area, e.x0, e.y0)) points.push([e.x0, e.y0]);
    for (const s of cuts(area, e)) points.push(pointAt(e, s));
  }
  for (const e of edgesNear(area, b.minX - TOUCH, b.minY - TOUCH, b.maxX + TOUCH, b.maxY + TOUCH)) {
    if (covers(b, e.x0, e.y0)) points.push([e.x0, e.y0]);
  }
  return points;
}
