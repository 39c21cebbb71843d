import { expect, test } from 'vitest';
import type { CellShape } from '../../solver/cell/shape.ts';
import { solveCell } from '../../solver/cell/solve-cell.ts';
import type { Edge } from '../../solver/mesh/mesh.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { bend, star, tee } from './shapes.ts';

const ROUGH = { flow: 0.03, peak: null };

function problem(shape: CellShape): Problem {
  try {
    solveCell(shape, ROUGH, undefined, 'junction:7');
  } catch (error) {
    if (error instanceof Problem) return error;
    throw error;
  }
  throw new Error('it was solved');
}

const edge = (x: number, y: number, tag = 0, bulge = 0): Edge => ({ x, y, bulge, tag });
const box = (loops: Edge[][], faces = 2, depth = 0.5): CellShape => ({
  loops,
  depth,
  faces,
  profile: { kind: 'rectangle' },
});
const channel = [edge(0, 0), edge(3, 0, 1), edge(3, 1), edge(0, 1, 2)];

for (const [name, shape, kind] of [
  ['no depth', { ...tee(0.5), depth: 0 }, 'shape'],
  ['a depth that is not a number', { ...tee(0.5), depth: Number.NaN }, 'shape'],
  ['no outline', box([]), 'shape'],
  ['two corners', box([channel.slice(0, 2)]), 'shape'],
  ['a corner that is not a number', box([[edge(Number.NaN, 0), ...channel.slice(1)]]), 'shape'],
  ['a face too few', box([channel], 3), 'shape'],
  ['a tag too high', box([channel], 1), 'shape'],
  ['no face', box([channel], 0), 'shape'],
  ['an outline that crosses itself', box([[edge(0, 0), edge(3, 1, 1), edge(3, 0), edge(0, 1, 2)]]), 'shape'],
  [
    'a post that touches the wall',
    box([channel, [edge(1, 0), edge(1, 0.5), edge(1.5, 0.5), edge(1.5, 0)]]),
    'shape',
  ],
  [
    'twenty thousand corners and one',
    box([
      Array.from({ length: 20_001 }, (_, i) =>
        edge(Math.cos(i / 3183.1), Math.sin(i / 3183.1), i < 2 ? i + 1 : 0),
      ),
    ]),
    'memory',
  ],
  [
    'a hundred faces',
    box([Array.from({ length: 100 }, (_, i) => edge(Math.cos(i / 15.92), Math.sin(i / 15.92), i + 1))], 100),
    'too-many',
  ],
] as const)
  test(`${name} is a problem with a place and a remedy`, () => {
    const found = problem(shape);
    expect(found.kind).toBe(kind);
    expect(found.where).toBe('junction:7');
    expect(found.what.length).toBeGreaterThan(10);
    expect(found.remedy.length).toBeGreaterThan(10);
  });

/** Solved with balanced books, or refused in words: never anything else. */
function solvedOrRefused(shape: CellShape): void {
  try {
    const { checks, portMatrix } = solveCell(shape, ROUGH, undefined, 'junction:7');
    expect(portMatrix.every(Number.isFinite)).toBe(true);
    expect(Math.max(checks.reciprocity, checks.conservation, checks.dissipation)).toBeLessThan(1e-7);
  } catch (error) {
    if (!(error instanceof Problem)) throw error;
    expect(['shape', 'memory', 'too-many']).toContain(error.kind);
  }
}

for (const gap of [20, 5, 1, 0.1])
  test(`arms ${gap} degrees apart are solved or refused`, () => {
    solvedOrRefused(
      star(
        [
          { angle: 0, width: 1 },
          { angle: gap, width: 1 },
          { angle: 180, width: 1 },
        ],
        0.5,
      ),
    );
  });
for (const thin of [1e-2, 1e-4, 1e-8])
  test(`a sliver ${thin} wide at the side of a channel is solved or refused`, () => {
    solvedOrRefused(
      box([
        [
          edge(0, 0),
          edge(3, 0, 1),
          edge(3, 1),
          edge(1.5 + thin, 1),
          edge(1.5 + thin, 2),
          edge(1.5, 2),
          edge(1.5, 1),
          edge(0, 1, 2),
        ],
      ]),
    );
  });
test('a chamber of posts is solved', () => {
  const posts = [
    [1.5, 0.6],
    [1.5, 1.4],
    [2.5, 1],
  ].map(([x, y]) => [edge(x! - 0.2, y!, 0, -1), edge(x! + 0.2, y!, 0, -1)]);
  const outline = [
    edge(0, 0.6),
    edge(0.5, 0.6),
    edge(0.5, 0),
    edge(3.5, 0),
    edge(3.5, 0.6),
    edge(4, 0.6, 1),
    edge(4, 1.4),
    edge(3.5, 1.4),
    edge(3.5, 2),
    edge(0.5, 2),
    edge(0.5, 1.4),
    edge(0, 1.4, 2),
  ];
  const { checks, portMatrix } = solveCell(box([outline, ...posts]), ROUGH);
  expect(portMatrix[0]!).toBeGreaterThan(0);
  expect(checks.conservation).toBeLessThan(1e-7);
  const free = solveCell(box([outline]), ROUGH);
  expect(portMatrix[0]!).toBeLessThan(free.portMatrix[0]!);
});
test('a dead end takes no flow', () => {
  const { portMatrix } = solveCell(box([[edge(0, 0), edge(1, 0, 1), edge(1, 1), edge(0, 1)]], 1), ROUGH);
  expect(Array.from(portMatrix)).toEqual([0]);
});
test('the rim of a hole in the roof is a face like another', () => {
  const hole = [edge(1, 0.5, 2, -1), edge(1.6, 0.5, 2, -1)];
  const { portMatrix, checks } = solveCell(
    box([[edge(0, 0), edge(3, 0, 1), edge(3, 1), edge(0, 1)], hole]),
    ROUGH,
  );
  expect(portMatrix[1]!).toBeLessThan(0);
  expect(checks.conservation).toBeLessThan(1e-7);
});
test('a small hole widens the error bound by what the turn into it may cost', () => {
  const bound = (radius: number): number => {
    const hole = [edge(1.3 - radius, 0.5, 2, -1), edge(1.3 + radius, 0.5, 2, -1)];
    return solveCell(box([[edge(0, 0), edge(3, 0, 1), edge(3, 1), edge(0, 1)], hole], 2, 0.2), ROUGH)
      .flowError;
  };
  expect(bound(0.05)).toBeGreaterThan(bound(0.3) + 0.05);
});
test('a bend of another profile says how far the rectangle in its place may be off', () => {
  const trapezoid = solveCell({ ...bend(0.2), profile: { kind: 'trapezoid', wallAngle: 75 } }, ROUGH);
  expect(trapezoid.profileError).toBeGreaterThan(0);
  expect(trapezoid.flowError).toBeGreaterThan(trapezoid.profileError);
  // Its corner is sharp.
  expect(trapezoid.peakError).toBeNull();
});
