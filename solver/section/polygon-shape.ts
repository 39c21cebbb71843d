import { crossingPlace } from '../mesh/crossing.ts';
import { Problem } from '../problem/problem.ts';
import type { Place } from './section.ts';
import { type SectionShape, WALL } from './section-shape.ts';
import { simplify } from './simplify.ts';

/** A measured outline of more points than this is simplified until it has no more. */
const MOST_POINTS = 400;
export const MOST_MEASURED = 20_000;
/** Share of the hydraulic diameter by which simplifying may move the wall without being asked. */
const UNSEEN = 2e-5;
/** A corner that turns back by less (degrees) is measurement, not a corner of the shape. */
const REENTRANT = 10;
/** The outline is judged for re-entrant corners after smoothing by this share of the hydraulic diameter. */
const JUDGED = 0.01;
const OBTUSE = 20;

const REMEDY = 'Give at least three different points round the cross-section, in order.';

/** Outlines of more corners are measured walls, not drawn ones: their shear is averaged along this share of the perimeter. */
const DRAWN = 12;
const AVERAGED = 0.02;

/**
 * A measured cross-section, in units of its height with the middle of its foot at the origin. Points may
 * run either way and the first may be repeated at the end. Many points are simplified (Douglas and
 * Peucker); how far that moved the wall is in `moved`. Throws where the outline encloses nothing or
 * crosses itself.
 */
export function polygonShape(points: readonly (readonly [number, number])[], where: string): SectionShape {
  const given = distinct(points, where);
  const [x0, x1] = range(given, 0);
  const [y0, y1] = range(given, 1);
  const unit = y1 - y0;
  const middle = (x0 + x1) / 2;
  const outline = given.map(([x, y]): Place => [(x - middle) / unit, (y - y0) / unit]);
  const empty = new Problem('profile', 'The measured cross-section encloses nothing.', where, REMEDY);
  if (!(unit > 0 && x1 > x0)) throw empty;
  const crossed = crossingOf(outline);
  if (crossed) {
    const at = `(${(middle + crossed[0] * unit).toPrecision(4)}, ${(y0 + crossed[1] * unit).toPrecision(4)}) m`;
    throw new Problem('profile', `The measured cross-section crosses itself at ${at}.`, where, REMEDY);
  }
  if (Math.abs(twiceArea(outline)) < (1e-6 * (x1 - x0)) / unit) throw empty;
  if (twiceArea(outline) < 0) outline.reverse();
  const dh = (2 * twiceArea(outline)) / lengthOf(outline);
  const { outline: corners, moved } = simplified(outline, UNSEEN * dh);
  const judged = simplify(corners, JUDGED * dh).outline;
  const measured = corners.length > DRAWN;
  return {
    key: `polygon ${corners.length} ${fingerprint(corners)}`,
    shape: [corners.map(([x, y]) => ({ x, y, bulge: 0, tag: WALL }))],
    symmetric: false,
    stretch: 1,
    unit,
    origin: [middle, y0],
    extra: 0,
    area: twiceArea(corners) / 2,
    perimeter: lengthOf(corners),
    width: (x1 - x0) / unit,
    depth: 1,
    floorMiddle: wallAt(corners, 0, 0, -1),
    sideMiddle: sideOf(corners),
    obtuse: measured ? [] : corners.filter((_, i) => turnAt(corners, i) > OBTUSE && turnAt(corners, i) < 88),
    reentrant: judged.filter((_, i) => turnAt(judged, i) < -REENTRANT),
    moved,
    averaged: measured ? AVERAGED * lengthOf(corners) : 0,
  };
}

/** Simplified no further than needed, and never so that it crosses itself. */
function simplified(outline: readonly Place[], least: number) {
  let tolerance = least;
  while (simplify(outline, tolerance).outline.length > MOST_POINTS) tolerance *= 1.4;
  let kept = simplify(outline, tolerance);
  while (crossingOf(kept.outline)) {
    tolerance /= 2;
    kept = tolerance < 1e-9 ? { outline: [...outline], moved: 0 } : simplify(outline, tolerance);
  }
  return kept;
}

