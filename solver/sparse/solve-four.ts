import type { Factor } from './factorise.ts';

/** Solves `here` (3 or 4) columns that begin at b0 side by side: each entry of L is read once for all. */
export function solveFour(factor: Factor, b: Float64Array, b0: number, here: number): void {
  const { n, order } = factor.symbolic;
  const x = factor.workspace.right;
  for (let k = 0, at = 0; k < n; k += 1, at += 4) {
    const i = b0 + order[k];
    x[at] = b[i];
    x[at + 1] = b[i + n];
    x[at + 2] = b[i + 2 * n];
    x[at + 3] = here > 3 ? b[i + 3 * n] : 0;
  }
  forwardFour(factor, x);
  backwardFour(factor, x);
  for (let k = 0, at = 0; k < n; k += 1, at += 4) {
    const i = b0 + order[k];
    b[i] = x[at];
    b[i + n] = x[at + 1];
    b[i + 2 * n] = x[at + 2];
    if (here > 3) b[i + 3 * n] = x[at + 3];
  }
}

/** L y = x on four right sides side by side. */
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

/** Lᵀ y = x on four right sides side by side. */
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
