/** Thrown where elimination meets a pivot that is not clearly positive (or, for L S Lᵀ, not clearly non-zero). */
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
