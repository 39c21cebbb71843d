import type { Path64 } from 'clipper2-ts';
import { curve } from '../../../solver/chip/geometry/curve.ts';
import { flatten } from '../../../solver/chip/plan.ts';
import { twiceArea } from '../../../solver/mesh/check-shape.ts';
import type { Edge, Shape } from '../../../solver/mesh/mesh.ts';

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

export function placed(shape: Shape, { mirror, scale, about: [cx, cy] }: Placing): Shape {
  const to = (e: Edge, bulge: number): Edge => ({
    x: cx + (mirror ? cx - e.x : e.x - cx) * scale,
    y: cy + (e.y - cy) * scale,
    bulge,
    tag: 0,
  });
  return shape.map((loop) => {
    if (!mirror) return loop.map((e) => to(e, e.bulge));
    // the other way round, so that an outer boundary stays counter-clockwise; an edge's bulge goes to its other end
    const n = loop.length;
    return loop.map((_, k) => to(loop[(n - k) % n]!, loop[(2 * n - k - 1) % n]!.bulge));
  });
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
  for (const shape of shapes) {
    for (const loop of shape) {
      for (let k = 0; k < loop.length; k++) {
        const e = loop[k]!;
        const next = loop[k + 1 === loop.length ? 0 : k + 1]!;
        sum += curve(e.x, e.y, next.x, next.y, e.bulge).length;
      }
    }
  }
  return sum;
}

/** The box round shapes, arcs by their full extent; undefined where there are none. */
export function boxOf(shapes: Iterable<Shape>): Box | undefined {
  let [x0, y0, x1, y1] = [Infinity, Infinity, -Infinity, -Infinity];
  const take = (x: number, y: number) => {
    x0 = Math.min(x0, x);
    y0 = Math.min(y0, y);
    x1 = Math.max(x1, x);
    y1 = Math.max(y1, y);
  };
  for (const shape of shapes) {
    const outer = shape[0] ?? [];
    outer.forEach((e, k) => {
      take(e.x, e.y);
      if (e.bulge === 0) return;
      const next = outer[(k + 1) % outer.length]!;
      const c = curve(e.x, e.y, next.x, next.y, e.bulge);
      const r = Math.abs(1 / c.curvature);
      for (const [ux, uy] of [
        [1, 0],
        [0, 1],
        [-1, 0],
        [0, -1],
      ] as const) {
        if (onArc(c.x0 - c.cx, c.y0 - c.cy, 4 * Math.atan(e.bulge), ux, uy))
          take(c.cx + r * ux, c.cy + r * uy);
      }
    });
  }
  return x1 < x0 ? undefined : { x0, y0, x1, y1 };
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
export function flatPaths(shape: Shape, chordError: number): Path64[] {
  const paths: Path64[] = [];
  for (const loop of shape) {
    const points = flatten(loop, chordError);
    if (points.length > 2) paths.push(points.map(([x, y]) => ({ x, y })));
  }
  return paths;
}

/** What no mask holds, nm: edges this short are rounding, and bodies less wide than this slivers. */
const LEAST = 1;
/** An arc that rises less than this over its chord is straight, nm. */
const FLAT = 0.01;

/** The shape without edges that are only rounding and without loops that are slivers; nothing where no more is left. */
export function tidied(shape: Shape): Shape[] {
  const loops = shape.map(withoutShortEdges);
  const wide = loops.filter((loop) => {
    if (loop.length < 2) return false;
    return 2 * Math.abs(areaOf([[loop]])) > LEAST * perimeterOf([[loop]]);
  });
  return loops.length > 0 && wide[0] === loops[0] ? [wide] : [];
}

function withoutShortEdges(loop: readonly Edge[]): readonly Edge[] {
  const n = loop.length;
  const long: Edge[] = [];
  loop.forEach((e, k) => {
    const next = loop[k + 1 === n ? 0 : k + 1]!;
    const chord = Math.hypot(next.x - e.x, next.y - e.y);
    if (chord < LEAST) return;
    const flat = e.bulge !== 0 && Math.abs(e.bulge) * chord < 2 * FLAT;
    long.push(flat ? { ...e, bulge: 0 } : e);
  });
  return long;
}
