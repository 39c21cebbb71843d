import type { Edge } from '../mesh/mesh.ts';
import type { CellShape } from './shape.ts';

/**
 * Creeping flow knows no scale, turn or mirror: every copy of a shape is brought to one and the same
 * copy, of depth 1, which is the one that is solved and kept. Its longest outer edge starts at the
 * origin and runs along +x; of several such the least by the edges that follow, in either direction.
 */
export interface Canonical {
  readonly shape: CellShape;
  /** Equal for copies, different otherwise. */
  readonly key: string;
  /** How the solved copy lies on the caller's; several where the shape is symmetric in itself. */
  readonly placements: readonly [Placement, ...Placement[]];
}

/** caller = origin + scale (turn (x, y or -y)) */
export interface Placement {
  readonly scale: number;
  readonly cos: number;
  readonly sin: number;
  readonly mirrored: boolean;
  readonly x: number;
  readonly y: number;
  /** Caller's face (from 0) of each face of the solved copy. */
  readonly face: Int32Array;
}

/** Point of the solved copy to the caller's coordinates. */
export function toCaller(at: Placement, x: number, y: number): [number, number] {
  const v = at.mirrored ? -y : y;
  return [at.x + at.scale * (at.cos * x - at.sin * v), at.y + at.scale * (at.sin * x + at.cos * v)];
}

/** Point in the caller's coordinates to the solved copy. */
export function fromCaller(at: Placement, x: number, y: number): [number, number] {
  const dx = (x - at.x) / at.scale;
  const dy = (y - at.y) / at.scale;
  const v = at.cos * dy - at.sin * dx;
  return [at.cos * dx + at.sin * dy, at.mirrored ? -v : v];
}

/** Symmetric outlines have many equal starts; beyond this many the first ones serve. */
const MOST_STARTS = 32;
/** Of the extent: what counts as equal, and what coordinates are rounded to. Not decimal, so that drawn numbers do not lie halfway. */
const QUANTUM = 0.987654321 * 2 ** -24;

/** Drops edges of no length and joins straight edges of one tag that run on in one line. */
function tidy(loop: readonly Edge[], tiny: number): Edge[] {
  const real = loop.filter((edge, i) => {
    const next = loop[(i + 1) % loop.length];
    return Math.hypot(next.x - edge.x, next.y - edge.y) > tiny;
  });
  return real.filter((edge, i) => {
    const before = real[(i + real.length - 1) % real.length];
    const next = real[(i + 1) % real.length];
    if (before.bulge !== 0 || edge.bulge !== 0 || before.tag !== edge.tag) return true;
    const ax = edge.x - before.x;
    const ay = edge.y - before.y;
    const bx = next.x - edge.x;
    const by = next.y - edge.y;
    return ax * bx + ay * by < 0 || Math.abs(ax * by - ay * bx) > tiny * Math.hypot(ax, ay);
  });
}

/** The loop walked backwards and reflected in the x axis, so that it still runs with the fluid on its left. */
function reflected(loop: readonly Edge[]): Edge[] {
  const n = loop.length;
  return loop.map((_, i) => {
    const from = loop[(n - i) % n];
    const along = loop[n - 1 - i];
    return { x: from.x, y: -from.y, bulge: along.bulge, tag: along.tag };
  });
}

/** Per edge: minus its chord, bulge, whether it is a face, turn from the chord before. */
function word(loop: readonly Edge[], scale: number): number[][] {
  const n = loop.length;
  const chord: (readonly [number, number])[] = [];
  for (let i = 0; i < n; i += 1) {
    const next = loop[(i + 1) % n];
    chord.push([next.x - loop[i].x, next.y - loop[i].y]);
  }
  const letters: number[][] = [];
  for (let i = 0; i < n; i += 1) {
    const edge = loop[i];
    const [ax, ay] = chord[(i + n - 1) % n];
    const [bx, by] = chord[i];
    const turn = Math.atan2(ax * by - ay * bx, ax * bx + ay * by);
    // A turn straight back is the same at +180 and -180 degrees.
    letters.push([
      -Math.hypot(bx, by) * scale,
      edge.bulge,
      edge.tag > 0 ? 1 : 0,
      Math.abs(turn) > Math.PI - 1e-6 ? Math.PI : turn,
    ]);
  }
  return letters;
}

function compare(a: readonly number[], b: readonly number[]): number {
  for (let i = 0; i < Math.min(a.length, b.length); i += 1) {
    const difference = a[i] - b[i];
    if (Math.abs(difference) > 2 * QUANTUM) return difference;
  }
  return a.length - b.length;
}

interface Candidate {
  readonly mirrored: boolean;
  readonly start: number;
}

function letter(
  words: readonly [number[][], number[][]],
  { mirrored, start }: Candidate,
  k: number,
): number[] {
  const word = words[mirrored ? 1 : 0];
  return word[(start + k) % word.length];
}

