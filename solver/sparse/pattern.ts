import type { SymmetricMatrix } from './matrix.ts';

/**
 * A = Σₑ Pₑᵀ Aₑ Pₑ: where each entry of each element's small symmetric matrix goes in the sum.
 *
 * An element is a list of unknowns; a negative one is held fixed and has no row. Of an element's
 * matrix only the lower triangle is kept, by rows: (0,0), (1,0), (1,1), (2,0), …
 */
export interface ElementPattern {
  /** Values are zero, to be filled by adding through `scatter`. */
  readonly matrix: SymmetricMatrix;
  /** Start of each element's entries in `scatter`, elements + 1. */
  readonly scatterStart: Int32Array;
  /** Index into matrix.value of each entry, or −1 where one of its two unknowns is held fixed. */
  readonly scatter: Int32Array;
}

/**
 * Pattern of the sum over elements without triplets, in O(entries).
 * @param n number of unknowns
 * @param elementStart elements + 1, into `unknowns`
 * @param unknowns the unknowns of every element; negative ones are left out; none twice in one element
 */
export function patternOfElements(n: number, elementStart: Int32Array, unknowns: Int32Array): ElementPattern {
  const elements = elementStart.length - 1;
  const scatterStart = new Int32Array(elements + 1);
  for (let e = 0; e < elements; e += 1) {
    const size = elementStart[e + 1] - elementStart[e];
    scatterStart[e + 1] = scatterStart[e] + (size * (size + 1)) / 2;
  }
  const entries = scatterStart[elements];
  const scatter = new Int32Array(entries).fill(-1);

  // Bucket the entries by column (smaller unknown), then each bucket by row (larger unknown) through a
  // second counting pass over rows: entries come out ordered by column and, within it, by row.
  const low = new Int32Array(entries);
  const high = new Int32Array(entries);
  const rowFill = new Int32Array(n + 1);
  for (let e = 0, entry = 0; e < elements; e += 1) {
    const from = elementStart[e];
    const to = elementStart[e + 1];
    for (let a = from; a < to; a += 1) {
      const ua = unknowns[a];
      for (let b = from; b <= a; b += 1, entry += 1) {
        const ub = unknowns[b];
        if (ua < 0 || ub < 0) {
          low[entry] = -1;
          continue;
        }
        low[entry] = Math.min(ua, ub);
        const row = Math.max(ua, ub);
        high[entry] = row;
        rowFill[row + 1] += 1;
      }
    }
  }
  for (let i = 0; i < n; i += 1) rowFill[i + 1] += rowFill[i];
  const kept = rowFill[n];
  const byRow = new Int32Array(kept);
  const columnFill = new Int32Array(n + 1);
  for (let entry = 0; entry < entries; entry += 1) {
    const column = low[entry];
    if (column < 0) continue;
    const row = high[entry];
    const at = rowFill[row];
    rowFill[row] = at + 1;
    byRow[at] = entry;
    columnFill[column + 1] += 1;
  }
  for (let j = 0; j < n; j += 1) columnFill[j + 1] += columnFill[j];
  const byColumn = new Int32Array(kept);
  for (let k = 0; k < kept; k += 1) {
    const entry = byRow[k];
    const column = low[entry];
    const at = columnFill[column];
    columnFill[column] = at + 1;
    byColumn[at] = entry;
  }

  const columnStart = new Int32Array(n + 1);
  const row = new Int32Array(kept + n);
  let size = 0;
  for (let j = 0, k = 0; j < n; j += 1) {
    columnStart[j] = size;
    // The diagonal is stored even where no element touches the unknown, so that a hole shows as a zero pivot.
    row[size] = j;
    size += 1;
    for (const end = columnFill[j]; k < end; k += 1) {
      const entry = byColumn[k];
      const i = high[entry];
      if (row[size - 1] !== i) {
        row[size] = i;
        size += 1;
      }
      scatter[entry] = size - 1;
    }
  }
  columnStart[n] = size;
  return {
    matrix: { n, columnStart, row: row.slice(0, size), value: new Float64Array(size) },
    scatterStart,
    scatter,
  };
}
