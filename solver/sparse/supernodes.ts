/** Columns of a block at most: beyond it the dense kernels gain nothing and their rows leave the cache. */
const WIDEST = 48;

/**
 * Blocks of consecutive columns of L with (nearly) the same rows below, so that elimination runs on dense
 * panels. Strictly equal neighbours are joined; then a block is joined with its parent next to it where the
 * zeros taken in cost less than the handling of one more block.
 *
 * @param parent elimination tree in postorder, n
 * @param count column counts of L, n
 * @returns first column of each block, blocks + 1
 */
export function supernodes(n: number, parent: Int32Array, count: Int32Array): Int32Array {
  const first = new Int32Array(n + 1);
  /** Zeros stored in each block. */
  const zeros = new Float64Array(n);
  let blocks = 0;
  for (let j = 0; j < n; j += 1) {
    first[blocks] = j;
    zeros[blocks] = 0;
    blocks += 1;
    // The new column joins the block before it, and the joined block the one before that, as long as it pays.
    while (blocks > 1) {
      const start = first[blocks - 1];
      const before = first[blocks - 2];
      if (parent[start - 1] === -1 || parent[start - 1] > j || parent[start - 1] < start) break;
      const w1 = start - before;
      const w2 = j + 1 - start;
      const width = w1 + w2;
      if (width > WIDEST) break;
      const below = count[j] - 1;
      const height1 = w1 + count[start - 1] - 1;
      const added = w1 * (width + below - height1);
      const inside = zeros[blocks - 2] + zeros[blocks - 1] + added;
      const area = (width * (width + 1)) / 2 + width * below;
      if (added > 0 && !pays(width, inside, area)) break;
      blocks -= 1;
      zeros[blocks - 1] = inside;
    }
  }
  first[blocks] = n;
  return first.slice(0, blocks + 1);
}

function pays(width: number, zeros: number, area: number): boolean {
  const share = zeros / area;
  return width <= 4 ? share < 0.8 : width <= 16 ? share < 0.3 : width <= 48 ? share < 0.1 : share < 0.05;
}
