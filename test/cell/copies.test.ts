import { expect, test } from 'vitest';
import { canonical, fromCaller, toCaller } from '../../solver/cell/canonical.ts';
import type { CellSolution } from '../../solver/cell/cell.ts';
import { decodeSolution, encodeSolution } from '../../solver/cell/encode.ts';
import { peakShear } from '../../solver/cell/peak.ts';
import type { CellShape } from '../../solver/cell/shape.ts';
import { cellKey, solveCell } from '../../solver/cell/solve-cell.ts';
import { type CellStore, memoryStore, solutionBytes } from '../../solver/cell/store.ts';
import { verify } from '../verify/row.ts';
import { bend, star, tee } from './shapes.ts';

/** Turned by `angle`, mirrored, scaled, moved, the loop begun at another corner, faces renumbered by `order`. */
function copy(
  shape: CellShape,
  how: { angle: number; mirrored: boolean; scale: number; start: number; order: readonly number[] },
): CellShape {
  const c = Math.cos(how.angle) * how.scale;
  const s = Math.sin(how.angle) * how.scale;
  const loops = shape.loops.map((loop) => {
    const n = loop.length;
    let edges = loop.map((edge) => ({ ...edge, tag: edge.tag === 0 ? 0 : how.order[edge.tag - 1]! + 1 }));
    if (how.mirrored)
      edges = edges.map((_, i) => {
        const from = edges[(n - i) % n]!;
        const along = edges[n - 1 - i]!;
        return { x: -from.x, y: from.y, bulge: along.bulge, tag: along.tag };
      });
    return edges.map((_, i) => {
      const edge = edges[(i + how.start) % n]!;
      return { ...edge, x: 3.7 + c * edge.x - s * edge.y, y: -1.1 + s * edge.x + c * edge.y };
    });
  });
  return { ...shape, loops, depth: shape.depth * how.scale };
}

const lopsided = star(
  [
    { angle: 0, width: 1 },
    { angle: 100, width: 0.7 },
    { angle: 215, width: 0.9 },
  ],
  0.5,
  0.15,
);
const HOW = [
  { angle: 0.3, mirrored: false, scale: 1, start: 3, order: [0, 1, 2] },
  { angle: Math.PI / 2, mirrored: true, scale: 2.5, start: 1, order: [2, 0, 1] },
  { angle: -2, mirrored: true, scale: 1e-4, start: 5, order: [1, 0, 2] },
] as const;

/** Largest difference of the copy's port matrix and peaks from the first one's, relative. */
function difference(first: CellSolution, other: CellSolution, how: (typeof HOW)[number]): number {
  const { faces } = first;
  let most = 0;
  let norm = 0;
  for (const value of first.portMatrix) norm = Math.max(norm, Math.abs(value));
  for (let i = 0; i < faces; i += 1)
    for (let j = 0; j < faces; j += 1) {
      const there = other.portMatrix[how.order[i]! * faces + how.order[j]!]! / how.scale ** 3;
      most = Math.max(most, Math.abs(there - first.portMatrix[i * faces + j]!) / norm);
    }
  for (let face = 0; face < faces; face += 1) {
    const here = new Float64Array(faces);
    const there = new Float64Array(faces);
    here[face] = 1;
    there[how.order[face]!] = 1;
    const a = peakShear(first, here);
    const b = peakShear(other, there);
    if (a && b) most = Math.max(most, Math.abs(b.value / a.value - 1));
  }
  return most;
}

for (const [name, shape] of [
  ['three unlike arms with fillets', lopsided],
  ['a T with fillets, symmetric in itself', tee(0.5, 0.1)],
  ['a sharp T', tee(0.3)],
] as const)
  for (const how of HOW)
    verify(
      {
        quantity: 'port matrix and peaks of a turned, mirrored or scaled copy',
        check: 'invariant',
        at: `${name}, turned by ${how.angle.toPrecision(2)}, ${how.mirrored ? 'mirrored, ' : ''}scaled by ${how.scale}`,
        source: 'Stokes flow has no scale, direction or handedness; flow goes with the cube of the scale',
        tolerance: 1e-6,
      },
      () => {
        const turned = copy(shape, how);
        // Apart, with no store: agreement must not come from one being the other's copy in memory.
        return difference(solveCell(shape), solveCell(turned), how);
      },
    );

