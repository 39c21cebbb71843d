import { blockFactor } from './block-factor.ts';
import { blockUpdate } from './block-update.ts';
import type { SymmetricMatrix } from './matrix.ts';
import { SingularMatrix } from './singular.ts';
import type { Symbolic } from './symbolic.ts';

/** P A Pᵀ = L Lᵀ. */
export interface Factor {
  readonly symbolic: Symbolic;
  /** L in dense panels, laid out by `symbolic`. */
  readonly panels: Float64Array;
  /** Scratch of factorisations and solves with this factor: one at a time. */
  readonly workspace: Workspace;
}

export interface Workspace {
  /** n each */
  readonly place: Int32Array;
  readonly floor: Float64Array;
  /** blocks each: queue of the blocks that wait to update a later one, and how far each has come. */
  readonly waiting: Int32Array;
  readonly next: Int32Array;
  readonly reached: Int32Array;
  /** 4 n */
  readonly right: Float64Array;
}

/** Room for a factor, empty. */
export function emptyFactor(symbolic: Symbolic): Factor {
  const { n, blocks, panelStart } = symbolic;
  return {
    symbolic,
    panels: new Float64Array(panelStart[blocks]),
    workspace: {
      place: new Int32Array(n),
      floor: new Float64Array(n),
      waiting: new Int32Array(blocks),
      next: new Int32Array(blocks),
      reached: new Int32Array(blocks),
      right: new Float64Array(4 * n),
    },
  };
}

/**
 * A pivot counts as zero below 64 √n units of round-off of its diagonal: what is left of an exact zero after n
 * steps was measured at up to 40 √n (a ring tied to nothing, 50 to 50 000 unknowns).
 */
const ROUND_OFF = 2 ** -52;

/**
 * Cholesky factorisation P A Pᵀ = L Lᵀ of a symmetric positive definite matrix, block by block
 * (left-looking: each block first takes the updates of the blocks before it, then is factored densely).
 *
 * @param matrix with the pattern that `symbolic` was made for
 * @param into a factor of the same `symbolic` to overwrite, so that nothing is allocated
 * @throws SingularMatrix with the unknown where a pivot is not clearly positive
 */
export function factorise(
  symbolic: Symbolic,
  matrix: SymmetricMatrix,
  into: Factor = emptyFactor(symbolic),
): Factor {
  const { n, order, blocks, firstColumn, rowStart, rows, panelStart, blockOf, scatter } = symbolic;
  const { columnStart, value } = matrix;
  if (matrix.n !== n || columnStart[n] !== scatter.length)
    throw new RangeError('The pattern is not the one analysed.');
  const { panels, workspace } = into;
  const { place, floor, waiting, next, reached } = workspace;

  panels.fill(0);
  for (let p = 0; p < scatter.length; p += 1) panels[scatter[p]] = value[p];
  const slack = 64 * Math.sqrt(n) * ROUND_OFF;
  for (let k = 0; k < n; k += 1) floor[k] = slack * Math.abs(value[columnStart[order[k]]]);

  waiting.fill(-1);
  for (let s = 0; s < blocks; s += 1) {
    const column = firstColumn[s];
    const end = firstColumn[s + 1];
    const width = end - column;
    const begin = rowStart[s];
    const height = rowStart[s + 1] - begin;
    const base = panelStart[s];
    for (let k = 0, at = base - column; k < height; k += 1, at += width) place[rows[begin + k]] = at;

    for (let d = waiting[s]; d !== -1; ) {
      const after = next[d];
      const dRows = rowStart[d];
      const dHeight = rowStart[d + 1] - dRows;
      const first = reached[d];
      let last = first + 1;
      while (last < dHeight && rows[dRows + last] < end) last += 1;
      const dWidth = firstColumn[d + 1] - firstColumn[d];
      blockUpdate(panels, panelStart[d], dWidth, rows, dRows, first, last, dHeight, place);
      if (last < dHeight) {
        reached[d] = last;
        const target = blockOf[rows[dRows + last]];
        next[d] = waiting[target];
        waiting[target] = d;
      }
      d = after;
    }

    const bad = blockFactor(panels, base, width, height, floor, column);
    if (bad >= 0) throw singular(symbolic, matrix, column + bad, panels[base + bad * width + bad]);
    if (height > width) {
      reached[s] = width;
      const target = blockOf[rows[begin + width]];
      next[s] = waiting[target];
      waiting[target] = s;
    }
  }
  return into;
}

function singular(symbolic: Symbolic, matrix: SymmetricMatrix, k: number, pivot: number): SingularMatrix {
  const column = symbolic.order[k];
  const diagonal = Math.abs(matrix.value[matrix.columnStart[column]]);
  return new SingularMatrix(column, diagonal > 0 ? pivot / diagonal : pivot);
}
