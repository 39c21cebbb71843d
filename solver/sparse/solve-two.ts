import type { Factor } from './factorise.ts';

/** Solves two columns that begin at b0 side by side. */
export function solveTwo(factor: Factor, b: Float64Array, b0: number): void {
  const { n, order } = factor.symbolic;
  const x = factor.workspace.right;
  for (let k = 0, at = 0; k < n; k += 1, at += 2) {
    const i = b0 + order[k];
    x[at] = b[i];
    x[at + 1] = b[i + n];
  }
  forwardTwo(factor, x);
  backwardTwo(factor, x);
  for (let k = 0, at = 0; k < n; k += 1, at += 2) {
    const i = b0 + order[k];
    b[i] = x[at];
    b[i + n] = x[at + 1];
  }
}

/** L y = x on two right sides side by side. */
function forwardTwo(factor: Factor, x: Float64Array): void {
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
      const r = inside ? 2 * (column + i) : 2 * rows[begin + i];
      const stop = inside ? i : width;
      let s0 = x[r];
      let s1 = x[r + 1];
      let y = 2 * column;
      for (let k = 0; k < stop; k += 1, y += 2) {
        const l = panels[at + k];
        s0 -= l * x[y];
        s1 -= l * x[y + 1];
      }
      if (inside) {
        const inverse = 1 / panels[at + i];
        s0 *= inverse;
        s1 *= inverse;
      }
      x[r] = s0;
      x[r + 1] = s1;
    }
  }
}

/** Lᵀ y = x on two right sides side by side. */
function backwardTwo(factor: Factor, x: Float64Array): void {
  const { symbolic, panels } = factor;
  const { blocks, firstColumn, rowStart, rows, panelStart } = symbolic;
  for (let s = blocks - 1; s >= 0; s -= 1) {
    const column = firstColumn[s];
    const width = firstColumn[s + 1] - column;
    const begin = rowStart[s];
    const height = rowStart[s + 1] - begin;
    const base = panelStart[s];
    // Column by column, so that the two sums stay in registers.
    for (let k = width - 1; k >= 0; k -= 1) {
      const r = 2 * (column + k);
      let s0 = x[r];
      let s1 = x[r + 1];
      let at = base + (k + 1) * width + k;
      for (let i = k + 1; i < height; i += 1, at += width) {
        const l = panels[at];
        const y = 2 * rows[begin + i];
        s0 -= l * x[y];
        s1 -= l * x[y + 1];
      }
      const inverse = 1 / panels[base + k * width + k];
      x[r] = s0 * inverse;
      x[r + 1] = s1 * inverse;
    }
  }
}
