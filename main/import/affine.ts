import { arcPoints } from './curves.ts';
import type { Track, Vertices } from './drawing.ts';

/** x' = a x + c y + e, y' = b x + d y + f. */
export type Affine = readonly [a: number, b: number, c: number, d: number, e: number, f: number];

export const SAME: Affine = [1, 0, 0, 1, 0, 0];

/** First `inner`, then `outer`. */
export function compose(outer: Affine, inner: Affine): Affine {
  const [a, b, c, d, e, f] = outer;
  const [p, q, r, s, t, u] = inner;
  return [a * p + c * q, b * p + d * q, a * r + c * s, b * r + d * s, a * t + c * u + e, b * t + d * u + f];
}

export const shift = (x: number, y: number): Affine => [1, 0, 0, 1, x, y];
export const scaling = (x: number, y: number): Affine => [x, 0, 0, y, 0, 0];
export function turning(radians: number): Affine {
  const quarter = (radians / Math.PI) * 2;
  // Quarter turns are exact, as references mostly are.
  const whole = Number.isInteger(Math.round(quarter * 1e9) / 1e9) ? Math.round(quarter) & 3 : -1;
  const cos = whole < 0 ? Math.cos(radians) : [1, 0, -1, 0][whole];
  const sin = whole < 0 ? Math.sin(radians) : [0, 1, 0, -1][whole];
  return [cos, sin, -sin, cos, 0, 0];
}

/** How lengths grow: the square root of the area's factor. */
export function growth([a, b, c, d]: Affine): number {
  return Math.sqrt(Math.abs(a * d - b * c));
}

/** Whether circles stay circles. */
export function isSimilar([a, b, c, d]: Affine): boolean {
  const size = Math.max(Math.abs(a), Math.abs(b), Math.abs(c), Math.abs(d));
  const direct = Math.abs(a - d) + Math.abs(b + c);
  const mirrored = Math.abs(a + d) + Math.abs(b - c);
  return Math.min(direct, mirrored) <= 1e-9 * size;
}

/** Vertices seen through `by`; arcs that would become pieces of ellipses are cut to chords first. */
export function moved(vertices: Vertices, by: Affine, closed: boolean): Vertices {
  if (by === SAME) return vertices;
  const [a, b, c, d, e, f] = by;
  const from = isSimilar(by) ? vertices : straightened(vertices, closed);
  const mirror = a * d - b * c < 0 ? -1 : 1;
  const out = new Float64Array(from.length);
  for (let k = 0; k < from.length; k += 3) {
    out[k] = a * from[k] + c * from[k + 1] + e;
    out[k + 1] = b * from[k] + d * from[k + 1] + f;
    out[k + 2] = mirror * from[k + 2];
  }
  return out;
}

export function movedTrack(track: Track, by: Affine): Track {
  if (by === SAME) return track;
  const { vertices, closed, widths, round } = track;
  const ends = round ? { round } : {};
  const grown = growth(by);
  const straight = !isSimilar(by) && vertices.some((value, k) => k % 3 === 2 && value !== 0);
  const out = moved(vertices, by, closed);
  // Cut arcs no longer match their widths edge by edge: the widest stands for all of them then.
  if (straight && widths.length > 0) {
    const widest = widths.reduce((most, width) => Math.max(most, width), 0);
    return {
      vertices: out,
      closed,
      widths: new Float64Array(2 * (out.length / 3)).fill(widest * grown),
      ...ends,
    };
  }
  return { vertices: out, closed, widths: widths.map((width) => width * grown), ...ends };
}

function straightened(vertices: Vertices, closed: boolean): Vertices {
  const count = vertices.length / 3;
  const out: number[] = [];
  for (let i = 0; i < count; i += 1) {
    const k = 3 * i;
    out.push(vertices[k], vertices[k + 1], 0);
    const next = 3 * ((i + 1) % count);
    if (vertices[k + 2] === 0 || (i === count - 1 && !closed)) continue;
    const chord = Math.hypot(vertices[next] - vertices[k], vertices[next + 1] - vertices[k + 1]);
    arcPoints(
      vertices[k],
      vertices[k + 1],
      vertices[next],
      vertices[next + 1],
      vertices[k + 2],
      chord * 1e-5,
      out,
    );
  }
  return Float64Array.from(out);
}
