import {
  type Axis,
  cornerPair,
  directionOn,
  lengthOn,
  type Pair,
  pairOf,
  placeOn,
  pointOn,
  widthOn,
} from './pairs.ts';
import { softStrips } from './soft.ts';
import type { Triangles } from './triangles.ts';
import type { Wall } from './walls.ts';

/** A stretch between two walls that face each other. */
export interface Strip {
  /** Centreline as points where it follows no line or arc; with a width at each. */
  readonly soft: readonly { readonly x: number; readonly y: number; readonly width: number }[] | null;
  /** Null for a soft one. */
  readonly axis: Axis | null;
  /** Places of its two ends. */
  readonly from: number;
  readonly to: number;
  readonly length: number;
  readonly ends: readonly [StripEnd, StripEnd];
}

/** One end of a strip: where its centreline stands and which way it leads out. */
export interface StripEnd {
  readonly x: number;
  readonly y: number;
  readonly ux: number;
  readonly uy: number;
  readonly width: number;
  /** How much further its centreline goes to the middle of a mouth that is cut aslant, nm. */
  readonly aslant: number;
  /** Knot that it leads into; −1 where the wall closes it. */
  knot: number;
}

/** What lies between strips: the triangles that belong to none, and the ends that lead in. */
export interface Knot {
  readonly ends: { readonly strip: number; readonly end: 0 | 1 }[];
  /** nm² */
  area: number;
}

export interface Strips {
  readonly strips: readonly Strip[];
  readonly knots: readonly Knot[];
}

/** A place at least this close to where both walls end (as a share of the width) counts as that end. */
const SNAP = 0.8;
/** Shorter ones than this share of their width are left to the knots. */
const SHORTEST = 0.2;

/** The strips of an area and the knots between them. */
export function stripsOf(walls: readonly Wall[], triangles: Triangles): Strips {
  const labels = new Labels(walls, triangles);
  const strip = new Int32Array(triangles.count).fill(-1);
  const strips: Strip[] = [];
  for (const run of runsOf(triangles, labels.of)) {
    const label = labels.of[run[0]];
    const found = hardStrip(labels.pairs[label], run, triangles, (end) => mouthAt(walls, labels, label, end));
    if (!found) continue;
    for (const t of run) strip[t] = strips.length;
    strips.push(found);
  }
  for (const soft of softStrips(triangles, strip)) {
    for (const t of soft.triangles) strip[t] = strips.length;
    strips.push(soft.strip);
  }
  return { strips, ...knotsOf(triangles, strips, strip) };
}

/** Which pair of walls each triangle lies between; −1 where none. */
class Labels {
  readonly pairs: Pair[] = [];
  /** Numbers of the two walls of each; the second is -1 where it is a corner. */
  readonly walls: (readonly [number, number])[] = [];
  readonly of: Int32Array;
  readonly #known = new Map<string, number>();
  readonly #walls: readonly Wall[];

  constructor(walls: readonly Wall[], triangles: Triangles) {
    this.#walls = walls;
    const { vertex, twin, count, wall, corner, previous, x, y } = triangles;
    this.of = new Int32Array(count).fill(-1);
    for (let t = 0; t < count; t += 1) {
      let side = -1;
      let sides = 0;
      for (let e = 3 * t; e < 3 * t + 3; e += 1) {
        if (twin[e] >= 0) continue;
        side = e;
        sides += 1;
      }
      if (sides !== 1) continue;
      const mine = wall[-1 - twin[side]];
      const apex = vertex[3 * t + ((side + 2) % 3)];
      let label = this.#pair(mine, wall[apex]);
      if (label < 0 && corner[apex] === 1) {
        label = this.#pair(mine, wall[previous[apex]]);
        if (label < 0) label = this.#corner(mine, apex, x[apex], y[apex]);
      }
      this.of[t] = label;
    }
  }

  #keep(key: string, e: number, f: number, make: () => Pair | null): number {
    let label = this.#known.get(key);
    if (label === undefined) {
      const pair = make();
      label = pair ? this.pairs.push(pair) - 1 : -1;
      if (pair) this.walls.push([e, f]);
      this.#known.set(key, label);
    }
    return label;
  }

  #pair(e: number, f: number): number {
    if (e === f) return -1;
    return this.#keep(e < f ? `${e} ${f}` : `${f} ${e}`, e, f, () => pairOf(this.#walls[e], this.#walls[f]));
  }

  #corner(e: number, apex: number, x: number, y: number): number {
    if (this.#walls[e].sweep <= 0) return -1;
    return this.#keep(`${e}.${apex}`, e, -1, () => cornerPair(this.#walls[e], x, y));
  }
}

