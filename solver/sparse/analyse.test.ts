import { describe, expect, test } from 'vitest';
import { DEFINITE, dense, fromEntries, randomFrom } from '../../test/sparse/matrices.ts';
import { analyse } from './analyse.ts';
import { elimination } from './elimination.ts';
import { fillOrder } from './fill-order.ts';
import type { SymmetricMatrix } from './matrix.ts';

/** Pattern of L by brute force: eliminate with sets. */
function bruteForce(matrix: SymmetricMatrix, order: Int32Array): Set<number>[] {
  const a = dense(matrix);
  const n = matrix.n;
  const columns = Array.from({ length: n }, () => new Set<number>());
  for (let j = 0; j < n; j += 1) {
    for (let i = j; i < n; i += 1) if (a[order[i]][order[j]] !== 0 || i === j) columns[j].add(i);
  }
  for (let k = 0; k < n; k += 1) {
    const below = [...columns[k]].filter((i) => i > k);
    for (const i of below) for (const j of below) if (i >= j) columns[j].add(i);
  }
  return columns;
}

describe('elimination tree, column counts and rows of blocks equal brute force', () => {
  for (const kind of Object.keys(DEFINITE)) {
    test(kind, () => {
      for (const n of [0, 1, 2, 3, 5, 10, 50, 120]) {
        const matrix = DEFINITE[kind](n, randomFrom(n + 1));
        for (const wanted of [fillOrder(matrix), Int32Array.from({ length: n }, (_, k) => k)]) {
          const { order, parent, count } = elimination(matrix, wanted);
          const columns = bruteForce(matrix, order);
          columns.forEach((column, j) => {
            expect(count[j]).toBe(column.size);
            const below = [...column].filter((i) => i > j);
            expect(parent[j]).toBe(below.length === 0 ? -1 : Math.min(...below));
          });
          const symbolic = analyse(matrix, wanted);
          expect(symbolic.factorEntries).toBe(columns.reduce((sum, column) => sum + column.size, 0));
          for (let s = 0; s < symbolic.blocks; s += 1) {
            const rows = symbolic.rows.slice(symbolic.rowStart[s], symbolic.rowStart[s + 1]);
            expect(rows).toEqual(Int32Array.from(new Set(rows)).sort());
            for (let j = symbolic.firstColumn[s]; j < symbolic.firstColumn[s + 1]; j += 1) {
              for (const i of columns[j]) expect(rows).toContain(i);
            }
          }
        }
      }
    });
  }
});

describe('order of elimination', () => {
  test('a permutation of everything', () => {
    for (const kind of Object.keys(DEFINITE)) {
      for (const n of [0, 1, 2, 3, 5, 10, 50, 500, 5000]) {
        const order = fillOrder(DEFINITE[kind](n, randomFrom(n)));
        expect([...order].sort((a, b) => a - b)).toEqual(Array.from({ length: n }, (_, i) => i));
      }
    }
  });

  test('trees, chains and stars fill nothing in', () => {
    const star = fromEntries(3000, () => 3000, new Map(Array.from({ length: 2999 }, (_, k) => [k + 1, -1])));
    for (const matrix of [DEFINITE.tree!(5000, randomFrom(4)), star]) {
      expect(analyse(matrix).factorEntries).toBe(matrix.row.length);
    }
  });

  test('an arrow with pairs keeps its shaft for the end', () => {
    const matrix = DEFINITE.arrow!(5000, randomFrom(4));
    expect(analyse(matrix).factorEntries).toBe(matrix.row.length);
  });

  test('a grid of 100 by 100: at most 31 n log₂ n / 4, what nested dissection takes', () => {
    // George 1973: nested dissection of an m × m grid of five points has about 31/4 n log₂ m entries (leading term, from memory).
    const matrix = DEFINITE.grid!(10000, randomFrom(4));
    expect(analyse(matrix).factorEntries).toBeLessThan((31 / 4) * 10000 * Math.log2(100));
  });

  test('does not depend on the values, and is the same every time', () => {
    const matrix = DEFINITE.random!(800, randomFrom(4));
    expect(fillOrder({ ...matrix, value: matrix.value.map(() => 1) })).toEqual(fillOrder(matrix));
  });
});
