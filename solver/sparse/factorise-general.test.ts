import { describe, expect, test } from 'vitest';
import { DEFINITE, dense, denseSolve, EPS, norm, randomFrom } from '../../test/sparse/matrices.ts';
import { verify } from '../../test/verify/row.ts';
import { analyse } from './analyse.ts';
import { emptyGeneralFactor, factoriseGeneral, solveGeneral } from './factorise-general.ts';
import type { SymmetricMatrix } from './matrix.ts';
import { SingularMatrix } from './singular.ts';

/** Pattern and diagonal of a definite kind, values below and above the diagonal apart, columns still dominant. */
function unsymmetric(kind: string, n: number, random: () => number): [SymmetricMatrix, Float64Array] {
  const matrix = DEFINITE[kind](n, random);
  const mirrored = matrix.value.map((v) => v * (2 * random() - 1));
  for (let j = 0; j < n; j += 1) mirrored[matrix.columnStart[j]] = matrix.value[matrix.columnStart[j]];
  return [matrix, mirrored];
}

function full(matrix: SymmetricMatrix, mirrored: Float64Array): Float64Array[] {
  const a = dense(matrix);
  const t = dense({ ...matrix, value: mirrored });
  return a.map((row, i) => row.map((v, j) => (j > i ? t[i][j] : v)));
}

for (const kind of Object.keys(DEFINITE)) {
  verify(
    {
      quantity: 'sparse L U, residual over round-off',
      check: 'invariant',
      at: `${kind} patterns of 0 to 500 unknowns, unsymmetric values`,
      source: 'LAPACK test suite: ‖b − Ax‖/(ε‖A‖‖x‖) below 30',
      tolerance: 30,
    },
    () => {
      let worst = 0;
      for (const n of [0, 1, 2, 3, 5, 10, 50, 500]) {
        const random = randomFrom(n + 3);
        const [matrix, mirrored] = unsymmetric(kind, n, random);
        const b = Float64Array.from({ length: n }, () => random() - 0.5);
        const x = b.slice();
        solveGeneral(factoriseGeneral(analyse(matrix), matrix, mirrored), x);
        const a = full(matrix, mirrored);
        const size = x.reduce((m, v) => Math.max(m, Math.abs(v)), 0);
        a.forEach((row, i) => {
          const residual = row.reduce((sum, v, j) => sum - v * x[j], b[i]);
          if (residual !== 0) worst = Math.max(worst, Math.abs(residual) / (EPS * norm(matrix) * size));
        });
      }
      return worst;
    },
  );
}

describe('two routes agree', () => {
  test('with row exchanges on the full matrix, in the given order and backwards', () => {
    for (const kind of ['random', 'banded', 'grid', 'arrow', 'disconnected', 'tree']) {
      const random = randomFrom(77);
      const n = 90;
      const [matrix, mirrored] = unsymmetric(kind, n, random);
      const b = Float64Array.from({ length: n }, () => random() - 0.5);
      const wanted = denseSolve(full(matrix, mirrored), b);
      const backwards = Int32Array.from({ length: n }, (_, k) => n - 1 - k);
      for (const symbolic of [analyse(matrix), analyse(matrix, backwards)]) {
        const into = emptyGeneralFactor(symbolic);
        factoriseGeneral(symbolic, matrix, matrix.value, into);
        const x = b.slice();
        solveGeneral(factoriseGeneral(symbolic, matrix, mirrored, into), x);
        for (let i = 0; i < n; i += 1) expect(Math.abs(x[i] - wanted[i])).toBeLessThan(1e-11);
      }
    }
  });

  test('a pivot that vanishes is named; a right side that is too short', () => {
    const [matrix, mirrored] = unsymmetric('banded', 20, randomFrom(1));
    const symbolic = analyse(matrix);
    expect(() => solveGeneral(factoriseGeneral(symbolic, matrix, mirrored), new Float64Array(19))).toThrow(
      'right side',
    );
    matrix.value[matrix.columnStart[7]] = Number.NaN;
    expect(() => factoriseGeneral(symbolic, matrix, mirrored)).toThrow(SingularMatrix);
  });
});
