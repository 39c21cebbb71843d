import type { Factor } from './factorise.ts';

/**
 * X = A⁻¹ B in place, by L Y = P B and Lᵀ P X = Y, four columns at a time.
 * @param b columns one after the other, n × columns
 */
export function solve(factor: Factor, b: Float64Array, columns = 1): void {
  const { n, order } = factor.symbolic;
  if (b.length < n * columns) throw new RangeError('The right side is shorter than n × columns.');
  const x = factor.workspace.right;
  let c = 0;
  for (; c + 1 < columns; c += 4) {
    const b0 = c * n;
    const here = Math.min(4, columns - c);
    for (let k = 0, at = 0; k < n; k += 1, at += 4) {
      const i = b0 + order[k];
      x[at] = b[i];
      x[at + 1] = b[i + n];
      x[at + 2] = here > 2 ? b[i + 2 * n] : 0;
      x[at + 3] = here > 3 ? b[i + 3 * n] : 0;
    }
    forwardFour(factor, x);
    backwardFour(factor, x);
    for (let k = 0, at = 0; k < n; k += 1, at += 4) {
      const i = b0 + order[k];
      b[i] = x[at];
      b[i + n] = x[at + 1];
      if (here > 2) b[i + 2 * n] = x[at + 2];
      if (here > 3) b[i + 3 * n] = x[at + 3];
    }
  }
  if (c >= columns) return;
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

/** As `forward`, on four right sides side by side. */
function forwardFour(factor: Factor, x: Float64Array): void {
  const { symbolic, panels } = factor;
  const { blocks, firstColumn, rowStart, rows, panelStart } = symbolic;
  for (let s = 0; s < blocks; s += 1) {
    const column = firstColumn[s];
    const width = firstColumn[s + 1] - column;
    const begin = rowStart[s];
    const height = rowStart[s + 1] - begin;
    let at = panelStart[s];
    for (let i = 0; i < height; i += 1, at += width) {
      const inside = i < width;
      const r = inside ? 4 * (column + i) : 4 * rows[begin + i];
      const stop = inside ? i : width;
      let s0 = x[r];
      let s1 = x[r + 1];
      let s2 = x[r + 2];
      let s3 = x[r + 3];
      let y = 4 * column;
      for (let k = 0; k < stop; k += 1, y += 4) {
        const l = panels[at + k];
        s0 -= l * x[y];
        s1 -= l * x[y + 1];
        s2 -= l * x[y + 2];
        s3 -= l * x[y + 3];
      }
      if (inside) {
        const inverse = 1 / panels[at + i];
        s0 *= inverse;
        s1 *= inverse;
        s2 *= inverse;
        s3 *= inverse;
      }
      x[r] = s0;
      x[r + 1] = s1;
      x[r + 2] = s2;
      x[r + 3] = s3;
    }
  }
}

/** As `backward`, on four right sides side by side. */
function backwardFour(factor: Factor, x: Float64Array): void {
  const { symbolic, panels } = factor;
  const { blocks, firstColumn, rowStart, rows, panelStart } = symbolic;
  for (let s = blocks - 1; s >= 0; s -= 1) {
    const column = firstColumn[s];
    const width = firstColumn[s + 1] - column;
    const begin = rowStart[s];
    const height = rowStart[s + 1] - begin;
    const base = panelStart[s];
    // Column by column, so that the four sums stay in registers.
    for (let k = width - 1; k >= 0; k -= 1) {
      const r = 4 * (column + k);
      let s0 = x[r];
      let s1 = x[r + 1];
      let s2 = x[r + 2];
      let s3 = x[r + 3];
      let at = base + (k + 1) * width + k;
      for (let i = k + 1; i < height; i += 1, at += width) {
        const l = panels[at];
        const y = 4 * rows[begin + i];
        s0 -= l * x[y];
        s1 -= l * x[y + 1];
        s2 -= l * x[y + 2];
        s3 -= l * x[y + 3];
      }
      const inverse = 1 / panels[base + k * width + k];
      x[r] = s0 * inverse;
      x[r + 1] = s1 * inverse;
      x[r + 2] = s2 * inverse;
      x[r + 3] = s3 * inverse;
    }
  }
}
