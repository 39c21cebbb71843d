import { cross, direction, distance, dot, nearestOnSegment, sub, type Xy } from './vector.ts';

/** Length along a polyline with corners rounded to `radius` where they have room for it, nm. */
export function pathLength(path: readonly Xy[], radius = 0): number {
  let total = 0;
  for (let i = 1; i < path.length; i += 1) total += distance(path[i - 1]!, path[i]!);
  if (radius > 0) {
    for (let i = 1; i + 1 < path.length; i += 1) {
      const half = turnAt(path, i) / 2;
      total += radius * (2 * half - 2 * Math.tan(half));
    }
  }
  return total;
}

/** Unsigned turn at the inner vertex i, radians, 0 straight on. */
export function turnAt(path: readonly Xy[], i: number): number {
  const before = direction(path[i - 1]!, path[i]!);
  const after = direction(path[i]!, path[i + 1]!);
  return Math.abs(Math.atan2(cross(before, after), dot(before, after)));
}

/** The nearest place of a polyline to p. `along` is the distance from its start, nm. */
export function nearestOnPath(
  p: Xy,
  path: readonly Xy[],
): {
  readonly at: Xy;
  readonly segment: number;
  readonly t: number;
  readonly away: number;
  readonly along: number;
} {
  let best = { at: path[0]!, segment: 0, t: 0, away: Number.POSITIVE_INFINITY, along: 0 };
  let before = 0;
  for (let i = 1; i < path.length; i += 1) {
    const a = path[i - 1]!;
    const b = path[i]!;
    const found = nearestOnSegment(p, a, b);
    const away = distance(p, found.at);
    const length = distance(a, b);
    if (away < best.away) best = { ...found, segment: i - 1, away, along: before + found.t * length };
    before += length;
  }
  return best;
}

/** The place at a distance along a polyline, nm; the ends beyond its ends. */
export function placeAlong(path: readonly Xy[], along: number): Xy {
  let left = along;
  for (let i = 1; i < path.length; i += 1) {
    const a = path[i - 1]!;
    const b = path[i]!;
    const length = distance(a, b);
    if (left <= length || i === path.length - 1) {
      const t = length === 0 ? 0 : Math.max(0, Math.min(1, left / length));
      return [a[0] + t * (b[0] - a[0]), a[1] + t * (b[1] - a[1])];
    }
    left -= length;
  }
  return path[0]!;
}

/** The polyline shifted sideways by `by` nm to its left (y upward), corners mitred. */
export function offsetPath(path: readonly Xy[], by: number): Xy[] {
  return path.map((p, i) => {
    const before = i > 0 ? direction(path[i - 1]!, p) : direction(p, path[1]!);
    const after = i + 1 < path.length ? direction(p, path[i + 1]!) : before;
    const normal: Xy = [-(before[1] + after[1]), before[0] + after[0]];
    const square = dot(normal, normal);
    // a path that doubles back has no mitre: shift by the normal of the segment that arrives
    if (square < 1e-6) return [p[0] - by * before[1], p[1] + by * before[0]];
    return [p[0] + (2 * by * normal[0]) / square, p[1] + (2 * by * normal[1]) / square];
  });
}

/** The path without repeated points and without points inside a straight run. */
export function tidy(path: readonly Xy[]): Xy[] {
  const out: Xy[] = [];
  for (const p of path) {
    const last = out.at(-1);
    if (last && last[0] === p[0] && last[1] === p[1]) continue;
    const before = out.at(-2);
    if (
      last &&
      before &&
      cross(sub(last, before), sub(p, last)) === 0 &&
      dot(sub(last, before), sub(p, last)) > 0
    )
      out.pop();
    out.push(p);
  }
  return out;
}

/** Signed area of a polygon, positive counter-clockwise with y upward, nm^2. */
export function area(outline: readonly Xy[]): number {
  let sum = 0;
  for (let i = 0; i < outline.length; i += 1) sum += cross(outline[i]!, outline[(i + 1) % outline.length]!);
  return sum / 2;
}

export function inside(p: Xy, outline: readonly Xy[]): boolean {
  let is = false;
  for (let i = 0, j = outline.length - 1; i < outline.length; j = i, i += 1) {
    const a = outline[i]!;
    const b = outline[j]!;
    if (a[1] > p[1] !== b[1] > p[1] && p[0] < a[0] + ((p[1] - a[1]) / (b[1] - a[1])) * (b[0] - a[0]))
      is = !is;
  }
  return is;
}

export interface Box {
  readonly left: number;
  readonly bottom: number;
  readonly right: number;
  readonly top: number;
}

/** The box around some points, widened by `by`; null of none. */
export function boxOf(points: Iterable<Xy>, by = 0): Box | null {
  let box: { left: number; bottom: number; right: number; top: number } | null = null;
  for (const [x, y] of points) {
    box ??= { left: x, bottom: y, right: x, top: y };
    if (x < box.left) box.left = x;
    if (x > box.right) box.right = x;
    if (y < box.bottom) box.bottom = y;
    if (y > box.top) box.top = y;
  }
  return box && { left: box.left - by, bottom: box.bottom - by, right: box.right + by, top: box.top + by };
}

/** The box between two opposite corners. */
export const boxBetween = (a: Xy, b: Xy): Box => ({
  left: Math.min(a[0], b[0]),
  right: Math.max(a[0], b[0]),
  bottom: Math.min(a[1], b[1]),
  top: Math.max(a[1], b[1]),
});
