import { columnCounts } from './column-counts.ts';
import { eliminationTree } from './elimination-tree.ts';
import { fillOrder } from './fill-order.ts';
import type { SymmetricMatrix } from './matrix.ts';
import { postorder } from './postorder.ts';
import { supernodes } from './supernodes.ts';
import type { Symbolic } from './symbolic.ts';

/**
 * The symbolic part of P A Pᵀ = L Lᵀ (or L S Lᵀ): order, blocks of columns, rows of each block and the place
 * of every value.
 *
 * @param pattern only n, columnStart and row are read
 * @param order unknowns in the order of elimination, n; by default one that keeps L sparse
 */
export function analyse(pattern: SymmetricMatrix, order: Int32Array = fillOrder(pattern)): Symbolic {
  const { n, columnStart } = pattern;
  const entries = columnStart[n]!;
  const place = new Int32Array(n);
  for (let k = 0; k < n; k += 1) place[order[k]!] = k;

  const first = triangles(pattern, place);
  const parent = new Int32Array(n);
  eliminationTree(n, first.rowStart, first.column, parent, new Int32Array(n));
  const post = new Int32Array(n);
  postorder(n, parent, null, 0, post);
  const count = new Int32Array(n);
  columnCounts(n, first.columnStart, first.row, parent, post, count);

  let most = 0;
  let factorEntries = 0;
  let operations = 0;
  for (let j = 0; j < n; j += 1) {
    const c = count[j]!;
    if (c > most) most = c;
    factorEntries += c;
    operations += c * c;
  }
  postorder(n, parent, count, most, post);

  // Renumber everything by the second postorder.
  const renumbered = new Int32Array(n);
  for (let k = 0; k < n; k += 1) renumbered[post[k]!] = k;
  const finalOrder = new Int32Array(n);
  const finalParent = new Int32Array(n);
  const finalCount = new Int32Array(n);
  for (let k = 0; k < n; k += 1) {
    const old = post[k]!;
    const up = parent[old]!;
    finalOrder[k] = order[old]!;
    finalParent[k] = up === -1 ? -1 : renumbered[up]!;
    finalCount[k] = count[old]!;
    place[finalOrder[k]!] = k;
  }

  const firstColumn = supernodes(n, finalParent, finalCount);
  const blocks = firstColumn.length - 1;
  const blockOf = new Int32Array(n);
  const rowStart = new Int32Array(blocks + 1);
  const panelStart = new Int32Array(blocks + 1);
  const blockParent = new Int32Array(blocks);
  for (let s = 0; s < blocks; s += 1) {
    const from = firstColumn[s]!;
    const to = firstColumn[s + 1]!;
    const height = to - from + finalCount[to - 1]! - 1;
    rowStart[s + 1] = rowStart[s]! + height;
    const end = panelStart[s]! + height * (to - from);
    if (end > 0x7fffffff) throw new RangeError('The factor has more than 2^31 values.');
    panelStart[s + 1] = end;
    for (let j = from; j < to; j += 1) blockOf[j] = s;
  }
  for (let s = 0; s < blocks; s += 1) {
    const up = finalParent[firstColumn[s + 1]! - 1]!;
    blockParent[s] = up === -1 ? -1 : blockOf[up]!;
  }

  const rows = blockRows(n, first, post, renumbered, firstColumn, blockOf, blockParent, rowStart);
  const scatter = new Int32Array(entries);
  placeValues(pattern, place, firstColumn, blockOf, rowStart, rows, panelStart, scatter);
  return {
    n,
    entries,
    order: finalOrder,
    blocks,
    firstColumn,
    rowStart,
    rows,
    panelStart,
    blockOf,
    scatter,
    factorEntries,
    operations,
  };
}

interface Triangles {
  readonly rowStart: Int32Array;
  readonly column: Int32Array;
  readonly columnStart: Int32Array;
  readonly row: Int32Array;
}

