import type { Finding } from '../problem/finding.ts';
import { type Area, inArea, nearestEdge } from './geometry/area.ts';
import { type Body, covers, endCorners, halfAt, outline } from './geometry/body.ts';
import { um } from './geometry/centreline.ts';
import { line, meet, nearest, pointAt, tangentAt } from './geometry/curve.ts';
import { meetElements } from './geometry/packed.ts';
import type { Place } from './read-graph-areas.ts';
import type { Drawing } from './read-graph-drawing.ts';
import type { Encounters } from './read-graph-joins.ts';
import type { Links } from './read-graph-links.ts';

/** One connected stretch in which two channels (or two parts of one) cover the same ground. */
interface Stretch {
  readonly a: number;
  readonly b: number;
  /** Element numbers on each side. */
  readonly inA: Set<number>;
  readonly inB: Set<number>;
  /** Corners of the common ground: place, and distance along each channel. */
  readonly points: { x: number; y: number; sa: number; sb: number }[];
}

/**
 * Covered areas that overlap although the centrelines do not meet there. Where a nearby join explains
 * it (the legs of a sharp Y, two branches side by side in the mouth of a third) nothing is added; an
 * end inside another channel is taken on to its centreline; channels that run into each other alongside
 * are joined where their overlap begins and ends.
 */
