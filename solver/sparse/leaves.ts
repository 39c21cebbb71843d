import type { SymmetricMatrix } from './matrix.ts';

/**
 * Unknowns that can be eliminated one after the other, each with at most one neighbour left:
 * they fill nothing in. A tree vanishes whole; a network with loops keeps its loops.
 *
 * @param order receives the leaves in order of elimination, n
 * @param left receives 1 for every unknown that is not a leaf, n
 * @returns the number of leaves
 */
export function peelLeaves(pattern: SymmetricMatrix, order: Int32Array, left: Uint8Array): number {
  const { n, columnStart, row } = pattern;
  const degree = new Int32Array(n);
  // The exclusive or of the neighbours still there: with one left, it is that neighbour.
  const neighbours = new Int32Array(n);
  for (let j = 0; j < n; j += 1) {
    let own = 0;
    let mixed = 0;
    const end = columnStart[j + 1];
    for (let p = columnStart[j] + 1; p < end; p += 1) {
      const i = row[p];
      own += 1;
      mixed ^= i;
      degree[i] += 1;
      neighbours[i] ^= j;
    }
    degree[j] += own;
    neighbours[j] ^= mixed;
  }
  left.fill(1);
  let count = 0;
  for (let start = 0; start < n; start += 1) {
    let leaf = start;
    while (left[leaf] === 1 && degree[leaf] <= 1) {
      left[leaf] = 0;
      order[count] = leaf;
      count += 1;
      if (degree[leaf] === 0) break;
      const next = neighbours[leaf];
      degree[next] -= 1;
      neighbours[next] ^= leaf;
      leaf = next;
    }
  }
  return count;
}
