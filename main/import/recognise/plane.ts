import {
  Clipper,
  Clipper64,
  ClipType,
  FillRule,
  type Path64,
  type Paths64,
  type PolyPath64,
  PolyTree64,
} from 'clipper2-ts';
import Flatbush from 'flatbush';
import { arcPoints } from '../curves.ts';
import type { DrawnLayer, Region, Vertices } from '../drawing.ts';
import type { Work } from '../work.ts';
import { boxAround, clusters } from './clusters.ts';
import { plainLoop } from './plain-loop.ts';
import { Tangles } from './tangles.ts';

/** Furthest that chords lie off the arcs they stand for, nm. */
const CHORD_ERROR = 20;

/** One connected area: outer boundary counter-clockwise, holes clockwise; whole nm. */
export interface Area {
  readonly outer: Path64;
  readonly holes: Paths64;
}

/** From drawing units to nanometres of the chip. */
export interface Frame {
  readonly scale: number;
  readonly x: number;
  readonly y: number;
}

export function toNm(vertices: Vertices, { scale, x, y }: Frame): Float64Array {
  const nm = new Float64Array(vertices.length);
  for (let k = 0; k < nm.length; k += 3) {
    nm[k] = vertices[k] * scale + x;
    nm[k + 1] = vertices[k + 1] * scale + y;
    nm[k + 2] = vertices[k + 2];
  }
  return nm;
}

/** A loop as whole nanometres, arcs cut to chords. */
export function pathOf(vertices: Vertices, frame: Frame): Path64 {
  const nm = toNm(vertices, frame);
  const path: Path64 = [];
  const inner: number[] = [];
  for (let k = 0; k < nm.length; k += 3) {
    path.push({ x: Math.round(nm[k]), y: Math.round(nm[k + 1]) });
    if (nm[k + 2] === 0) continue;
    const next = (k + 3) % nm.length;
    inner.length = 0;
    arcPoints(nm[k], nm[k + 1], nm[next], nm[next + 1], nm[k + 2], CHORD_ERROR, inner);
    for (let i = 0; i < inner.length; i += 3)
      path.push({ x: Math.round(inner[i]), y: Math.round(inner[i + 1]) });
  }
  return path;
}

/** The union of a layer's closed regions, and how many outlines were taken as walls inside others. */
export function layerAreas(layer: DrawnLayer, frame: Frame, work: Work): { areas: Area[]; posts: number } {
  const drawn = layer.regions.map(({ loops }, i) => {
    work.at((0.3 * i) / layer.regions.length);
    return loops.map((loop) => pathOf(loop, frame));
  });
  const tangles = new Tangles(`layer ${layer.name}`, work);
  const areas: Area[] = [];
  let posts = 0;
  const groups = clusters(drawn.map(boxAround));
  groups.forEach((group, g) => {
    const told = (share: number): void => work.at(0.3 + (0.7 * (g + share)) / groups.length);
    told(0);
    const alone = group.length === 1 && drawn[group[0]].length === 1 ? plainLoop(drawn[group[0]][0]) : null;
    if (alone) {
      areas.push({ outer: alone, holes: [] });
      return;
    }
    const paths = group.map((i) => drawn[i]);
    tangles.count(paths.flat());
    const regions = group.map((i) => layer.regions[i]);
    const united = unitedRegions(regions, paths, work, told);
    for (const area of united.areas) areas.push(area);
    posts += united.posts;
  });
  return { areas, posts };
}

/** The union of regions that may touch, given as paths. */
function unitedRegions(
  regions: readonly Region[],
  drawn: readonly Paths64[],
  work: Work,
  told: (share: number) => void,
): { areas: Area[]; posts: number } {
  const plain: Paths64 = [];
  const nesting: Paths64 = [];
  regions.forEach(({ fill, nests }, i) => {
    told((0.4 * i) / regions.length);
    const paths = drawn[i];
    if (nests) nesting.push(positive(paths[0]));
    else if (paths.length === 1 && fill === 'non-zero') plain.push(positive(paths[0]));
    else plain.push(...Clipper.union(paths, fill === 'even-odd' ? FillRule.EvenOdd : FillRule.NonZero));
  });
  const levels = levelsOf(nesting, work);
  let all: Paths64 = [];
  levels.forEach((level, depth) => {
    if (depth % 2 === 0) all = Clipper.union([...all, ...level], FillRule.NonZero);
    else all = Clipper.difference(all, level, FillRule.NonZero);
    told(0.4 + (0.5 * depth) / levels.length);
  });
  const posts = levels.reduce((sum, level, depth) => sum + (depth % 2 === 1 ? level.length : 0), 0);
  return { areas: areasOf([...all, ...plain]), posts };
}

