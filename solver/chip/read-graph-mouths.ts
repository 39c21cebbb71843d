import type { Finding } from '../problem/finding.ts';
import { cuts, edgesNear, inArea, nearestEdge } from './geometry/area.ts';
import { type Body, endCorners, halfAt, loopsOverlap, outline } from './geometry/body.ts';
import { um } from './geometry/centreline.ts';
import { line, meet, nearest, pointAt, tangentAt } from './geometry/curve.ts';
import { TOUCH } from './geometry/tolerance.ts';
import type { Place } from './read-graph-areas.ts';
import type { Drawing } from './read-graph-drawing.ts';
import type { Links } from './read-graph-links.ts';

/**
 * What a chamber or hole takes up of the channels of one layer: the stretches of their centrelines
 * inside it, and, where only covered areas overlap, ends taken on to it or a join alongside.
 * Returns whether anything met it.
 */
export function joinToArea(
  drawing: Drawing,
  links: Links,
  place: Place,
  layer: number,
  findings: Finding[],
): boolean {
  const { area } = place;
  const near = drawing.index?.search(area.minX, area.minY, area.maxX, area.maxY) ?? [];
  near.sort((p, q) => p - q);
  const entered = new Set<number>();
  const beside: number[] = [];
  for (const i of near) {
    const b = drawing.bodies[i]!;
    if (drawing.layerOf[b.element.channel] !== layer) continue;
    if (enter(links, place, b)) entered.add(i);
    else if (meets(place, b)) beside.push(i);
  }
  // a run of neighbouring elements beside the area is one mouth; next to one that enters, it is explained
  for (let k = 0; k < beside.length; ) {
    const run = [beside[k]!];
    const channel = drawing.bodies[beside[k]!]!.element.channel;
    const sameChannel = (i: number) => drawing.bodies[i]?.element.channel === channel;
    for (k++; k < beside.length && beside[k] === run[run.length - 1]! + 1 && sameChannel(beside[k]!); k++) {
      run.push(beside[k]!);
    }
    const before = run[0]! - 1;
    const after = run[run.length - 1]! + 1;
    if (entered.has(before) && sameChannel(before)) continue;
    if (entered.has(after) && sameChannel(after)) continue;
    joinMouth(drawing, links, place, run, findings);
  }
  return entered.size > 0 || beside.length > 0;
}

/** Marks the stretches of an element's centreline in the area. */
function enter(links: Links, place: Place, b: Body): boolean {
  const e = b.element;
  const { area } = place;
  const at = cuts(area, e.curve);
  const stops = [0, ...at, e.curve.length];
  let any = false;
  for (let k = 1; k < stops.length; k++) {
    const low = stops[k - 1]!;
    const high = stops[k]!;
    const [x, y] = pointAt(e.curve, (low + high) / 2);
    const within = high - low > TOUCH && inArea(area, x, y);
    // a mere touch counts too
    const touch = !within && k < stops.length - 1;
    if (!within && !touch) continue;
    any = true;
    const from = e.s0 + (touch ? high : low);
    const to = e.s0 + high;
    if (place.kind === 'chamber') links.addMark(place.node, e.channel, from, to, halfAt(e, to));
    else {
      const foot = e.s0 + nearest(e.curve, place.at[0], place.at[1]);
      const core = Math.min(Math.max(foot, from), to);
      links.addMark(place.node, e.channel, from, to, halfAt(e, core), core);
    }
  }
  return any;
}

function meets(place: Place, b: Body): boolean {
  const loop = outline(b);
  const edges = edgesNear(place.area, b.minX - TOUCH, b.minY - TOUCH, b.maxX + TOUCH, b.maxY + TOUCH);
  if (edges.length > 0 && loopsOverlap(loop, edges)) return true;
  return inArea(place.area, loop[0]!.x0, loop[0]!.y0);
}

