import type { Chip } from '../../chip/chip.ts';
import { type Area, areasOverlap, cuts, disc, edgesNear, inArea, polygon } from '../../chip/geometry/area.ts';
import { type Body, commonCorners, covers, outline } from '../../chip/geometry/body.ts';
import { nearest, pointAt, tangentAt } from '../../chip/geometry/curve.ts';
import { TOUCH } from '../../chip/geometry/tolerance.ts';
import type { Graph } from '../../chip/graph.ts';
import { type Drawing, layerNumbers } from '../../chip/read-graph-drawing.ts';
import { BEND_RADIUS, BEND_TURN, STEP, TAPER_SLOPE } from './bounds.ts';

/** A stretch of a channel where its flow cannot be that of a duct. */
export interface Core {
  readonly channel: number;
  low: number;
  high: number;
  /** What makes it so; cores of one source belong to one cell. */
  readonly source: number;
}

/** The hole of a port or via on one layer. */
export interface Hole {
  readonly x: number;
  readonly y: number;
  readonly radius: number;
  readonly layer: number;
  readonly site: number;
  readonly area: Area;
}

export interface Sources {
  readonly cores: Core[];
  /** Sources that count only if a cell reaches them: channels that go straight on into each other. */
  readonly weak: boolean[];
  /** Sources that are steep tapers. */
  readonly taper: boolean[];
  /** Chambers of each source. */
  readonly chambers: Map<number, number[]>;
  readonly holes: readonly Hole[];
  /** Holes that a source's ground touches. */
  readonly holesOf: Map<number, Set<number>>;
}

/**
 * Everything that needs a cell, as stretches along channels: where covered areas overlap (junctions,
 * ends on ends with a turn or a step), corners and tight bends, steep tapers, chambers, holes.
 */
export function findCores(chip: Chip, graph: Graph, drawing: Drawing): Sources {
  const found: Sources = {
    cores: [],
    weak: [],
    taper: [],
    chambers: new Map(),
    holes: holesOf(chip, graph),
    holesOf: new Map(),
  };
  overlaps(chip, drawing, found);
  bends(chip, drawing, found);
  chambers(chip, drawing, found);
  holeContacts(drawing, found);
  return found;
}

function addSource(found: Sources, weak = false, taper = false): number {
  found.weak.push(weak);
  found.taper.push(taper);
  return found.weak.length - 1;
}

function holesOf(chip: Chip, graph: Graph): Hole[] {
  const layers = layerNumbers(chip);
  const siteOfVia = new Map<string, number>();
  graph.sites.forEach((site, i) => {
    for (const id of site.vias) siteOfVia.set(id, i);
  });
  const holes: Hole[] = [];
  for (const v of chip.vias) {
    const site = siteOfVia.get(v.id)!;
    const [x, y] = v.at;
    const radius = v.diameter / 2;
    for (const l of v.layers)
      holes.push({ x, y, radius, layer: layers.get(l)!, site, area: disc(x, y, radius) });
  }
  chip.ports.forEach((p, i) => {
    if (p.diameter <= 0) return;
    const [x, y] = p.at;
    const radius = p.diameter / 2;
    const site = graph.portSite[i]!;
    holes.push({ x, y, radius, layer: layers.get(p.layer)!, site, area: disc(x, y, radius) });
  });
  return holes;
}

/** Elements of one layer that overlap, other than neighbours in one channel. */
function overlaps(chip: Chip, drawing: Drawing, found: Sources): void {
  const { elements, boxes, index, layerOf } = drawing;
  if (!index) return;
  const { channel } = elements;
  for (let i = 0; i < elements.count; i++) {
    const near: number[] = index.search(
      boxes[4 * i]!,
      boxes[4 * i + 1]!,
      boxes[4 * i + 2]!,
      boxes[4 * i + 3]!,
      (j) => j > i,
    );
    for (const j of near.sort((p, q) => p - q)) {
      const a = channel[i]!;
      const b = channel[j]!;
      if (layerOf[a] !== layerOf[b] || (a === b && j <= i + 1) || !drawing.overlap(i, j)) continue;
      const p = drawing.body(i);
      const q = drawing.body(j);
      if (a === b && sameBend(p, q)) continue;
      const joint = jointOf(p, q, drawing);
      if (joint) {
        endOnEnd(found, chip, drawing, joint);
        continue;
      }
      const source = addSource(found);
      const corners = commonCorners(p, q);
      const margin = filletReach(chip, drawing, p, q);
      span(found, p, corners, source, margin);
      span(found, q, corners, source, margin);
    }
  }
}

