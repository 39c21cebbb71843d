import type { SymmetricMatrix } from './matrix.ts';
import type { Symbolic } from './symbolic.ts';

/** Thrown where elimination meets a pivot that is not clearly positive (or, without symmetry, not clearly non-zero). */
export class SingularMatrix extends Error {
  /** The unknown, in the caller's numbering, that the others (eliminated before it) do not leave determined. */
  readonly column: number;
  /** The pivot, over the matrix's own diagonal there where that is not zero. */
  readonly pivot: number;

  constructor(column: number, pivot: number) {
    super(`Elimination stops at unknown ${column}: the pivot is ${pivot.toExponential(2)} of its diagonal.`);
    this.name = 'SingularMatrix';
    this.column = column;
    this.pivot = pivot;
  }
}

/**
 * The least pivot to accept in each column, by order of elimination: 64 √n units of round-off of the diagonal.
 * What is left of an exact zero after n steps was measured at up to 40 √n (a ring tied to nothing, 50 to 50 000
 * unknowns).
 * @throws RangeError where the matrix does not have the pattern analysed
 */
export function pivotFloor(symbolic: Symbolic, matrix: SymmetricMatrix, floor: Float64Array): void {
  const { n, order, scatter } = symbolic;
  const { columnStart, value } = matrix;
  if (matrix.n !== n || columnStart[n] !== scatter.length) {
    throw new RangeError('The pattern is not the one analysed.');
  }
  const slack = 64 * Math.sqrt(n) * Number.EPSILON;
  for (let k = 0; k < n; k += 1) floor[k] = slack * Math.abs(value[columnStart[order[k]]]);
}

/** The failure of column k, whose pivot the panels hold. */
export function singular(
  { order, firstColumn, panelStart, blockOf }: Symbolic,
  { columnStart, value }: SymmetricMatrix,
  k: number,
  panels: Float64Array,
): SingularMatrix {
  const s = blockOf[k];
  const width = firstColumn[s + 1] - firstColumn[s];
  const pivot = panels[panelStart[s] + (k - firstColumn[s]) * (width + 1)];
  const diagonal = Math.abs(value[columnStart[order[k]]]);
  return new SingularMatrix(order[k], diagonal > 0 ? pivot / diagonal : pivot);
}
