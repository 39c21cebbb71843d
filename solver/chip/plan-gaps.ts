import Flatbush from 'flatbush';
import type { Chip, Nm } from './chip.ts';
import {
  type Area,
  areaOf as areaIn,
  areasOverlap,
  areasOverlapOnce,
  discOf,
  inArea,
} from './geometry/area.ts';
import { type Body, outline } from './geometry/body.ts';
import { type Curve, nearest, pointAt } from './geometry/curve.ts';
import { TOUCH } from './geometry/tolerance.ts';
import { type Drawing, drawingOf, layerNumbers } from './read-graph-drawing.ts';

/** A wall between two bodies of one layer, where it is thinnest. */
export interface Gap {
  /** Ids of the channels, chambers, vias or ports on both sides; twice the same for a channel beside itself. */
  readonly between: readonly [string, string];
  readonly layer: string;
  /** Thickness, nm. */
  readonly width: number;
  /** Middle of the wall there, nm. */
  readonly at: readonly [number, number];
}

/** One body as a closed outline. */
export interface Solid {
  readonly id: string;
  readonly layer: number;
  readonly area: Area;
  /** Number among the drawing's elements; -1 for chambers and holes. */
  readonly element: number;
}

/**
 * Walls thinner than `below` (nm), the thinnest of every pair of bodies, by thickness. Bodies that
 * overlap or touch have no wall between them, and a gap that another body fills is none.
 */
export function gaps(chip: Chip, below: Nm): Gap[] {
  const drawing = drawingOf(chip);
  const solids = solidsOf(chip, drawing);
  if (solids.length === 0) return [];
  const index = new Flatbush(solids.length);
  for (const { area } of solids) index.add(area.minX, area.minY, area.maxX, area.maxY);
  index.finish();
  const meets = drawing.keeps ? areasOverlapOnce : areasOverlap;
  const thinnest = new Map<string, Gap>();
  for (let i = 0; i < solids.length; i++) {
    const p = solids[i]!;
    const { minX, minY, maxX, maxY } = p.area;
    const near = index.search(minX - below, minY - below, maxX + below, maxY + below, (j) => j > i);
    if (near.length > 1) near.sort((a, b) => a - b);
    for (const j of near) {
      const q = solids[j]!;
      if (q.layer !== p.layer || meets(p.area, q.area)) continue;
      const wall = (x: number, y: number) => !filled(solids, index, p.layer, x, y);
      const gap = narrowest(p.area.edges, q.area.edges, below, wall);
      if (!gap || gap.width <= TOUCH) continue;
      const key = `${p.layer} ${p.id} ${q.id}`;
      const known = thinnest.get(key);
      if (known && known.width <= gap.width) continue;
      const layer = chip.layers[p.layer]!.id;
      thinnest.set(key, { between: [p.id, q.id], layer, width: gap.width, at: [gap.x, gap.y] });
    }
  }
  return [...thinnest.values()].sort((a, b) => a.width - b.width);
}

function solidsOf(chip: Chip, drawing: Drawing): Solid[] {
  const solids: Solid[] = [];
  for (let element = 0; element < drawing.elements.count; element++) {
    solids.push(elementSolid(chip, drawing, element));
  }
  return [...solids, ...otherSolids(chip)];
}

const areas = new WeakMap<Body, Area>();

/** What a body covers; the same object for the same body. */
function areaOf(b: Body): Area {
  let area = areas.get(b);
  if (!area) {
    const { minX, minY, maxX, maxY } = b;
    area = { edges: outline(b), minX, minY, maxX, maxY, index: undefined };
    areas.set(b, area);
  }
  return area;
}

/** What one element of a channel covers. */
export function elementSolid(chip: Chip, drawing: Drawing, element: number): Solid {
  const b = drawing.body(element);
  const { channel } = b.element;
  const area = areaOf(b);
  return { id: chip.channels[channel]!.id, layer: drawing.layerOf[channel]!, area, element };
}

/** Chambers and holes; a via once for each of its layers. */
export function otherSolids(chip: Chip): Solid[] {
  const layers = layerNumbers(chip);
  const solids: Solid[] = [];
  const add = (id: string, layer: string, area: Area) => {
    solids.push({ id, layer: layers.get(layer)!, area, element: -1 });
  };
  for (const c of chip.chambers) add(c.id, c.layer, areaIn(c.outline));
  for (const v of chip.vias) for (const l of v.layers) add(v.id, l, discOf(v));
  for (const p of chip.ports) {
    if (p.diameter > 0) add(p.id, p.layer, discOf(p));
  }
  return solids;
}

function filled(solids: readonly Solid[], index: Flatbush, layer: number, x: number, y: number): boolean {
  return index.search(x, y, x, y).some((i) => solids[i]!.layer === layer && inArea(solids[i]!.area, x, y));
}

export interface Narrow {
  readonly width: number;
  readonly x: number;
  readonly y: number;
}

/** Tells whether a place is wall. */
export type Wall = (x: number, y: number) => boolean;

/** The shortest way through wall between two outlines that do not meet, if shorter than `below`. */
export function narrowest(
  a: readonly Curve[],
  b: readonly Curve[],
  below: number,
  wall: Wall,
): Narrow | undefined {
  let best: Narrow | undefined;
  const offer = (width: number, x: number, y: number) => {
    if (width < (best?.width ?? below) && wall(x, y)) best = { width, x, y };
  };
  for (const p of a) {
    for (const q of b) {
      for (const t of [0, 0.5, 1]) {
        shortest(p, q, p.length * t, offer);
        shortest(q, p, q.length * t, offer);
      }
    }
  }
  return best;
}

/**
 * The way from a place on one edge to the nearest on the other; where one is bent, on from there by
 * going to and fro until both feet stay (each step shortens the way).
 */
function shortest(
  from: Curve,
  to: Curve,
  d: number,
  offer: (width: number, x: number, y: number) => void,
): void {
  const bent = from.curvature !== 0 || to.curvature !== 0;
  let [x, y] = pointAt(from, d);
  let [fx, fy] = pointAt(to, nearest(to, x, y));
  for (let k = 0; bent && k < 40; k++) {
    const [nx, ny] = pointAt(from, nearest(from, fx, fy));
    const moved = Math.hypot(nx - x, ny - y);
    [x, y] = [nx, ny];
    [fx, fy] = pointAt(to, nearest(to, x, y));
    if (moved < 0.01) break;
  }
  offer(Math.hypot(fx - x, fy - y), (x + fx) / 2, (y + fy) / 2);
}
