import type { Path64 } from 'clipper2-ts';
import Flatbush from 'flatbush';

/** Least and greatest x and y. */
export interface Box {
  left: number;
  top: number;
  right: number;
  bottom: number;
}

export function boxAround(paths: readonly Path64[]): Box {
  const box = { left: Infinity, top: Infinity, right: -Infinity, bottom: -Infinity };
  for (const path of paths) {
    for (let k = 0; k < path.length; k += 1) {
      const { x, y } = path[k];
      if (x < box.left) box.left = x;
      if (x > box.right) box.right = x;
      if (y < box.top) box.top = y;
      if (y > box.bottom) box.bottom = y;
    }
  }
  return box;
}

/**
 * Things whose boxes touch, taken together: what lies in one cluster has nothing to do with what lies in
 * another. Indices in order, clusters in order of their first.
 */
export function clusters(boxes: readonly Box[]): number[][] {
  const count = boxes.length;
  if (count === 0) return [];
  const index = new Flatbush(count);
  for (const { left, top, right, bottom } of boxes) index.add(left, top, right, bottom);
  index.finish();
  const parent = Int32Array.from({ length: count }, (_, i) => i);
  const find = (i: number): number => {
    while (parent[i] !== i) {
      parent[i] = parent[parent[i]];
      i = parent[i];
    }
    return i;
  };
  boxes.forEach(({ left, top, right, bottom }, i) => {
    index.search(left, top, right, bottom, (j) => {
      if (j > i) {
        const [a, b] = [find(i), find(j)];
        // The least index is the root, so that order is kept.
        if (a < b) parent[b] = a;
        else parent[a] = b;
      }
      return false;
    });
  });
  const byRoot = new Map<number, number[]>();
  for (let i = 0; i < count; i += 1) {
    const root = find(i);
    const known = byRoot.get(root);
    if (known) known.push(i);
    else byRoot.set(root, [i]);
  }
  return [...byRoot.values()];
}
