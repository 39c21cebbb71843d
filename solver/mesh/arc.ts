/**
 * Geometry of one boundary edge from (x0, y0) to (x1, y1) with bulge b = tan(sweep/4): chord c,
 * sweep θ = 4 atan b, positive counter-clockwise. The point at the share t of the sweep is
 * P₀ + c [sin(tθ/2)/sin(θ/2)] · (chord direction turned by (t − 1)θ/2), which is stable as θ → 0.
 */
export interface Curve {
  readonly x0: number;
  readonly y0: number;
  readonly x1: number;
  readonly y1: number;
  /** Sweep in radians; 0 is straight. */
  readonly sweep: number;
  readonly length: number;
}

export function curveOf(x0: number, y0: number, x1: number, y1: number, bulge: number): Curve {
  const chord = Math.hypot(x1 - x0, y1 - y0);
  const sweep = 4 * Math.atan(bulge);
  const half = Math.abs(sweep) / 2;
  const length = half < 1e-9 ? chord : (chord * half) / Math.sin(half);
  return { x0, y0, x1, y1, sweep, length };
}

/** Writes the point at the share t of the length into out[at], out[at + 1]. */
export function pointAt(curve: Curve, t: number, out: Float64Array | number[], at = 0): void {
  const dx = curve.x1 - curve.x0;
  const dy = curve.y1 - curve.y0;
  if (curve.sweep === 0) {
    out[at] = curve.x0 + t * dx;
    out[at + 1] = curve.y0 + t * dy;
    return;
  }
  const half = curve.sweep / 2;
  const scale = Math.sin(t * half) / Math.sin(half);
  const turn = (t - 1) * half;
  const c = Math.cos(turn) * scale;
  const s = Math.sin(turn) * scale;
  out[at] = curve.x0 + c * dx - s * dy;
  out[at + 1] = curve.y0 + s * dx + c * dy;
}

/** Direction of travel (radians) at the share t of the length. */
export function directionAt(curve: Curve, t: number): number {
  return Math.atan2(curve.y1 - curve.y0, curve.x1 - curve.x0) + (t - 0.5) * curve.sweep;
}

/** Share t in [0, 1] of the point of the curve nearest to (px, py). */
export function nearestShare(curve: Curve, px: number, py: number): number {
  const dx = curve.x1 - curve.x0;
  const dy = curve.y1 - curve.y0;
  const chord2 = dx * dx + dy * dy;
  if (curve.sweep === 0) {
    const t = ((px - curve.x0) * dx + (py - curve.y0) * dy) / chord2;
    return Math.min(1, Math.max(0, t));
  }
  // Centre: to the left of the chord's middle by (chord/2) cot(sweep/2).
  const cot = 1 / Math.tan(curve.sweep / 2);
  const cx = curve.x0 + dx / 2 - (dy / 2) * cot;
  const cy = curve.y0 + dy / 2 + (dx / 2) * cot;
  const start = Math.atan2(curve.y0 - cy, curve.x0 - cx);
  let swept = Math.atan2(py - cy, px - cx) - start;
  if (curve.sweep < 0) swept = -swept;
  const sweep = Math.abs(curve.sweep);
  // The nearest end, where the direction is outside the sweep.
  while (swept < sweep / 2 - Math.PI) swept += 2 * Math.PI;
  while (swept > sweep / 2 + Math.PI) swept -= 2 * Math.PI;
  const t = swept / sweep;
  return Math.min(1, Math.max(0, t));
}

/** Twice the area between the chord and the arc, positive where the arc adds area on its left. */
export function twiceSegmentArea(curve: Curve): number {
  if (curve.sweep === 0) return 0;
  const radius = curve.length / curve.sweep;
  return radius * radius * (curve.sweep - Math.sin(curve.sweep));
}
