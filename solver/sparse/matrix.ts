/**
 * A symmetric sparse matrix: its lower triangle with the diagonal, by compressed columns.
 * Row indices ascend within each column and the diagonal comes first.
 */
export interface SymmetricMatrix {
  readonly n: number;
  /** n + 1 */
  readonly columnStart: Int32Array;
  /** columnStart[n] */
  readonly row: Int32Array;
  /** columnStart[n] */
  readonly value: Float64Array;
}
