import type { Finding } from '../problem/finding.ts';
import { type Body, covers, endCorners, halfAt, outline } from './geometry/body.ts';
import { um } from './geometry/centreline.ts';
import { line, meet, nearest, pointAt, tangentAt } from './geometry/curve.ts';
import type { Place } from './read-graph-areas.ts';
import type { Drawing } from './read-graph-drawing.ts';
import type { Encounters } from './read-graph-joins.ts';
import type { Links } from './read-graph-links.ts';
import { halfOn, halfWidest, openStretches, type Stretch } from './read-graph-stretches.ts';

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
  const open = openStretches(drawing, links, found, places);
  const joined = joinEnds(drawing, links, open, findings);
  for (const stretch of open) joinAlongside(drawing, links, stretch, joined.get(stretch) ?? [], findings);
}

/** A join made: distance along the one channel and along the other. */
interface Joined {
  readonly channel: number;
  readonly s: number;
  readonly other: number;
  readonly t: number;
}

/** An end of one channel that lies in another, and where it would be led to. */
interface OpenEnd {
  readonly stretch: Stretch;
  readonly element: number;
  readonly atEnd: boolean;
  readonly from: readonly [number, number];
  /** Element and distance along it where the added length lands, and how long that is. */
  readonly target: number;
  readonly d: number;
  readonly length: number;
}

/**
 * Joins every end of one channel that lies in another, the shortest added lengths first, so that
 * the order of channels does not matter.
 */
function joinEnds(
  drawing: Drawing,
  links: Links,
  stretches: readonly Stretch[],
  findings: Finding[],
): Map<Stretch, Joined[]> {
  const ends = stretches.flatMap((stretch) => openEnds(drawing, stretch));
  ends.sort((p, q) => {
    const close = Math.abs(p.length - q.length) <= 1e-3;
    return close ? p.from[0] - q.from[0] || p.from[1] - q.from[1] : p.length - q.length;
  });
  const joined = new Map<Stretch, Joined[]>();
  for (const end of ends) {
    const { stretch } = end;
    const list = joined.get(stretch) ?? [];
    joined.set(stretch, list);
    const e = drawing.elements.at(end.element);
    const s = end.atEnd ? e.s1 : e.s0;
    const reach = 4 * halfWidest(drawing, stretch);
    // where two ends face each other, the join of the one serves the other
    if (list.some((k) => k.other === e.channel && Math.abs(k.t - s) <= reach)) continue;
    list.push(joinEnd(drawing, links, end, findings));
  }
  return joined;
}

function openEnds(drawing: Drawing, stretch: Stretch): OpenEnd[] {
  const { first } = drawing.elements;
  const ends: OpenEnd[] = [];
  const look = (element: number, others: Set<number>, atEnd: boolean) => {
    const target = [...others].filter((j) => endIn(drawing, element, atEnd, drawing.body(j)));
    if (target.length > 0)
      ends.push({ stretch, element, atEnd, ...landing(drawing, element, atEnd, target) });
  };
  for (const [channel, own, others] of [
    [stretch.a, stretch.inA, stretch.inB],
    [stretch.b, stretch.inB, stretch.inA],
  ] as const) {
    const head = first[channel]!;
    const tail = first[channel + 1]! - 1;
    if (own.has(head)) look(head, others, false);
    if (own.has(tail)) look(tail, others, true);
  }
  return ends;
}