/** Parts of one channel that overlap beside a slight bend, which is no cell. */
function sameBend(p: Body, q: Body): boolean {
  const between = q.element.s0 - p.element.s1;
  if (between >= 2 * Math.min(p.element.h1, q.element.h0)) return false;
  const [ax, ay] = tangentAt(p.element.curve, p.element.curve.length);
  const { ux, uy } = q.element.curve;
  return Math.abs(Math.atan2(ax * uy - ay * ux, ax * ux + ay * uy)) <= BEND_TURN;
}

function span(
  found: Sources,
  b: Body,
  corners: readonly (readonly [number, number])[],
  source: number,
  margin: number,
): void {
  const e = b.element;
  let low = Infinity;
  let high = -Infinity;
  for (const [x, y] of corners) {
    const s = e.s0 + nearest(e.curve, x, y);
    low = Math.min(low, s);
    high = Math.max(high, s);
  }
  if (low <= high) {
    found.cores.push({ channel: e.channel, low: low - margin, high: high + margin, source });
  }
}

/** Two ends of channels at one point. */
interface Joint {
  readonly p: End;
  readonly q: End;
}

function jointOf(p: Body, q: Body, drawing: Drawing): Joint | undefined {
  for (const a of ends(p, drawing)) {
    for (const b of ends(q, drawing))
      if (Math.hypot(a.x - b.x, a.y - b.y) <= 2 * TOUCH) return { p: a, q: b };
  }
  return undefined;
}

/**
 * Channels that end on each other: as far along each as to where its wall meets the other's, fillet
 * included; where they go straight on and are alike in width, a joint that needs no cell of its own.
 */
function endOnEnd(found: Sources, chip: Chip, drawing: Drawing, { p, q }: Joint): void {
  const { fillet } = chip.layers[drawing.layerOf[p.channel]!]!;
  const cosine = p.ux * q.ux + p.uy * q.uy;
  const sine = Math.abs(p.ux * q.uy - p.uy * q.ux);
  const turn = Math.atan2(sine, -cosine);
  const step = Math.abs(p.half - q.half) > STEP * Math.max(p.half, q.half);
  const source = addSource(found, turn <= BEND_TURN && !step);
  for (const [own, other] of [
    [p, q],
    [q, p],
  ] as const) {
    const corner = turn <= BEND_TURN ? 0 : Math.max(0, (other.half + own.half * cosine) / sine);
    const rounding = turn <= BEND_TURN ? (step ? fillet : 0) : fillet * Math.tan(turn / 2);
    const reach = Math.min(corner + rounding, own.room);
    const [low, high] = own.atStart ? [0, reach] : [own.total - reach, own.total];
    found.cores.push({ channel: own.channel, low, high, source });
  }
}

interface End {
  readonly x: number;
  readonly y: number;
  /** Into the channel. */
  readonly ux: number;
  readonly uy: number;
  readonly half: number;
  readonly channel: number;
  readonly atStart: boolean;
  /** Length of the channel, and of the element there. */
  readonly total: number;
  readonly room: number;
}

function ends(b: Body, drawing: Drawing): End[] {
  const e = b.element;
  const c = e.curve;
  const { channel } = e;
  const total = drawing.elements.total(channel);
  const common = { channel, total, room: c.length };
  const list: End[] = [];
  if (e.s0 === 0) list.push({ ...common, x: c.x0, y: c.y0, ux: c.ux, uy: c.uy, half: e.h0, atStart: true });
  if (e.s1 === total) {
    const [ux, uy] = tangentAt(c, c.length);
    list.push({ ...common, x: c.x1, y: c.y1, ux: -ux, uy: -uy, half: e.h1, atStart: false });
  }
  return list;
}

/** How far the fillets of the sharpest corner between two crossing strips reach along them. */
function filletReach(chip: Chip, drawing: Drawing, p: Body, q: Body): number {
  const { fillet } = chip.layers[drawing.layerOf[p.element.channel]!]!;
  if (fillet === 0) return 0;
  const a = p.element.curve;
  const b = q.element.curve;
  const sine = Math.abs(a.ux * b.uy - a.uy * b.ux);
  const cosine = Math.abs(a.ux * b.ux + a.uy * b.uy);
  // tangent length of an arc in the acute corner; between parallel strips there is none
  return sine < 0.05 ? fillet : Math.min(20, (1 + cosine) / sine) * fillet;
}

