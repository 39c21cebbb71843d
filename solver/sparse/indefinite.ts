import { analyse } from './analyse.ts';
import { factoriseGeneral, type GeneralFactor, solveGeneral } from './factorise-general.ts';
import type { SymmetricMatrix } from './matrix.ts';

/** P A Pᵀ = L D Lᵀ with D of either sign, held as L D and Lᵀ. */
export type IndefiniteFactor = GeneralFactor;

/**
 * L D Lᵀ of a symmetric matrix without exchange of rows: safe for quasi-definite matrices in any order. For
 * definite ones `factorise` takes half the work.
 * @throws SingularMatrix where a pivot vanishes
 */
export function factoriseIndefinite(matrix: SymmetricMatrix, order?: Int32Array): IndefiniteFactor {
  return factoriseGeneral(analyse(matrix, order), matrix, matrix.value);
}

/** X = A⁻¹ B in place; columns one after the other, n × columns. */
export function solveIndefinite(factor: IndefiniteFactor, b: Float64Array, columns = 1): void {
  const { n } = factor.symbolic;
  for (let c = 0; c < columns; c += 1) solveGeneral(factor, b.subarray(c * n, (c + 1) * n));
}

/** How many eigenvalues of the matrix are negative (Sylvester's law of inertia): the negative pivots. */
export function negativeEigenvalues({ symbolic, lower }: IndefiniteFactor): number {
  const { blocks, firstColumn, panelStart } = symbolic;
  let count = 0;
  for (let s = 0; s < blocks; s += 1) {
    const width = firstColumn[s + 1] - firstColumn[s];
    for (let c = 0; c < width; c += 1) if (lower[panelStart[s] + c * (width + 1)] < 0) count += 1;
  }
  return count;
}
