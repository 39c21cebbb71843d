/** Curves cut to chords within a tolerance; points are appended to `out` as x, y, 0. */

/** Most pieces of one curve. */
const MOST = 4096;

/** Inner points of an arc given by its ends and bulge; the ends themselves are left to the caller. */
export function arcPoints(
  x0: number,
  y0: number,
  x1: number,
  y1: number,
  bulge: number,
  tolerance: number,
  out: number[],
): void {
  const dx = x1 - x0;
  const dy = y1 - y0;
  const chord = Math.hypot(dx, dy);
  const sweep = 4 * Math.atan(bulge);
  const radius = Math.abs(chord / (2 * Math.sin(sweep / 2)));
  if (!(radius > 0) || !Number.isFinite(radius)) return;
  const step = 2 * Math.acos(Math.max(0, 1 - tolerance / radius));
  const count = Math.min(MOST, Math.max(2, Math.ceil(Math.abs(sweep) / Math.min(step, Math.PI / 8))));
  const half = sweep / 2;
  for (let i = 1; i < count; i += 1) {
    const t = i / count;
    const scale = Math.sin(t * half) / Math.sin(half);
    const turn = (t - 1) * half;
    const c = Math.cos(turn) * scale;
    const s = Math.sin(turn) * scale;
    out.push(x0 + c * dx - s * dy, y0 + s * dx + c * dy, 0);
  }
}

/** Cuts the curve `at` between two values of its parameter, ends left out, until chords lie within `tolerance`. */
export function cutCurve(
  at: (t: number) => readonly [number, number],
  from: number,
  to: number,
  tolerance: number,
  out: number[],
  least = 2,
): void {
  const cut = (
    t0: number,
    p0: readonly [number, number],
    t1: number,
    p1: readonly [number, number],
    depth: number,
  ) => {
    const tm = (t0 + t1) / 2;
    const pm = at(tm);
    const q = at(t0 + (t1 - t0) * 0.27);
    if (depth > 0 || off(pm, p0, p1) > tolerance || off(q, p0, p1) > tolerance) {
      if (depth > -12) {
        cut(t0, p0, tm, pm, depth - 1);
        out.push(pm[0], pm[1], 0);
        cut(tm, pm, t1, p1, depth - 1);
      }
    }
  };
  const start = Math.ceil(Math.log2(least));
  cut(from, at(from), to, at(to), start);
}

function off(
  p: readonly [number, number],
  a: readonly [number, number],
  b: readonly [number, number],
): number {
  const dx = b[0] - a[0];
  const dy = b[1] - a[1];
  const length = Math.hypot(dx, dy);
  if (length === 0) return Math.hypot(p[0] - a[0], p[1] - a[1]);
  return Math.abs((p[0] - a[0]) * dy - (p[1] - a[1]) * dx) / length;
}

/** Piece of an ellipse: centre, half axis as a vector, ratio of the other, from and to in radians; both ends kept. */
export function ellipsePoints(
  cx: number,
  cy: number,
  ax: number,
  ay: number,
  ratio: number,
  from: number,
  to: number,
  tolerance: number,
): number[] {
  const at = (t: number): [number, number] => [
    cx + ax * Math.cos(t) - ay * ratio * Math.sin(t),
    cy + ay * Math.cos(t) + ax * ratio * Math.sin(t),
  ];
  const [x0, y0] = at(from);
  const [x1, y1] = at(to);
  const out = [x0, y0, 0];
  cutCurve(at, from, to, tolerance, out, 8);
  out.push(x1, y1, 0);
  return out;
}

export interface Nurbs {
  readonly degree: number;
  readonly knots: readonly number[];
  readonly x: readonly number[];
  readonly y: readonly number[];
  readonly weights: readonly number[];
}

/**
 * A rational B-spline as chords within `tolerance`, ends included, by de Boor's recursion; null where its
 * numbers make none.
 */
export function nurbsPoints({ degree, knots, x, y, weights }: Nurbs, tolerance: number): number[] | null {
  const count = x.length;
  if (!(degree >= 1 && degree <= 15 && count > degree && knots.length === count + degree + 1)) return null;
  for (let i = 1; i < knots.length; i += 1) if (!(knots[i] >= knots[i - 1])) return null;
  if (weights.length !== count || weights.some((w) => !(w > 0))) return null;
  const low = knots[degree];
  const high = knots[count];
  if (!(high > low)) return null;
  const dx = new Float64Array(degree + 1);
  const dy = new Float64Array(degree + 1);
  const dw = new Float64Array(degree + 1);
  const at = (t: number): [number, number] => {
    let k = degree;
    let top = count - 1;
    while (k < top) {
      const mid = (k + top + 1) >> 1;
      if (knots[mid] <= t) k = mid;
      else top = mid - 1;
    }
    for (let j = 0; j <= degree; j += 1) {
      const i = j + k - degree;
      dw[j] = weights[i];
      dx[j] = x[i] * weights[i];
      dy[j] = y[i] * weights[i];
    }
    for (let r = 1; r <= degree; r += 1) {
      for (let j = degree; j >= r; j -= 1) {
        const i = j + k - degree;
        const span = knots[i + degree - r + 1] - knots[i];
        const share = span > 0 ? (t - knots[i]) / span : 0;
        dx[j] = (1 - share) * dx[j - 1] + share * dx[j];
        dy[j] = (1 - share) * dy[j - 1] + share * dy[j];
        dw[j] = (1 - share) * dw[j - 1] + share * dw[j];
      }
    }
    return [dx[degree] / dw[degree], dy[degree] / dw[degree]];
  };
  const out: number[] = [...at(low), 0];
  for (let i = degree; i < count; i += 1) {
    if (!(knots[i + 1] > knots[i])) continue;
    cutCurve(at, knots[i], knots[i + 1], tolerance, out, 2);
    out.push(...at(knots[i + 1]), 0);
  }
  return out;
}
