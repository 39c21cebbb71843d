import type { Symbolic } from './symbolic.ts';

/** Scratch of factorisations and solves: one at a time. */
export interface Workspace {
  /** n each */
  readonly place: Int32Array;
  readonly floor: Float64Array;
  /** blocks each: queue of the blocks that wait to update a later one, and how far each has come. */
  readonly waiting: Int32Array;
  readonly next: Int32Array;
  readonly reached: Int32Array;
  /** 4 n */
  readonly right: Float64Array;
}

export function workspaceFor({ n, blocks }: Symbolic): Workspace {
  return {
    place: new Int32Array(n),
    floor: new Float64Array(n),
    waiting: new Int32Array(blocks),
    next: new Int32Array(blocks),
    reached: new Int32Array(blocks),
    right: new Float64Array(4 * n),
  };
}

/**
 * The order of work of a left-looking factorisation: each block first takes the updates of the blocks before it
 * that have a row among its columns, then is factored. Between the two `workspace.place` holds where each of
 * the block's rows starts in its panel, less its first column.
 *
 * @param update subtracts what block d contributes through its rows `first` … `last`−1, out of `height`
 * @param factor factors block s; −1, or the column within it that fails
 * @returns −1, or the number of the column that failed
 */
export function sweep(
  symbolic: Symbolic,
  { place, waiting, next, reached }: Workspace,
  update: (d: number, first: number, last: number, height: number) => void,
  factor: (s: number, width: number, height: number) => number,
): number {
  const { blocks, firstColumn, rowStart, rows, panelStart, blockOf } = symbolic;
  waiting.fill(-1);
  for (let s = 0; s < blocks; s += 1) {
    const column = firstColumn[s];
    const end = firstColumn[s + 1];
    const width = end - column;
    const begin = rowStart[s];
    const height = rowStart[s + 1] - begin;
    for (let k = 0, at = panelStart[s] - column; k < height; k += 1, at += width) place[rows[begin + k]] = at;

    for (let d = waiting[s]; d !== -1; ) {
      const after = next[d];
      const dRows = rowStart[d];
      const dHeight = rowStart[d + 1] - dRows;
      const first = reached[d];
      let last = first + 1;
      while (last < dHeight && rows[dRows + last] < end) last += 1;
      update(d, first, last, dHeight);
      if (last < dHeight) {
        reached[d] = last;
        const target = blockOf[rows[dRows + last]];
        next[d] = waiting[target];
        waiting[target] = d;
      }
      d = after;
    }

    const bad = factor(s, width, height);
    if (bad >= 0) return column + bad;
    if (height > width) {
      reached[s] = width;
      const target = blockOf[rows[begin + width]];
      next[s] = waiting[target];
      waiting[target] = s;
    }
  }
  return -1;
}
