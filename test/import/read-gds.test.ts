import { expect, test } from 'vitest';
import { boundary, drawingOf, gds, layerOf, REAL, record, rounded } from './read.ts';

/** GDSII stream format, release 6, by its published records; placements worked by hand. */

const sref = (name: string, more: readonly number[], xy: readonly number[]): number[] => [
  ...record(0x0a, 0),
  ...record(0x12, 6, name),
  ...more,
  ...record(0x10, 3, xy),
  ...record(0x11, 0),
];

const ANGLE = record(0x1c, 5, REAL.ninety);
const MAG = record(0x1b, 5, REAL.two);
const MIRROR = record(0x1a, 1, [0x80, 0]);

const loops = (structures: Parameters<typeof gds>[0], layer = '1/0') =>
  layerOf(drawingOf(gds(structures)), layer).regions.map(({ loops: [loop] }) => rounded(loop));

test('a boundary, its last point not repeated; the database unit is a nanometre', () => {
  const drawing = drawingOf(gds({ TOP: [boundary([0, 0, 1000, 0, 1000, 200, 0, 200])] }));
  expect(drawing.unit).toBeCloseTo(1e-9, 20);
  expect(rounded(layerOf(drawing, '1/0').regions[0].loops[0])).toEqual([
    0, 0, 0, 1000, 0, 0, 1000, 200, 0, 0, 200, 0,
  ]);
});

test('a reference is mirrored about x, magnified, turned and moved, in that order', () => {
  const cell = [boundary([0, 0, 10, 0, 10, 5])];
  expect(loops({ TOP: [sref('C', [...MIRROR, ...MAG, ...ANGLE], [100, 0])], C: cell })).toEqual([
    // (10, 5) mirrored (10, -5), twice (20, -10), a quarter turn (10, 20), moved (110, 20)
    [100, 0, 0, 100, 20, 0, 110, 20, 0],
  ]);
});

test('an array of two columns and three rows, from its three points', () => {
  const aref = [
    ...record(0x0b, 0),
    ...record(0x12, 6, 'C'),
    ...record(0x13, 2, [2, 3]),
    ...record(0x10, 3, [0, 0, 200, 0, 0, 90]),
    ...record(0x11, 0),
  ];
  const placed = loops({ TOP: [aref], C: [boundary([0, 0, 10, 0, 10, 5])] });
  expect(placed.map(([x, y]) => [x, y])).toEqual([
    [0, 0],
    [100, 0],
    [0, 30],
    [100, 30],
    [0, 60],
    [100, 60],
  ]);
});

test('an array of what is mirrored, magnified and turned: pitches are those of the plan', () => {
  const aref = [
    ...record(0x0b, 0),
    ...record(0x12, 6, 'C'),
    ...MIRROR,
    ...MAG,
    ...ANGLE,
    ...record(0x13, 2, [2, 1]),
    // turned with what it places: columns go up, rows to the left
    ...record(0x10, 3, [100, 100, 100, 200, 70, 100]),
    ...record(0x11, 0),
  ];
  // (x, y) mirrored, twice and a quarter turn is (2 y, 2 x)
  expect(loops({ TOP: [aref], C: [boundary([0, 0, 10, 0, 10, 5])] })).toEqual([
    [100, 100, 0, 100, 120, 0, 110, 120, 0],
    [100, 150, 0, 100, 170, 0, 110, 170, 0],
  ]);
});

test('several structures that none places are all taken, and that is said', () => {
  const drawing = drawingOf(
    gds({ A: [boundary([0, 0, 10, 0, 10, 5])], B: [boundary([20, 0, 30, 0, 30, 5])] }),
  );
  expect(layerOf(drawing, '1/0').regions).toHaveLength(2);
  expect(drawing.assumed).toEqual([
    'No structure places "A", "B": all were taken, each where its own coordinates have it.',
  ]);
});

test('paths: flush, square and given ends, width absolute where negative', () => {
  const path = (more: readonly number[], width: number): number[] => [
    ...record(0x09, 0),
    ...record(0x0d, 2, [2]),
    ...record(0x0e, 2, [5]),
    ...more,
    ...record(0x0f, 3, [width]),
    ...record(0x30, 3, [7]),
    ...record(0x31, 3, [9]),
    ...record(0x10, 3, [0, 0, 100, 0]),
    ...record(0x11, 0),
  ];
  const ends = (type: number) => {
    const drawing = drawingOf(gds({ TOP: [path(record(0x21, 2, [type]), 20)] }));
    const [track] = layerOf(drawing, '2/5').tracks;
    return [track.vertices[0], track.vertices[3], track.widths[0]];
  };
  expect(ends(0)).toEqual([0, 100, 20]);
  expect(ends(2)).toEqual([-10, 110, 20]);
  expect(ends(4)).toEqual([-7, 109, 20]);
  expect(ends(1)).toEqual([0, 100, 20]);
  const [round, square] = [1, 0].map(
    (type) => layerOf(drawingOf(gds({ TOP: [path(record(0x21, 2, [type]), 20)] })), '2/5').tracks[0]!.round,
  );
  expect([round, square]).toEqual([true, undefined]);
  const twice = drawingOf(gds({ TOP: [sref('C', MAG, [0, 0])], C: [path([], -20), path([], 20)] }));
  expect(layerOf(twice, '2/5').tracks.map(({ widths }) => widths[0])).toEqual([20, 40]);
});

test('boxes are regions, texts are listed', () => {
  const box = [
    ...record(0x2d, 0),
    ...record(0x0d, 2, [3]),
    ...record(0x2e, 2, [1]),
    ...record(0x10, 3, [0, 0, 5, 0, 5, 5, 0, 5, 0, 0]),
    ...record(0x11, 0),
  ];
  const text = [
    ...record(0x0c, 0),
    ...record(0x0d, 2, [3]),
    ...record(0x10, 3, [0, 0]),
    ...record(0x19, 6, 'hello'),
    ...record(0x11, 0),
  ];
  const drawing = drawingOf(gds({ TOP: [box, text] }));
  expect(rounded(layerOf(drawing, '3/1').regions[0].loops[0])).toHaveLength(12);
  expect(drawing.notUnderstood.map(({ what, count }) => [what, count])).toEqual([['TEXT', 1]]);
});

test('structures that hold each other in a circle, and what is cut short, are refused with the byte', () => {
  expect(() => drawingOf(gds({ A: [sref('B', [], [0, 0])], B: [sref('A', [], [0, 0])] }))).toThrow(
    expect.objectContaining({ kind: 'reference' }),
  );
  expect(() => drawingOf(gds({ TOP: [sref('A', [], [0, 0])], A: [sref('A', [], [0, 0])] }))).toThrow(
    expect.objectContaining({ what: 'The structure "A" holds a reference to itself.' }),
  );
  const whole = gds({ TOP: [boundary([0, 0, 10, 0, 10, 5])] });
  expect(() => drawingOf(whole.subarray(0, whole.length - 6))).toThrow(
    expect.objectContaining({ kind: 'syntax', where: expect.stringMatching(/^byte \d+$/) }),
  );
});
