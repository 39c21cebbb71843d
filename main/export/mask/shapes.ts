import type { Paths64 } from 'clipper2-ts';
import { curve, lengthOf } from '../../../solver/chip/geometry/curve.ts';
import { twiceArea } from '../../../solver/mesh/check-shape.ts';
import type { Edge, Shape } from '../../../solver/mesh/mesh.ts';
import { pathsOf, polygonsOf } from './loops.ts';

/** What a mask needs of shapes made of lines and true arcs; lengths in nm. */

export interface Box {
  readonly x0: number;
  readonly y0: number;
  readonly x1: number;
  readonly y1: number;
}

/** Turned over where asked, scaled about a point, then moved. */
export interface Placing {
  readonly mirror: boolean;
  readonly scale: number;
  readonly about: readonly [number, number];
}

export function placed(shape: Shape, placing: Placing): Shape {
  const out: Edge[][] = [];
  for (const loop of shape) {
    const n = loop.length;
    const to = new Array<Edge>(n);
    for (let k = 0; k < n; k++) {
      // the other way round where mirrored, so that an outer boundary stays counter-clockwise; an edge's bulge goes
      // to its other end
      const from = placing.mirror ? loop[k === 0 ? 0 : n - k]! : loop[k]!;
      to[k] = placedEdge(from, placing.mirror ? loop[n - k - 1]!.bulge : from.bulge, placing);
    }
    out.push(to);
  }
  return out;
}

function placedEdge(e: Edge, bulge: number, { mirror, scale, about }: Placing): Edge {
  const cx = about[0];
  const cy = about[1];
  return {
    x: cx + (mirror ? cx - e.x : e.x - cx) * scale,
    y: cy + (e.y - cy) * scale,
    bulge,
    tag: 0,
  };
}

export function moved(shape: Shape, dx: number, dy: number): Shape {
  return shape.map((loop) => loop.map((e) => ({ ...e, x: e.x + dx, y: e.y + dy })));
}

/** Counter-clockwise loop of straight edges. */
export function polygon(points: readonly (readonly [number, number])[]): Edge[] {
  return points.map(([x, y]) => ({ x, y, bulge: 0, tag: 0 }));
}

export function rectangle(x0: number, y0: number, x1: number, y1: number): Edge[] {
  return polygon([
    [x0, y0],
    [x1, y0],
    [x1, y1],
    [x0, y1],
  ]);
}

export function circle(x: number, y: number, radius: number): Edge[] {
  return [
    { x: x - radius, y, bulge: 1, tag: 0 },
    { x: x + radius, y, bulge: 1, tag: 0 },
  ];
}

export function reversed(loop: readonly Edge[]): Edge[] {
  const n = loop.length;
  return loop.map((_, k) => {
    const from = loop[(n - k) % n]!;
    return { ...from, bulge: 0 - loop[(2 * n - k - 1) % n]!.bulge };
  });
}

/** Exact area, arcs included. */
export function areaOf(shapes: readonly Shape[]): number {
  let sum = 0;
  for (const shape of shapes) for (const loop of shape) sum += twiceArea(loop) / 2;
  return sum;
}

export function perimeterOf(shapes: readonly Shape[]): number {
  let sum = 0;
  for (const shape of shapes) for (const loop of shape) sum += lengthOfLoop(loop);
  return sum;
}

function lengthOfLoop(loop: readonly Edge[]): number {
  let sum = 0;
  for (let k = 0; k < loop.length; k++) {
    const e = loop[k]!;
    const next = loop[k + 1 === loop.length ? 0 : k + 1]!;
    sum += lengthOf(e.x, e.y, next.x, next.y, e.bulge);
  }
  return sum;
}

/** The box round shapes, arcs by their full extent; undefined where there are none. */
export function boxOf(shapes: Iterable<Shape>): Box | undefined {
  const box = { x0: Infinity, y0: Infinity, x1: -Infinity, y1: -Infinity };
  for (const shape of shapes) {
    const outer = shape[0] ?? [];
    for (let k = 0; k < outer.length; k++) {
      const e = outer[k]!;
      take(box, e.x, e.y);
      if (e.bulge !== 0) takeArc(box, e, outer[k + 1 === outer.length ? 0 : k + 1]!);
    }
  }
  return box.x1 < box.x0 ? undefined : box;
}

