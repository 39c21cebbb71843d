import type { Strip, StripEnd } from './strips.ts';
import type { Triangles } from './triangles.ts';

/** A soft strip is at least this many times as long as wide. */
const LONGEST_KNOT = 1.5;
/** Furthest that its points lie off the line between those that are kept, as a share of the width; and in nm. */
const OFF = 0.001;
const OFF_NM = 20;

interface Sample {
  readonly x: number;
  readonly y: number;
  readonly width: number;
}

/**
 * Stretches between walls that follow neither lines nor arcs: chains of triangles that lie between two
 * walls and belong to no strip yet. The centreline is where both walls are equally far.
 */
export function softStrips(
  triangles: Triangles,
  strip: Int32Array,
): { strip: Strip; triangles: readonly number[] }[] {
  const { twin, count } = triangles;
  const sides = new Uint8Array(count);
  for (let e = 0; e < 3 * count; e += 1) if (twin[e] < 0) sides[Math.floor(e / 3)] += 1;
  const free = (t: number): boolean => strip[t] < 0 && sides[t] === 1;
  const seen = new Uint8Array(count);
  const found: { strip: Strip; triangles: readonly number[] }[] = [];
  for (let first = 0; first < count; first += 1) {
    if (seen[first] || !free(first)) continue;
    for (const chain of chainsFrom(first, triangles, free, seen)) {
      const made = softStrip(chain, triangles);
      if (made) found.push({ strip: made, triangles: chain });
    }
  }
  return found;
}

/** The chain of free triangles through `first`, in order. */
function chainsFrom(
  first: number,
  { twin }: Triangles,
  free: (t: number) => boolean,
  seen: Uint8Array,
): number[][] {
  seen[first] = 1;
  const arms: number[][] = [];
  for (let e = 3 * first; e < 3 * first + 3; e += 1) {
    if (twin[e] < 0) continue;
    const arm: number[] = [];
    let t = Math.floor(twin[e] / 3);
    while (free(t) && !seen[t]) {
      seen[t] = 1;
      arm.push(t);
      let next = -1;
      for (let k = 3 * t; k < 3 * t + 3; k += 1) {
        if (twin[k] < 0) continue;
        const other = Math.floor(twin[k] / 3);
        if (!seen[other] && free(other)) next = other;
      }
      if (next < 0) break;
      t = next;
    }
    arms.push(arm);
  }
  const [a = [], b = []] = arms;
  return [[...a.toReversed(), first, ...b]];
}

/** Most cosine between a wall and the way across to the other. */
const LEAST_SQUARE = 0.6;

function softStrip(chain: readonly number[], triangles: Triangles): Strip | null {
  const { twin, x, y, next } = triangles;
  if (chain.length < 6) return null;
  // The wall on either side in order, from the pieces that the triangles stand on.
  const inChain = new Set(chain);
  const left: number[] = [];
  const right: number[] = [];
  for (let k = 0; k < chain.length; k += 1) {
    const t = chain[k];
    for (let e = 3 * t; e < 3 * t + 3; e += 1) {
      if (twin[e] >= 0) continue;
      const i = -1 - twin[e];
      // The side that leads on follows the wall's piece counter-clockwise where the wall lies right.
      const onward = Math.floor(twin[e - (e % 3) + ((e + 1) % 3)] / 3);
      const isRight = k + 1 < chain.length ? onward === chain[k + 1] : !inChain.has(onward);
      (isRight ? right : left).push(i);
    }
  }
  if (left.length < 2 || right.length < 2) return null;
  const run = (pieces: readonly number[], forward: boolean): [number, number][] => {
    const points: [number, number][] = [];
    for (const i of pieces) {
      const [a, b] = forward ? [i, next[i]] : [next[i], i];
      if (points.length === 0) points.push([x[a], y[a]]);
      points.push([x[b], y[b]]);
    }
    return points;
  };
  const rightRun = run(right, true);
  const leftRun = run(left, false);
  const samples = middles(rightRun, leftRun);
  if (samples.length < 3) return null;
  let length = 0;
  let widest = 0;
  let narrowest = Infinity;
  for (let k = 0; k < samples.length; k += 1) {
    widest = Math.max(widest, samples[k].width);
    narrowest = Math.min(narrowest, samples[k].width);
    if (k > 0) length += Math.hypot(samples[k].x - samples[k - 1].x, samples[k].y - samples[k - 1].y);
  }
  if (length < LONGEST_KNOT * widest || narrowest < 0.2 * widest) return null;
  samples.unshift(...ledTo(samples[0], samples[2], rightRun[0], leftRun[0]));
  samples.push(
    ...ledTo(samples[samples.length - 1], samples[samples.length - 3], rightRun.at(-1)!, leftRun.at(-1)!),
  );
  const kept = simplified(samples, Math.max(OFF_NM, OFF * narrowest));
  const end = (a: Sample, b: Sample): StripEnd => {
    const d = Math.hypot(a.x - b.x, a.y - b.y);
    return { x: a.x, y: a.y, ux: (a.x - b.x) / d, uy: (a.y - b.y) / d, width: a.width, aslant: 0, knot: -1 };
  };
  const last = kept.length - 1;
  return {
    soft: kept,
    axis: null,
    from: 0,
    to: length,
    length,
    ends: [end(kept[0], samples[2]), end(kept[last], samples[samples.length - 3])],
  };
}

