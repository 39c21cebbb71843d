import Flatbush from 'flatbush';
import { twiceArea } from '../mesh/check-shape.ts';
import type { Edge, Shape } from '../mesh/mesh.ts';
import { bodyBox } from './geometry/body-box.ts';
import { part } from './geometry/curve.ts';
import { H0, H1, S0, S1, STRIDE, TURN1 } from './geometry/elements.ts';
import type { PlanBody } from './plan.ts';
import type { Drawing } from './read-graph-drawing.ts';

/**
 * The union of many bodies, part by part: channels are cut square in the middle of their straight
 * stretches, what is left between the cuts is united by itself, and the outlines are joined again where
 * they were cut. The cost then grows with the number of bodies; that of one union of everything, which
 * sweeps over all that lies side by side at every height, grows faster.
 */

/** A straight stretch is cut where it is this many half widths long, and nothing else is near its middle. */
const LONG = 0.5;
/** Fewer bodies are united at once. */
const FEW = 40;
/** What two sides of a cut may lie apart by rounding, nm. */
const SAME = 0.01;
const ROOM = 10;

type Strip = PlanBody & { kind: 'strip' };

/** What takes room: elements of strips, and other bodies. */
class Items {
  count = 0;
  /** Index of the body that each is part of. */
  body = new Int32Array(1024);
  /** Number of the element; -1 for other bodies. */
  element = new Int32Array(1024);
  /** Four numbers each, as `bodyBox` gives them. */
  boxes = new Float64Array(4096);

  /** Adds one and returns where its box goes. */
  add(body: number, element: number): number {
    const at = this.count;
    if (at === this.body.length) this.#grow();
    this.body[at] = body;
    this.element[at] = element;
    this.count = at + 1;
    return 4 * at;
  }

  addSquare(body: number, x: number, y: number, reach: number): void {
    const at = this.add(body, -1);
    this.boxes[at] = x - reach;
    this.boxes[at + 1] = y - reach;
    this.boxes[at + 2] = x + reach;
    this.boxes[at + 3] = y + reach;
  }

  index(): Flatbush {
    const b = this.boxes;
    const index = new Flatbush(this.count);
    for (let at = 0; at < 4 * this.count; at += 4) index.add(b[at]!, b[at + 1]!, b[at + 2]!, b[at + 3]!);
    index.finish();
    return index;
  }

  #grow(): void {
    const { body, element, boxes } = this;
    this.body = new Int32Array(2 * body.length);
    this.body.set(body);
    this.element = new Int32Array(2 * body.length);
    this.element.set(element);
    this.boxes = new Float64Array(8 * body.length);
    this.boxes.set(boxes);
  }
}

/**
 * One shape for what the bodies cover together, or undefined where that is not to be had part by part: few
 * bodies, none that can be cut, or an outcome that is not one connected shape.
 *
 * @param unite shapes of some of the bodies, with the labels of their edges
 */
export function unitedInParts(
  drawing: Drawing,
  bodies: readonly PlanBody[],
  unite: (some: readonly PlanBody[]) => readonly Shape[],
): Shape | undefined {
  if (bodies.length < FEW) return undefined;
  const pieces = cut(drawing, bodies);
  if (pieces.length === bodies.length) return undefined;
  const parts: (readonly Edge[])[] = [];
  for (const some of groups(drawing, pieces)) {
    for (const shape of unite(some)) for (const loop of shape) parts.push(loop);
  }
  const loops = joined(parts);
  if (!loops) return undefined;
  const shape: Edge[][] = [];
  let outer: Edge[] | undefined;
  for (const loop of loops) {
    if (twiceArea(loop) <= 0) shape.push(loop);
    else if (outer) return undefined;
    else outer = loop;
  }
  return outer && [outer, ...shape];
}

interface Cut {
  /** Distance along the channel. */
  readonly s: number;
  readonly tag: number;
}

/** The bodies with strips cut in two wherever they can be; both sides of a cut bear its number. */
function cut(drawing: Drawing, bodies: readonly PlanBody[]): PlanBody[] {
  const items = itemsOf(drawing, bodies);
  const index = items.index();
  let tag = 0;
  // items come body by body
  let item = 0;
  const parts: PlanBody[] = [];
  for (let i = 0; i < bodies.length; i++) {
    const cuts: Cut[] = [];
    for (; item < items.count && items.body[item] === i; item++) {
      const s = cutAt(drawing, items.element[item]!, item, index);
      if (Number.isNaN(s)) continue;
      tag += 1;
      cuts.push({ s, tag });
    }
    addParts(bodies[i]!, cuts, parts);
  }
  return parts;
}

