import { area, FillRule, type Path64, type Paths64, union, xor } from 'clipper2-ts';
import { type Loops, pathsOf } from './loops.ts';
import { tiles } from './split.ts';

/** Points that are compared at once. */
const TILE = 1000;
/** With more edges unlike, and more than this share of all, grounds are compared tile by tile. */
const MANY = 1000;
const UNLIKE = 0.25;

/**
 * Area between two sets of polygons, outer ones counter-clockwise, holes clockwise, nm²: ground that both cover
 * equally often counts nothing, so what `b` covers twice and `a` once is told as well. Edges that both have, and
 * those that two polygons of one set have in opposite directions, cancel out; what is left are the closed outlines
 * of the difference. Triangles among them, which every slanted edge leaves that was cut at a whole nanometre, are
 * counted each, also where they lie on one another. Where most of many edges are unlike, what is covered twice counts
 * once.
 */
export function differenceOf(a: Loops, b: Loops): number {
  const edges = new Edges(a.points);
  edges.add(a, 1);
  edges.add(b, -1);
  const left = edges.left();
  const count = left.length / 4;
  if (count > MANY && count > UNLIKE * (a.points + b.points)) return tiled(pathsOf(a), pathsOf(b));
  const loops: Paths64 = [];
  let triangles = 0;
  for (const loop of loopsOf(left)) {
    if (loop.length === 3) triangles += Math.abs(area(loop));
    else loops.push(loop);
  }
  return triangles + areaOf(union(loops, FillRule.NonZero));
}

function tiled(a: Paths64, b: Paths64): number {
  let sum = 0;
  for (const [p, q] of tiles(a, b, TILE)) sum += areaOf(xor(p, q, FillRule.NonZero));
  return sum;
}

const areaOf = (paths: Paths64): number => paths.reduce((sum, path) => sum + area(path), 0);

/** Directed edges with how often they are there; those along the axes point by point, the others as wholes. */
class Edges {
  /** By the coordinate of the line, in turns: a place along it, and by how much its edges become more there. */
  readonly #upright = new Map<number, number[]>();
  readonly #level = new Map<number, number[]>();
  /** Slanted edges, four coordinates and how often. */
  #slanted: Float64Array;
  #wholes = 0;
  /** Open addressing: numbers of slanted edges, from 1. */
  #table: Int32Array;

  /** @param expected about how many unlike edges there will be */
  constructor(expected: number) {
    const size = 2 ** Math.ceil(Math.log2(2.2 * expected + 16));
    this.#table = new Int32Array(size);
    this.#slanted = new Float64Array((5 * size) / 2 + 5);
  }

