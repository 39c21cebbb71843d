/**
 * parent(j) = min { i > j : l_ij ≠ 0 } of the factor of a symmetric matrix, −1 for a root.
 * Liu 1986: each row's entries climb to the row through compressed paths; O(entries · log n) at worst.
 *
 * @param rowStart n + 1, into `column`
 * @param column the entries left of the diagonal of each row, any order
 * @param parent receives the tree, n
 * @param ancestor workspace, n
 */
export function eliminationTree(
  n: number,
  rowStart: Int32Array,
  column: Int32Array,
  parent: Int32Array,
  ancestor: Int32Array,
): void {
  for (let k = 0; k < n; k += 1) {
    parent[k] = -1;
    ancestor[k] = -1;
    const end = rowStart[k + 1];
    for (let p = rowStart[k]; p < end; p += 1) {
      let i = column[p];
      while (i !== k) {
        const next = ancestor[i];
        ancestor[i] = k;
        if (next === -1) {
          parent[i] = k;
          break;
        }
        i = next;
      }
    }
  }
}
