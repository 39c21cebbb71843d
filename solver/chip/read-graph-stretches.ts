import { type Area, inArea, nearestEdge } from './geometry/area.ts';
import { type Body, commonCorners, halfAt, outline } from './geometry/body.ts';
import { nearest, pointAt } from './geometry/curve.ts';
import { Meetings, meetElements } from './geometry/packed.ts';
import type { Place } from './read-graph-areas.ts';
import type { Drawing } from './read-graph-drawing.ts';
import type { Encounters } from './read-graph-joins.ts';
import type { Links } from './read-graph-links.ts';

/** One connected stretch in which two channels (or two parts of one) cover the same ground. */
export interface Stretch {
  readonly a: number;
  readonly b: number;
  /** Element numbers on each side. */
  readonly inA: Set<number>;
  readonly inB: Set<number>;
  /** Corners of the common ground: place, and distance along each channel. */
  readonly points: { x: number; y: number; sa: number; sb: number }[];
}

/**
 * The stretches of common ground that no nearby join explains. Explained are the legs of a sharp Y, the
 * inside of a tight bend, and branches side by side in the mouth of a chamber, a hole or a third channel.
 */
export function openStretches(
  drawing: Drawing,
  links: Links,
  found: Encounters,
  places: readonly Place[],
): Stretch[] {
  const total = drawing.elements.count;
  const over = new Map<number, number>();
  for (let k = 0; k < found.overA.length; k++) over.set(found.overA[k]! * total + found.overB[k]!, k);
  const seen = new Uint8Array(found.overA.length);
  const joins = marksOf(links);
  const open: Stretch[] = [];
  for (let k = 0; k < seen.length; k++) {
    if (seen[k]) continue;
    const { stretch, explained } = flood(drawing, found, k, over, seen);
    if (explained && stretch.a !== stretch.b) continue;
    measure(drawing, stretch, over);
    if (stretch.a === stretch.b && nearAlong(drawing, stretch)) continue;
    if (!throughOther(drawing, links, joins, places, stretch)) open.push(stretch);
  }
  return open;
}

function flood(
  drawing: Drawing,
  found: Encounters,
  start: number,
  over: Map<number, number>,
  seen: Uint8Array,
): { stretch: Stretch; explained: boolean } {
  const { first, channel, count: total } = drawing.elements;
  const a = channel[found.overA[start]!]!;
  const b = channel[found.overB[start]!]!;
  const stretch: Stretch = { a, b, inA: new Set(), inB: new Set(), points: [] };
  let explained = false;
  const meetings = new Meetings();
  const queue = [start];
  seen[start] = 1;
  for (let k = queue.pop(); k !== undefined; k = queue.pop()) {
    const i = found.overA[k]!;
    const j = found.overB[k]!;
    stretch.inA.add(i);
    stretch.inB.add(j);
    for (let di = -1; di <= 1; di++) {
      const p = i + di;
      if (p < first[a]! || p >= first[a + 1]!) continue;
      for (let dj = -1; dj <= 1; dj++) {
        const q = j + dj;
        if (q < first[b]! || q >= first[b + 1]! || q <= p) continue;
        const key = p * total + q;
        const next = over.get(key);
        if (next === undefined && !explained) {
          meetElements(drawing.elements, p, q, meetings);
          explained = meetings.count > 0;
        }
        if (next !== undefined && !seen[next]) {
          seen[next] = 1;
          queue.push(next);
        }
      }
    }
  }
  return { stretch, explained };
}

/** Corners of the common ground of every pair of the stretch. */
function measure(drawing: Drawing, stretch: Stretch, over: Map<number, number>): void {
  const total = drawing.elements.count;
  for (const i of stretch.inA) {
    for (const j of stretch.inB) {
      if (!over.has(i * total + j)) continue;
      const a = drawing.body(i);
      const b = drawing.body(j);
      for (const [x, y] of commonCorners(a, b)) {
        const sa = a.element.s0 + nearest(a.element.curve, x, y);
        const sb = b.element.s0 + nearest(b.element.curve, x, y);
        stretch.points.push({ x, y, sa, sb });
      }
    }
  }
  if (stretch.points.length > 0) return;
  // areas that touch within the tolerance but have no corner in common: the nearest corners stand for it
  for (const i of stretch.inA) {
    for (const j of stretch.inB) {
      const e = drawing.elements.at(i);
      const [x, y, sb] = closest(drawing.body(i), drawing.body(j));
      stretch.points.push({ x, y, sa: e.s0 + nearest(e.curve, x, y), sb });
    }
  }
}

