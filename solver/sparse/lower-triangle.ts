import type { SymmetricMatrix } from './matrix.ts';

/** The entries below the diagonal of a reordered symmetric matrix, by rows and by columns, each unsorted. */
export interface LowerTriangle {
  /** n + 1, into `column` */
  readonly rowStart: Int32Array;
  readonly column: Int32Array;
  /** n + 1, into `row` and `source` */
  readonly columnStart: Int32Array;
  readonly row: Int32Array;
  /** Index of the value in the matrix as given. */
  readonly source: Int32Array;
}

/**
 * The strict lower triangle of P A Pᵀ.
 * @param place new number of each unknown, n
 */
export function lowerTriangle(pattern: SymmetricMatrix, place: Int32Array): LowerTriangle {
  const { n, columnStart: start, row: rowOf } = pattern;
  const rowStart = new Int32Array(n + 1);
  const columnStart = new Int32Array(n + 1);
  for (let j = 0; j < n; j += 1) {
    const a = place[j];
    const end = start[j + 1];
    for (let p = start[j] + 1; p < end; p += 1) {
      const b = place[rowOf[p]];
      const high = Math.max(a, b);
      const low = Math.min(a, b);
      rowStart[high + 1] += 1;
      columnStart[low + 1] += 1;
    }
  }
  for (let k = 0; k < n; k += 1) {
    rowStart[k + 1] += rowStart[k];
    columnStart[k + 1] += columnStart[k];
  }
  const entries = rowStart[n];
  const column = new Int32Array(entries);
  const row = new Int32Array(entries);
  const source = new Int32Array(entries);
  const rowFill = rowStart.slice();
  const columnFill = columnStart.slice();
  for (let j = 0; j < n; j += 1) {
    const a = place[j];
    const end = start[j + 1];
    for (let p = start[j] + 1; p < end; p += 1) {
      const b = place[rowOf[p]];
      const high = Math.max(a, b);
      const low = Math.min(a, b);
      const atRow = rowFill[high];
      column[atRow] = low;
      rowFill[high] = atRow + 1;
      const atColumn = columnFill[low];
      row[atColumn] = high;
      source[atColumn] = p;
      columnFill[low] = atColumn + 1;
    }
  }
  return { rowStart, column, columnStart, row, source };
}