test('copies have one key, other shapes another', () => {
  const keys = [tee(0.5), ...HOW.map((how) => copy(tee(0.5), how))].map((shape) => cellKey(shape));
  expect(new Set(keys).size).toBe(1);
  const others = [tee(0.5), tee(0.51), tee(0.5, 0.1), tee(0.5, 0, 1.01), bend(0.5)].map((shape) =>
    cellKey(shape),
  );
  expect(new Set(others).size).toBe(5);
});

test('a placement leads there and back', () => {
  const { placements, shape } = canonical(copy(lopsided, HOW[1]));
  const { x, y } = shape.loops[0]![2]!;
  const [px, py] = toCaller(placements[0], x, y);
  const [bx, by] = fromCaller(placements[0], px, py);
  expect(bx).toBeCloseTo(x, 10);
  expect(by).toBeCloseTo(y, 10);
  const corner = copy(lopsided, HOW[1]).loops[0]!.map((edge) => Math.hypot(edge.x - px, edge.y - py));
  expect(Math.min(...corner)).toBeLessThan(1e-6);
});

test('fifty equal bends are one solve', () => {
  const kept = memoryStore();
  let solves = 0;
  const store: CellStore = {
    get: kept.get,
    put: (key, solution) => {
      solves += 1;
      kept.put(key, solution);
    },
  };
  for (let i = 0; i < 50; i += 1)
    solveCell(
      copy(bend(0.5), {
        angle: (i % 4) * (Math.PI / 2),
        mirrored: i % 3 === 0,
        scale: 1 + i,
        start: i % 4,
        order: [0, 1],
      }),
      undefined,
      store,
    );
  expect(solves).toBe(1);
});

test('what was solved for less is solved again for more, and serves for less', () => {
  const store = memoryStore();
  const preview = solveCell(tee(0.5), { flow: 0.03, peak: null }, store);
  const better = solveCell(tee(0.5), { flow: 0.002, peak: null }, store);
  expect(better.flowError).toBeLessThan(preview.flowError);
  expect(solveCell(tee(0.5), { flow: 0.03, peak: null }, store).flowError).toBe(better.flowError);
});

test('the store in memory stays within its bound and drops what was used longest ago', () => {
  const shapes = [0.3, 0.4, 0.5, 0.6].map((depth) => bend(depth));
  const free = memoryStore();
  for (const shape of shapes) solveCell(shape, { flow: 0.03, peak: null }, free);
  const keys = shapes.map((shape) => cellKey(shape));
  const sizes = keys.map((key) => solutionBytes(free.get(key)!));
  const store = memoryStore(sizes.reduce((a, b) => a + b, 0) - 1);
  for (const shape of shapes.slice(0, 3)) solveCell(shape, { flow: 0.03, peak: null }, store);
  store.get(keys[0]!);
  solveCell(shapes[3]!, { flow: 0.03, peak: null }, store);
  expect(keys.map((key) => store.get(key) !== undefined)).toEqual([true, false, true, true]);
  expect(store.bytes()).toBeLessThan(sizes.reduce((a, b) => a + b, 0));
});

test('a solution survives being written and read, and damage is noticed', () => {
  const store = memoryStore();
  const shape = tee(0.5, 0.1);
  const fresh = solveCell(shape, undefined, store);
  const kept = store.get(cellKey(shape))!;
  const bytes = encodeSolution(kept);
  const again = decodeSolution(bytes)!;
  const other = memoryStore();
  other.put(cellKey(shape), again);
  const read = solveCell(shape, undefined, other);
  expect(read.portMatrix).toEqual(fresh.portMatrix);
  expect(peakShear(read, [1, 0, 0])).toEqual(peakShear(fresh, [1, 0, 0]));

  const bare = decodeSolution(encodeSolution(kept, false))!;
  expect(bare.fields).toBeNull();
  expect(bare.portMatrix).toEqual(kept.portMatrix);

  expect(decodeSolution(bytes.subarray(0, bytes.length - 8))).toBeNull();
  expect(decodeSolution(new Uint8Array(7))).toBeNull();
  expect(decodeSolution(new Uint8Array(1024))).toBeNull();
  const doubles = new Float64Array(bytes.slice().buffer);
  for (const [at, value] of [
    [1, 1e9],
    [10, -1],
    [12, 0.5],
    [13, Number.NaN],
    [18, Number.NaN],
  ] as const) {
    const damaged = doubles.slice();
    damaged[at] = value;
    expect(decodeSolution(new Uint8Array(damaged.buffer))).toBeNull();
  }
});
