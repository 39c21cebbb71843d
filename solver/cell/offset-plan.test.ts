import { expect, test } from 'vitest';
import type { Edge } from '../mesh/mesh.ts';
import { offsetPlan } from './offset-plan.ts';

const edge = (x: number, y: number, tag = 0, bulge = 0): Edge => ({ x, y, bulge, tag });

test('walls move outward, faces stay in their lines', () => {
  const channel = [edge(0, 0), edge(3, 0, 1), edge(3, 1), edge(0, 1, 2)];
  const [moved] = offsetPlan([channel], 0.1)!;
  const expected = [
    [0, -0.1],
    [3, -0.1],
    [3, 1.1],
    [0, 1.1],
  ];
  moved!.forEach((at, i) => {
    expect(at.x).toBeCloseTo(expected[i]![0]!, 12);
    expect(at.y).toBeCloseTo(expected[i]![1]!, 12);
  });
});

test('a post shrinks as the walls move outward of the fluid, keeping its centre', () => {
  const outer = [edge(-2, -2, 1), edge(2, -2), edge(2, 2, 2), edge(-2, 2)];
  const post = [edge(-0.5, 0, 0, -1), edge(0.5, 0, 0, -1)];
  const moved = offsetPlan([outer, post], 0.1)!;
  expect(moved[1]!.map((at) => at.x)).toEqual([-0.4, 0.4]);
});

test('a detail smaller than the move is told', () => {
  const notch = [
    edge(0, 0),
    edge(3, 0, 1),
    edge(3, 1),
    edge(2, 1),
    edge(2, 1.05),
    edge(1.95, 1.05),
    edge(1.95, 1),
    edge(0, 1, 2),
  ];
  expect(offsetPlan([notch], -0.1)).toBeNull();
});