  add({ x, y, ends }: Loops, times: number): void {
    let from = 0;
    for (const end of ends) {
      let x0 = x[end - 1]!;
      let y0 = y[end - 1]!;
      for (let k = from; k < end; k++) {
        const x1 = x[k]!;
        const y1 = y[k]!;
        if (x0 === x1) put(this.#upright, x0, y0, y1, times);
        else if (y0 === y1) put(this.#level, y0, x0, x1, times);
        else this.#whole(x0, y0, x1, y1, times);
        x0 = x1;
        y0 = y1;
      }
      from = end;
    }
  }

  #whole(x0: number, y0: number, x1: number, y1: number, times: number): void {
    if (2 * this.#wholes >= this.#table.length) this.#grow();
    const place = this.#find(x0, y0, x1, y1);
    const known = this.#table[place]!;
    if (known > 0) {
      this.#slanted[5 * known - 1]! += times;
      return;
    }
    const at = 5 * this.#wholes;
    const s = this.#slanted;
    s[at] = x0;
    s[at + 1] = y0;
    s[at + 2] = x1;
    s[at + 3] = y1;
    s[at + 4] = times;
    this.#wholes += 1;
    this.#table[place] = this.#wholes;
  }

  #find(x0: number, y0: number, x1: number, y1: number): number {
    const mask = this.#table.length - 1;
    let hash = Math.imul(x0, 0x9e3779b1) ^ Math.imul(y0, 0x85ebca6b);
    hash =
      Math.imul(hash ^ (hash >>> 15), 0x2c1b3c6d) + Math.imul(x1, 0xc2b2ae35) + Math.imul(y1, 0x27d4eb2f);
    const s = this.#slanted;
    for (let place = (hash ^ (hash >>> 15)) & mask; ; place = (place + 1) & mask) {
      const at = 5 * (this.#table[place]! - 1);
      if (at < 0) return place;
      if (s[at] === x0 && s[at + 1] === y0 && s[at + 2] === x1 && s[at + 3] === y1) return place;
    }
  }

  #grow(): void {
    const old = this.#slanted;
    this.#slanted = new Float64Array(2 * old.length);
    this.#slanted.set(old);
    this.#table = new Int32Array(2 * this.#table.length);
    for (let k = 0; k < this.#wholes; k++) {
      const at = 5 * k;
      this.#table[this.#find(old[at]!, old[at + 1]!, old[at + 2]!, old[at + 3]!)] = k + 1;
    }
  }

  /** From x, y to x, y: four numbers for each edge that is left. */
  left(): number[] {
    const out: number[] = [];
    const s = this.#slanted;
    for (let at = 0; at < 5 * this.#wholes; at += 5) {
      const times = s[at + 4]!;
      for (let k = 0; k < times; k++) out.push(s[at]!, s[at + 1]!, s[at + 2]!, s[at + 3]!);
      for (let k = 0; k > times; k--) out.push(s[at + 2]!, s[at + 3]!, s[at]!, s[at + 1]!);
    }
    for (const [x, changes] of this.#upright) walk(changes, x, true, out);
    for (const [y, changes] of this.#level) walk(changes, y, false, out);
    return out;
  }
}

function put(lines: Map<number, number[]>, line: number, from: number, to: number, times: number): void {
  const changes = lines.get(line);
  if (changes) changes.push(from, times, to, -times);
  else lines.set(line, [from, times, to, -times]);
}

/** Puts each stretch along a line into `out` as often as edges are left there, in their direction. */
function walk(changes: readonly number[], line: number, upright: boolean, out: number[]): void {
  const order = new Array<number>(changes.length / 2);
  for (let k = 0; k < order.length; k++) order[k] = 2 * k;
  if (order.length > 1) order.sort((i, j) => changes[i]! - changes[j]!);
  let times = 0;
  let before = 0;
  for (const k of order) {
    const at = changes[k]!;
    if (at > before) {
      for (let i = 0; i < Math.abs(times); i++) {
        const [from, to] = times > 0 ? [before, at] : [at, before];
        if (upright) out.push(line, from, line, to);
        else out.push(from, line, to, line);
      }
    }
    times += changes[k + 1]!;
    before = at;
  }
}

/** Closed paths of edges of which as many lead to every point as away from it. */
function loopsOf(edges: readonly number[]): Paths64 {
  const count = edges.length / 4;
  const points = new Points(2 * count);
  const to = new Int32Array(count);
  /** Latest edge away from each point that is not used yet, and the one before it from the same point; -1 for none. */
  const away = new Int32Array(2 * count).fill(-1);
  const earlier = new Int32Array(count);
  for (let k = 0; k < count; k++) {
    const from = points.number(edges[4 * k]!, edges[4 * k + 1]!);
    to[k] = points.number(edges[4 * k + 2]!, edges[4 * k + 3]!);
    earlier[k] = away[from]!;
    away[from] = k;
  }
  const loops: Paths64 = [];
  /** Where on the way each point is; -1 for those that are not. */
  const place = new Int32Array(points.count).fill(-1);
  for (let k = 0; k < count; k++) {
    // each return to a point of the way closes a loop, which is taken off it
    const start = points.number(edges[4 * k]!, edges[4 * k + 1]!);
    const way = [start];
    place[start] = 0;
    for (let edge = away[start]!; edge >= 0; ) {
      away[way[way.length - 1]!] = earlier[edge]!;
      const here = to[edge]!;
      const met = place[here]!;
      if (met < 0) {
        place[here] = way.length;
        way.push(here);
      } else {
        const loop: Path64 = [points.at(here)];
        for (let i = met + 1; i < way.length; i++) {
          place[way[i]!] = -1;
          loop.push(points.at(way[i]!));
        }
        way.length = met + 1;
        loops.push(loop);
      }
      edge = away[here]!;
    }
    for (const point of way) place[point] = -1;
  }
  return loops;
}

/** Numbers for places, from 0 as they come. */
class Points {
  count = 0;
  readonly #x: Float64Array;
  readonly #y: Float64Array;
  /** Open addressing: numbers from 1. */
  readonly #table: Int32Array;

  constructor(most: number) {
    this.#x = new Float64Array(most);
    this.#y = new Float64Array(most);
    this.#table = new Int32Array(2 ** Math.ceil(Math.log2(2 * most + 16)));
  }

  number(x: number, y: number): number {
    const table = this.#table;
    const mask = table.length - 1;
    let hash = Math.imul(x, 0x9e3779b1) ^ Math.imul(y, 0x85ebca6b);
    hash = Math.imul(hash ^ (hash >>> 15), 0x2c1b3c6d);
    for (let place = (hash ^ (hash >>> 15)) & mask; ; place = (place + 1) & mask) {
      const known = table[place]! - 1;
      if (known < 0) {
        this.#x[this.count] = x;
        this.#y[this.count] = y;
        this.count += 1;
        table[place] = this.count;
        return this.count - 1;
      }
      if (this.#x[known] === x && this.#y[known] === y) return known;
    }
  }

  at(point: number): Path64[number] {
    return { x: this.#x[point]!, y: this.#y[point]! };
  }
}
