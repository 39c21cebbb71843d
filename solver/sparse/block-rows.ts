import type { LowerTriangle } from './lower-triangle.ts';

/**
 * Rows of every block of columns, its own columns first, ascending. Row i belongs to each block on the way up
 * the tree from the columns where the matrix has an entry in row i to the block of i itself. Visiting the rows
 * in ascending order leaves nothing to sort.
 *
 * @param firstColumn blocks + 1
 * @param blockOf block of each column, n
 * @param blockParent the tree, block by block, −1 for a root, blocks
 * @param rowStart blocks + 1, where each block's rows go in the result
 */
export function blockRows(
  n: number,
  lower: LowerTriangle,
  firstColumn: Int32Array,
  blockOf: Int32Array,
  blockParent: Int32Array,
  rowStart: Int32Array,
): Int32Array {
  const blocks = firstColumn.length - 1;
  const rows = new Int32Array(rowStart[blocks]);
  const fill = new Int32Array(blocks);
  for (let s = 0; s < blocks; s += 1) {
    let at = rowStart[s];
    const end = firstColumn[s + 1];
    for (let j = firstColumn[s]; j < end; j += 1, at += 1) rows[at] = j;
    fill[s] = at;
  }
  const seen = new Int32Array(blocks).fill(-1);
  for (let i = 0; i < n; i += 1) {
    seen[blockOf[i]] = i;
    const end = lower.rowStart[i + 1];
    for (let p = lower.rowStart[i]; p < end; p += 1) {
      let s = blockOf[lower.column[p]];
      while (seen[s] !== i) {
        seen[s] = i;
        const at = fill[s];
        rows[at] = i;
        fill[s] = at + 1;
        s = blockParent[s];
      }
    }
  }
  return rows;
}
