import Flatbush from 'flatbush';
import { twiceArea } from '../mesh/check-shape.ts';
import type { Edge, Shape } from '../mesh/mesh.ts';
import { bodyBox, type PlanBox } from './geometry/body-box.ts';
import { part } from './geometry/curve.ts';
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

/** Something that takes room: an element of a strip, or another body. */
interface Item {
  /** Index of the body that it is part of. */
  readonly body: number;
  /** Number of the element; -1 for other bodies. */
  readonly element: number;
  readonly box: PlanBox;
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
  const loops = joined(groups(drawing, pieces).flatMap((some) => unite(some).flat()));
  if (!loops) return undefined;
  const outer = loops.filter((loop) => twiceArea(loop) > 0);
  if (outer.length !== 1) return undefined;
  return [outer[0]!, ...loops.filter((loop) => loop !== outer[0])];
}

/** The bodies with strips cut in two wherever they can be; both sides of a cut bear its number. */
function cut(drawing: Drawing, bodies: readonly PlanBody[]): PlanBody[] {
  const items = itemsOf(drawing, bodies);
  const index = indexOf(items);
  let tag = 0;
  const places = new Map<number, { s: number; tag: number }[]>();
  items.forEach(({ body, element }, i) => {
    if (element < 0) return;
    const e = drawing.elements.at(element);
    const half = Math.max(e.h0, e.h1);
    const { length, ux, uy, x0, y0, curvature } = e.curve;
    if (curvature !== 0 || length < LONG * half) return;
    const [mx, my] = [x0 + (ux * length) / 2, y0 + (uy * length) / 2];
    const [dx, dy] = [Math.abs(uy) * half + ROOM, Math.abs(ux) * half + ROOM];
    const near = index.search(mx - dx, my - dy, mx + dx, my + dy);
    if (near.length !== 1 || near[0] !== i) return;
    tag += 1;
    const list = places.get(body) ?? [];
    places.set(body, list);
    list.push({ s: (e.s0 + e.s1) / 2, tag });
  });
  return bodies.flatMap((body, i) => {
    const cuts = places.get(i);
    if (!cuts || body.kind !== 'strip') return [body];
    const inside = cuts.filter(({ s }) => s > body.from && s < body.to).sort((a, b) => a.s - b.s);
    const parts: Strip[] = [];
    let from = { s: body.from, tag: body.tagFrom };
    for (const to of [...inside, { s: body.to, tag: body.tagTo }]) {
      parts.push({ ...body, from: from.s, to: to.s, tagFrom: from.tag, tagTo: to.tag });
      from = to;
    }
    return parts;
  });
}

/** Bodies that may touch one another, taken together; the two sides of a cut do not count as touching. */
function groups(drawing: Drawing, bodies: readonly PlanBody[]): PlanBody[][] {
  const items = itemsOf(drawing, bodies);
  const index = indexOf(items);
  const root = bodies.map((_, i) => i);
  const find = (i: number): number => {
    while (root[i] !== i) {
      root[i] = root[root[i]!]!;
      i = root[i]!;
    }
    return i;
  };
  items.forEach((item, i) => {
    const [x0, y0, x1, y1] = item.box;
    for (const k of index.search(x0, y0, x1, y1)) {
      const other = items[k]!;
      if (k <= i || other.body === item.body) continue;
      if (item.element >= 0 && other.element === item.element) continue;
      root[find(item.body)] = find(other.body);
    }
  });
  const byRoot = new Map<number, PlanBody[]>();
  bodies.forEach((body, i) => {
    const list = byRoot.get(find(i));
    if (list) list.push(body);
    else byRoot.set(find(i), [body]);
  });
  return [...byRoot.values()];
}

function indexOf(items: readonly Item[]): Flatbush {
  const index = new Flatbush(items.length);
  for (const { box } of items) index.add(...box);
  index.finish();
  return index;
}

function itemsOf(drawing: Drawing, bodies: readonly PlanBody[]): Item[] {
  const items: Item[] = [];
  bodies.forEach((body, i) => {
    if (body.kind === 'strip') addElements(drawing, body, i, items);
    else items.push({ body: i, element: -1, box: boxOf(drawing, body) });
  });
  return items;
}

