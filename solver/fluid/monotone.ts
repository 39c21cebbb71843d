/**
 * Piecewise cubic interpolation that keeps the data's monotony (no overshoot): slopes are weighted
 * harmonic means of the neighbouring secants (Fritsch and Butland 1984, SIAM J. Sci. Stat. Comput.
 * 5, 300), with the three-point end slopes of Moler 2004, ch. 3.
 */

/** Slopes at the knots; `x` strictly increasing, at least two knots, lengths equal. */
export function monotoneSlopes(x: ArrayLike<number>, y: ArrayLike<number>): Float64Array {
  const n = x.length;
  const slope = new Float64Array(n);
  const secant = (i: number): number => (y[i + 1] - y[i]) / (x[i + 1] - x[i]);
  if (n === 2) return slope.fill(secant(0));
  for (let i = 1; i < n - 1; i += 1) {
    const before = secant(i - 1);
    const after = secant(i);
    if (before * after <= 0) continue;
    const left = x[i] - x[i - 1];
    const right = x[i + 1] - x[i];
    const w1 = 2 * right + left;
    const w2 = right + 2 * left;
    slope[i] = (w1 + w2) / (w1 / before + w2 / after);
  }
  slope[0] = endSlope(x[1] - x[0], x[2] - x[1], secant(0), secant(1));
  slope[n - 1] = endSlope(x[n - 1] - x[n - 2], x[n - 2] - x[n - 3], secant(n - 2), secant(n - 3));
  return slope;
}

function endSlope(near: number, far: number, secant: number, next: number): number {
  const slope = ((2 * near + far) * secant - near * next) / (near + far);
  if (slope * secant <= 0) return 0;
  if (secant * next <= 0 && Math.abs(slope) > 3 * Math.abs(secant)) return 3 * secant;
  return slope;
}

/** The knot at or below `at`, so that `at` lies in the interval it opens; clamped to the table. */
function intervalOf(x: ArrayLike<number>, at: number): number {
  let low = 0;
  let high = x.length - 1;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (x[middle] <= at) low = middle;
    else high = middle;
  }
  return low;
}

/** Value at `at` of the cubic through the knots with the given slopes. */
export function hermite(
  x: ArrayLike<number>,
  y: ArrayLike<number>,
  slope: ArrayLike<number>,
  at: number,
): number {
  const i = intervalOf(x, at);
  const h = x[i + 1] - x[i];
  const s = (at - x[i]) / h;
  const r = 1 - s;
  return (
    r * r * ((1 + 2 * s) * y[i] + s * h * slope[i]) + s * s * ((1 + 2 * r) * y[i + 1] - r * h * slope[i + 1])
  );
}
