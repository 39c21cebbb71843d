import type { Place } from './section.ts';

/**
 * A closed outline with as few of its points as keep all others within `tolerance` of it (Douglas and
 * Peucker 1973). `moved` is how far the farthest dropped point lies from what is kept.
 */
export function simplify(outline: readonly Place[], tolerance: number): { outline: Place[]; moved: number } {
  const n = outline.length;
  // Two points that surely belong: the first lowest-left one, and the one farthest from it.
  let a = 0;
  for (let i = 1; i < n; i += 1) {
    if (outline[i][0] + outline[i][1] < outline[a][0] + outline[a][1]) a = i;
  }
  let b = a;
  for (let i = 0; i < n; i += 1) if (apart(outline[i], outline[a]) > apart(outline[b], outline[a])) b = i;

  const keep = new Uint8Array(n);
  keep[a] = 1;
  keep[b] = 1;
  let moved = 0;
  const stack: [number, number][] = [
    [a, b > a ? b : b + n],
    [b, a > b ? a : a + n],
  ];
  while (stack.length > 0) {
    const [i, j] = stack.pop()!;
    let far = -1;
    let most = 0;
    for (let k = i + 1; k < j; k += 1) {
      const distance = toSegment(outline[k % n], outline[i % n], outline[j % n]);
      if (distance > most) {
        most = distance;
        far = k;
      }
    }
    if (most > tolerance) {
      keep[far % n] = 1;
      stack.push([i, far], [far, j]);
    } else moved = Math.max(moved, most);
  }
  return { outline: outline.filter((_, i) => keep[i] === 1), moved };
}

const apart = (p: Place, q: Place): number => Math.hypot(p[0] - q[0], p[1] - q[1]);

function toSegment(p: Place, a: Place, b: Place): number {
  const [dx, dy] = [b[0] - a[0], b[1] - a[1]];
  const t = ((p[0] - a[0]) * dx + (p[1] - a[1]) * dy) / (dx * dx + dy * dy);
  const s = Math.min(1, Math.max(0, t));
  return Math.hypot(p[0] - a[0] - s * dx, p[1] - a[1] - s * dy);
}