/** The points without repetitions, the last one not the first again. */
function distinct(points: readonly (readonly [number, number])[], where: string): Place[] {
  if (points.length > MOST_MEASURED) {
    throw new Problem(
      'too-many',
      `The measured cross-section has ${points.length} points; ${MOST_MEASURED} can be used.`,
      where,
      'Leave out points that lie close together.',
    );
  }
  for (const [x, y] of points) {
    if (Number.isFinite(x) && Number.isFinite(y)) continue;
    throw new Problem('profile', 'A point of the measured cross-section is no number.', where, REMEDY);
  }
  const kept = points.filter(([x, y], i) => {
    const [px, py] = points[(i + points.length - 1) % points.length];
    return x !== px || y !== py;
  });
  if (kept.length < 3)
    throw new Problem('profile', 'The measured cross-section has too few points.', where, REMEDY);
  return kept.map(([x, y]) => [x, y]);
}

function range(points: readonly Place[], axis: 0 | 1): [number, number] {
  let [low, high] = [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY];
  for (const point of points) {
    low = Math.min(low, point[axis]);
    high = Math.max(high, point[axis]);
  }
  return [low, high];
}

function twiceArea(outline: readonly Place[]): number {
  let sum = 0;
  for (let i = 0, j = outline.length - 1; i < outline.length; j = i, i += 1) {
    sum += outline[j][0] * outline[i][1] - outline[i][0] * outline[j][1];
  }
  return sum;
}

function lengthOf(outline: readonly Place[]): number {
  let sum = 0;
  for (let i = 0, j = outline.length - 1; i < outline.length; j = i, i += 1) {
    sum += Math.hypot(outline[i][0] - outline[j][0], outline[i][1] - outline[j][1]);
  }
  return sum;
}

/** Left turn at corner i, degrees; below zero it is re-entrant. */
function turnAt(outline: readonly Place[], i: number): number {
  const n = outline.length;
  const [a, b, c] = [outline[(i + n - 1) % n], outline[i], outline[(i + 1) % n]];
  const [ux, uy, vx, vy] = [b[0] - a[0], b[1] - a[1], c[0] - b[0], c[1] - b[1]];
  return (Math.atan2(ux * vy - uy * vx, ux * vx + uy * vy) * 180) / Math.PI;
}

/** Where the line `axis` = value meets the outline: the lowest (−1) or highest (+1) place along it. */
function wallAt(outline: readonly Place[], axis: 0 | 1, value: number, end: -1 | 1): Place {
  const other = axis === 0 ? 1 : 0;
  let best = Number.NEGATIVE_INFINITY;
  for (let i = 0, j = outline.length - 1; i < outline.length; j = i, i += 1) {
    const [a, b] = [outline[j], outline[i]];
    if (a[axis] > value === b[axis] > value) continue;
    const t = (value - a[axis]) / (b[axis] - a[axis]);
    best = Math.max(best, end * (a[other] + t * (b[other] - a[other])));
  }
  return axis === 0 ? [value, end * best] : [end * best, value];
}

/** The right side wall at half the height, or next to it where a re-entrant corner lies just there. */
function sideOf(outline: readonly Place[]): Place {
  for (const height of [0.5, 0.49, 0.51]) {
    const [x, y] = wallAt(outline, 1, height, 1);
    const inCorner = outline.some(
      (place, i) => Math.hypot(place[0] - x, place[1] - y) < 1e-6 && turnAt(outline, i) < 0,
    );
    if (!inCorner) return [x, y];
  }
  return wallAt(outline, 1, 0.5, 1);
}

function crossingOf(outline: readonly Place[]): readonly [number, number] | null {
  const count = outline.length;
  return crossingPlace({
    count,
    x: Float64Array.from(outline, ([x]) => x),
    y: Float64Array.from(outline, ([, y]) => y),
    next: Int32Array.from(outline, (_, i) => (i + 1) % count),
  });
}

/** 64 bits of FNV-1a over the coordinates to nine digits. */
function fingerprint(outline: readonly Place[]): string {
  let [a, b] = [0x811c9dc5, 0x01000193];
  for (const place of outline) {
    for (const value of place) {
      const whole = Math.round(value * 1e9);
      for (const part of [whole | 0, Math.floor(whole / 2 ** 32) | 0]) {
        a = Math.imul(a ^ part, 0x01000193);
        a ^= a >>> 15;
        b = Math.imul(b ^ part, 0x85ebca6b);
        b ^= b >>> 13;
      }
    }
  }
  return `${(a >>> 0).toString(16)}${(b >>> 0).toString(16).padStart(8, '0')}`;
}