/** Triangles of one label that hang together, the label −1 left out. */
function* runsOf({ twin, count }: Triangles, label: Int32Array): Generator<number[]> {
  const seen = new Uint8Array(count);
  for (let first = 0; first < count; first += 1) {
    if (seen[first] || label[first] < 0) continue;
    const run = [first];
    seen[first] = 1;
    for (let k = 0; k < run.length; k += 1) {
      const t = run[k];
      for (let e = 3 * t; e < 3 * t + 3; e += 1) {
        if (twin[e] < 0) continue;
        const other = Math.floor(twin[e] / 3);
        if (seen[other] || label[other] !== label[first]) continue;
        seen[other] = 1;
        run.push(other);
      }
    }
    yield run;
  }
}

function hardStrip(
  { axis, from, to, beyond }: Pair,
  run: readonly number[],
  { vertex, x, y }: Triangles,
  mouth: (end: 0 | 1) => number | null,
): Strip | null {
  const middle = (from + to) / 2;
  let [low, high] = [Infinity, -Infinity];
  for (const t of run) {
    for (let e = 3 * t; e < 3 * t + 3; e += 1) {
      const s = placeOn(axis, x[vertex[e]], y[vertex[e]], middle);
      low = Math.min(low, s);
      high = Math.max(high, s);
    }
  }
  low = Math.max(low, from);
  high = Math.min(high, to);
  if (!(high > low)) return null;
  const wide = Math.max(widthOn(axis, low), widthOn(axis, high));
  const reach = axis.kind === 'line' ? SNAP * wide : (SNAP * wide) / axis.radius;
  if (low - from < reach) low = from;
  if (to - high < reach) high = to;
  const aslant = ([0, 1] as const).map((end) => {
    if (end === 0 ? low !== from : high !== to) return 0;
    const at = mouth(end);
    const by = at === null ? beyond[end] / 2 : end === 0 ? from - at : at - to;
    return beyond[end] <= wide && Math.abs(by) <= wide ? by : 0;
  });
  return stripOn(axis, low, high, wide, [aslant[0], aslant[1]]);
}

/** Lines that cross the centreline within this of each other are one, nm. */
const SAME_LINE = 20;
/** Least slope across the centreline of a wall that is led on across it. */
const LEAST_RISE = 0.3;

/**
 * Where the centreline between two straight walls crosses the outline of what they open into: the walls
 * beyond the mouth are led on into it, up to where they meet. Null where they do not tell.
 */
function mouthAt(walls: readonly Wall[], labels: Labels, label: number, end: 0 | 1): number | null {
  const { axis, from, to } = labels.pairs[label];
  const [e, f] = labels.walls[label];
  if (axis.kind !== 'line' || f < 0) return null;
  const middle = (from + to) / 2;
  const [x, y] = pointOn(axis, middle);
  const [one, other] = [e, f].map((k) => {
    // The walls run round the fluid, so that one leads up to the mouth and the other away from it.
    const own = walls[k];
    const along = (own.x1 - own.x0) * axis.ux + (own.y1 - own.y0) * axis.uy;
    const wall = besideOf(walls, k, along > 0 === (end === 1) ? 'after' : 'before');
    if (wall?.sweep !== 0) return null;
    const place = (px: number, py: number): [number, number] => [
      (px - x) * axis.ux + (py - y) * axis.uy,
      (py - y) * axis.ux - (px - x) * axis.uy,
    ];
    const [[s0, o0], [s1, o1]] = [place(wall.x0, wall.y0), place(wall.x1, wall.y1)];
    if (Math.abs(o1 - o0) < LEAST_RISE * Math.abs(s1 - s0)) return null;
    // s = at + lean times the offset from the axis.
    const lean = (s1 - s0) / (o1 - o0);
    return { at: s0 - lean * o0, lean, side: Math.sign(o0 + o1) };
  });
  if (!one || !other || one.side === other.side) return null;
  if (Math.abs(one.at - other.at) <= SAME_LINE) return middle + (one.at + other.at) / 2;
  const corner = (other.at - one.at) / (one.lean - other.lean);
  if (!(Math.abs(corner) < widthOn(axis, end === 0 ? from : to) / 2)) return null;
  // The line that lies on the centreline's side of the corner between them.
  return middle + (corner * one.side < 0 ? one.at : other.at);
}

