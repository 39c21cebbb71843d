import type { Edge, Shape } from './mesh.ts';
import type { FullSizing } from './sizing.ts';

/**
 * Canonical pose: every turned, mirrored, moved or scaled copy of a shape is brought to one and the
 * same copy before it is meshed, so that copies mesh alike to the last bit. The outer loop's edges
 * (length, bulge, wanted size, turn to the next) are read as a cyclic word in both directions; the
 * least rotation starts the loop, its first chord lies along +x from the origin, and the total of its
 * chords is the unit. Where the word repeats (a symmetric shape), holes and size points decide.
 */
export interface Pose {
  readonly shape: Shape;
  readonly sizing: FullSizing;
  /** For each loop and edge of `shape`: the loop and edge of the caller's shape that starts at the same vertex. */
  readonly vertexOf: readonly (readonly [number, number])[][];
  readonly mirrored: boolean;
  /** Turns coordinates of the pose back into the caller's, in place. */
  back(x: Float64Array, y: Float64Array, count: number): void;
}

/** Quantum of compared lengths and angles: far above rounding, far below any meaning; not decimal. */
const QUANTUM = 1.2345678e-9;
/** Coordinates of the pose are whole multiples of this, so that copies agree bit for bit. */
const SNAP = 2 ** -36;
/** Symmetric shapes have many equal starts; beyond this many the first ones serve. */
const MAX_STARTS = 64;

const quantised = (value: number): number => Math.round(value / QUANTUM);
const snapped = (value: number): number => Math.round(value / SNAP) * SNAP;
/** Keeps 33 bits: sizes that differ by rounding only become equal. */
function rounded(value: number): number {
  if (!(value > 0 && value < Number.POSITIVE_INFINITY)) return value;
  const unit = 2 ** (Math.floor(Math.log2(value)) - 33);
  return Math.round(value / unit) * unit;
}

export function canonicalPose(shape: Shape, sizing: FullSizing): Pose {
  const outer = shape[0];
  let total = 0;
  for (let i = 0; i < outer.length; i += 1) total += chord(outer, i);
  const scale = 1 / total;
  const words = cyclicWords(outer, scale, sizing);
  const forward = leastRotation(words.forward);
  const backward = leastRotation(words.backward);
  const order = compareCyclic(words.forward, forward, words.backward, backward);
  const starts: [number, boolean][] = [];
  if (order <= 0) for (const at of equalStarts(words.forward, forward)) starts.push([at, false]);
  // Position j of the backward word is edge n − 1 − j, travelled from its end.
  if (order >= 0) for (const at of equalStarts(words.backward, backward)) starts.push([at, true]);

  let best: Posed | undefined;
  for (const [at, mirrored] of starts) {
    const posed = poseAt(shape, sizing, scale, at, mirrored);
    if (!best || compareLists(posed.key, best.key) < 0) best = posed;
    if (shape.length === 1 && sizing.points.length === 0) break;
  }
  const { frame, mirrored, loops, vertexOf, points } = best!;
  const tagSize = new Map<number, number>();
  for (const loop of shape) {
    for (const edge of loop) tagSize.set(edge.tag, rounded(sizing.wallSize(edge.tag) * scale));
  }
  return {
    shape: loops,
    vertexOf,
    mirrored,
    sizing: {
      ...sizing,
      size: rounded(sizing.size * scale),
      growth: sizing.growth,
      points,
      wallSize: (tag) => tagSize.get(tag) ?? Number.POSITIVE_INFINITY,
    },
    back(x, y, count) {
      layBack(frame, mirrored, total, x, y, count);
    },
  };
}

/** From the frame of the pose to the caller's. */
function layBack(
  { cos, sin, x0, y0 }: Posed['frame'],
  mirrored: boolean,
  total: number,
  x: Float64Array,
  y: Float64Array,
  count: number,
): void {
  for (let i = 0; i < count; i += 1) {
    const u = x[i] * total;
    const v = (mirrored ? -y[i] : y[i]) * total;
    x[i] = x0 + cos * u - sin * v;
    y[i] = y0 + sin * u + cos * v;
  }
}

/** From the caller's frame to that of the pose, whose outline has length 1. */
function placed(
  { cos, sin, x0, y0 }: Posed['frame'],
  mirrored: boolean,
  scale: number,
  x: number,
  y: number,
): [number, number] {
  const dx = (x - x0) * scale;
  const dy = (y - y0) * scale;
  const v = cos * dy - sin * dx;
  return [snapped(cos * dx + sin * dy), snapped(mirrored ? -v : v)];
}

function chord(loop: readonly Edge[], i: number): number {
  const a = loop[i];
  const b = loop[(i + 1) % loop.length];
  return Math.hypot(b.x - a.x, b.y - a.y);
}