/** Where along its channel an element can be cut; NaN where it cannot. */
function cutAt({ elements }: Drawing, element: number, item: number, index: Flatbush): number {
  if (element < 0) return Number.NaN;
  const { curve: c, h0, h1, s0, s1 } = elements.at(element);
  const half = Math.max(h0, h1);
  if (c.curvature !== 0 || c.length < LONG * half) return Number.NaN;
  const mx = c.x0 + (c.ux * c.length) / 2;
  const my = c.y0 + (c.uy * c.length) / 2;
  const dx = Math.abs(c.uy) * half + ROOM;
  const dy = Math.abs(c.ux) * half + ROOM;
  const near = index.search(mx - dx, my - dy, mx + dx, my + dy);
  return near.length === 1 && near[0] === item ? (s0 + s1) / 2 : Number.NaN;
}

/** What is left of a body between its cuts, which come in the order of the channel. */
function addParts(body: PlanBody, cuts: readonly Cut[], parts: PlanBody[]): void {
  if (body.kind !== 'strip') {
    parts.push(body);
    return;
  }
  const { kind, channel } = body;
  let from = body.from;
  let tagFrom = body.tagFrom;
  for (const { s, tag } of cuts) {
    if (s <= body.from || s >= body.to) continue;
    parts.push({ kind, channel, from, to: s, tagFrom, tagTo: tag });
    from = s;
    tagFrom = tag;
  }
  parts.push({ kind, channel, from, to: body.to, tagFrom, tagTo: body.tagTo });
}

/** Bodies that may touch one another, taken together; the two sides of a cut do not count as touching. */
function groups(drawing: Drawing, bodies: readonly PlanBody[]): PlanBody[][] {
  const items = itemsOf(drawing, bodies);
  const { body, element, boxes } = items;
  const index = items.index();
  const root = new Int32Array(bodies.length);
  for (let i = 0; i < root.length; i++) root[i] = i;
  for (let i = 0; i < items.count; i++) {
    const at = 4 * i;
    for (const k of index.search(boxes[at]!, boxes[at + 1]!, boxes[at + 2]!, boxes[at + 3]!)) {
      if (k <= i || body[k] === body[i]) continue;
      if (element[i]! >= 0 && element[k] === element[i]) continue;
      root[rootOf(root, body[i]!)] = rootOf(root, body[k]!);
    }
  }
  const byRoot = new Array<PlanBody[] | undefined>(bodies.length).fill(undefined);
  const found: PlanBody[][] = [];
  for (let i = 0; i < bodies.length; i++) {
    const r = rootOf(root, i);
    let group = byRoot[r];
    if (!group) {
      group = [];
      byRoot[r] = group;
      found.push(group);
    }
    group.push(bodies[i]!);
  }
  return found;
}

function rootOf(root: Int32Array, body: number): number {
  let i = body;
  while (root[i] !== i) {
    root[i] = root[root[i]!]!;
    i = root[i]!;
  }
  return i;
}

function itemsOf(drawing: Drawing, bodies: readonly PlanBody[]): Items {
  const items = new Items();
  for (let i = 0; i < bodies.length; i++) {
    const body = bodies[i]!;
    if (body.kind === 'strip') addElements(drawing, body, i, items);
    else addBody(drawing, body, i, items);
  }
  return items;
}

function addElements({ elements }: Drawing, strip: Strip, body: number, items: Items): void {
  const { channel, from, to } = strip;
  const end = elements.first[channel + 1]!;
  const { data } = elements;
  for (let id = elements.first[channel]!; id < end; id++) {
    const k = id * STRIDE;
    const s0 = data[k + S0]!;
    const s1 = data[k + S1]!;
    if (s1 <= from || s0 >= to) continue;
    const c = elements.curve(id);
    const half = Math.max(data[k + H0]!, data[k + H1]!);
    // an arc counts whole: cuts are in straight stretches
    const covered = c.curvature === 0 ? part(c, Math.max(0, from - s0), Math.min(c.length, to - s0)) : c;
    const at = items.add(body, id);
    bodyBox(covered, half, ROOM, items.boxes, at);
    // a mitred corner reaches up to two half widths from its vertex
    if (data[k + TURN1] !== 0 && to > s1) items.addSquare(body, c.x1, c.y1, 2 * half + ROOM);
  }
}

