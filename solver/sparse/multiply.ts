import type { SymmetricMatrix } from './matrix.ts';

/** y = A x from the lower triangle; x and y have n values and are not the same array. */
export function multiply(matrix: SymmetricMatrix, x: Float64Array, y: Float64Array): void {
  const { n, columnStart, row, value } = matrix;
  y.fill(0, 0, n);
  for (let j = 0; j < n; j += 1) {
    const start = columnStart[j];
    const end = columnStart[j + 1];
    const xj = x[j];
    let sum = y[j] + value[start] * xj;
    for (let p = start + 1; p < end; p += 1) {
      const i = row[p];
      const a = value[p];
      sum += a * x[i];
      y[i] += a * xj;
    }
    y[j] = sum;
  }
}
