import { columnCounts } from './column-counts.ts';
import { eliminationTree } from './elimination-tree.ts';
import { type LowerTriangle, lowerTriangle } from './lower-triangle.ts';
import type { SymmetricMatrix } from './matrix.ts';
import { postorder } from './postorder.ts';

/** How the elimination of a symmetric matrix goes, column by column. */
export interface Elimination {
  /** order[k] is the unknown eliminated as number k, n; a postorder of the tree. */
  readonly order: Int32Array;
  /** Number of each unknown in that order, n. */
  readonly place: Int32Array;
  /** Elimination tree by number, −1 for a root, n. */
  readonly parent: Int32Array;
  /** Non-zeros of each column of L, diagonal included, n. */
  readonly count: Int32Array;
  /** The reordered matrix. */
  readonly lower: LowerTriangle;
}

/**
 * Tree and column counts of P A Pᵀ = L Lᵀ, renumbered so that every subtree is a run of columns that ends in
 * its root, with the longest column among the children just before it. Renumbering so changes no fill.
 */
export function elimination(pattern: SymmetricMatrix, wanted: Int32Array): Elimination {
  const { n } = pattern;
  const place = new Int32Array(n).fill(-1);
  for (let k = 0; k < n; k += 1) place[wanted[k]] = k;
  if (wanted.length !== n || place.includes(-1)) throw new RangeError('The order is not a permutation.');

  const given = lowerTriangle(pattern, place);
  const tree = new Int32Array(n);
  eliminationTree(n, given.rowStart, given.column, tree, new Int32Array(n));
  const post = new Int32Array(n);
  postorder(n, tree, null, 0, post);
  const counted = new Int32Array(n);
  columnCounts(n, given.columnStart, given.row, tree, post, counted);
  let most = 0;
  for (let j = 0; j < n; j += 1) most = Math.max(most, counted[j]);
  postorder(n, tree, counted, most, post);

  const renumbered = new Int32Array(n);
  for (let k = 0; k < n; k += 1) renumbered[post[k]] = k;
  const order = new Int32Array(n);
  const parent = new Int32Array(n);
  const count = new Int32Array(n);
  for (let k = 0; k < n; k += 1) {
    const old = post[k];
    const up = tree[old];
    order[k] = wanted[old];
    parent[k] = up === -1 ? -1 : renumbered[up];
    count[k] = counted[old];
    place[order[k]] = k;
  }
  return { order, place, parent, count, lower: lowerTriangle(pattern, place) };
}
