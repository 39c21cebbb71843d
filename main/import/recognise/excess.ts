import { Clipper, EndType, FillRule, JoinType, type Paths64 } from 'clipper2-ts';
import type { Found } from './layer.ts';

/** Ground outside the drawing thinner than twice this, nm, is the edge of a channel that fits. */
const THIN = 500;
/** A channel is dropped that covers this share of itself, or of its width squared, outside. */
const SHARE = 0.05;
const SQUARES = 0.5;

/** Channels without those that cover ground which was not drawn; that ground is left to chambers. */
export function dropExcess(found: Found[], covered: Paths64, ground: Paths64): Found[] {
  // A sliver of rounding that runs the wrong way round would turn all others into holes.
  const over = Clipper.difference(covered, ground, FillRule.NonZero).filter(
    (path) => Math.abs(Clipper.area(path)) > THIN * THIN,
  );
  if (over.length === 0) return found;
  const thick = Clipper.inflatePaths(over, -THIN, JoinType.Miter, EndType.Polygon);
  if (thick.length === 0) return found;
  const outside = new Float64Array(found.length);
  for (const piece of thick) {
    const { left, top, right, bottom } = Clipper.getBounds(piece);
    const [x, y] = [(left + right) / 2, (top + bottom) / 2];
    let best = Infinity;
    let at = -1;
    found.forEach(({ course: { path, width } }, k) => {
      const reach = Math.max(...width) / 2 + (right - left + bottom - top) / 2;
      for (let i = 0; i + 1 < path.length; i += 1) {
        const [[ax, ay], [bx, by]] = [path[i], path[i + 1]];
        const [dx, dy] = [bx - ax, by - ay];
        const t = Math.min(1, Math.max(0, ((x - ax) * dx + (y - ay) * dy) / (dx * dx + dy * dy)));
        const d = Math.hypot(x - ax - t * dx, y - ay - t * dy);
        if (d <= reach && d < best) [best, at] = [d, k];
      }
    });
    if (at >= 0) outside[at] += Math.abs(Clipper.area(piece));
  }
  return found.filter(({ course: { path, width } }, k) => {
    const wide = Math.max(...width);
    let length = 0;
    for (let i = 0; i + 1 < path.length; i += 1) {
      length += Math.hypot(path[i + 1][0] - path[i][0], path[i + 1][1] - path[i][1]);
    }
    return outside[k] <= Math.min(SHARE * length * wide, SQUARES * wide * wide);
  });
}
