import { expect, test } from 'vitest';
import { shapeGradients, shapeValues } from './basis.ts';
import { DEGREE_4, DEGREE_6, LINE_POINTS, LINE_WEIGHTS } from './quadrature.ts';

test('integration rules are exact to their degree and no further', () => {
  const factorial = (n: number): number => (n < 2 ? 1 : n * factorial(n - 1));
  for (const [rule, degree] of [
    [DEGREE_4, 4],
    [DEGREE_6, 6],
  ] as const) {
    const error = (i: number, j: number): number => {
      let sum = 0;
      for (let q = 0; q < rule.count; q += 1) sum += rule.weight[q] * rule.u[q] ** i * rule.v[q] ** j;
      return Math.abs(sum - (factorial(i) * factorial(j)) / factorial(i + j + 2));
    };
    for (let i = 0; i <= degree; i += 1) {
      for (let j = 0; i + j <= degree; j += 1) expect(error(i, j)).toBeLessThan(1e-14);
    }
    expect(error(degree + 1, 0)).toBeGreaterThan(1e-7);
  }
  for (let i = 0; i <= 5; i += 1) {
    const sum = LINE_POINTS.reduce((total, t, q) => total + LINE_WEIGHTS[q] * t ** i, 0);
    expect(sum).toBeCloseTo(1 / (i + 1), 14);
  }
});

test('basis functions are one at their own node and zero at the others, and their derivatives fit', () => {
  const nodes = [
    [0, 0],
    [1, 0],
    [0, 1],
    [0.5, 0],
    [0.5, 0.5],
    [0, 0.5],
  ];
  const value = new Float64Array(6);
  const [du, dv, ahead, behind] = [0, 1, 2, 3].map(() => new Float64Array(6));
  nodes.forEach(([u, v], k) => {
    shapeValues(u, v, value);
    value.forEach((got, i) => {
      expect(got).toBeCloseTo(i === k ? 1 : 0, 14);
    });
  });
  const [u, v, h] = [0.23, 0.41, 1e-5];
  shapeGradients(u, v, du, dv);
  for (const [wanted, pu, pv] of [
    [du, h, 0],
    [dv, 0, h],
  ] as const) {
    shapeValues(u + pu, v + pv, ahead);
    shapeValues(u - pu, v - pv, behind);
    for (let i = 0; i < 6; i += 1) expect((ahead[i] - behind[i]) / (2 * h)).toBeCloseTo(wanted[i], 8);
  }
});