/** A sample where the chain ends: the last one led on, along the way from the one before, to between its two walls. */
function ledTo(
  end: Sample,
  before: Sample,
  a: readonly [number, number],
  b: readonly [number, number],
): Sample[] {
  const d = Math.hypot(end.x - before.x, end.y - before.y);
  const [ux, uy] = [(end.x - before.x) / d, (end.y - before.y) / d];
  const by = ((a[0] + b[0]) / 2 - end.x) * ux + ((a[1] + b[1]) / 2 - end.y) * uy;
  return by > 0 && by < 2 * end.width ? [{ x: end.x + by * ux, y: end.y + by * uy, width: end.width }] : [];
}

/** Points half way between each point of one wall and the other wall, where the walls face each other. */
function middles(one: readonly [number, number][], other: readonly [number, number][]): Sample[] {
  const out: Sample[] = [];
  let near = 0;
  for (let k = 0; k < one.length; k += 1) {
    const [px, py] = one[k];
    let best = Infinity;
    let at: [number, number] = [0, 0];
    let where = near;
    for (let j = Math.max(0, near - 8); j < Math.min(other.length - 1, near + 40); j += 1) {
      const [ax, ay] = other[j];
      const [dx, dy] = [other[j + 1][0] - ax, other[j + 1][1] - ay];
      const dd = dx * dx + dy * dy;
      const t = dd > 0 ? Math.min(1, Math.max(0, ((px - ax) * dx + (py - ay) * dy) / dd)) : 0;
      const d = Math.hypot(px - ax - t * dx, py - ay - t * dy);
      if (d < best) {
        best = d;
        at = [ax + t * dx, ay + t * dy];
        where = j;
      }
    }
    near = where;
    // At its ends a chain is cut aslant: points that find no partner but an end are left out.
    if (
      (at[0] === other[0][0] && at[1] === other[0][1]) ||
      (at[0] === other.at(-1)![0] && at[1] === other.at(-1)![1])
    ) {
      if (k > 0 && k < one.length - 1) continue;
    }
    const [before, after] = [one[Math.max(0, k - 1)], one[Math.min(one.length - 1, k + 1)]];
    const [ux, uy] = [after[0] - before[0], after[1] - before[1]];
    const across = Math.abs(ux * (at[0] - px) + uy * (at[1] - py)) / (Math.hypot(ux, uy) * best);
    if (across > LEAST_SQUARE) continue;
    const [x, y] = [(px + at[0]) / 2, (py + at[1]) / 2];
    const last = out.at(-1);
    if (last && Math.hypot(x - last.x, y - last.y) < 1e-3 * best) continue;
    out.push({ x, y, width: best });
  }
  return out;
}

/** The points that a line in place and width needs to stay within `tolerance` of all (Douglas and Peucker's way). */
function simplified(samples: readonly Sample[], tolerance: number): Sample[] {
  const keep = new Uint8Array(samples.length);
  keep[0] = keep[samples.length - 1] = 1;
  const stack: [number, number][] = [[0, samples.length - 1]];
  while (stack.length > 0) {
    const [a, b] = stack.pop()!;
    const [p, q] = [samples[a], samples[b]];
    const [dx, dy, dw] = [q.x - p.x, q.y - p.y, q.width - p.width];
    const dd = dx * dx + dy * dy;
    let worst = tolerance;
    let at = -1;
    for (let k = a + 1; k < b; k += 1) {
      const s = samples[k];
      const t = dd > 0 ? Math.min(1, Math.max(0, ((s.x - p.x) * dx + (s.y - p.y) * dy) / dd)) : 0;
      const d = Math.hypot(s.x - p.x - t * dx, s.y - p.y - t * dy) + Math.abs(s.width - p.width - t * dw) / 2;
      if (d > worst) [worst, at] = [d, k];
    }
    if (at < 0) continue;
    keep[at] = 1;
    stack.push([a, at], [at, b]);
  }
  return samples.filter((_, k) => keep[k] === 1);
}