function addElements(drawing: Drawing, { channel, from, to }: Strip, body: number, items: Item[]): void {
  const { elements } = drawing;
  for (let id = elements.first[channel]!; id < elements.first[channel + 1]!; id++) {
    const e = elements.at(id);
    if (e.s1 <= from || e.s0 >= to) continue;
    const c = e.curve;
    const [low, high] = [Math.max(0, from - e.s0), Math.min(c.length, to - e.s0)];
    const half = Math.max(e.h0, e.h1);
    // an arc counts whole: cuts are in straight stretches
    const box = bodyBox(c.curvature === 0 ? part(c, low, high) : c, half, ROOM);
    items.push({ body, element: id, box });
    // a mitred corner reaches up to two half widths from its vertex
    if (e.turn1 === 0 || to <= e.s1) continue;
    const reach = 2 * half + ROOM;
    items.push({ body, element: -1, box: [c.x1 - reach, c.y1 - reach, c.x1 + reach, c.y1 + reach] });
  }
}

function boxOf(drawing: Drawing, body: Exclude<PlanBody, Strip>): PlanBox {
  if (body.kind === 'chamber') {
    const { outline } = drawing.chip.chambers[body.chamber]!;
    const xs = outline.map(([x]) => x);
    const ys = outline.map(([, y]) => y);
    return [Math.min(...xs) - ROOM, Math.min(...ys) - ROOM, Math.max(...xs) + ROOM, Math.max(...ys) + ROOM];
  }
  const reach = ROOM + (body.kind === 'disc' ? body.radius : 2 * Math.max(body.into.half, body.out.half));
  return [body.x - reach, body.y - reach, body.x + reach, body.y + reach];
}

/** The loops with the two edges of every cut taken out and what they parted joined; undefined where an edge has no partner. */
function joined(loops: readonly (readonly Edge[])[]): Edge[][] | undefined {
  const edges: Edge[] = loops.flat();
  const next = new Int32Array(edges.length);
  const before = new Int32Array(edges.length);
  const byTag = new Map<number, number[]>();
  let first = 0;
  for (const loop of loops) {
    loop.forEach(({ tag }, k) => {
      const here = first + k;
      next[here] = first + ((k + 1) % loop.length);
      before[next[here]!] = here;
      if (tag > 0) byTag.set(tag, [...(byTag.get(tag) ?? []), here]);
    });
    first += loop.length;
  }
  const seams = new Set<number>();
  const gone = new Uint8Array(edges.length);
  const link = (from: number, to: number): void => {
    next[from] = to;
    before[to] = from;
    seams.add(to);
  };
  for (const pair of byTag.values()) {
    const [a, b] = pair;
    if (pair.length !== 2 || a === undefined || b === undefined) return undefined;
    if (apart(edges, a, next[b]!) > SAME || apart(edges, next[a]!, b) > SAME) return undefined;
    gone[a] = 1;
    gone[b] = 1;
    const [beforeA, beforeB, afterA, afterB] = [before[a]!, before[b]!, next[a]!, next[b]!];
    link(beforeA, afterB);
    link(beforeB, afterA);
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
      if (!seams.has(k) || !goesOn(edges, before[k]!, k)) loop.push(edges[k]!);
    }
    if (loop.length < 2) return undefined;
    out.push(fromLeast(loop));
  }
  return out;
}

const apart = (edges: readonly Edge[], a: number, b: number): number =>
  Math.hypot(edges[a]!.x - edges[b]!.x, edges[a]!.y - edges[b]!.y);

const goesOn = (edges: readonly Edge[], a: number, b: number): boolean =>
  edges[a]!.bulge === 0 && edges[b]!.bulge === 0;

/** The loop from its leftmost, then lowest corner on, as one union gives it. */
function fromLeast(loop: Edge[]): Edge[] {
  let k = 0;
  loop.forEach((e, i) => {
    const dx = e.x - loop[k]!.x;
    if (dx < -SAME || (dx <= SAME && e.y < loop[k]!.y)) k = i;
  });
  return [...loop.slice(k), ...loop.slice(0, k)];
}
