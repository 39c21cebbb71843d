import type { Mesh } from '../../mesh/mesh.ts';

/** Tags of a quarter rectangle's edges. */
export const WALL = 0;
export const SYMMETRY = 1;

/**
 * One quarter of a rectangle of half-widths `halfWidth` by 1, [0, halfWidth] x [0, 1], wall at the far
 * sides, symmetry at x = 0 and y = 0: a grid of right triangles, `across` cells over the half depth,
 * finer towards the wall, and as many towards the side wall as it takes, growing away from it.
 */
export function quarterRectangle(halfWidth: number, across: number): Mesh {
  const ys = graded(1, across);
  // Near the side wall as over the depth; beyond one depth the flow knows no side wall and cells grow.
  const xs: number[] = [];
  if (halfWidth <= 1.5) {
    for (const s of graded(1, Math.max(across, Math.ceil(across * halfWidth)))) xs.push(s * halfWidth);
  } else {
    for (const s of ys) xs.push(halfWidth - 1 + s);
    let step = xs[1] - xs[0];
    while (xs[0] > 0) {
      step *= 1.35;
      xs.unshift(xs[0] - step < 0.6 * step ? 0 : xs[0] - step);
    }
  }
  return grid(xs, ys);
}

/** From 0 to `length`, cells shrinking smoothly towards `length`: x = sin of a straight run. */
function graded(length: number, cells: number): number[] {
  const top = 1.15;
  return Array.from({ length: cells + 1 }, (_, i) =>
    i === cells ? length : (length * Math.sin((top * i) / cells)) / Math.sin(top),
  );
}

function grid(xs: readonly number[], ys: readonly number[]): Mesh {
  const nx = xs.length - 1;
  const ny = ys.length - 1;
  const vertexCount = (nx + 1) * (ny + 1);
  const width = 2 * nx + 1;
  const nodeCount = width * (2 * ny + 1);
  const x = new Float64Array(nodeCount);
  const y = new Float64Array(nodeCount);
  // Places on the doubled grid: both even are corners and come first.
  const node = new Int32Array(nodeCount);
  let corner = 0;
  let middle = vertexCount;
  const between = (v: readonly number[], k: number): number =>
    k % 2 === 0 ? v[k / 2] : (v[(k - 1) / 2] + v[(k + 1) / 2]) / 2;
  for (let j = 0; j <= 2 * ny; j += 1) {
    for (let i = 0; i <= 2 * nx; i += 1) {
      const n = i % 2 === 0 && j % 2 === 0 ? corner++ : middle++;
      node[j * width + i] = n;
      x[n] = between(xs, i);
      y[n] = between(ys, j);
    }
  }
  const at = (i: number, j: number): number => node[j * width + i];
  const triangles = new Int32Array(12 * nx * ny);
  let t = 0;
  for (let j = 0; j < 2 * ny; j += 2) {
    for (let i = 0; i < 2 * nx; i += 2) {
      const diagonal = at(i + 1, j + 1);
      // The diagonal runs to the wall's corner, so that no triangle has all its corners on the wall.
      triangles.set([at(i, j), at(i + 2, j), at(i + 2, j + 2), at(i + 1, j), at(i + 2, j + 1), diagonal], t);
      triangles.set(
        [at(i, j), at(i + 2, j + 2), at(i, j + 2), diagonal, at(i + 1, j + 2), at(i, j + 1)],
        t + 6,
      );
      t += 12;
    }
  }
  const boundary: number[] = [];
  const tags: number[] = [];
  for (let i = 0; i < 2 * nx; i += 2) {
    boundary.push(at(i, 0), at(i + 2, 0), at(i + 1, 0));
    tags.push(SYMMETRY);
    boundary.push(at(i + 2, 2 * ny), at(i, 2 * ny), at(i + 1, 2 * ny));
    tags.push(WALL);
  }
  for (let j = 0; j < 2 * ny; j += 2) {
    boundary.push(at(2 * nx, j), at(2 * nx, j + 2), at(2 * nx, j + 1));
    tags.push(WALL);
    boundary.push(at(0, j + 2), at(0, j), at(0, j + 1));
    tags.push(SYMMETRY);
  }
  return {
    vertexCount,
    nodeCount,
    x,
    y,
    triangles,
    boundary: Int32Array.from(boundary),
    boundaryTag: Int32Array.from(tags),
  };
}
