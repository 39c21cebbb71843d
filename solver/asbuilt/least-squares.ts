/**
 * x of least Σ (rows x − right)² within bounds that hold nought: the active-set method of Stark and Parker (1995).
 * Variables at a bound are let go by the sign of the gradient there, those that would leave stop at their bound.
 *
 * @param rows must have full column rank
 * @param bounds least and most of each variable; least ≤ 0 ≤ most
 */
export function boundedLeastSquares(
  rows: readonly (readonly number[])[],
  right: readonly number[],
  bounds: readonly (readonly [number, number])[],
): number[] {
  const n = bounds.length;
  const x = new Array<number>(n).fill(0);
  // Normal equations: every column was scaled, and the rows that hold a drive in place keep them sound.
  const a = Array.from({ length: n }, (_, i) =>
    Array.from({ length: n }, (_, j) => rows.reduce((sum, row) => sum + row[i] * row[j], 0)),
  );
  const b = Array.from({ length: n }, (_, i) => rows.reduce((sum, row, r) => sum + row[i] * right[r], 0));
  const size = Math.max(...b.map(Math.abs), 1e-300);
  const free = new Set(bounds.flatMap(([low, high], i) => (low < high ? [i] : [])));
  for (let round = 0; round < 10 * n + 10; round += 1) {
    const inner = [...free];
    const wish = solveDense(
      inner.map((i) => inner.map((j) => a[i][j])),
      inner.map((i) => b[i] - x.reduce((sum, v, j) => sum + (free.has(j) ? 0 : a[i][j] * v), 0)),
    );
    let share = 1;
    let stops = -1;
    inner.forEach((i, k) => {
      const step = wish[k] - x[i];
      const end = step > 0 ? bounds[i][1] : bounds[i][0];
      if (step !== 0 && (end - x[i]) / step < share) {
        share = Math.max(0, (end - x[i]) / step);
        stops = i;
      }
    });
    inner.forEach((i, k) => {
      x[i] += share * (wish[k] - x[i]);
    });
    if (stops >= 0) {
      x[stops] = wish[inner.indexOf(stops)] > x[stops] ? bounds[stops][1] : bounds[stops][0];
      free.delete(stops);
      continue;
    }
    // At the best of the free ones: the bound that hinders most is let go.
    let [most, next] = [1e-9 * size, -1];
    for (let i = 0; i < n; i += 1) {
      if (free.has(i) || !(bounds[i][0] < bounds[i][1])) continue;
      const pull = b[i] - x.reduce((sum, v, j) => sum + a[i][j] * v, 0);
      const inward = x[i] === bounds[i][0] ? pull : -pull;
      if (inward > most) [most, next] = [inward, i];
    }
    if (next < 0) return x;
    free.add(next);
  }
  return x;
}

/** Cholesky of a symmetric positive definite matrix. */
function solveDense(a: number[][], b: number[]): number[] {
  const n = b.length;
  for (let k = 0; k < n; k += 1) {
    for (let j = 0; j < k; j += 1) a[k][k] -= a[k][j] ** 2;
    const pivot = Math.sqrt(Math.max(a[k][k], 1e-300));
    a[k][k] = pivot;
    for (let i = k + 1; i < n; i += 1) {
      for (let j = 0; j < k; j += 1) a[i][k] -= a[i][j] * a[k][j];
      a[i][k] /= pivot;
    }
  }
  const x = [...b];
  for (let i = 0; i < n; i += 1) {
    for (let j = 0; j < i; j += 1) x[i] -= a[i][j] * x[j];
    x[i] /= a[i][i];
  }
  for (let i = n - 1; i >= 0; i -= 1) {
    for (let j = i + 1; j < n; j += 1) x[i] -= a[j][i] * x[j];
    x[i] /= a[i][i];
  }
  return x;
}
