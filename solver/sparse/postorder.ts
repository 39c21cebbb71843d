/**
 * Numbers a forest so that every subtree is a run of numbers ending in its root.
 * Children of a node come by ascending weight, so that the heaviest child is the root's neighbour and
 * can share a block of columns with it; without weights, by ascending number.
 *
 * @param parent n, −1 for a root
 * @param weight n, or null; values at most `heaviest`
 * @param post receives the nodes in postorder, n
 */
export function postorder(
  n: number,
  parent: Int32Array,
  weight: Int32Array | null,
  heaviest: number,
  post: Int32Array,
): void {
  const firstChild = new Int32Array(n + 1).fill(-1);
  const sibling = new Int32Array(n);
  // Linked in descending order, so that the lists are ascending. Roots hang from node n.
  const link = (j: number) => {
    const up = parent[j] < 0 ? n : parent[j];
    sibling[j] = firstChild[up];
    firstChild[up] = j;
  };
  if (weight === null) {
    for (let j = n - 1; j >= 0; j -= 1) link(j);
  } else {
    const bucket = new Int32Array(heaviest + 1).fill(-1);
    const next = new Int32Array(n);
    for (let j = 0; j < n; j += 1) {
      const w = weight[j];
      next[j] = bucket[w];
      bucket[w] = j;
    }
    for (let w = heaviest; w >= 0; w -= 1) {
      for (let j = bucket[w]; j !== -1; j = next[j]) link(j);
    }
  }
  let count = 0;
  let node = firstChild[n];
  while (node !== -1) {
    // Down to the first leaf, then up as long as there is no sibling left to visit.
    while (firstChild[node] !== -1) {
      const child = firstChild[node];
      firstChild[node] = -1;
      node = child;
    }
    for (;;) {
      post[count] = node;
      count += 1;
      const up = parent[node];
      if (sibling[node] !== -1) {
        node = sibling[node];
        break;
      }
      if (up === -1) {
        node = -1;
        break;
      }
      node = up;
    }
  }
}
