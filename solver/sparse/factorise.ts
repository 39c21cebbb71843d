import { blockFactor } from './block-factor.ts';
import { blockUpdate } from './block-update.ts';
import type { SymmetricMatrix } from './matrix.ts';
import { pivotFloor, singular } from './singular.ts';
import { sweep, type Workspace, workspaceFor } from './sweep.ts';
import type { Symbolic } from './symbolic.ts';

/** P A Pᵀ = L Lᵀ. */
export interface Factor {
  readonly symbolic: Symbolic;
  /** L in dense panels, laid out by `symbolic`. */
  readonly panels: Float64Array;
  /** Scratch of factorisations and solves with this factor: one at a time. */
  readonly workspace: Workspace;
}

/** Room for a factor, empty. */
export function emptyFactor(symbolic: Symbolic): Factor {
  return {
    symbolic,
    panels: new Float64Array(symbolic.panelStart[symbolic.blocks]),
    workspace: workspaceFor(symbolic),
  };
}

/**
 * Cholesky factorisation P A Pᵀ = L Lᵀ of a symmetric positive definite matrix, block by block.
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
  const { firstColumn, rowStart, rows, panelStart, scatter } = symbolic;
  const { panels, workspace } = into;
  const { place, floor } = workspace;
  pivotFloor(symbolic, matrix, floor);
  panels.fill(0);
  for (let p = 0; p < scatter.length; p += 1) panels[scatter[p]] = matrix.value[p];

  const failed = sweep(
    symbolic,
    workspace,
    (d, first, last, height) => {
      const width = firstColumn[d + 1] - firstColumn[d];
      blockUpdate(
        panels,
        panels,
        panels,
        panelStart[d],
        width,
        rows,
        rowStart[d],
        first,
        last,
        height,
        place,
      );
    },
    (s, width, height) => blockFactor(panels, panelStart[s], width, height, floor, firstColumn[s]),
  );
  if (failed >= 0) throw singular(symbolic, matrix, failed, panels);
  return into;
}
