import { blockFactorGeneral } from './block-factor-general.ts';
import { blockUpdate } from './block-update.ts';
import type { SymmetricMatrix } from './matrix.ts';
import { pivotFloor, singular } from './singular.ts';
import { sweep, type Workspace, workspaceFor } from './sweep.ts';
import type { Symbolic } from './symbolic.ts';

/** P A Pᵀ = L U, U with a unit diagonal. */
export interface GeneralFactor {
  readonly symbolic: Symbolic;
  /** L in dense panels, laid out by `symbolic`. */
  readonly lower: Float64Array;
  /** Uᵀ likewise; its diagonal is not stored. */
  readonly upper: Float64Array;
  readonly workspace: Workspace;
}

/** Room for a factor, empty. */
export function emptyGeneralFactor(symbolic: Symbolic): GeneralFactor {
  const size = symbolic.panelStart[symbolic.blocks];
  return {
    symbolic,
    lower: new Float64Array(size),
    upper: new Float64Array(size),
    workspace: workspaceFor(symbolic),
  };
}

/**
 * L U factorisation without exchange of rows of a matrix whose pattern is symmetric though its values need not
 * be. Safe where each column's diagonal outweighs the rest of it (flows that depend on both end pressures), and
 * for symmetric quasi-definite matrices (a saddle with a small negative definite block in its corner).
 *
 * @param matrix the lower triangle and diagonal, with the pattern that `symbolic` was made for
 * @param mirrored the values opposite those of `matrix`, a(column, row) for each, same positions
 * @param into a factor of the same `symbolic` to overwrite, so that nothing is allocated
 * @throws SingularMatrix with the unknown where a pivot vanishes
 */
export function factoriseGeneral(
  symbolic: Symbolic,
  matrix: SymmetricMatrix,
  mirrored: Float64Array,
  into: GeneralFactor = emptyGeneralFactor(symbolic),
): GeneralFactor {
  const { n, order, firstColumn, rowStart, rows, panelStart, scatter } = symbolic;
  const { columnStart, row, value } = matrix;
  const { lower, upper, workspace } = into;
  const { place, floor } = workspace;
  pivotFloor(symbolic, matrix, floor);
  lower.fill(0);
  upper.fill(0);
  // A value below the diagonal of A may lie above it in the order of elimination.
  const rank = workspace.right;
  for (let k = 0; k < n; k += 1) rank[order[k]] = k;
  for (let j = 0; j < n; j += 1) {
    const end = columnStart[j + 1];
    for (let p = columnStart[j]; p < end; p += 1) {
      const kept = rank[row[p]] >= rank[j];
      lower[scatter[p]] = kept ? value[p] : mirrored[p];
      upper[scatter[p]] = kept ? mirrored[p] : value[p];
    }
  }

  const failed = sweep(
    symbolic,
    workspace,
    (d, first, last, height) => {
      const from = panelStart[d];
      const width = firstColumn[d + 1] - firstColumn[d];
      blockUpdate(lower, lower, upper, from, width, rows, rowStart[d], first, last, height, place);
      blockUpdate(upper, upper, lower, from, width, rows, rowStart[d], first, last, height, place);
    },
    (s, width, height) =>
      blockFactorGeneral(lower, upper, panelStart[s], width, height, floor, firstColumn[s]),
  );
  if (failed >= 0) throw singular(symbolic, matrix, failed, lower);
  return into;
}

/** x = A⁻¹ b in place, by L y = P b and U P x = y. */
export function solveGeneral(factor: GeneralFactor, b: Float64Array): void {
  const { symbolic, lower, upper, workspace } = factor;
  const { n, order, blocks, firstColumn, rowStart, rows, panelStart } = symbolic;
  if (b.length < n) throw new RangeError('The right side is shorter than n.');
  const x = workspace.right;
  for (let k = 0; k < n; k += 1) x[k] = b[order[k]];
  for (let s = 0; s < blocks; s += 1) {
    const column = firstColumn[s];
    const width = firstColumn[s + 1] - column;
    const begin = rowStart[s];
    const height = rowStart[s + 1] - begin;
    for (let i = 0, at = panelStart[s]; i < height; i += 1, at += width) {
      const r = rows[begin + i];
      const stop = Math.min(i, width);
      let sum = x[r];
      for (let k = 0; k < stop; k += 1) sum -= lower[at + k] * x[column + k];
      x[r] = i < width ? sum / lower[at + i] : sum;
    }
  }
  for (let s = blocks - 1; s >= 0; s -= 1) {
    const column = firstColumn[s];
    const width = firstColumn[s + 1] - column;
    const begin = rowStart[s];
    const height = rowStart[s + 1] - begin;
    for (let i = height - 1, at = panelStart[s] + i * width; i > 0; i -= 1, at -= width) {
      const v = x[rows[begin + i]];
      const stop = Math.min(i, width);
      for (let k = 0; k < stop; k += 1) x[column + k] -= upper[at + k] * v;
    }
  }
  for (let k = 0; k < n; k += 1) b[order[k]] = x[k];
}