function closest(a: Body, b: Body): [number, number, number] {
  let best = Infinity;
  let place: [number, number, number] = [0, 0, 0];
  for (const edge of outline(a)) {
    const d = nearest(b.element.curve, edge.x0, edge.y0);
    const [x, y] = pointAt(b.element.curve, d);
    const off = Math.hypot(x - edge.x0, y - edge.y0);
    if (off < best) {
      best = off;
      place = [edge.x0, edge.y0, b.element.s0 + d];
    }
  }
  return place;
}

/** Two parts of one channel that overlap close to where the path itself joins them: a tight bend, no shortcut. */
function nearAlong(drawing: Drawing, stretch: Stretch): boolean {
  let apart = 0;
  let half = 0;
  for (const p of stretch.points) {
    apart = Math.max(apart, Math.abs(p.sb - p.sa));
    half = Math.max(half, halfOn(drawing, stretch.inA, p.sa));
  }
  return apart <= 8 * half;
}

export function halfOn(drawing: Drawing, elements: Set<number>, s: number): number {
  for (const i of elements) {
    const e = drawing.elements.at(i);
    if (s >= e.s0 && s <= e.s1) return halfAt(e, s);
  }
  return 0;
}

interface Marks {
  readonly byChannel: ReadonlyMap<number, readonly number[]>;
  readonly byNode: ReadonlyMap<number, readonly number[]>;
}

function marksOf(links: Links): Marks {
  const byChannel = new Map<number, number[]>();
  const byNode = new Map<number, number[]>();
  const add = (map: Map<number, number[]>, key: number, mark: number) => {
    const list = map.get(key);
    if (list) list.push(mark);
    else map.set(key, [mark]);
  };
  for (let m = 0; m < links.marks; m++) {
    add(byChannel, links.channel[m]!, m);
    add(byNode, links.root(links.node[m]!), m);
  }
  return { byChannel, byNode };
}

/**
 * Whether the common ground lies in the mouth of something that both are joined to there: a chamber
 * or hole, or a third channel.
 */
function throughOther(
  drawing: Drawing,
  links: Links,
  marks: Marks,
  places: readonly Place[],
  stretch: Stretch,
): boolean {
  const { a, b, points } = stretch;
  if (a === b) return false;
  // Each node once and each third channel once: crowded drawings have hundreds of marks at one node.
  const rootsOf = (channel: number) =>
    new Set((marks.byChannel.get(channel) ?? []).map((m) => links.root(links.node[m]!)));
  const thirdAt = (root: number) => new Set(marks.byNode.get(root)!.map((m) => links.channel[m]!));
  const rootsOfB = rootsOf(b);
  const thirdOfB = new Map<number, Set<number>>();
  for (const root of rootsOfB) {
    for (const c of thirdAt(root)) {
      if (c === a || c === b) continue;
      const list = thirdOfB.get(c);
      if (list) list.add(root);
      else thirdOfB.set(c, new Set([root]));
    }
  }
  const half = halfWidest(drawing, stretch);
  for (const root of rootsOf(a)) {
    if (rootsOfB.has(root)) {
      const place = places.find((p) => links.root(p.node) === root);
      if (place && points.every((c) => nearArea(place.area, c.x, c.y, half))) return true;
    }
    for (const c of thirdAt(root)) {
      if (c === a || c === b) continue;
      for (const root2 of thirdOfB.get(c) ?? []) {
        const reach = 2 * Math.max(links.stout[root]!, links.stout[root2]!) + 2 * half;
        if (points.every((q) => Math.min(away(links, root, q), away(links, root2, q)) <= reach)) return true;
      }
    }
  }
  return false;
}

function nearArea(area: Area, x: number, y: number, reach: number): boolean {
  return inArea(area, x, y) || nearestEdge(area, x, y).distance <= reach;
}

function away(links: Links, node: number, q: { x: number; y: number }): number {
  const n = links.weight[node]!;
  return Math.hypot(links.x[node]! / n - q.x, links.y[node]! / n - q.y);
}

export function halfWidest(drawing: Drawing, stretch: Stretch): number {
  let half = 0;
  for (const i of [...stretch.inA, ...stretch.inB]) {
    const e = drawing.elements.at(i);
    half = Math.max(half, e.h0, e.h1);
  }
  return half;
}
