/**
 * What the elimination of a symmetric matrix needs to know beforehand, from its pattern alone. Made by
 * `analyse`, used by any number of factorisations.
 *
 * The factor L (of the reordered matrix) lies in blocks of consecutive columns. Block s has columns
 * firstColumn[s] … firstColumn[s+1]−1 and rows rows[rowStart[s] … rowStart[s+1]−1], its own columns first,
 * ascending; its values are a dense panel, row by row, from panelStart[s].
 */
export interface Symbolic {
  readonly n: number;
  /** order[k] is the unknown eliminated as number k, n. */
  readonly order: Int32Array;
  readonly blocks: number;
  /** blocks + 1 */
  readonly firstColumn: Int32Array;
  /** blocks + 1, into `rows` */
  readonly rowStart: Int32Array;
  readonly rows: Int32Array;
  /** blocks + 1; the last is the length of all panels together. */
  readonly panelStart: Int32Array;
  /** Block of each column, n. */
  readonly blockOf: Int32Array;
  /** Where each stored value of the matrix goes in the panels; as long as the matrix has values. */
  readonly scatter: Int32Array;
  /** Column counts of L summed, diagonal included, without the zeros that blocks take in. */
  readonly factorEntries: number;
  /** Σ count², the multiplications and additions of a factorisation. */
  readonly operations: number;
}