/** The union of areas; those that touch no other stay as they are. */
export function unitedAreas(areas: readonly Area[]): Area[] {
  return clusters(areas.map(({ outer }) => boxAround([outer]))).flatMap((group) =>
    group.length === 1 ? [areas[group[0]]] : areasOf(pathsOf(group.map((i) => areas[i]))),
  );
}

function positive(path: Path64): Path64 {
  return Clipper.area(path) < 0 ? path.toReversed() : path;
}

/** The united areas of paths that are filled by their winding. */
export function areasOf(paths: Paths64): Area[] {
  if (paths.length === 0) return [];
  return booleanAreas(ClipType.Union, paths, []);
}

export function booleanAreas(type: ClipType, subject: Paths64, clip: Paths64): Area[] {
  const clipper = new Clipper64();
  clipper.preserveCollinear = false;
  if (subject.length > 0) clipper.addSubject(subject);
  if (clip.length > 0) clipper.addClip(clip);
  const tree = new PolyTree64();
  clipper.execute(type, FillRule.NonZero, tree);
  const areas: Area[] = [];
  collect(tree, areas);
  return areas;
}

function collect(tree: PolyPath64, areas: Area[]): void {
  for (let i = 0; i < tree.count; i += 1) {
    const outer = tree.child(i);
    const holes: Paths64 = [];
    for (let k = 0; k < outer.count; k += 1) {
      holes.push(outer.child(k).poly!);
      collect(outer.child(k), areas);
    }
    areas.push({ outer: outer.poly!, holes });
  }
}

export const pathsOf = (areas: readonly Area[]): Paths64 =>
  areas.flatMap(({ outer, holes }) => [outer, ...holes]);

/** Loops by how many others hold them whole. */
function levelsOf(loops: Paths64, work: Work): Paths64[] {
  if (loops.length === 0) return [];
  const boxes = loops.map((loop) => Clipper.getBounds(loop));
  const sizes = loops.map((loop) => Clipper.area(loop));
  const index = new Flatbush(loops.length);
  for (const { left, top, right, bottom } of boxes) index.add(left, top, right, bottom);
  index.finish();
  const levels: Paths64[] = [];
  const outlines: Outline[] = [];
  loops.forEach((loop, i) => {
    const box = boxes[i];
    let depth = 0;
    for (const other of index.search(box.left, box.top, box.right, box.bottom)) {
      work.tick();
      const around = boxes[other];
      if (sizes[other] <= sizes[i]) continue;
      if (around.left > box.left || around.right < box.right) continue;
      if (around.top > box.top || around.bottom < box.bottom) continue;
      work.tick(1 + (loop.length >> 4));
      outlines[other] ??= new Outline(loops[other]);
      if (outlines[other].holds(loop)) depth += 1;
    }
    levels[depth] ??= [];
    levels[depth].push(loop);
  });
  return Array.from(levels, (level) => level ?? []);
}

/** A loop that is asked again and again what lies within it. */
class Outline {
  readonly #path: Path64;
  readonly #index: Flatbush;

  constructor(path: Path64) {
    this.#path = path;
    this.#index = new Flatbush(path.length);
    for (let i = 0, j = path.length - 1; i < path.length; j = i, i += 1) {
      const [a, b] = [path[i], path[j]];
      this.#index.add(Math.min(a.x, b.x), Math.min(a.y, b.y), Math.max(a.x, b.x), Math.max(a.y, b.y));
    }
    this.#index.finish();
  }

  /** Whether a loop lies within, touching allowed. */
  holds(inner: Path64): boolean {
    return inner.every(({ x, y }) => this.#reaches(x, y));
  }

  #reaches(x: number, y: number): boolean {
    const path = this.#path;
    let inside = false;
    let on = false;
    // Edges level with the point, or to the right of it.
    this.#index.search(x, y, Infinity, y, (i) => {
      const [a, b] = [path[i], path[i === 0 ? path.length - 1 : i - 1]];
      const cross = (b.x - a.x) * (y - a.y) - (b.y - a.y) * (x - a.x);
      if (cross === 0 && (x - a.x) * (x - b.x) <= 0 && (y - a.y) * (y - b.y) <= 0) on = true;
      if (a.y > y !== b.y > y && x < ((b.x - a.x) * (y - a.y)) / (b.y - a.y) + a.x) inside = !inside;
      return false;
    });
    return on || inside;
  }
}
