import { cutCurve } from '../curves.ts';

/** A spline that was given by the points it goes through. */
export interface FitSpline {
  readonly x: readonly number[];
  readonly y: readonly number[];
  /** Directions at its first and last point, of any length; null where the file gives none. */
  readonly start: readonly [number, number] | null;
  readonly end: readonly [number, number] | null;
  /** Whether it goes on smoothly from its last point to its first. */
  readonly closed: boolean;
}

/**
 * The cubic spline through the points as chords within `tolerance`, vertices in threes, ends included (of a
 * closed one the first point is not repeated); null where the points make none. The format's reference does
 * not say which curve goes through the points: this is the one with continuous curvature whose parameter is the
 * length of the chords, tangent to the given directions at unit speed, and without curvature at an end that has none.
 */
export function fitSplinePoints(given: FitSpline, tolerance: number): number[] | null {
  const { x, y } = distinct(given);
  const closed = given.closed && x.length > 2;
  if (x.length < 2) return null;
  if (closed) {
    x.push(x[0]!);
    y.push(y[0]!);
  }
  const spans = Float64Array.from({ length: x.length - 1 }, (_, i) =>
    Math.hypot(x[i + 1]! - x[i]!, y[i + 1]! - y[i]!),
  );
  if (spans.some((span) => !(span > 0) || !Number.isFinite(span))) return null;
  const [start, end] = [unit(given.start), unit(given.end)];
  const dx = slopes(x, spans, closed, start?.[0], end?.[0]);
  const dy = slopes(y, spans, closed, start?.[1], end?.[1]);
  const out: number[] = [x[0]!, y[0]!, 0];
  spans.forEach((span, i) => {
    const at = (t: number): [number, number] => [
      hermite(x[i]!, x[i + 1]!, dx[i]! * span, dx[i + 1]! * span, t),
      hermite(y[i]!, y[i + 1]!, dy[i]! * span, dy[i + 1]! * span, t),
    ];
    cutCurve(at, 0, 1, tolerance, out, 4);
    if (!closed || i + 1 < spans.length) out.push(x[i + 1]!, y[i + 1]!, 0);
  });
  return out;
}

function distinct({ x, y, closed }: FitSpline): { x: number[]; y: number[] } {
  const out: { x: number[]; y: number[] } = { x: [], y: [] };
  x.forEach((value, i) => {
    if (i > 0 && value === out.x.at(-1) && y[i] === out.y.at(-1)) return;
    out.x.push(value);
    out.y.push(y[i]!);
  });
  if (closed && out.x.length > 1 && out.x[0] === out.x.at(-1) && out.y[0] === out.y.at(-1)) {
    out.x.pop();
    out.y.pop();
  }
  return out;
}

function unit(way: readonly [number, number] | null): [number, number] | null {
  const length = way ? Math.hypot(...way) : 0;
  return way && length > 0 ? [way[0] / length, way[1] / length] : null;
}

function hermite(a: number, b: number, da: number, db: number, t: number): number {
  const s = 1 - t;
  return s * s * (1 + 2 * t) * a + t * t * (3 - 2 * t) * b + s * s * t * da - s * t * t * db;
}

/** First derivatives at the points, by the continuity of the second: a tridiagonal system, cyclic where closed. */
function slopes(
  value: readonly number[],
  spans: Float64Array,
  closed: boolean,
  start: number | undefined,
  end: number | undefined,
): Float64Array {
  const n = spans.length;
  const rise = (i: number): number => (value[i + 1]! - value[i]!) / spans[i]!;
  // Row i: low[i] m[i-1] + mid[i] m[i] + high[i] m[i+1] = right[i].
  const low = new Float64Array(n + 1);
  const mid = new Float64Array(n + 1).fill(1);
  const high = new Float64Array(n + 1);
  const right = new Float64Array(n + 1);
  for (let i = 1; i < n; i += 1) {
    low[i] = spans[i]!;
    mid[i] = 2 * (spans[i - 1]! + spans[i]!);
    high[i] = spans[i - 1]!;
    right[i] = 3 * (spans[i]! * rise(i - 1) + spans[i - 1]! * rise(i));
  }
  if (closed) return cyclic(spans, rise);
  if (start === undefined) [mid[0], high[0], right[0]] = [2, 1, 3 * rise(0)];
  else right[0] = start;
  if (end === undefined) [low[n], mid[n], right[n]] = [1, 2, 3 * rise(n - 1)];
  else right[n] = end;
  return tridiagonal(low, mid, high, right);
}

function tridiagonal(
  low: Float64Array,
  mid: Float64Array,
  high: Float64Array,
  right: Float64Array,
): Float64Array {
  const n = mid.length;
  const pivot = Float64Array.from(mid);
  const out = Float64Array.from(right);
  for (let i = 1; i < n; i += 1) {
    const factor = low[i]! / pivot[i - 1]!;
    pivot[i]! -= factor * high[i - 1]!;
    out[i]! -= factor * out[i - 1]!;
  }
  out[n - 1]! /= pivot[n - 1]!;
  for (let i = n - 2; i >= 0; i -= 1) out[i] = (out[i]! - high[i]! * out[i + 1]!) / pivot[i]!;
  return out;
}

/** The same round a closed curve, its corners of the matrix taken out by the formula of Sherman and Morrison. */
function cyclic(spans: Float64Array, rise: (i: number) => number): Float64Array {
  const n = spans.length;
  const before = (i: number): number => (i === 0 ? n - 1 : i - 1);
  const low = Float64Array.from(spans);
  const mid = spans.map((span, i) => 2 * (spans[before(i)]! + span));
  const high = spans.map((_, i) => spans[before(i)]!);
  const right = spans.map((span, i) => 3 * (span * rise(before(i)) + spans[before(i)]! * rise(i)));
  const [first, last] = [low[0]!, high[n - 1]!];
  const gamma = -mid[0]!;
  mid[0]! -= gamma;
  mid[n - 1]! -= (first * last) / gamma;
  const plain = tridiagonal(low, mid, high, right);
  const corner = new Float64Array(n);
  [corner[0], corner[n - 1]] = [gamma, last];
  const bent = tridiagonal(low, mid, high, corner);
  const share = first / gamma;
  const factor = (plain[0]! + share * plain[n - 1]!) / (1 + bent[0]! + share * bent[n - 1]!);
  const out = new Float64Array(n + 1);
  for (let i = 0; i < n; i += 1) out[i] = plain[i]! - factor * bent[i]!;
  out[n] = out[0]!;
  return out;
}
