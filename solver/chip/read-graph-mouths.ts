import type { Finding } from '../problem/finding.ts';
import { type Area, commonGround, cuts, edgesNear, inArea, nearestEdge } from './geometry/area.ts';
import { type Body, endCorners, halfAt, loopsOverlap, outline } from './geometry/body.ts';
import { byPair } from './geometry/by-pair.ts';
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
  const taken: Taken[] = [];
  for (const i of near) {
    const b = drawing.body(i);
    if (drawing.layerOf[b.element.channel] !== layer) continue;
    const met = drawing.keeps ? metBy(area, b, () => meeting(place, b)) : meeting(place, b);
    for (const stretch of met.inside) runOn(taken, b.element.channel, stretch);
    if (met.inside.length > 0) entered.add(i);
    else if (met.beside) beside.push(i);
  }
  for (const t of taken) {
    const core = place.kind === 'chamber' ? undefined : t.core;
    links.addMark(place.node, t.channel, t.low, t.high, t.half, core);
  }
  // a run of neighbouring elements beside the area is one mouth; next to one that enters, it is explained
  for (let k = 0; k < beside.length; ) {
    const run = [beside[k]!];
    const channel = drawing.elements.channel[beside[k]!]!;
    const sameChannel = (i: number) => drawing.elements.channel[i] === channel;
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

/** A stretch of a channel's centreline in an area, with its place nearest to the area's centre. */
interface Stretch {
  readonly low: number;
  readonly high: number;
  readonly half: number;
  readonly core: number;
  /** Distance of that place from the centre. */
  readonly off: number;
}

interface Taken extends Writable<Stretch> {
  readonly channel: number;
}
type Writable<T> = { -readonly [K in keyof T]: T[K] };

/** What an area has of an element: stretches of its centreline, or else whether it lies beside it. */
interface Meeting {
  readonly inside: readonly Stretch[];
  readonly beside: boolean;
}

/** A place's centre goes with its area, so this depends on nothing else. */
const metBy = byPair<Area, Meeting, Body>();

function meeting(place: Place, b: Body): Meeting {
  const inside = stretchesIn(place, b);
  return { inside, beside: inside.length === 0 && meets(place, b) };
}

/** Adds a stretch, run on from that of the element before. */
function runOn(taken: Taken[], channel: number, { low, high, half, core, off }: Stretch): void {
  const last = taken[taken.length - 1];
  if (last && last.channel === channel && low - last.high <= TOUCH) {
    last.high = high;
    last.half = Math.min(last.half, half);
    if (off < last.off) {
      last.off = off;
      last.core = core;
    }
  } else taken.push({ channel, low, high, half, core, off });
}

/** The stretches of an element's centreline in the area. */
function stretchesIn(place: Place, b: Body): Stretch[] {
  const e = b.element;
  const { area } = place;
  const stops = [0, ...cuts(area, e.curve), e.curve.length];
  const inside = [false];
  for (let k = 1; k < stops.length; k++) {
    const [x, y] = pointAt(e.curve, (stops[k - 1]! + stops[k]!) / 2);
    inside.push(stops[k]! - stops[k - 1]! > TOUCH && inArea(area, x, y));
  }
  inside.push(false);
  const found: Stretch[] = [];
  for (let k = 1; k < stops.length; k++) {
    // a mere touch counts too
    const touch = k < stops.length - 1 && !inside[k] && !inside[k + 1];
    if (!inside[k] && !touch) continue;
    const from = touch ? stops[k]! : stops[k - 1]!;
    const to = stops[k]!;
    const core = Math.min(Math.max(nearest(e.curve, place.at[0], place.at[1]), from), to);
    const [x, y] = pointAt(e.curve, core);
    const off = Math.hypot(x - place.at[0], y - place.at[1]);
    const s = e.s0 + core;
    const half = halfAt(e, s);
    found.push({ low: e.s0 + from, high: e.s0 + to, half, core: s, off });
  }
  return found;
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
  const channel = drawing.elements.channel[run[0]!]!;
  const length = drawing.elements.total(channel);
  const id = drawing.chip.channels[channel]!.id;
  for (const atEnd of [false, true]) {
    const element = atEnd ? drawing.elements.first[channel + 1]! - 1 : drawing.elements.first[channel]!;
    if (!run.includes(element)) continue;
    const e = drawing.elements.at(element);
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
    const e = drawing.elements.at(i);
    const s = e.s0 + nearest(e.curve, x, y);
    low = Math.min(low, s);
    high = Math.max(high, s);
  };
  for (const i of run) for (const [x, y] of commonGround(place.area, drawing.body(i))) spread(i, x, y);
  if (low > high) {
    // they touch without a corner in common: at the corner nearest to the area
    let least = Infinity;
    for (const i of run) {
      for (const { x0, y0 } of outline(drawing.body(i))) {
        const { distance } = nearestEdge(place.area, x0, y0);
        if (distance >= least) continue;
        least = distance;
        const e = drawing.elements.at(i);
        low = high = e.s0 + nearest(e.curve, x0, y0);
      }
    }
  }
  const s = (low + high) / 2;
  const at = run.find((i) => drawing.elements.at(i).s1 >= s) ?? run[0]!;
  const e = drawing.elements.at(at);
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