/** The wall next to another in its loop, by the corner that they have in common. */
function besideOf(walls: readonly Wall[], k: number, where: 'before' | 'after'): Wall | null {
  const wall = walls[k];
  // Mostly the next in the list; the last of a loop is followed by its first.
  for (let n = 1; n < walls.length; n += 1) {
    const other = walls[(where === 'after' ? k + n : k + walls.length - n) % walls.length];
    if (where === 'after' && other.x0 === wall.x1 && other.y0 === wall.y1) return other;
    if (where === 'before' && other.x1 === wall.x0 && other.y1 === wall.y0) return other;
  }
  return null;
}

/** The stretch of an axis between two places; null where it is too short to be one. */
export function stripOn(
  axis: Axis,
  from: number,
  to: number,
  wide: number,
  aslant: readonly [number, number] = [0, 0],
): Strip | null {
  const length = lengthOn(axis, from, to);
  if (length < SHORTEST * wide && axis.kind === 'line') return null;
  const end = (s: number, sign: 1 | -1): StripEnd => {
    const [x, y] = pointOn(axis, s);
    const [ux, uy] = directionOn(axis, s);
    const width = Math.max(0, widthOn(axis, s));
    return { x, y, ux: sign * ux, uy: sign * uy, width, aslant: aslant[sign < 0 ? 0 : 1], knot: -1 };
  };
  return { soft: null, axis, from, to, length, ends: [end(from, -1), end(to, 1)] };
}

/** Gathers the triangles between strips, and where strips touch one another, into knots. */
function knotsOf(
  { vertex, twin, count, x, y }: Triangles,
  strips: readonly Strip[],
  strip: Int32Array,
): { knots: Knot[] } {
  // Places to join: triangles of no strip, then two ends per strip.
  const parent = Int32Array.from({ length: count + 2 * strips.length }, (_, i) => i);
  const find = (i: number): number => {
    while (parent[i] !== i) {
      parent[i] = parent[parent[i]];
      i = parent[i];
    }
    return i;
  };
  const touched = new Uint8Array(2 * strips.length);
  const endAt = (s: number, e: number): number => {
    const [a, b] = [vertex[e], vertex[e - (e % 3) + ((e + 1) % 3)]];
    const [mx, my] = [(x[a] + x[b]) / 2, (y[a] + y[b]) / 2];
    const [p, q] = strips[s].ends;
    const end = Math.hypot(mx - p.x, my - p.y) <= Math.hypot(mx - q.x, my - q.y) ? 0 : 1;
    touched[2 * s + end] = 1;
    return count + 2 * s + end;
  };
  for (let e = 0; e < 3 * count; e += 1) {
    if (twin[e] < e) continue;
    const [s, other] = [strip[Math.floor(e / 3)], strip[Math.floor(twin[e] / 3)]];
    if (s >= 0 && s === other) continue;
    const a = s < 0 ? Math.floor(e / 3) : endAt(s, e);
    const b = other < 0 ? Math.floor(twin[e] / 3) : endAt(other, e);
    parent[find(a)] = find(b);
  }
  const knots: Knot[] = [];
  const byRoot = new Map<number, number>();
  const knotAt = (i: number): number => {
    const root = find(i);
    let knot = byRoot.get(root);
    if (knot === undefined) {
      knot = knots.push({ ends: [], area: 0 }) - 1;
      byRoot.set(root, knot);
    }
    return knot;
  };
  for (let t = 0; t < count; t += 1) {
    if (strip[t] >= 0) continue;
    const [a, b, c] = [vertex[3 * t], vertex[3 * t + 1], vertex[3 * t + 2]];
    knots[knotAt(t)].area += ((x[b] - x[a]) * (y[c] - y[a]) - (y[b] - y[a]) * (x[c] - x[a])) / 2;
  }
  strips.forEach(({ ends }, s) => {
    for (const end of [0, 1] as const) {
      if (!touched[2 * s + end]) continue;
      const knot = knotAt(count + 2 * s + end);
      knots[knot].ends.push({ strip: s, end });
      ends[end].knot = knot;
    }
  });
  return { knots };
}
