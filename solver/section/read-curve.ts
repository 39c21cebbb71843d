import type { Place } from './section.ts';
import type { StretchEnd, WallCurve } from './wall-curve.ts';

/** Greatest shear along the wall, where it is, and the doubt about it. */
export interface Reading {
  readonly shear: number;
  readonly at: Place;
  readonly doubt: number;
}

/** Samples between two Gauss points when looking for the peak, on a wall of few and of many of them. */
const SAMPLES = 12;
const MANY = 400;
const SAMPLES_OF_MANY = 2;

export function peakOf(curve: WallCurve): Reading {
  const samples = curve.s.length > MANY ? SAMPLES_OF_MANY : SAMPLES;
  let best: Reading = { shear: -1, at: [0, 0], doubt: 0 };
  for (let i = 0; i < curve.ends.length; i += 1) {
    const stretch = extended(curve, i);
    const { s } = stretch;
    for (let k = 0; k + 1 < s.length; k += 1) {
      for (let j = 0; j <= samples; j += 1) {
        const at = s[k] + ((s[k + 1] - s[k]) * j) / samples;
        if (at < curve.from[i] || at > curve.to[i]) continue;
        const shear = interpolate(stretch, stretch.shear, at);
        if (shear > best.shear) best = { shear, at: placeAt(stretch, at), doubt: doubtAt(stretch, at) };
      }
    }
  }
  return best;
}

/** Shear at the wall's point nearest to a place. */
export function shearNear(curve: WallCurve, place: Place): Reading {
  let nearest = 0;
  let least = Number.POSITIVE_INFINITY;
  for (let p = 0; p < curve.x.length; p += 1) {
    const distance = Math.hypot(curve.x[p] - place[0], curve.y[p] - place[1]);
    if (distance < least) {
      least = distance;
      nearest = p;
    }
  }
  let i = 0;
  while (curve.start[i + 1] <= nearest) i += 1;
  const stretch = extended(curve, i);
  // Along the wall by the projection on the direction there.
  const [a, b] = [Math.max(curve.start[i], nearest - 1), Math.min(curve.start[i + 1] - 1, nearest + 1)];
  const [dx, dy] = [curve.x[b] - curve.x[a], curve.y[b] - curve.y[a]];
  const ahead =
    ((place[0] - curve.x[nearest]) * dx + (place[1] - curve.y[nearest]) * dy) / Math.hypot(dx, dy);
  const at = Math.min(curve.to[i], Math.max(curve.from[i], curve.s[nearest] + ahead));
  const close = 1e-9 * (curve.to[i] - curve.from[i]);
  const inCorner = (end: 0 | 1, s: number): boolean =>
    curve.ends[i][end] === 'still' && Math.abs(at - s) < close;
  if (inCorner(0, curve.from[i]) || inCorner(1, curve.to[i])) return { shear: 0, at: place, doubt: 0 };
  return {
    shear: Math.max(0, interpolate(stretch, stretch.shear, at)),
    at: place,
    doubt: Math.abs(curve.doubt[nearest]),
  };
}

/**
 * The curve's points with those at the ends of its stretches (corners of zero shear, and where a mirror
 * line cuts the wall): x, y, shear of each, one after the other.
 */
export function curvePoints(curve: WallCurve): number[] {
  const points: number[] = [];
  const last = curve.ends.length - 1;
  const closed = curve.endsAt[last][1].every((value, axis) => value === curve.endsAt[0][0][axis]);
  for (let i = 0; i <= last; i += 1) {
    const stretch = extended(curve, i);
    const end = (which: 0 | 1, s: number): void => {
      // The corner that closes one stretch opens the next, and on a closed wall the last the first.
      const opened = which === 0 && i > 0 && curve.ends[i - 1][1] === 'still';
      if (curve.ends[i][which] === 'bend' || opened || (which === 1 && i === last && closed)) return;
      points.push(...curve.endsAt[i][which], Math.max(0, interpolate(stretch, stretch.shear, s)));
    };
    end(0, curve.from[i]);
    for (let p = curve.start[i]; p < curve.start[i + 1]; p += 1) {
      points.push(curve.x[p], curve.y[p], Math.max(0, curve.shear[p]));
    }
    end(1, curve.to[i]);
  }
  return points;
}

/** A stretch with what is known beyond its ends: zero in convex corners, the image behind a mirror. */
export interface Stretch {
  readonly s: number[];
  readonly x: number[];
  readonly y: number[];
  readonly shear: number[];
  readonly doubt: number[];
}

/** Points that a mirror repeats. */
const IMAGES = 3;

export function extended(curve: WallCurve, i: number): Stretch {
  const pick = (values: Float64Array): number[] => [...values.subarray(curve.start[i], curve.start[i + 1])];
  const stretch: Stretch = {
    s: pick(curve.s),
    x: pick(curve.x),
    y: pick(curve.y),
    shear: pick(curve.shear),
    doubt: pick(curve.doubt),
  };
  extend(stretch, curve.ends[i][0], curve.from[i], curve.endsAt[i][0], false);
  extend(stretch, curve.ends[i][1], curve.to[i], curve.endsAt[i][1], true);
  return stretch;
}

function extend(stretch: Stretch, end: StretchEnd, s: number, at: Place, after: boolean): void {
  const { length } = stretch.s;
  const add = (list: number[], value: number): void => {
    if (after) list.push(value);
    else list.unshift(value);
  };
  if (end === 'still') {
    const near = after ? length - 1 : 0;
    add(stretch.s, s);
    add(stretch.x, at[0]);
    add(stretch.y, at[1]);
    add(stretch.shear, 0);
    add(stretch.doubt, stretch.doubt[near]);
  }
  if (end === 'mirror') {
    for (let k = 0; k < Math.min(IMAGES, length); k += 1) {
      // Images are added outside those already there, so the source moves inwards by one each time.
      const source = after ? length - 1 - k : 2 * k;
      add(stretch.s, 2 * s - stretch.s[source]);
      add(stretch.x, -stretch.x[source]);
      add(stretch.y, stretch.y[source]);
      add(stretch.shear, stretch.shear[source]);
      add(stretch.doubt, stretch.doubt[source]);
    }
  }
}

/** Cubic through the four points of the stretch around `at` (fewer where it has fewer). */
export function interpolate(stretch: Stretch, values: readonly number[], at: number): number {
  const { s } = stretch;
  const count = Math.min(4, s.length);
  const half = Math.floor(count / 2);
  const k = Math.max(0, Math.min(s.length - count, firstFrom(s, at) - half));
  let sum = 0;
  for (let i = k; i < k + count; i += 1) {
    let weight = values[i];
    for (let j = k; j < k + count; j += 1) if (j !== i) weight *= (at - s[j]) / (s[i] - s[j]);
    sum += weight;
  }
  return sum;
}

function placeAt(stretch: Stretch, at: number): Place {
  return [interpolate(stretch, stretch.x, at), interpolate(stretch, stretch.y, at)];
}

function doubtAt(stretch: Stretch, at: number): number {
  const k = Math.max(0, Math.min(stretch.s.length - 2, firstFrom(stretch.s, at) - 1));
  return Math.max(Math.abs(stretch.doubt[k]), Math.abs(stretch.doubt[k + 1]));
}

/** Index of the first of ascending values that is not below `at`; their number where all are. */
function firstFrom(s: readonly number[], at: number): number {
  let [low, high] = [0, s.length];
  while (low < high) {
    const middle = (low + high) >> 1;
    if (s[middle] < at) low = middle + 1;
    else high = middle;
  }
  return low;
}
