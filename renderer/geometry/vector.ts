/** A place or a direction in the plan, nanometres (fractions allowed until it enters the chip). */
export type Xy = readonly [number, number];

export const add = (a: Xy, b: Xy): Xy => [a[0] + b[0], a[1] + b[1]];
export const sub = (a: Xy, b: Xy): Xy => [a[0] - b[0], a[1] - b[1]];
export const times = (a: Xy, factor: number): Xy => [a[0] * factor, a[1] * factor];
export const dot = (a: Xy, b: Xy): number => a[0] * b[0] + a[1] * b[1];
export const cross = (a: Xy, b: Xy): number => a[0] * b[1] - a[1] * b[0];
export const distance = (a: Xy, b: Xy): number => Math.hypot(a[0] - b[0], a[1] - b[1]);
export const mid = (a: Xy, b: Xy): Xy => [(a[0] + b[0]) / 2, (a[1] + b[1]) / 2];
export const same = (a: Xy, b: Xy): boolean => a[0] === b[0] && a[1] === b[1];
/** To whole nanometres, as the chip keeps them. */
export const whole = (a: Xy): readonly [number, number] => [Math.round(a[0]) + 0, Math.round(a[1]) + 0];

/** Unit vector of a to b; [1, 0] where they coincide. */
export function direction(a: Xy, b: Xy): Xy {
  const length = distance(a, b);
  return length === 0 ? [1, 0] : [(b[0] - a[0]) / length, (b[1] - a[1]) / length];
}

/** Turned by `degrees`, counter-clockwise seen with y upward. */
export function turned(a: Xy, about: Xy, degrees: number): Xy {
  const quarter = ((degrees % 360) + 360) % 360;
  const [x, y] = sub(a, about);
  // quarter turns are exact, so that turning four times gives the same chip
  if (quarter === 0) return a;
  if (quarter === 90) return [about[0] - y, about[1] + x];
  if (quarter === 180) return [about[0] - x, about[1] - y];
  if (quarter === 270) return [about[0] + y, about[1] - x];
  const angle = (degrees * Math.PI) / 180;
  const c = Math.cos(angle);
  const s = Math.sin(angle);
  return [about[0] + c * x - s * y, about[1] + s * x + c * y];
}

/** Nearest point of the segment a-b to p, with its share t of the way from a. */
export function nearestOnSegment(p: Xy, a: Xy, b: Xy): { readonly at: Xy; readonly t: number } {
  const d = sub(b, a);
  const square = dot(d, d);
  const t = square === 0 ? 0 : Math.min(1, Math.max(0, dot(sub(p, a), d) / square));
  return { at: [a[0] + t * d[0], a[1] + t * d[1]], t };
}

/** Where the line through a along u meets the segment b-c, or null. */
export function rayMeets(a: Xy, u: Xy, b: Xy, c: Xy): Xy | null {
  const d = sub(c, b);
  const bottom = cross(u, d);
  if (Math.abs(bottom) < 1e-12 * Math.hypot(d[0], d[1])) return null;
  const s = cross(sub(b, a), u) / bottom;
  return s < 0 || s > 1 ? null : [b[0] + s * d[0], b[1] + s * d[1]];
}
