import { describe, expect, test } from 'vitest';
import {
  DEFINITE,
  dense,
  denseSolve,
  EPS,
  norm,
  randomFrom,
  solveRatio,
} from '../../test/sparse/matrices.ts';
import { verify } from '../../test/verify/row.ts';
import { analyse } from './analyse.ts';
import { emptyFactor, factorise } from './factorise.ts';
import { factoriseIndefinite, solveIndefinite } from './indefinite.ts';
import type { SymmetricMatrix } from './matrix.ts';
import { solve } from './solve.ts';
import type { Symbolic } from './symbolic.ts';

const SIZES = [0, 1, 2, 3, 5, 10, 50, 500, 5000];

function rightSide(n: number, random: () => number): Float64Array {
  return Float64Array.from({ length: n }, () => random() - 0.5);
}

/** ‖P A Pᵀ − L Lᵀ‖ / (n ε ‖A‖), in the largest entry. */
function factorRatio(matrix: SymmetricMatrix, symbolic: Symbolic, panels: Float64Array): number {
  const { n, blocks, firstColumn, rowStart, rows, panelStart, order } = symbolic;
  const l = Array.from({ length: n }, () => new Float64Array(n));
  for (let s = 0; s < blocks; s += 1) {
    const width = firstColumn[s + 1] - firstColumn[s];
    for (let k = rowStart[s]; k < rowStart[s + 1]; k += 1) {
      for (let c = 0; c < width; c += 1) {
        const j = firstColumn[s] + c;
        if (rows[k] >= j) l[rows[k]][j] = panels[panelStart[s] + (k - rowStart[s]) * width + c];
      }
    }
  }
  const a = dense(matrix);
  let worst = 0;
  for (let i = 0; i < n; i += 1) {
    for (let j = 0; j <= i; j += 1) {
      let sum = a[order[i]][order[j]];
      for (let k = 0; k <= j; k += 1) sum -= l[i][k] * l[j][k];
      worst = Math.max(worst, Math.abs(sum));
    }
  }
  return n === 0 ? 0 : worst / (n * EPS * norm(matrix));
}

for (const kind of Object.keys(DEFINITE)) {
  verify(
    {
      quantity: 'sparse Cholesky, residual over round-off',
      check: 'invariant',
      at: `${kind} matrices of ${SIZES.join(', ')} unknowns`,
      source: 'LAPACK test suite: ‖b − Ax‖/(ε‖A‖‖x‖) and ‖A − LLᵀ‖/(nε‖A‖) below 30',
      tolerance: 30,
    },
    () => {
      let worst = 0;
      for (const n of SIZES) {
        const random = randomFrom(n + 17);
        const matrix = DEFINITE[kind](n, random);
        const symbolic = analyse(matrix);
        const factor = factorise(symbolic, matrix);
        const b = rightSide(n, random);
        const x = b.slice();
        solve(factor, x);
        worst = Math.max(worst, solveRatio(matrix, x, b));
        if (n <= 50) worst = Math.max(worst, factorRatio(matrix, symbolic, factor.panels));
      }
      return worst;
    },
  );
}

describe('two routes agree', () => {
  for (const kind of Object.keys(DEFINITE).filter((name) => name !== 'unequal')) {
    test(`${kind}: with row exchanges on the full matrix, signed by columns, in another order`, () => {
      for (const n of [1, 2, 3, 5, 10, 50, 200, 5000]) {
        const random = randomFrom(n + 5);
        const matrix = DEFINITE[kind](n, random);
        const b = rightSide(n, random);
        const x = b.slice();
        solve(factorise(analyse(matrix), matrix), x);
        const size = x.reduce((m, v) => Math.max(m, Math.abs(v)), 0);
        const close = (y: Float64Array) => {
          for (let i = 0; i < n; i += 1) expect(Math.abs(y[i] - x[i]) / size).toBeLessThan(1e-10);
        };
        const signed = b.slice();
        solveIndefinite(factoriseIndefinite(matrix), signed);
        close(signed);
        if (n <= 200) {
          close(denseSolve(dense(matrix), b));
          const backwards = Int32Array.from({ length: n }, (_, k) => n - 1 - k);
          const y = b.slice();
          solve(factorise(analyse(matrix, backwards), matrix), y);
          close(y);
        }
      }
    });
  }
});

test('values only: the same bits as a factorisation from nothing, and nothing left of the old values', () => {
  const random = randomFrom(3);
  const first = DEFINITE.grid!(400, random);
  const symbolic = analyse(first);
  const factor = factorise(symbolic, first, emptyFactor(symbolic));
  const second = { ...first, value: first.value.map((v) => v * 1.25) };
  factorise(symbolic, second, factor);
  expect(factor.panels).toEqual(factorise(analyse(second), second).panels);
});

test('several right sides at once: each as if alone', () => {
  const random = randomFrom(9);
  const matrix = DEFINITE.random!(120, random);
  const factor = factorise(analyse(matrix), matrix);
  for (let columns = 0; columns <= 9; columns += 1) {
    const b = rightSide(120 * columns, random);
    const alone = b.slice();
    for (let c = 0; c < columns; c += 1) solve(factor, alone.subarray(120 * c, 120 * (c + 1)));
    solve(factor, b, columns);
    for (let i = 0; i < b.length; i += 1) expect(Math.abs(b[i] - alone[i])).toBeLessThan(1e-12);
  }
});

test('a right side that is too short, a pattern that is another, an order that is none', () => {
  const matrix = DEFINITE.banded!(10, randomFrom(1));
  const other = DEFINITE.banded!(11, randomFrom(1));
  const symbolic = analyse(matrix);
  expect(() => factorise(symbolic, other)).toThrow('pattern');
  expect(() => solve(factorise(symbolic, matrix), new Float64Array(19), 2)).toThrow('right side');
  expect(() => analyse(matrix, new Int32Array(10))).toThrow('permutation');
  expect(() => analyse(matrix, Int32Array.of(0, 1))).toThrow('permutation');
});