function addBody(drawing: Drawing, body: Exclude<PlanBody, Strip>, i: number, items: Items): void {
  if (body.kind === 'chamber') {
    const at = items.add(i, -1);
    const b = items.boxes;
    b[at] = b[at + 1] = Infinity;
    b[at + 2] = b[at + 3] = -Infinity;
    for (const [x, y] of drawing.chip.chambers[body.chamber]!.outline) {
      b[at] = Math.min(b[at]!, x - ROOM);
      b[at + 1] = Math.min(b[at + 1]!, y - ROOM);
      b[at + 2] = Math.max(b[at + 2]!, x + ROOM);
      b[at + 3] = Math.max(b[at + 3]!, y + ROOM);
    }
    return;
  }
  const reach = body.kind === 'disc' ? body.radius : 2 * Math.max(body.into.half, body.out.half);
  items.addSquare(i, body.x, body.y, ROOM + reach);
}

/** The loops with the two edges of every cut taken out and what they parted joined; undefined where an edge has no partner. */
function joined(loops: readonly (readonly Edge[])[]): Edge[][] | undefined {
  const edges: Edge[] = [];
  let tags = 0;
  for (const loop of loops) {
    for (const e of loop) {
      edges.push(e);
      tags = Math.max(tags, e.tag);
    }
  }
  const next = new Int32Array(edges.length);
  const before = new Int32Array(edges.length);
  /** Two edges for each cut, -1 where there is none. */
  const pairs = new Int32Array(2 * (tags + 1)).fill(-1);
  const order: number[] = [];
  let first = 0;
  for (const loop of loops) {
    const n = loop.length;
    for (let k = 0; k < n; k++) {
      next[first + k] = first + (k + 1 === n ? 0 : k + 1);
      before[first + k] = first + (k === 0 ? n - 1 : k - 1);
      const { tag } = loop[k]!;
      if (tag <= 0) continue;
      if (pairs[2 * tag]! < 0) {
        pairs[2 * tag] = first + k;
        order.push(tag);
      } else if (pairs[2 * tag + 1]! < 0) pairs[2 * tag + 1] = first + k;
      else return undefined;
    }
    first += n;
  }
  const seams = new Uint8Array(edges.length);
  const gone = new Uint8Array(edges.length);
  for (const tag of order) {
    const a = pairs[2 * tag]!;
    const b = pairs[2 * tag + 1]!;
    if (b < 0) return undefined;
    if (apart(edges, a, next[b]!) > SAME || apart(edges, next[a]!, b) > SAME) return undefined;
    gone[a] = 1;
    gone[b] = 1;
    const beforeA = before[a]!;
    const beforeB = before[b]!;
    const afterA = next[a]!;
    const afterB = next[b]!;
    next[beforeA] = afterB;
    before[afterB] = beforeA;
    next[beforeB] = afterA;
    before[afterA] = beforeB;
    seams[afterA] = 1;
    seams[afterB] = 1;
  }
  const out: Edge[][] = [];
  const seen = new Uint8Array(edges.length);
  for (let start = 0; start < edges.length; start++) {
    if (seen[start] || gone[start]) continue;
    const loop: Edge[] = [];
    for (let k = start; !seen[k]; k = next[k]!) {
      if (gone[k]) return undefined;
      seen[k] = 1;
      // a seam parts one straight side: its edge goes on
      if (!seams[k] || !goesOn(edges, before[k]!, k)) loop.push(edges[k]!);
    }
    if (loop.length < 2) return undefined;
    out.push(fromLeast(loop));
  }
  return out;
}

function apart(edges: readonly Edge[], a: number, b: number): number {
  return Math.hypot(edges[a]!.x - edges[b]!.x, edges[a]!.y - edges[b]!.y);
}

function goesOn(edges: readonly Edge[], a: number, b: number): boolean {
  return edges[a]!.bulge === 0 && edges[b]!.bulge === 0;
}

/** The loop from its leftmost, then lowest corner on, as one union gives it. */
function fromLeast(loop: Edge[]): Edge[] {
  let k = 0;
  for (let i = 1; i < loop.length; i++) {
    const dx = loop[i]!.x - loop[k]!.x;
    if (dx < -SAME || (dx <= SAME && loop[i]!.y < loop[k]!.y)) k = i;
  }
  return k === 0 ? loop : [...loop.slice(k), ...loop.slice(0, k)];
}
