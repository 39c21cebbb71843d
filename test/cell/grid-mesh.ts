import type { Mesh } from '../../solver/mesh/mesh.ts';

/**
 * Quadratic triangles on the cells of a rectilinear grid that `inside` keeps, each cell cut along one
 * diagonal, alternating. `tag` names the boundary edges by their middle. For tests, so that what they
 * show does not depend on the mesher.
 */
export function gridMesh(
  xs: readonly number[],
  ys: readonly number[],
  tag: (x: number, y: number) => number,
  inside: (x: number, y: number) => boolean = () => true,
  move: (x: number, y: number) => readonly [number, number] = (x, y) => [x, y],
): Mesh {
  const corner = new Map<number, number>();
  const px: number[] = [];
  const py: number[] = [];
  const at = (i: number, j: number): number => {
    const key = j * xs.length + i;
    const known = corner.get(key);
    if (known !== undefined) return known;
    corner.set(key, px.length);
    px.push(xs[i]!);
    py.push(ys[j]!);
    return px.length - 1;
  };
  const cells: [number, number, number][] = [];
  for (let j = 0; j + 1 < ys.length; j += 1)
    for (let i = 0; i + 1 < xs.length; i += 1) {
      if (!inside((xs[i]! + xs[i + 1]!) / 2, (ys[j]! + ys[j + 1]!) / 2)) continue;
      const [a, b, c, d] = [at(i, j), at(i + 1, j), at(i + 1, j + 1), at(i, j + 1)];
      if ((i + j) % 2 === 0) cells.push([a, b, c], [a, c, d]);
      else cells.push([a, b, d], [b, c, d]);
    }
  const vertexCount = px.length;
  const middle = new Map<string, number>();
  const uses = new Map<string, number>();
  const key = (a: number, b: number): string => (a < b ? `${a} ${b}` : `${b} ${a}`);
  const mid = (a: number, b: number): number => {
    const k = key(a, b);
    uses.set(k, (uses.get(k) ?? 0) + 1);
    const known = middle.get(k);
    if (known !== undefined) return known;
    middle.set(k, px.length);
    px.push((px[a]! + px[b]!) / 2);
    py.push((py[a]! + py[b]!) / 2);
    return px.length - 1;
  };
  const triangles: number[] = [];
  for (const [a, b, c] of cells) triangles.push(a, b, c, mid(a, b), mid(b, c), mid(c, a));
  const boundary: number[] = [];
  const boundaryTag: number[] = [];
  for (const [a, b, c] of cells)
    for (const [p, q] of [
      [a, b],
      [b, c],
      [c, a],
    ] as const) {
      if (uses.get(key(p, q)) !== 1) continue;
      const m = middle.get(key(p, q))!;
      boundary.push(p, q, m);
      boundaryTag.push(tag(px[m]!, py[m]!));
    }
  const moved = px.map((x, i) => move(x, py[i]!));
  return {
    vertexCount,
    nodeCount: px.length,
    x: Float64Array.from(moved, (p) => p[0]),
    y: Float64Array.from(moved, (p) => p[1]),
    triangles: Int32Array.from(triangles),
    boundary: Int32Array.from(boundary),
    boundaryTag: Int32Array.from(boundaryTag),
  };
}

/** Points from a to b whose spacing grows from `least` at `fine` ('a', 'b' or both ends) by `growth`. */
export function graded(
  a: number,
  b: number,
  least: number,
  most: number,
  fine: 'a' | 'b' | 'ab' | 'none',
): number[] {
  const length = b - a;
  const sizes: number[] = [];
  const half = fine === 'ab' ? length / 2 : length;
  let size = fine === 'none' ? most : least;
  let sum = 0;
  while (sum < half - 1e-12) {
    sizes.push(size);
    sum += size;
    size = Math.min(most, size * 1.5);
  }
  const scaled = sizes.map((s) => (s * half) / sum);
  const all =
    fine === 'ab' ? [...scaled, ...scaled.toReversed()] : fine === 'b' ? scaled.toReversed() : scaled;
  const out = [a];
  for (const s of all) out.push(out.at(-1)! + s);
  out[out.length - 1] = b;
  return out;
}