/** One number per edge, travelled either way: equal numbers mean equal edge and equal turn after it. */
function cyclicWords(loop: readonly Edge[], scale: number, sizing: FullSizing) {
  const n = loop.length;
  const edges: number[][] = [];
  const turns: number[] = [];
  for (let i = 0; i < n; i += 1) {
    const before = loop[(i + n - 1) % n];
    const here = loop[i];
    const after = loop[(i + 1) % n];
    const ux = here.x - before.x;
    const uy = here.y - before.y;
    const vx = after.x - here.x;
    const vy = after.y - here.y;
    turns.push(quantised(Math.atan2(ux * vy - uy * vx, ux * vx + uy * vy)));
    const size = Math.min(sizing.size, sizing.wallSize(here.tag)) * scale;
    edges.push([
      // The longest edge comes first: it gives the frame its direction.
      -quantised(Math.hypot(vx, vy) * scale),
      quantised(here.bulge),
      size < Number.POSITIVE_INFINITY ? quantised(size) : -1,
    ]);
  }
  const letters: number[][] = [];
  for (let i = 0; i < n; i += 1) letters.push([...edges[i], turns[(i + 1) % n]]);
  for (let i = n - 1; i >= 0; i -= 1) letters.push([...edges[i], turns[i]]);
  const rank = new Map<string, number>();
  for (const letter of [...letters].sort(compareLists)) {
    const name = letter.join(' ');
    if (!rank.has(name)) rank.set(name, rank.size);
  }
  const word: number[] = [];
  for (const letter of letters) word.push(rank.get(letter.join(' '))!);
  return { forward: word.slice(0, n), backward: word.slice(n) };
}

function compareLists(a: readonly number[], b: readonly number[]): number {
  for (let i = 0; i < a.length && i < b.length; i += 1) {
    if (a[i] !== b[i]) return a[i] - b[i];
  }
  return a.length - b.length;
}

/** Start of the least rotation of a cyclic word, in linear time. */
function leastRotation(word: readonly number[]): number {
  const n = word.length;
  let i = 0;
  let j = 1;
  let k = 0;
  while (i < n && j < n && k < n) {
    const a = word[(i + k) % n];
    const b = word[(j + k) % n];
    if (a === b) {
      k += 1;
      continue;
    }
    if (a > b) i += k + 1;
    else j += k + 1;
    if (i === j) j += 1;
    k = 0;
  }
  return Math.min(i, j);
}

function compareCyclic(a: readonly number[], i: number, b: readonly number[], j: number): number {
  const n = a.length;
  for (let k = 0; k < n; k += 1) {
    const d = a[(i + k) % n] - b[(j + k) % n];
    if (d !== 0) return d;
  }
  return 0;
}

/** All starts whose rotation equals that of `first`: multiples of the word's period. */
function equalStarts(word: readonly number[], first: number): number[] {
  const n = word.length;
  // Failure function of the rotation; n − fail is the period if it divides n.
  const fail = new Int32Array(n + 1);
  fail[0] = -1;
  for (let i = 0; i < n; i += 1) {
    let k = fail[i];
    while (k >= 0 && word[(first + k) % n] !== word[(first + i) % n]) k = fail[k];
    fail[i + 1] = k + 1;
  }
  const period = n % (n - fail[n]) === 0 ? n - fail[n] : n;
  const starts: number[] = [];
  for (let at = 0; at < n && starts.length < MAX_STARTS; at += period) starts.push((first + at) % n);
  return starts;
}

interface Posed {
  readonly key: number[];
  readonly frame: { cos: number; sin: number; x0: number; y0: number };
  readonly mirrored: boolean;
  readonly loops: Edge[][];
  readonly vertexOf: [number, number][][];
  readonly points: { x: number; y: number; size: number; growth: number }[];
}

function poseAt(shape: Shape, sizing: FullSizing, scale: number, at: number, mirrored: boolean): Posed {
  const outer = shape[0];
  const n = outer.length;
  const from = outer[mirrored ? (n - at) % n : at];
  const to = outer[mirrored ? n - 1 - at : (at + 1) % n];
  const length = Math.hypot(to.x - from.x, to.y - from.y);
  const frame = { cos: (to.x - from.x) / length, sin: (to.y - from.y) / length, x0: from.x, y0: from.y };
  const loops: Edge[][] = [];
  const vertexOf: [number, number][][] = [];
  for (let l = 0; l < shape.length; l += 1) {
    const loop = shape[l];
    const m = loop.length;
    const places: [number, number][] = [];
    for (const edge of loop) places.push(placed(frame, mirrored, scale, edge.x, edge.y));
    const turned: Edge[] = [];
    const origin: [number, number][] = [];
    let start = mirrored ? (n - at) % n : at;
    if (l > 0) {
      start = 0;
      for (let i = 1; i < m; i += 1) if (compareLists(places[i], places[start]) < 0) start = i;
    }
    for (let k = 0; k < m; k += 1) {
      const v = mirrored ? (start - k + 2 * m) % m : (start + k) % m;
      const edge = loop[mirrored ? (v + m - 1) % m : v];
      turned.push({
        x: places[v][0],
        y: places[v][1],
        bulge: Math.round(edge.bulge / SNAP) * SNAP,
        tag: edge.tag,
      });
      origin.push([l, v]);
    }
    loops.push(turned);
    vertexOf.push(origin);
  }
  const holes = loops.slice(1).map((loop, i) => ({ loop, origin: vertexOf[i + 1] }));
  holes.sort((a, b) => compareLists([a.loop[0].x, a.loop[0].y], [b.loop[0].x, b.loop[0].y]));
  const points = sizing.points
    .map((point) => {
      const [x, y] = placed(frame, mirrored, scale, point.x, point.y);
      return { x, y, size: rounded(point.size * scale), growth: point.growth };
    })
    .sort((a, b) => compareLists([a.x, a.y, a.size], [b.x, b.y, b.size]));
  const key = holes.flatMap(({ loop }) => loop.flatMap((edge) => [quantised(edge.x), quantised(edge.y)]));
  for (const point of points) key.push(quantised(point.x), quantised(point.y), quantised(point.size));
  return {
    key,
    frame,
    mirrored,
    loops: [loops[0], ...holes.map(({ loop }) => loop)],
    vertexOf: [vertexOf[0], ...holes.map(({ origin }) => origin)],
    points,
  };
}
