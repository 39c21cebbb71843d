import { expect, test } from 'vitest';
import { piece, resultOf } from '../testing/results.ts';
import { directionsOf, marksAlong, signOn } from './flow-marks.ts';

const level = [
  [0, 0],
  [144, 0],
] as const;

test('marks stand at equal distances along a path and point along it', () => {
  const marks = marksAlong(level, 0);
  expect(marks.map(({ x }) => x)).toEqual([36, 108]);
  expect(marks.every(({ ux, uy }) => ux === 1 && uy === 0)).toBe(true);
  // round a corner they turn with it
  const round = marksAlong([...level, [144, 144]], 0);
  expect(round.map(({ uy }) => uy)).toEqual([0, 0, 1, 1]);
});
test('a shift moves them along, a whole step changes nothing, nor does one against the path lose any', () => {
  expect(marksAlong(level, 10).map(({ x }) => x)).toEqual([46, 118]);
  expect(marksAlong(level, 72)).toEqual(marksAlong(level, 0));
  expect(marksAlong(level, -50).map(({ x }) => x)).toEqual([58, 130]);
});
test('a stretch too short to read bears none', () => {
  expect(
    marksAlong(
      [
        [0, 0],
        [20, 0],
      ],
      0,
    ),
  ).toEqual([]);
});
test('the direction of a stretch is that of the piece which fills most of it', () => {
  const directions = directionsOf(
    resultOf({
      channels: [
        {
          id: 'a',
          pieces: [piece({ along: [0, 0.004], flow: 1e-10 }), piece({ along: [0.004, 0.01], flow: -1e-10 })],
        },
        { id: 'still', pieces: [piece({ flow: null })] },
      ],
    }),
  );
  expect(signOn(directions, 'a', 0, 4e6)).toBe(1);
  expect(signOn(directions, 'a', 3e6, 10e6)).toBe(-1);
  expect(signOn(directions, 'still', 0, 1e6)).toBe(0);
  expect(signOn(directions, 'none', 0, 1e6)).toBe(0);
});
