import type { Factor } from './factorise.ts';
import { solveFour } from './solve-four.ts';
import { solveTwo } from './solve-two.ts';

/**
 * X = A⁻¹ B in place, by L Y = P B and Lᵀ P X = Y, four or two columns at a time.
 * @param b columns one after the other, n × columns
 */
export function solve(factor: Factor, b: Float64Array, columns = 1): void {
  const { n, order } = factor.symbolic;
  if (b.length < n * columns) throw new RangeError('The right side is shorter than n × columns.');
  let c = 0;
  for (; c + 2 < columns; c += 4) solveFour(factor, b, c * n, Math.min(4, columns - c));
  if (c + 1 < columns) {
    solveTwo(factor, b, c * n);
    c += 2;
  }
  if (c >= columns) return;
  const x = factor.workspace.right;
  const b0 = c * n;
  for (let k = 0; k < n; k += 1) x[k] = b[b0 + order[k]];
  forward(factor, x);
  backward(factor, x);
  for (let k = 0; k < n; k += 1) b[b0 + order[k]] = x[k];
}

/** L y = x in place, in the order of elimination. */
function forward(factor: Factor, x: Float64Array): void {
  const { symbolic, panels } = factor;
  const { blocks, firstColumn, rowStart, rows, panelStart } = symbolic;
  for (let s = 0; s < blocks; s += 1) {
    const column = firstColumn[s];
    const width = firstColumn[s + 1] - column;
    const begin = rowStart[s];
    const height = rowStart[s + 1] - begin;
    let at = panelStart[s];
    for (let i = 0; i < width; i += 1, at += width) {
      let sum = x[column + i];
      for (let k = 0; k < i; k += 1) sum -= panels[at + k] * x[column + k];
      x[column + i] = sum / panels[at + i];
    }
    for (let i = width; i < height; i += 1, at += width) {
      let sum = 0;
      for (let k = 0; k < width; k += 1) sum += panels[at + k] * x[column + k];
      const r = rows[begin + i];
      x[r] -= sum;
    }
  }
}

/** Lᵀ y = x in place. */
function backward(factor: Factor, x: Float64Array): void {
  const { symbolic, panels } = factor;
  const { blocks, firstColumn, rowStart, rows, panelStart } = symbolic;
  for (let s = blocks - 1; s >= 0; s -= 1) {
    const column = firstColumn[s];
    const width = firstColumn[s + 1] - column;
    const begin = rowStart[s];
    const height = rowStart[s + 1] - begin;
    const base = panelStart[s];
    let at = base + width * width;
    for (let i = width; i < height; i += 1, at += width) {
      const v = x[rows[begin + i]];
      for (let k = 0; k < width; k += 1) x[column + k] = x[column + k] - panels[at + k] * v;
    }
    for (let i = width - 1; i >= 0; i -= 1) {
      const row = base + i * width;
      const v = x[column + i] / panels[row + i];
      x[column + i] = v;
      for (let k = 0; k < i; k += 1) x[column + k] = x[column + k] - panels[row + k] * v;
    }
  }
}