export function readOverlaps(
  drawing: Drawing,
  links: Links,
  found: Encounters,
  places: readonly Place[],
  findings: Finding[],
): void {
  if (found.overA.length === 0) return;
  const total = drawing.elements.count;
  const over = new Map<number, number>();
  for (let k = 0; k < found.overA.length; k++) over.set(found.overA[k]! * total + found.overB[k]!, k);
  const seen = new Uint8Array(found.overA.length);
  const joins = marksOf(links);
  for (let k = 0; k < seen.length; k++) {
    if (seen[k]) continue;
    const { stretch, explained } = flood(drawing, found, k, over, seen);
    if (explained && stretch.a !== stretch.b) continue;
    measure(drawing, stretch, over);
    if (stretch.a === stretch.b && nearAlong(drawing, stretch)) continue;
    if (throughOther(drawing, links, joins, places, stretch)) continue;
    const joined = joinEnds(drawing, links, stretch, findings);
    joinAlongside(drawing, links, stretch, joined, findings);
  }
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
          meetElements(drawing.elements, p, q, () => {
            explained = true;
          });
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

function commonCorners(a: Body, b: Body): [number, number][] {
  const points: [number, number][] = [];
  const ea = outline(a);
  const eb = outline(b);
  for (const e of ea) if (covers(b, e.x0, e.y0)) points.push([e.x0, e.y0]);
  for (const e of eb) if (covers(a, e.x0, e.y0)) points.push([e.x0, e.y0]);
  for (const p of ea) for (const q of eb) meet(p, q, (s) => points.push(pointAt(p, s)));
  return points;
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

function halfOn(drawing: Drawing, elements: Set<number>, s: number): number {
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
  const rootsOfB = new Map<number, number>();
  const thirdOfB = new Map<number, number[]>();
  for (const m of marks.byChannel.get(b) ?? []) {
    const root = links.root(links.node[m]!);
    rootsOfB.set(root, m);
    for (const other of marks.byNode.get(root)!) {
      const c = links.channel[other]!;
      if (c === a || c === b) continue;
      const list = thirdOfB.get(c);
      if (list) list.push(root);
      else thirdOfB.set(c, [root]);
    }
  }
  const half = halfWidest(drawing, stretch);
  for (const m of marks.byChannel.get(a) ?? []) {
    const root = links.root(links.node[m]!);
    if (rootsOfB.has(root)) {
      const place = places.find((p) => links.root(p.node) === root);
      if (place && points.every((c) => nearArea(place.area, c.x, c.y, half))) return true;
    }
    for (const other of marks.byNode.get(root)!) {
      const c = links.channel[other]!;
      if (c === a || c === b) continue;
      for (const root2 of thirdOfB.get(c) ?? []) {
        const reach = 2 * links.stout[root]! + 2 * half;
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

function halfWidest(drawing: Drawing, stretch: Stretch): number {
  let half = 0;
  for (const i of [...stretch.inA, ...stretch.inB]) {
    const e = drawing.elements.at(i);
    half = Math.max(half, e.h0, e.h1);
  }
  return half;
}

/** A join made: distance along the one channel and along the other. */
interface Joined {
  readonly channel: number;
  readonly s: number;
  readonly other: number;
  readonly t: number;
}

/** Joins every end of one channel that lies in the other. */
function joinEnds(drawing: Drawing, links: Links, stretch: Stretch, findings: Finding[]): Joined[] {
  const { first } = drawing.elements;
  const { a, b, inA, inB } = stretch;
  const candidates: [number, Set<number>, boolean][] = [];
  if (inA.has(first[a]!)) candidates.push([first[a]!, inB, false]);
  if (inA.has(first[a + 1]! - 1)) candidates.push([first[a + 1]! - 1, inB, true]);
  if (inB.has(first[b]!)) candidates.push([first[b]!, inA, false]);
  if (inB.has(first[b + 1]! - 1)) candidates.push([first[b + 1]! - 1, inA, true]);
  const joined: Joined[] = [];
  const reach = 4 * halfWidest(drawing, stretch);
  for (const [element, others, atEnd] of candidates) {
    const e = drawing.elements.at(element);
    const end = atEnd ? e.s1 : e.s0;
    // where two ends face each other, the join of the one serves the other
    if (joined.some((k) => k.other === e.channel && Math.abs(k.t - end) <= reach)) continue;
    const target = [...others].filter((j) => endIn(drawing, element, atEnd, drawing.body(j)));
    if (target.length > 0) joined.push(joinEnd(drawing, links, element, atEnd, target, findings));
  }
  return joined;
}

function endIn(drawing: Drawing, element: number, atEnd: boolean, other: Body): boolean {
  const [ax, ay, bx, by] = endCorners(drawing.elements.at(element), atEnd);
  if (covers(other, ax, ay) || covers(other, bx, by)) return true;
  let hit = false;
  const edge = line(ax, ay, bx, by);
  for (const e of outline(other)) {
    meet(edge, e, () => {
      hit = true;
    });
  }
  return hit;
}

function joinEnd(
  drawing: Drawing,
  links: Links,
  element: number,
  atEnd: boolean,
  target: readonly number[],
  findings: Finding[],
): Joined {
  const e = drawing.elements.at(element);
  const length = drawing.elements.total(e.channel);
  const store = atEnd ? links.tail : links.head;
  const known = store.get(e.channel);
  const [x, y] = known ? [known.x, known.y] : atEnd ? [e.curve.x1, e.curve.y1] : [e.curve.x0, e.curve.y0];
  let best = Infinity;
  let place = { x, y, element: target[0]!, d: 0 };
  if (!known) {
    const [ux, uy] = atEnd ? tangentAt(e.curve, e.curve.length) : [-e.curve.ux, -e.curve.uy];
    for (const j of target) {
      const o = drawing.elements.at(j);
      const reach = 2 * (Math.max(e.h0, e.h1) + Math.max(o.h0, o.h1));
      meet(line(x, y, x + ux * reach, y + uy * reach), o.curve, (s, d) => {
        if (s >= best) return;
        best = s;
        place = { x: x + ux * s, y: y + uy * s, element: j, d };
      });
    }
  }
  if (best === Infinity) {
    for (const j of target) {
      const { curve } = drawing.elements.at(j);
      const d = nearest(curve, x, y);
      const [px, py] = pointAt(curve, d);
      const off = Math.hypot(px - x, py - y);
      if (off >= best) continue;
      best = off;
      place = { x: px, y: py, element: j, d };
    }
  }
  const other = drawing.elements.at(place.element);
  const along = known?.length ?? best;
  if (!known) store.set(e.channel, { x: place.x, y: place.y, length: best });
  const node = links.addNode(place.x, place.y);
  const sa = atEnd ? length + along : -along;
  const sb = other.s0 + place.d;
  links.addMark(node, e.channel, sa, sa, atEnd ? e.h1 : e.h0);
  links.addMark(node, other.channel, sb, sb, halfAt(other, sb));
  const id = drawing.chip.channels[e.channel]!.id;
  const otherId = drawing.chip.channels[other.channel]!.id;
  findings.push({
    kind: 'end-extended',
    severity: 'note',
    where: id,
    says: `The ${atEnd ? 'last' : 'first'} end of ${id} lies in ${otherId} without reaching its centreline; it was taken on by ${um(best)} to it.`,
    do: `End ${id} on the centreline of ${otherId}, or clear of it if they are not to be joined.`,
    at: [place.x * 1e-9, place.y * 1e-9],
  });
  return { channel: e.channel, s: sa, other: other.channel, t: sb };
}

/**
 * Joins what overlaps side by side: where the overlap begins and where it ends, as far as no end is
 * joined there already and (two parts of one channel) the path itself does not connect there; a short
 * overlap without either in its middle.
 */
function joinAlongside(
  drawing: Drawing,
  links: Links,
  stretch: Stretch,
  joined: readonly Joined[],
  findings: Finding[],
): void {
  const points = [...stretch.points].sort((p, q) => p.sa - q.sa || p.sb - q.sb);
  const low = points[0]!;
  const high = points[points.length - 1]!;
  const reach = 4 * halfWidest(drawing, stretch);
  const long = high.sa - low.sa > reach;
  if (!long && joined.length > 0) return;
  const { a, b } = stretch;
  const places = (long ? [low, high] : [points[points.length >> 1]!]).filter(
    (p) => !(a === b && p.sb - p.sa <= 2 * reach) && !joined.some((k) => served(k, stretch, p, reach)),
  );
  for (const p of places) {
    const node = links.addNode(p.x, p.y);
    links.addMark(node, a, p.sa, p.sa, halfOn(drawing, stretch.inA, p.sa));
    links.addMark(node, b, p.sb, p.sb, halfOn(drawing, stretch.inB, p.sb));
  }
  const idA = drawing.chip.channels[a]!.id;
  const idB = drawing.chip.channels[b]!.id;
  findings.push({
    kind: 'overlap-alongside',
    severity: 'warn',
    where: idB,
    says: `${a === b ? `Two parts of ${idA}` : `${idA} and ${idB}`} overlap side by side over ${um(high.sa - low.sa)}, so they are one cavity there; they were joined ${long ? 'where the overlap begins and ends' : 'in its middle'}, and between count as two channels.`,
    do: 'Move them apart to leave a wall between them, or draw the common stretch as one wider channel.',
    at: [low.x * 1e-9, low.y * 1e-9],
  });
}

function served(k: Joined, stretch: Stretch, p: Stretch['points'][number], reach: number): boolean {
  const s = k.channel === stretch.a ? p.sa : p.sb;
  const t = k.channel === stretch.a ? p.sb : p.sa;
  if (Math.abs(k.s - s) <= reach && Math.abs(k.t - t) <= reach) return true;
  return stretch.a === stretch.b && Math.abs(k.s - t) <= reach && Math.abs(k.t - s) <= reach;
}