function joinMouth(
  drawing: Drawing,
  links: Links,
  place: Place,
  run: readonly number[],
  findings: Finding[],
): void {
  const channel = drawing.bodies[run[0]!]!.element.channel;
  const length = drawing.lines[channel]!.length;
  const id = drawing.chip.channels[channel]!.id;
  for (const atEnd of [false, true]) {
    const element = atEnd ? drawing.first[channel + 1]! - 1 : drawing.first[channel]!;
    if (!run.includes(element)) continue;
    const e = drawing.bodies[element]!.element;
    const [ax, ay, bx, by] = endCorners(e, atEnd);
    const edge = line(ax, ay, bx, by);
    if (cuts(place.area, edge).length === 0 && !inArea(place.area, ax, ay)) continue;
    const [x, y] = atEnd ? [e.curve.x1, e.curve.y1] : [e.curve.x0, e.curve.y0];
    const [ux, uy] = atEnd ? tangentAt(e.curve, e.curve.length) : [-e.curve.ux, -e.curve.uy];
    const reach = 2 * Math.max(e.h0, e.h1);
    let best = Infinity;
    for (const c of place.area.edges)
      meet(line(x, y, x + ux * reach, y + uy * reach), c, (s) => {
        best = Math.min(best, s);
      });
    let [px, py] = [x + ux * best, y + uy * best];
    if (best === Infinity) {
      const nearby = nearestEdge(place.area, x, y);
      best = nearby.distance;
      [px, py] = pointAt(nearby.edge, nearest(nearby.edge, x, y));
    }
    const store = atEnd ? links.tail : links.head;
    const known = store.get(channel);
    if (!known) store.set(channel, { x: px, y: py, length: best });
    const along = known?.length ?? best;
    const s = atEnd ? length + along : -along;
    links.addMark(place.node, channel, s, s, atEnd ? e.h1 : e.h0);
    findings.push({
      kind: 'end-extended',
      severity: 'note',
      where: id,
      says: `The ${atEnd ? 'last' : 'first'} end of ${id} opens into ${place.kind} ${place.id} without its centreline reaching it; it was taken on by ${um(best)}.`,
      do: `End ${id} inside ${place.id}, or clear of it if they are not to be joined.`,
      at: [px * 1e-9, py * 1e-9],
    });
    return;
  }
  joinBeside(drawing, links, place, run, findings);
}

/** The channel runs along the area with its side in it: joined at the middle of the common stretch. */
function joinBeside(
  drawing: Drawing,
  links: Links,
  place: Place,
  run: readonly number[],
  findings: Finding[],
): void {
  let low = Infinity;
  let high = -Infinity;
  const spread = (i: number, x: number, y: number) => {
    const e = drawing.bodies[i]!.element;
    const s = e.s0 + nearest(e.curve, x, y);
    low = Math.min(low, s);
    high = Math.max(high, s);
  };
  for (const i of run) {
    const b = drawing.bodies[i]!;
    for (const edge of outline(b)) {
      if (inArea(place.area, edge.x0, edge.y0)) spread(i, edge.x0, edge.y0);
      for (const s of cuts(place.area, edge)) spread(i, ...pointAt(edge, s));
    }
  }
  const s = (low + high) / 2;
  const at = run.find((i) => drawing.bodies[i]!.element.s1 >= s) ?? run[0]!;
  const e = drawing.bodies[at]!.element;
  links.addMark(place.node, e.channel, s, s, halfAt(e, s));
  const id = drawing.chip.channels[e.channel]!.id;
  const [x, y] = pointAt(e.curve, s - e.s0);
  findings.push({
    kind: 'overlap-alongside',
    severity: 'warn',
    where: id,
    says: `${id} runs along ${place.kind} ${place.id} with its side in it over ${um(high - low)}, so they are one cavity; they were joined in the middle of that stretch.`,
    do: 'Move them apart to leave a wall between them, or lead the channel into it.',
    at: [x * 1e-9, y * 1e-9],
  });
}
