import { blockRows } from './block-rows.ts';
import { elimination } from './elimination.ts';
import { fillOrder } from './fill-order.ts';
import type { SymmetricMatrix } from './matrix.ts';
import { supernodes } from './supernodes.ts';
import type { Symbolic } from './symbolic.ts';

/**
 * The symbolic part of P A Pᵀ = L Lᵀ: order, blocks of columns, rows of each block and the place of every
 * value.
 *
 * @param pattern only n, columnStart and row are read
 * @param wanted unknowns in the order of elimination, n; by default one that keeps L sparse
 */
export function analyse(pattern: SymmetricMatrix, wanted: Int32Array = fillOrder(pattern)): Symbolic {
  const { n, columnStart } = pattern;
  const { order, parent, count, lower } = elimination(pattern, wanted);
  const firstColumn = supernodes(n, parent, count);
  const blocks = firstColumn.length - 1;
  const blockOf = new Int32Array(n);
  const rowStart = new Int32Array(blocks + 1);
  const panelStart = new Int32Array(blocks + 1);
  for (let s = 0; s < blocks; s += 1) {
    const from = firstColumn[s];
    const to = firstColumn[s + 1];
    const height = to - from + count[to - 1] - 1;
    rowStart[s + 1] = rowStart[s] + height;
    const end = panelStart[s] + height * (to - from);
    if (end > 0x7fffffff) throw new RangeError('The factor has more than 2^31 values.');
    panelStart[s + 1] = end;
    blockOf.fill(s, from, to);
  }
  const blockParent = new Int32Array(blocks);
  for (let s = 0; s < blocks; s += 1) {
    const up = parent[firstColumn[s + 1] - 1];
    blockParent[s] = up === -1 ? -1 : blockOf[up];
  }
  const rows = blockRows(n, lower, firstColumn, blockOf, blockParent, rowStart);

  const scatter = new Int32Array(columnStart[n]);
  const position = new Int32Array(n);
  for (let s = 0; s < blocks; s += 1) {
    const from = firstColumn[s];
    const to = firstColumn[s + 1];
    const width = to - from;
    const begin = rowStart[s];
    const height = rowStart[s + 1] - begin;
    const base = panelStart[s] - from;
    for (let k = 0, at = base; k < height; k += 1, at += width) position[rows[begin + k]] = at;
    for (let j = from; j < to; j += 1) {
      scatter[columnStart[order[j]]] = position[j] + j;
      const end = lower.columnStart[j + 1];
      for (let p = lower.columnStart[j]; p < end; p += 1) {
        scatter[lower.source[p]] = position[lower.row[p]] + j;
      }
    }
  }

  let factorEntries = 0;
  let operations = 0;
  for (let j = 0; j < n; j += 1) {
    factorEntries += count[j];
    operations += count[j] * count[j];
  }
  return {
    n,
    order,
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