/** Corners, tight arcs and steep tapers. */
function bends(chip: Chip, drawing: Drawing, found: Sources): void {
  const { elements } = drawing;
  for (let c = 0; c < chip.channels.length; c++) {
    const { fillet } = chip.layers[drawing.layerOf[c]!]!;
    const first = elements.first[c]!;
    const last = elements.first[c + 1]! - 1;
    const total = elements.total(c);
    const [w0, w1] = chip.channels[c]!.width;
    if (Math.abs(w1 - w0) / 2 / total > TAPER_SLOPE) {
      found.cores.push({ channel: c, low: 0, high: total, source: addSource(found, false, true) });
      continue;
    }
    for (let id = first; id <= last; id++) {
      const e = elements.at(id);
      const width = 2 * Math.max(e.h0, e.h1);
      if (e.curve.curvature !== 0 && Math.abs(1 / e.curve.curvature) < BEND_RADIUS * width) {
        found.cores.push({ channel: c, low: e.s0, high: e.s1, source: addSource(found) });
      }
      const turn = Math.abs(e.turn1);
      if (turn < 1e-6 || id === last) continue;
      const next = elements.at(id + 1);
      // many small turns in a row are a bend of their mean radius
      const radius = (e.curve.length + next.curve.length) / 2 / turn;
      if (turn <= BEND_TURN && (radius >= BEND_RADIUS * width || turn < BEND_TURN / 20)) continue;
      const reach = (e.h1 + fillet) * Math.tan(turn / 2);
      found.cores.push({
        channel: c,
        low: e.s1 - Math.min(reach, e.curve.length),
        high: e.s1 + Math.min(reach, next.curve.length),
        source: addSource(found),
      });
    }
  }
}

function chambers(chip: Chip, drawing: Drawing, found: Sources): void {
  const layers = layerNumbers(chip);
  const areas = chip.chambers.map((c) => polygon(c.outline));
  const sources = areas.map(() => addSource(found));
  chip.chambers.forEach((c, i) => {
    const layer = layers.get(c.layer)!;
    const source = sources[i]!;
    found.chambers.set(source, [i]);
    const { fillet } = chip.layers[layer]!;
    for (const b of bodiesAt(drawing, areas[i]!, layer)) {
      const corners = commonGround(areas[i]!, b);
      span(found, b, corners, source, 1.5 * fillet);
    }
    found.holes.forEach((hole, k) => {
      if (hole.layer === layer && areasOverlap(areas[i]!, hole.area)) addHole(found, source, k);
    });
  });
}

function addHole(found: Sources, source: number, hole: number): void {
  const set = found.holesOf.get(source) ?? new Set();
  found.holesOf.set(source, set.add(hole));
}

function bodiesAt(drawing: Drawing, area: Area, layer: number): Body[] {
  const near: number[] = drawing.index?.search(area.minX, area.minY, area.maxX, area.maxY) ?? [];
  return near
    .filter((i) => drawing.layerOf[drawing.elements.channel[i]!] === layer)
    .sort((p, q) => p - q)
    .map((i) => drawing.body(i));
}

function commonGround(area: Area, b: Body): [number, number][] {
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

/** Strips that reach under a hole: each its own source, for at the rim the pressure is the hole's. */
function holeContacts(drawing: Drawing, found: Sources): void {
  found.holes.forEach((hole, k) => {
    for (const b of bodiesAt(drawing, hole.area, hole.layer)) {
      const corners = commonGround(hole.area, b);
      if (corners.length === 0) continue;
      // the rim bulges along the strip beyond where it meets the walls
      const e = b.element;
      const d = nearest(e.curve, hole.x, hole.y);
      const [fx, fy] = pointAt(e.curve, d);
      if (Math.hypot(fx - hole.x, fy - hole.y) < Math.max(e.h0, e.h1)) {
        for (const end of [d - hole.radius, d + hole.radius]) {
          corners.push(pointAt(e.curve, Math.min(Math.max(end, 0), e.curve.length)));
        }
      }
      const source = addSource(found);
      addHole(found, source, k);
      span(found, b, corners, source, 0);
    }
  });
}
