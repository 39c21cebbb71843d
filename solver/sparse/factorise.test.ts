import { expect, test } from 'vitest';
import { analyse } from './analyse.ts';
import { factorise } from './factorise.ts';
import { patternOfElements } from './pattern.ts';
import { solve } from './solve.ts';

test('a chain of three unit resistances to earth', () => {
  const { matrix, scatter } = patternOfElements(
    3,
    Int32Array.of(0, 2, 4, 6),
    Int32Array.of(-1, 0, 0, 1, 1, 2),
  );
  for (let e = 0; e < 3; e += 1) {
    for (const [entry, value] of [
      [0, 1],
      [1, -1],
      [2, 1],
    ] as const) {
      const at = scatter[3 * e + entry]!;
      if (at >= 0) matrix.value[at] = matrix.value[at]! + value;
    }
  }
  const b = Float64Array.of(0, 0, 1, 1, 0, 0);
  solve(factorise(analyse(matrix), matrix), b, 2);
  [1, 2, 3, 1, 1, 1].forEach((value, i) => {
    expect(b[i]).toBeCloseTo(value, 12);
  });
});
