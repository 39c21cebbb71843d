import { describe, expect, test } from 'vitest';
import { DEFINITE, EPS, fromEntries, randomFrom, scaled } from '../../test/sparse/matrices.ts';
import { analyse } from './analyse.ts';
import { factorise } from './factorise.ts';
import { factoriseIndefinite, negativeEigenvalues, solveIndefinite } from './indefinite.ts';
import type { SymmetricMatrix } from './matrix.ts';
import { SingularMatrix } from './singular.ts';

function failure(matrix: SymmetricMatrix, order?: Int32Array): SingularMatrix {
  try {
    factorise(analyse(matrix, order), matrix);
  } catch (error) {
    if (error instanceof SingularMatrix) return error;
    throw error;
  }
  throw new Error('The factorisation went through.');
}

/** A ring of conductances with nothing to earth: A·1 = 0. */
function floatingRing(n: number, random: () => number, from = 0, total = n): SymmetricMatrix {
  const sum = new Float64Array(total);
  const below = new Map<number, number>();
  for (let k = 0; k < n; k += 1) {
    const a = from + k;
    const b = from + ((k + 1) % n);
    const g = 0.1 + random();
    const key = Math.min(a, b) * total + Math.max(a, b);
    below.set(key, (below.get(key) ?? 0) - g);
    sum[a] += g;
    sum[b] += g;
  }
  return fromEntries(total, (i) => (i >= from && i < from + n ? sum[i] : 1), below);
}

describe('singular', () => {
  test('a ring tied to nothing, at every size and scale', () => {
    for (const n of [3, 5, 10, 50, 500, 5000]) {
      for (const scale of [1, 1e12, 1e-12]) {
        const error = failure(scaled(floatingRing(n, randomFrom(n)), () => scale));
        expect(Math.abs(error.pivot)).toBeLessThan(64 * Math.sqrt(n) * EPS);
      }
    }
  });

  test('the unknown named lies in the part that floats', () => {
    const error = failure(floatingRing(7, randomFrom(2), 20, 40));
    expect(error.column).toBeGreaterThanOrEqual(20);
    expect(error.column).toBeLessThan(27);
    expect(error.message).toContain(`unknown ${error.column}`);
  });

  test('an unknown that nothing touches', () => {
    expect(failure(fromEntries(3, (i) => (i === 1 ? 0 : 1), new Map())).column).toBe(1);
  });

  test('a value that is not a number', () => {
    const matrix = DEFINITE.grid!(25, randomFrom(1));
    matrix.value[matrix.columnStart[12]] = Number.NaN;
    expect(failure(matrix).pivot).toBeNaN();
  });
});

describe('indefinite', () => {
  test('the first pivot that is negative is named, in a given order', () => {
    // Leading minors 2, 3, 4, then the diagonal of unknown 3 is pulled below zero.
    const chain = fromEntries(
      6,
      (i) => (i === 3 ? -1 : 2),
      new Map([0, 1, 2, 3, 4].map((i) => [6 * i + i + 1, -1])),
    );
    const error = failure(chain, Int32Array.of(0, 1, 2, 3, 4, 5));
    expect(error.column).toBe(3);
    expect(error.pivot).toBeCloseTo(-1.75, 12);
  });

  test('random ones of every size', () => {
    for (const n of [1, 2, 3, 5, 10, 50, 500, 5000]) {
      const matrix = DEFINITE.random!(n, randomFrom(n));
      const k = matrix.columnStart[n >> 1];
      matrix.value[k] = -matrix.value[k];
      expect(failure(matrix).pivot).toBeLessThan(0);
    }
  });

  test('signed factorisation: inertia of a saddle, and its solution', () => {
    // [K Bᵀ; B −εI] with 3 + 2 unknowns: three positive pivots, two negative.
    const eps = 1e-9;
    const below = new Map<number, number>([
      [0 * 5 + 1, -1],
      [1 * 5 + 2, -1],
      [0 * 5 + 3, 1],
      [1 * 5 + 3, -1],
      [1 * 5 + 4, 1],
      [2 * 5 + 4, -1],
    ]);
    const matrix = fromEntries(5, (i) => (i < 3 ? 2.5 : -eps), below);
    const factor = factoriseIndefinite(matrix);
    expect(negativeEigenvalues(factor)).toBe(2);
    const b = Float64Array.of(1, 0, -1, 0, 0);
    solveIndefinite(factor, b);
    // By hand: the constraints make the three velocities equal; symmetry makes them zero.
    for (let i = 0; i < 3; i += 1) expect(Math.abs(b[i])).toBeLessThan(1e-8);
    expect(b[3]).toBeCloseTo(1, 8);
    expect(b[4]).toBeCloseTo(1, 8);
  });

  test('signed factorisation: a pivot that vanishes is named', () => {
    const matrix = fromEntries(2, () => 1, new Map([[1, 1]]));
    expect(() => factoriseIndefinite(matrix)).toThrow(SingularMatrix);
  });
});
