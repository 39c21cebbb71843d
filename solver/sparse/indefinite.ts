import { elimination } from './elimination.ts';
import { fillOrder } from './fill-order.ts';
import type { SymmetricMatrix } from './matrix.ts';
import { SingularMatrix } from './singular.ts';

/** P A Pᵀ = L D Lᵀ with unit L by columns (the ones not stored) and D of either sign. */
export interface IndefiniteFactor {
  readonly n: number;
  /** order[k] is the unknown eliminated as number k, n. */
  readonly order: Int32Array;
  /** n + 1 */
  readonly columnStart: Int32Array;
  readonly row: Int32Array;
  readonly value: Float64Array;
  /** D, n */
  readonly pivot: Float64Array;
}

/** A pivot below this times its row's largest entry counts as zero. */
const SMALLEST = 2 ** -48;

/**
 * L D Lᵀ of a symmetric matrix without exchange of rows, row by row: safe for quasi-definite matrices (a
 * saddle with a small negative definite block in its corner), in any order. For definite ones `factorise` is
 * several times faster.
 * @throws SingularMatrix where a pivot vanishes
 */
export function factoriseIndefinite(
  matrix: SymmetricMatrix,
  wanted: Int32Array = fillOrder(matrix),
): IndefiniteFactor {
  const { n, value: given, columnStart: givenStart } = matrix;
  const { order, parent, count, lower } = elimination(matrix, wanted);
  const columnStart = new Int32Array(n + 1);
  for (let j = 0; j < n; j += 1) {
    const end = columnStart[j] + count[j] - 1;
    if (end > 0x7fffffff) throw new RangeError('The factor has more than 2^31 values.');
    columnStart[j + 1] = end;
  }
  const row = new Int32Array(columnStart[n]);
  const value = new Float64Array(columnStart[n]);
  const pivot = new Float64Array(n);
  const fill = columnStart.slice(0, n);

  // Rows of the reordered matrix with their values.
  const rowValue = new Float64Array(lower.column.length);
  const rowFill = lower.rowStart.slice(0, n);
  const sortedColumn = new Int32Array(lower.column.length);
  for (let j = 0; j < n; j += 1) {
    for (let p = lower.columnStart[j]; p < lower.columnStart[j + 1]; p += 1) {
      const at = rowFill[lower.row[p]];
      sortedColumn[at] = j;
      rowValue[at] = given[lower.source[p]];
      rowFill[lower.row[p]] = at + 1;
    }
  }

  const seen = new Int32Array(n).fill(-1);
  const y = new Float64Array(n);
  const path = new Int32Array(n);
  const pattern = new Int32Array(n);
  for (let k = 0; k < n; k += 1) {
    // Non-zeros of row k of L: the paths in the tree from the entries of A, in an order that eliminates first what comes first.
    let top = n;
    seen[k] = k;
    let d = given[givenStart[order[k]]];
    let largest = Math.abs(d);
    for (let p = lower.rowStart[k]; p < lower.rowStart[k + 1]; p += 1) {
      let i = sortedColumn[p];
      y[i] = rowValue[p];
      largest = Math.max(largest, Math.abs(y[i]));
      let depth = 0;
      for (; seen[i] !== k; i = parent[i]) {
        path[depth] = i;
        depth += 1;
        seen[i] = k;
      }
      while (depth > 0) {
        top -= 1;
        depth -= 1;
        pattern[top] = path[depth];
      }
    }
    for (; top < n; top += 1) {
      const i = pattern[top];
      const yi = y[i];
      y[i] = 0;
      const end = fill[i];
      for (let p = columnStart[i]; p < end; p += 1) y[row[p]] -= value[p] * yi;
      const l = yi / pivot[i];
      d -= l * yi;
      row[end] = k;
      value[end] = l;
      fill[i] = end + 1;
    }
    if (!(Math.abs(d) > SMALLEST * largest))
      throw new SingularMatrix(order[k], largest > 0 ? d / largest : d);
    pivot[k] = d;
  }
  return { n, order, columnStart, row, value, pivot };
}

/** X = A⁻¹ B in place by L Z = P B, D Y = Z, Lᵀ P X = Y; columns one after the other, n × columns. */
export function solveIndefinite(factor: IndefiniteFactor, b: Float64Array, columns = 1): void {
  const { n, order, columnStart, row, value, pivot } = factor;
  const x = new Float64Array(n);
  for (let c = 0; c < columns; c += 1) {
    for (let k = 0; k < n; k += 1) x[k] = b[c * n + order[k]];
    for (let j = 0; j < n; j += 1) {
      const v = x[j];
      for (let p = columnStart[j]; p < columnStart[j + 1]; p += 1) x[row[p]] -= value[p] * v;
    }
    for (let j = n - 1; j >= 0; j -= 1) {
      let v = x[j] / pivot[j];
      for (let p = columnStart[j]; p < columnStart[j + 1]; p += 1) v -= value[p] * x[row[p]];
      x[j] = v;
    }
    for (let k = 0; k < n; k += 1) b[c * n + order[k]] = x[k];
  }
}