/** The strict lower triangle of the reordered matrix, by rows and by columns. */
function triangles(pattern: SymmetricMatrix, place: Int32Array): Triangles {
  const { n, columnStart: start, row: rowOf } = pattern;
  const rowStart = new Int32Array(n + 1);
  const columnStart = new Int32Array(n + 1);
  for (let j = 0; j < n; j += 1) {
    const a = place[j]!;
    const end = start[j + 1]!;
    for (let p = start[j]! + 1; p < end; p += 1) {
      const b = place[rowOf[p]!]!;
      const high = a > b ? a : b;
      const low = a > b ? b : a;
      rowStart[high + 1] = rowStart[high + 1]! + 1;
      columnStart[low + 1] = columnStart[low + 1]! + 1;
    }
  }
  for (let k = 0; k < n; k += 1) {
    rowStart[k + 1] = rowStart[k + 1]! + rowStart[k]!;
    columnStart[k + 1] = columnStart[k + 1]! + columnStart[k]!;
  }
  const column = new Int32Array(rowStart[n]!);
  const row = new Int32Array(rowStart[n]!);
  const rowFill = rowStart.slice();
  const columnFill = columnStart.slice();
  for (let j = 0; j < n; j += 1) {
    const a = place[j]!;
    const end = start[j + 1]!;
    for (let p = start[j]! + 1; p < end; p += 1) {
      const b = place[rowOf[p]!]!;
      const high = a > b ? a : b;
      const low = a > b ? b : a;
      const atRow = rowFill[high]!;
      column[atRow] = low;
      rowFill[high] = atRow + 1;
      const atColumn = columnFill[low]!;
      row[atColumn] = high;
      columnFill[low] = atColumn + 1;
    }
  }
  return { rowStart, column, columnStart, row };
}

/**
 * Rows of every block, ascending: row i belongs to each block on the way up the tree from the columns where
 * A has an entry in row i to the block of i itself. Visiting i in ascending order leaves nothing to sort.
 */
function blockRows(
  n: number,
  lower: Triangles,
  post: Int32Array,
  renumbered: Int32Array,
  firstColumn: Int32Array,
  blockOf: Int32Array,
  blockParent: Int32Array,
  rowStart: Int32Array,
): Int32Array {
  const blocks = firstColumn.length - 1;
  const rows = new Int32Array(rowStart[blocks]!);
  const fill = new Int32Array(blocks);
  for (let s = 0; s < blocks; s += 1) {
    let at = rowStart[s]!;
    for (let j = firstColumn[s]!; j < firstColumn[s + 1]!; j += 1) {
      rows[at] = j;
      at += 1;
    }
    fill[s] = at;
  }
  const seen = new Int32Array(blocks).fill(-1);
  for (let i = 0; i < n; i += 1) {
    const top = blockOf[i]!;
    seen[top] = i;
    const old = post[i]!;
    const end = lower.rowStart[old + 1]!;
    for (let p = lower.rowStart[old]!; p < end; p += 1) {
      let s = blockOf[renumbered[lower.column[p]!]!]!;
      while (seen[s] !== i) {
        seen[s] = i;
        const at = fill[s]!;
        rows[at] = i;
        fill[s] = at + 1;
        s = blockParent[s]!;
      }
    }
  }
  return rows;
}

function placeValues(
  pattern: SymmetricMatrix,
  place: Int32Array,
  firstColumn: Int32Array,
  blockOf: Int32Array,
  rowStart: Int32Array,
  rows: Int32Array,
  panelStart: Int32Array,
  scatter: Int32Array,
): void {
  const { n, columnStart, row } = pattern;
  // By block of the smaller of the two places, so that one map from row to position serves the whole block.
  const blocks = firstColumn.length - 1;
  const start = new Int32Array(blocks + 1);
  const entries = columnStart[n]!;
  const high = new Int32Array(entries);
  const low = new Int32Array(entries);
  for (let j = 0; j < n; j += 1) {
    const a = place[j]!;
    const end = columnStart[j + 1]!;
    for (let p = columnStart[j]!; p < end; p += 1) {
      const b = place[row[p]!]!;
      const l = a < b ? a : b;
      low[p] = l;
      high[p] = a < b ? b : a;
      const s = blockOf[l]! + 1;
      start[s] = start[s]! + 1;
    }
  }
  for (let s = 0; s < blocks; s += 1) start[s + 1] = start[s + 1]! + start[s]!;
  const byBlock = new Int32Array(entries);
  const fill = start.slice();
  for (let p = 0; p < entries; p += 1) {
    const s = blockOf[low[p]!]!;
    const at = fill[s]!;
    byBlock[at] = p;
    fill[s] = at + 1;
  }
  const position = new Int32Array(n);
  for (let s = 0; s < blocks; s += 1) {
    const from = firstColumn[s]!;
    const width = firstColumn[s + 1]! - from;
    const base = panelStart[s]! - from;
    const begin = rowStart[s]!;
    const height = rowStart[s + 1]! - begin;
    for (let k = 0; k < height; k += 1) position[rows[begin + k]!] = k * width;
    const end = start[s + 1]!;
    for (let k = start[s]!; k < end; k += 1) {
      const p = byBlock[k]!;
      scatter[p] = base + position[high[p]!]! + low[p]!;
    }
  }
}
