import { describe, expect, test } from 'vitest';
import { DEFINITE, denseSolve, randomFrom } from '../../test/sparse/matrices.ts';
import { analyse } from './analyse.ts';
import { factorise } from './factorise.ts';
import { type Apply, gmres } from './gmres.ts';
import { multiply } from './multiply.ts';
import { solve } from './solve.ts';

const identity: Apply = (x, y) => y.set(x);

describe('gmres', () => {
  test('an unsymmetric full matrix, against elimination with row exchanges', () => {
    for (const n of [0, 1, 2, 3, 10, 50]) {
      const random = randomFrom(n);
      const a = Array.from({ length: n }, (_, i) =>
        Float64Array.from({ length: n }, (_, j) => random() - 0.5 + (i === j ? 3 : 0)),
      );
      const apply: Apply = (x, y) => {
        for (let i = 0; i < n; i += 1) y[i] = a[i].reduce((sum, v, j) => sum + v * x[j], 0);
      };
      const b = Float64Array.from({ length: n }, () => random() - 0.5);
      const x = new Float64Array(n);
      expect(gmres(apply, identity, b, x, 1e-13, n)).toBeLessThanOrEqual(1e-13 + (n === 0 ? 0 : 1e-12));
      const wanted = denseSolve(a, b);
      for (let i = 0; i < n; i += 1) expect(Math.abs(x[i] - wanted[i])).toBeLessThan(1e-12);
    }
  });

  test('preconditioned by the symmetric part, a sparse matrix with a skew part takes few steps', () => {
    const random = randomFrom(8);
    const matrix = DEFINITE.grid(2000, random);
    const n = matrix.n;
    const factor = factorise(analyse(matrix), matrix);
    // Skew: ± 5 % of the diagonal between neighbours in number.
    const s = Float64Array.from({ length: n }, (_, i) => 0.05 * matrix.value[matrix.columnStart[i]]);
    const apply: Apply = (x, y) => {
      multiply(matrix, x, y);
      for (let i = 0; i + 1 < n; i += 1) {
        y[i] += s[i] * x[i + 1];
        y[i + 1] -= s[i] * x[i];
      }
    };
    const precondition: Apply = (x, y) => {
      y.set(x);
      solve(factor, y);
    };
    const b = Float64Array.from({ length: n }, () => random() - 0.5);
    const x = new Float64Array(n);
    expect(gmres(apply, precondition, b, x, 1e-10, 40)).toBeLessThanOrEqual(1e-10);
    const y = new Float64Array(n);
    apply(x, y);
    let residual = 0;
    let size = 0;
    for (let i = 0; i < n; i += 1) {
      residual += (b[i] - y[i]) ** 2;
      size += b[i] ** 2;
    }
    expect(Math.sqrt(residual / size)).toBeLessThan(2e-10);
  });

  test('says how far it came when steps run out, and gives zero for a zero right side', () => {
    const apply: Apply = (x, y) => y.set(x.map((v, i) => (i + 1) * v));
    const x = new Float64Array(20);
    expect(gmres(apply, identity, new Float64Array(20).fill(1), x, 1e-12, 3)).toBeGreaterThan(1e-3);
    expect(gmres(apply, identity, new Float64Array(20), x, 1e-12, 3)).toBe(0);
    expect([...x]).toEqual(new Array(20).fill(0));
  });
});
