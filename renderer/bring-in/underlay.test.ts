import { expect, test } from 'vitest';
import { scaledBy, told, type Underlay } from './underlay.ts';

const UNDERLAY: Underlay = {
  name: 'photo',
  image: { naturalWidth: 100, naturalHeight: 50 } as HTMLImageElement,
  x: 1000,
  y: 2000,
  scale: 10,
  opacity: 0.5,
  picked: [],
};

test('two points and their distance scale the picture about the first', () => {
  // 300 nm apart on the plan, 600 in truth: everything doubles about (1100, 2100).
  const scaled = scaledBy(
    UNDERLAY,
    [
      [1100, 2100],
      [1400, 2100],
    ],
    600,
  );
  expect(scaled).toMatchObject({ scale: 20, x: 900, y: 1900 });
});

test('one point, or no distance, is refused in words', () => {
  expect(
    scaledBy(
      UNDERLAY,
      [
        [1, 1],
        [1, 1],
      ],
      600,
    ),
  ).toMatch(/apart/);
  expect(
    scaledBy(
      UNDERLAY,
      [
        [1, 1],
        [2, 1],
      ],
      0,
    ),
  ).toMatch(/apart/);
});

test('lengths are told to the fifth figure of the width of the picture, and no finer than a nanometre', () => {
  // 76.2 mm wide: to a micrometre
  const wide = { ...UNDERLAY, scale: 762_000 };
  expect(told(wide, -27_213_214)).toBe(-27_213_000);
  expect(told(wide, 400)).toBe(0);
  // 1 µm wide
  expect(told(UNDERLAY, 123.4)).toBe(123);
});