/** Starts whose cyclic words are least, by elimination. */
function leastStarts(words: readonly [number[][], number[][]]): Candidate[] {
  const n = words[0].length;
  let left: Candidate[] = [];
  for (let start = 0; start < n; start += 1) left.push({ mirrored: false, start }, { mirrored: true, start });
  for (let k = 0; k < n && left.length > 1; k += 1) {
    let least = letter(words, left[0], k);
    for (const c of left) if (compare(letter(words, c, k), least) < 0) least = letter(words, c, k);
    const same: Candidate[] = [];
    for (const c of left) if (compare(letter(words, c, k), least) === 0) same.push(c);
    left = same;
    // What is left may differ further on; a cap here keeps long regular outlines from costing n^2.
    if (left.length > MOST_STARTS && k > 64) break;
  }
  return left.slice(0, MOST_STARTS);
}

export function canonical(given: CellShape): Canonical {
  // A measure that no turn changes: half the way round, chord by chord.
  let extent = 0;
  given.loops[0].forEach((edge, i) => {
    const next = given.loops[0][(i + 1) % given.loops[0].length];
    extent += Math.hypot(next.x - edge.x, next.y - edge.y) / 2;
  });
  const loops = given.loops.map((loop) => tidy(loop, 1e-10 * extent));
  const both = [loops, loops.map(reflected)] as const;
  const starts = leastStarts([word(both[0][0], 1 / extent), word(both[1][0], 1 / extent)]);

  const built = starts.map((c) => build(given, both[c.mirrored ? 1 : 0], c, extent));
  let best = built[0];
  for (const other of built) if (compare(other.numbers, best.numbers) < 0) best = other;
  const same = built.filter((other) => compare(other.numbers, best.numbers) === 0);
  const profile =
    given.profile.kind === 'polygon'
      ? given.profile.points.map(([x, y]) => [rounded(x / given.depth), rounded(y / given.depth)])
      : given.profile;
  return {
    shape: best.shape,
    key: `${JSON.stringify(profile)} ${JSON.stringify(best.shape.loops.map((loop) => loop.map((e) => [e.x, e.y, e.bulge, e.tag])))}`,
    placements: [best.placement, ...same.filter((other) => other !== best).map((other) => other.placement)],
  };
}

/** To nine digits, enough to tell measured points apart. */
const rounded = (value: number): number => Number(value.toPrecision(9));

interface Built {
  readonly shape: CellShape;
  /** All coordinates, bulges and tags, over the extent, to compare. */
  readonly numbers: number[];
  readonly placement: Placement;
}

const snapped = (value: number, quantum: number): number => Math.round(value / quantum) * quantum + 0;

/** The shape with outer edge `start` laid along +x from the origin, in depths. */
function build(given: CellShape, loops: readonly Edge[][], from: Candidate, extent: number): Built {
  const { depth } = given;
  const outer = loops[0];
  const origin = outer[from.start];
  const next = outer[(from.start + 1) % outer.length];
  const length = Math.hypot(next.x - origin.x, next.y - origin.y);
  const cos = (next.x - origin.x) / length;
  const sin = (next.y - origin.y) / length;
  // The odd factor keeps round extents away from where the step changes.
  const quantum = QUANTUM * 2 ** Math.ceil(Math.log2((0.8123 * extent) / depth));

  const face = new Map<number, number>();
  const lay = (loop: readonly Edge[], start: number): Edge[] =>
    loop.map((_, i) => {
      const edge = loop[(start + i) % loop.length];
      const dx = (edge.x - origin.x) / depth;
      const dy = (edge.y - origin.y) / depth;
      if (edge.tag > 0 && !face.has(edge.tag)) face.set(edge.tag, face.size + 1);
      return {
        x: snapped(cos * dx + sin * dy, quantum),
        y: snapped(cos * dy - sin * dx, quantum),
        bulge: Math.round(edge.bulge / QUANTUM) * QUANTUM + 0,
        tag: edge.tag > 0 ? (face.get(edge.tag) as number) : 0,
      };
    });
  const laid = [lay(outer, from.start)];
  const posts = loops.slice(1).map((loop) => {
    const probe = loop.map((edge) => {
      const dx = edge.x - origin.x;
      const dy = edge.y - origin.y;
      return [(cos * dx + sin * dy) / extent, (cos * dy - sin * dx) / extent];
    });
    let start = 0;
    for (let i = 1; i < probe.length; i += 1) if (compare(probe[i], probe[start]) < 0) start = i;
    return { loop, start, at: probe[start] };
  });
  posts.sort((a, b) => compare(a.at, b.at));
  for (const post of posts) laid.push(lay(post.loop, post.start));

  const numbers: number[] = [];
  for (const loop of laid)
    for (const e of loop) numbers.push((e.x * depth) / extent, (e.y * depth) / extent, e.bulge, e.tag);
  const faceOf = new Int32Array(given.faces).fill(-1);
  for (const [tag, mine] of face) faceOf[mine - 1] = tag - 1;
  return {
    shape: { ...given, loops: laid, depth: 1 },
    numbers,
    placement: {
      scale: depth,
      cos,
      // Reflected loops have y turned round: undo it after turning back.
      sin: from.mirrored ? -sin : sin,
      mirrored: from.mirrored,
      x: origin.x,
      y: from.mirrored ? -origin.y : origin.y,
      face: faceOf,
    },
  };
}
