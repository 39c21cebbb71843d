import type { DrawnLayer, Gathering, Track } from './drawing.ts';
import { OUTLINE } from './drawing.ts';

/** Share of the drawing's extent within which two ends of lines count as one point. */
const JOIN = 1e-6;

/**
 * Joins loose lines and arcs of a layer that meet end to end. What closes becomes a region; what does not
 * stays a line, in one piece where it is one.
 */
export function chainLines(layer: DrawnLayer, gathering: Gathering): void {
  const lines = layer.lines.splice(0);
  if (lines.length === 0) return;
  const nodes = new Nodes(extent(lines) * JOIN, lines[0].vertices[0], lines[0].vertices[1]);
  const from = new Int32Array(lines.length);
  const to = new Int32Array(lines.length);
  const seen = new Set<number>();
  const used = new Uint8Array(lines.length);
  lines.forEach(({ vertices }, i) => {
    const last = vertices.length - 3;
    from[i] = nodes.at(vertices[0], vertices[1]);
    to[i] = nodes.at(vertices[last], vertices[last + 1]);
    // The same line drawn twice is one.
    if (vertices.length > 6) return;
    if (vertices[2] !== 0) return;
    const key = Math.min(from[i], to[i]) * ROW + Math.max(from[i], to[i]);
    if (seen.has(key)) used[i] = 1;
    seen.add(key);
  });
  const ends: number[][] = Array.from({ length: nodes.count }, () => []);
  for (let i = 0; i < lines.length; i += 1) {
    if (used[i]) continue;
    ends[from[i]].push(i);
    ends[to[i]].push(i);
  }
  const walk = (first: number, start: number): { closed: boolean; parts: number[]; forward: boolean[] } => {
    const parts: number[] = [];
    const forward: boolean[] = [];
    let line = first;
    let node = start;
    for (;;) {
      used[line] = 1;
      gathering.work.tick();
      parts.push(line);
      forward.push(from[line] === node);
      node = from[line] === node ? to[line] : from[line];
      if (node === start) return { closed: true, parts, forward };
      const [a, b] = ends[node];
      if (ends[node].length !== 2 || (used[a] === 1) === (used[b] === 1))
        return { closed: false, parts, forward };
      line = used[a] ? b : a;
    }
  };
  // Open chains first, from where they begin; what is left then goes round.
  for (let node = 0; node < ends.length; node += 1) {
    if (ends[node].length === 2) continue;
    for (const line of ends[node]) if (!used[line]) keep(walk(line, node));
  }
  for (let i = 0; i < lines.length; i += 1) if (!used[i]) keep(walk(i, from[i]));

  function keep({ closed, parts, forward }: ReturnType<typeof walk>): void {
    const taken = parts.map((part, k) => {
      const own = forward[k] ? lines[part].vertices : turned(lines[part].vertices);
      return k === parts.length - 1 && !closed ? own : own.subarray(0, -3);
    });
    const whole = new Float64Array(taken.reduce((sum, own) => sum + own.length, 0));
    let at = 0;
    for (const own of taken) {
      whole.set(own, at);
      at += own.length;
    }
    if (closed) layer.regions.push({ loops: [whole], ...OUTLINE });
    else layer.lines.push({ vertices: whole, closed: false, widths: new Float64Array(0) });
  }
}

/** A line the other way round; the bulge belongs to the edge that follows its vertex. */
function turned(vertices: Float64Array): Float64Array {
  const count = vertices.length / 3;
  const out = new Float64Array(vertices.length);
  for (let i = 0; i < count; i += 1) {
    const k = 3 * (count - 1 - i);
    out[3 * i] = vertices[k];
    out[3 * i + 1] = vertices[k + 1];
    out[3 * i + 2] = i === count - 1 ? 0 : -vertices[k - 1];
  }
  return out;
}

function extent(lines: readonly Track[]): number {
  let [x0, y0, x1, y1] = [Infinity, Infinity, -Infinity, -Infinity];
  for (const { vertices } of lines) {
    for (let k = 0; k < vertices.length; k += 3) {
      x0 = Math.min(x0, vertices[k]);
      x1 = Math.max(x1, vertices[k]);
      y0 = Math.min(y0, vertices[k + 1]);
      y1 = Math.max(y1, vertices[k + 1]);
    }
  }
  return Math.max(x1 - x0, y1 - y0);
}

/** Cells in a row of the grid below: more than an extent holds, and products stay whole. */
const ROW = 2 ** 24;
/** Size of a cell in tolerances. */
const CELL = 16;
const NONE: readonly number[] = [];

/** Points that are one where they lie closer than a tolerance. */
class Nodes {
  readonly #x: number[] = [];
  readonly #y: number[] = [];
  readonly #cells = new Map<number, number[]>();
  readonly #tolerance: number;
  readonly #x0: number;
  readonly #y0: number;

  constructor(tolerance: number, x: number, y: number) {
    this.#tolerance = tolerance > 0 ? tolerance : 1;
    this.#x0 = x;
    this.#y0 = y;
  }

  get count(): number {
    return this.#x.length;
  }

  at(x: number, y: number): number {
    const t = this.#tolerance;
    const [u, v] = [(x - this.#x0) / (CELL * t), (y - this.#y0) / (CELL * t)];
    // Only a point near the edge of its cell can have a neighbour in the next one.
    const [left, right] = [Math.floor(u - 1 / CELL), Math.floor(u + 1 / CELL)];
    const [low, high] = [Math.floor(v - 1 / CELL), Math.floor(v + 1 / CELL)];
    for (let i = left; i <= right; i += 1) {
      for (let j = low; j <= high; j += 1) {
        for (const node of this.#cells.get(i * ROW + j) ?? NONE) {
          if (Math.hypot(this.#x[node] - x, this.#y[node] - y) <= t) return node;
        }
      }
    }
    const node = this.#x.length;
    this.#x.push(x);
    this.#y.push(y);
    const key = Math.floor(u) * ROW + Math.floor(v);
    const cell = this.#cells.get(key);
    if (cell) cell.push(node);
    else this.#cells.set(key, [node]);
    return node;
  }
}