function take(box: { x0: number; y0: number; x1: number; y1: number }, x: number, y: number): void {
  box.x0 = Math.min(box.x0, x);
  box.y0 = Math.min(box.y0, y);
  box.x1 = Math.max(box.x1, x);
  box.y1 = Math.max(box.y1, y);
}

function takeArc(box: Parameters<typeof take>[0], e: Edge, next: Edge): void {
  const c = curve(e.x, e.y, next.x, next.y, e.bulge);
  const r = Math.abs(1 / c.curvature);
  const sweep = 4 * Math.atan(e.bulge);
  const [ax, ay] = [c.x0 - c.cx, c.y0 - c.cy];
  if (onArc(ax, ay, sweep, 1, 0)) take(box, c.cx + r, c.cy);
  if (onArc(ax, ay, sweep, 0, 1)) take(box, c.cx, c.cy + r);
  if (onArc(ax, ay, sweep, -1, 0)) take(box, c.cx - r, c.cy);
  if (onArc(ax, ay, sweep, 0, -1)) take(box, c.cx, c.cy - r);
}

/** Whether direction (ux, uy) lies within `sweep` of (ax, ay), counter-clockwise positive. */
function onArc(ax: number, ay: number, sweep: number, ux: number, uy: number): boolean {
  let turn = Math.atan2(ax * uy - ay * ux, ax * ux + ay * uy);
  if (sweep > 0 && turn < 0) turn += 2 * Math.PI;
  if (sweep < 0 && turn > 0) turn -= 2 * Math.PI;
  return Math.abs(turn) <= Math.abs(sweep);
}

export function grown(box: Box, by: number): Box {
  return { x0: box.x0 - by, y0: box.y0 - by, x1: box.x1 + by, y1: box.y1 + by };
}

export function united(boxes: readonly Box[]): Box {
  return {
    x0: Math.min(...boxes.map((b) => b.x0)),
    y0: Math.min(...boxes.map((b) => b.y0)),
    x1: Math.max(...boxes.map((b) => b.x1)),
    y1: Math.max(...boxes.map((b) => b.y1)),
  };
}

/** All loops as polygons in whole nanometres, holes clockwise, less those that rounding leaves nothing of. */
export const flatPaths = (shape: Shape, chordError: number): Paths64 =>
  pathsOf(polygonsOf([shape], chordError));

/** What no mask holds, nm: edges this short are rounding, and bodies less wide than this slivers. */
const LEAST = 1;
/** An arc that rises less than this over its chord is straight, nm. */
const FLAT = 0.01;

/** The shape without edges that are only rounding and without loops that are slivers; nothing where no more is left. */
export function tidied(shape: Shape): Shape[] {
  const wide: (readonly Edge[])[] = [];
  for (let i = 0; i < shape.length; i++) {
    const loop = withoutShortEdges(shape[i]!);
    if (loop.length >= 2 && Math.abs(twiceArea(loop)) > LEAST * lengthOfLoop(loop)) wide.push(loop);
    else if (i === 0) return [];
  }
  return wide.length > 0 ? [wide] : [];
}

function withoutShortEdges(loop: readonly Edge[]): readonly Edge[] {
  const n = loop.length;
  let kept: Edge[] | undefined;
  for (let k = 0; k < n; k++) {
    const e = loop[k]!;
    const next = loop[k + 1 === n ? 0 : k + 1]!;
    const dx = next.x - e.x;
    const dy = next.y - e.y;
    const chord = Math.sqrt(dx * dx + dy * dy);
    const flat = e.bulge !== 0 && Math.abs(e.bulge) * chord < 2 * FLAT;
    if (chord >= LEAST && !flat) {
      kept?.push(e);
      continue;
    }
    kept ??= loop.slice(0, k);
    if (chord >= LEAST) kept.push({ ...e, bulge: 0 });
  }
  return kept ?? loop;
}
