/**
 * count(j) = number of non-zeros in column j of L, diagonal included, without forming L.
 * Gilbert, Ng and Peyton 1994: row i of L is a subtree of the elimination tree whose leaves are found by
 * visiting columns in postorder; the counts follow from the leaves and the least common ancestors of
 * consecutive ones.
 *
 * @param columnStart n + 1, into `row`
 * @param row the entries below the diagonal of each column of A, any order
 * @param post the nodes of the tree in postorder, n
 * @param count receives the counts, n
 */
export function columnCounts(
  n: number,
  columnStart: Int32Array,
  row: Int32Array,
  parent: Int32Array,
  post: Int32Array,
  count: Int32Array,
): void {
  /** Postorder number of the first descendant of each node. */
  const first = new Int32Array(n).fill(-1);
  for (let k = 0; k < n; k += 1) {
    let j = post[k];
    count[j] = first[j] === -1 ? 1 : 0;
    while (j !== -1 && first[j] === -1) {
      first[j] = k;
      j = parent[j];
    }
  }
  const furthest = new Int32Array(n).fill(-1);
  const previousLeaf = new Int32Array(n).fill(-1);
  const ancestor = new Int32Array(n);
  for (let j = 0; j < n; j += 1) ancestor[j] = j;

  for (let k = 0; k < n; k += 1) {
    const j = post[k];
    const up = parent[j];
    if (up !== -1) count[up] -= 1;
    const end = columnStart[j + 1];
    for (let p = columnStart[j]; p < end; p += 1) {
      const i = row[p];
      if (first[j] <= furthest[i]) continue;
      furthest[i] = first[j];
      count[j] += 1;
      const leaf = previousLeaf[i];
      previousLeaf[i] = j;
      if (leaf === -1) continue;
      let meet = leaf;
      while (meet !== ancestor[meet]) meet = ancestor[meet];
      for (let s = leaf; s !== meet; ) {
        const next = ancestor[s];
        ancestor[s] = meet;
        s = next;
      }
      count[meet] -= 1;
    }
    if (up !== -1) ancestor[j] = up;
  }
  for (let k = 0; k < n; k += 1) {
    const j = post[k];
    const up = parent[j];
    if (up !== -1) count[up] += count[j];
  }
}