/** Where an end, led on straight, reaches the centreline of what it lies in; else the nearest place on it. */
function landing(
  drawing: Drawing,
  element: number,
  atEnd: boolean,
  target: readonly number[],
): Pick<OpenEnd, 'from' | 'target' | 'd' | 'length'> {
  const e = drawing.elements.at(element);
  const [x, y] = atEnd ? [e.curve.x1, e.curve.y1] : [e.curve.x0, e.curve.y0];
  const [ux, uy] = atEnd ? tangentAt(e.curve, e.curve.length) : [-e.curve.ux, -e.curve.uy];
  let best = { from: [x, y] as const, target: target[0]!, d: 0, length: Infinity };
  for (const j of target) {
    const o = drawing.elements.at(j);
    const reach = 2 * (Math.max(e.h0, e.h1) + Math.max(o.h0, o.h1));
    meet(line(x, y, x + ux * reach, y + uy * reach), o.curve, (length, d) => {
      if (length < best.length) best = { from: [x, y], target: j, d, length };
    });
  }
  if (best.length < Infinity) return best;
  for (const j of target) {
    const c = drawing.elements.curve(j);
    const d = nearest(c, x, y);
    const [px, py] = pointAt(c, d);
    const length = Math.hypot(px - x, py - y);
    if (length < best.length) best = { from: [x, y], target: j, d, length };
  }
  return best;
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

function joinEnd(drawing: Drawing, links: Links, end: OpenEnd, findings: Finding[]): Joined {
  const e = drawing.elements.at(end.element);
  const other = drawing.elements.at(end.target);
  const store = end.atEnd ? links.tail : links.head;
  let [x, y] = pointAt(other.curve, end.d);
  let sb = other.s0 + end.d;
  // an end is led on once: a second channel that it lies in is joined at the same place
  const known = store.get(e.channel);
  if (known) {
    ({ x, y } = known);
    sb = other.s0 + nearest(other.curve, x, y);
  } else store.set(e.channel, { x, y, length: end.length });
  const along = known?.length ?? end.length;
  const node = links.addNode(x, y);
  const sa = end.atEnd ? e.s1 + along : -along;
  links.addMark(node, e.channel, sa, sa, end.atEnd ? e.h1 : e.h0);
  links.addMark(node, other.channel, sb, sb, halfAt(other, sb));
  const id = drawing.chip.channels[e.channel]!.id;
  const otherId = drawing.chip.channels[other.channel]!.id;
  findings.push({
    kind: 'end-extended',
    severity: 'note',
    where: id,
    says: `The ${end.atEnd ? 'last' : 'first'} end of ${id} lies in ${otherId} without reaching its centreline; it was taken on by ${um(end.length)} to it.`,
    do: `End ${id} on the centreline of ${otherId}, or clear of it if they are not to be joined.`,
    at: [x * 1e-9, y * 1e-9],
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
  const along = span(stretch.points);
  const reach = 4 * halfWidest(drawing, stretch);
  const long = Math.max(along.highA - along.lowA, along.highB - along.lowB) > reach;
  if (!long && joined.length > 0) return;
  const { a, b } = stretch;
  const [startB, stopB] = along.same ? [along.lowB, along.highB] : [along.highB, along.lowB];
  const places: [number, number][] = long
    ? [
        [along.lowA, startB],
        [along.highA, stopB],
      ]
    : [[(along.lowA + along.highA) / 2, (along.lowB + along.highB) / 2]];
  for (const [sa, sb] of places) {
    if (a === b && sb - sa <= 2 * reach) continue;
    if (joined.some((k) => served(k, stretch, sa, sb, reach))) continue;
    const p = drawing.placeAt(a, sa);
    const q = drawing.placeAt(b, sb);
    const node = links.addNode((p[0] + q[0]) / 2, (p[1] + q[1]) / 2);
    links.addMark(node, a, sa, sa, halfOn(drawing, stretch.inA, sa));
    links.addMark(node, b, sb, sb, halfOn(drawing, stretch.inB, sb));
  }
  const [x, y] = drawing.placeAt(a, along.lowA);
  const idA = drawing.chip.channels[a]!.id;
  const idB = drawing.chip.channels[b]!.id;
  findings.push({
    kind: 'overlap-alongside',
    severity: 'warn',
    where: idB,
    says: `${a === b ? `Two parts of ${idA}` : `${idA} and ${idB}`} overlap side by side over ${um(along.highA - along.lowA)}, so they are one cavity there; they were joined ${long ? 'where the overlap begins and ends' : 'in its middle'}, and between count as two channels.`,
    do: 'Move them apart to leave a wall between them, or draw the common stretch as one wider channel.',
    at: [x * 1e-9, y * 1e-9],
  });
}

function served(k: Joined, stretch: Stretch, sa: number, sb: number, reach: number): boolean {
  const [s, t] = k.channel === stretch.a ? [sa, sb] : [sb, sa];
  if (Math.abs(k.s - s) <= reach && Math.abs(k.t - t) <= reach) return true;
  return stretch.a === stretch.b && Math.abs(k.s - t) <= reach && Math.abs(k.t - s) <= reach;
}

/** Where common ground begins and ends along both channels, and whether they run the same way there. */
function span(points: Stretch['points']): {
  lowA: number;
  highA: number;
  lowB: number;
  highB: number;
  same: boolean;
} {
  let lowA = Infinity;
  let highA = -Infinity;
  let lowB = Infinity;
  let highB = -Infinity;
  for (const p of points) {
    lowA = Math.min(lowA, p.sa);
    highA = Math.max(highA, p.sa);
    lowB = Math.min(lowB, p.sb);
    highB = Math.max(highB, p.sb);
  }
  let tendency = 0;
  for (const p of points) tendency += (p.sa - (lowA + highA) / 2) * (p.sb - (lowB + highB) / 2);
  return { lowA, highA, lowB, highB, same: tendency >= 0 };
}
