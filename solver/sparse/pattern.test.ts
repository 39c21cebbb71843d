import { expect, test } from 'vitest';
import { dense, randomFrom } from '../../test/sparse/matrices.ts';
import { patternOfElements } from './pattern.ts';

test('elements that share, repeat and are held fixed add up to the full matrix', () => {
  const random = randomFrom(12);
  for (let round = 0; round < 50; round += 1) {
    const n = 1 + Math.floor(random() * 12);
    const elementStart = [0];
    const unknowns: number[] = [];
    for (let e = 0; e < 15; e += 1) {
      const own = new Set<number>();
      for (let k = 0; k < 5; k += 1) own.add(Math.floor(random() * n));
      unknowns.push(...[...own].map((u) => (random() < 0.2 ? -1 : u)));
      elementStart.push(unknowns.length);
    }
    const { matrix, scatterStart, scatter } = patternOfElements(
      n,
      Int32Array.from(elementStart),
      Int32Array.from(unknowns),
    );
    const wanted = Array.from({ length: n }, () => new Float64Array(n));
    for (let e = 0; e < 15; e += 1) {
      const own = unknowns.slice(elementStart[e], elementStart[e + 1]);
      let p = scatterStart[e];
      for (let a = 0; a < own.length; a += 1) {
        for (let b = 0; b <= a; b += 1, p += 1) {
          const v = random();
          if (own[a] < 0 || own[b] < 0) {
            expect(scatter[p]).toBe(-1);
            continue;
          }
          matrix.value[scatter[p]] += v;
          wanted[own[a]][own[b]] += v;
          if (a !== b) wanted[own[b]][own[a]] += v;
        }
      }
      expect(p).toBe(scatterStart[e + 1]);
    }
    const full = dense(matrix);
    for (let i = 0; i < n; i += 1) {
      for (let j = 0; j < n; j += 1) expect(full[i][j]).toBeCloseTo(wanted[i][j], 12);
      expect(matrix.row[matrix.columnStart[i]]).toBe(i);
      const rows = matrix.row.slice(matrix.columnStart[i], matrix.columnStart[i + 1]);
      expect(rows).toEqual(rows.slice().sort());
    }
  }
});

test('nothing at all', () => {
  const { matrix } = patternOfElements(0, Int32Array.of(0), new Int32Array(0));
  expect(matrix.columnStart).toEqual(Int32Array.of(0));
});
