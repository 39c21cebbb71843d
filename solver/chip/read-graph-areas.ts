import Flatbush from 'flatbush';
import type { Finding } from '../problem/finding.ts';
import { Problem } from '../problem/problem.ts';
import type { Point } from './chip.ts';
import {
  type Area,
  areaOf,
  areasOverlap,
  areasOverlapOnce,
  centroid,
  discOf,
  inArea,
} from './geometry/area.ts';
import { covers, halfAt } from './geometry/body.ts';
import { um } from './geometry/centreline.ts';
import { nearest, pointAt } from './geometry/curve.ts';
import { TOUCH } from './geometry/tolerance.ts';
import { type Drawing, layerNumbers } from './read-graph-drawing.ts';
import type { Links } from './read-graph-links.ts';
import { joinToArea } from './read-graph-mouths.ts';

/** A chamber or a hole with its node. */
export interface Place {
  readonly area: Area;
  readonly layers: readonly number[];
  readonly node: number;
  readonly id: string;
  readonly kind: 'chamber' | 'via' | 'port';
  readonly at: Point;
}

/** Nodes of chambers, vias and ports, in the chip's order of each. */
export interface Places {
  readonly chambers: readonly number[];
  readonly vias: readonly number[];
  readonly ports: readonly number[];
  /** Chambers and holes. */
  readonly areas: readonly Place[];
}

/** Chambers, vias and ports: what of the channels they take up, and what joins what through them. */
export function readPlaces(drawing: Drawing, links: Links, findings: Finding[]): Places {
  const { chip } = drawing;
  const layer = layerNumbers(chip);
  const all: Place[] = [];
  const place = (
    kind: Place['kind'],
    id: string,
    area: Area,
    layers: readonly string[],
    at: Point,
  ): number => {
    const node = links.addNode(at[0], at[1]);
    all.push({ area, layers: layers.map((l) => layer.get(l)!), node, id, kind, at });
    return node;
  };
  const chambers = chip.chambers.map((c) =>
    place('chamber', c.id, areaOf(c.outline), [c.layer], centroid(c.outline)),
  );
  const vias = chip.vias.map((v) => place('via', v.id, discOf(v), v.layers, v.at));
  const ports = chip.ports.map((p) =>
    p.diameter > 0 ? place('port', p.id, discOf(p), [p.layer], p.at) : links.addNode(p.at[0], p.at[1]),
  );
  const index = placeIndex(all);
  const wet = all.map((p) => p.layers.map(() => p.kind === 'chamber'));
  for (let i = 0; i < all.length; i++) {
    const p = all[i]!;
    for (let k = 0; k < p.layers.length; k++) {
      if (joinToArea(drawing, links, p, p.layers[k]!, findings)) wet[i]![k] = true;
    }
  }
  for (let i = 0; i < all.length; i++) uniteOverlapping(drawing, all, i, index, links, wet);
  for (let i = 0; i < all.length; i++) {
    const dry = wet[i]!.indexOf(false);
    if (dry >= 0) throw outside(drawing, all[i]!.kind, all[i]!.id, all[i]!.at, all[i]!.layers[dry]!);
  }
  for (let i = 0; i < chip.ports.length; i++) {
    const port = chip.ports[i]!;
    if (port.diameter === 0)
      placePoint(drawing, links, { all, index }, port.id, port.at, layer.get(port.layer)!, ports[i]!);
  }
  return { chambers, vias, ports, areas: all };
}

function placeIndex(all: readonly Place[]): Flatbush | undefined {
  if (all.length === 0) return undefined;
  const index = new Flatbush(all.length);
  for (const { area } of all) {
    index.add(area.minX - TOUCH, area.minY - TOUCH, area.maxX + TOUCH, area.maxY + TOUCH);
  }
  index.finish();
  return index;
}

/** Chambers and holes that overlap on a layer are one place. */
function uniteOverlapping(
  drawing: Drawing,
  all: readonly Place[],
  i: number,
  index: Flatbush | undefined,
  links: Links,
  wet: boolean[][],
): void {
  const p = all[i]!;
  const { minX, minY, maxX, maxY } = p.area;
  const meet = drawing.keeps ? areasOverlapOnce : areasOverlap;
  for (const j of index!.search(minX, minY, maxX, maxY, (k) => k > i).sort((a, b) => a - b)) {
    const q = all[j]!;
    const shared = p.layers.filter((l) => q.layers.includes(l));
    if (shared.length === 0 || !meet(p.area, q.area)) continue;
    links.unite(p.node, q.node);
    for (const l of shared) {
      // a hole is wet where it meets a chamber, or a via that brings fluid
      if (q.kind !== 'port') wet[i]![p.layers.indexOf(l)] = true;
      if (p.kind !== 'port') wet[j]![q.layers.indexOf(l)] = true;
    }
  }
}

/** A port without a hole sits at a point of the fluid. */
function placePoint(
  drawing: Drawing,
  links: Links,
  areas: { readonly all: readonly Place[]; readonly index: Flatbush | undefined },
  id: string,
  at: Point,
  layer: number,
  node: number,
): void {
  const [x, y] = at;
  for (const k of areas.index?.search(x, y, x, y).sort((a, b) => a - b) ?? []) {
    const p = areas.all[k]!;
    if (p.layers.includes(layer) && inArea(p.area, x, y)) {
      links.unite(p.node, node);
      return;
    }
  }
  let best = Infinity;
  let channel = -1;
  let s = 0;
  let half = 0;
  for (const j of drawing.index?.search(x, y, x, y).sort((a, b) => a - b) ?? []) {
    const b = drawing.body(j);
    const e = b.element;
    if (drawing.layerOf[e.channel] !== layer || !covers(b, x, y)) continue;
    const d = nearest(e.curve, x, y);
    const [px, py] = pointAt(e.curve, d);
    const off = Math.hypot(px - x, py - y);
    if (off >= best) continue;
    best = off;
    channel = e.channel;
    s = e.s0 + d;
    half = halfAt(e, s);
  }
  if (channel < 0) throw outside(drawing, 'port', id, at, layer);
  links.addMark(node, channel, s, s, half);
}

/** The problem of a port or via where there is no fluid: which, where, and what is nearest. */
function outside(drawing: Drawing, kind: string, id: string, at: Point, layer: number): Problem {
  const { chip } = drawing;
  let best = Infinity;
  let name = '';
  const nearby = drawing.index?.neighbors(at[0], at[1], 16, Infinity, (j) => {
    return drawing.layerOf[drawing.elements.channel[j]!] === layer;
  });
  for (const j of nearby ?? []) {
    const e = drawing.elements.at(j);
    const d = nearest(e.curve, at[0], at[1]);
    const [px, py] = pointAt(e.curve, d);
    const gap = Math.max(0, Math.hypot(px - at[0], py - at[1]) - halfAt(e, e.s0 + d));
    if (gap < best) {
      best = gap;
      name = chip.channels[e.channel]!.id;
    }
  }
  const layerId = chip.layers[layer]!.id;
  const where = `(${um(at[0])}, ${um(at[1])})`;
  const nearestTo = name
    ? `the nearest channel there is ${name}, ${um(best)} away`
    : 'that layer has no channel at all';
  return new Problem(
    'place',
    `There is no fluid of layer ${layerId} under ${kind} ${id} at ${where}: ${nearestTo}.`,
    `${kind}:${id}`,
    name
      ? `Move ${id} onto a channel or chamber of ${layerId}, or draw one to it.`
      : `Draw a channel or chamber on ${layerId} to it, or put it on another layer.`,
  );
}
