import { type Curve, directionAt, nearestShare, pointAt } from './arc.ts';
import type { EdgeWish } from './edge-wish.ts';
import { Grid } from './grid.ts';

/** Up to this many edges, all pairs are looked at; beyond, only those near by the edges' own sizes. */
const ALL_PAIRS = 200;
/** Walls that face each other less than this do not make a gap (cosine). */
const FACING = 0.15;
/** Places to look from are at most about this many wished sizes apart. */
const WIDE_SIGHT = 2;
const MOST_HALVINGS = 14;

/**
 * Where walls face each other across the fluid closer than `across` times their edge lengths: at a
 * point p with inward normal n and the nearest point q of another edge, the ball that touches both has
 * the diameter |q − p|/cos(n, q − p), which is the width of the gap there. Neighbouring edges make no
 * gap, their corner does. `previous[i]` is the edge that ends where i starts; `size` per edge.
 */
export function gapWishes(
  curves: readonly Curve[],
  previous: Int32Array,
  size: Float64Array,
  largest: number,
  across: number,
): EdgeWish[] {
  const count = curves.length;
  const wishes: EdgeWish[] = [];
  const grid = count > ALL_PAIRS ? new Grid(boxes(curves)) : null;
  const p = [0, 0];
  const q = [0, 0];
  let [edge, share, nx, ny, reach] = [0, 0, 0, 0, 0];

  const look = (other: number): void => {
    // A vertex lies on both of its edges; other places make no gap with either neighbour.
    if (other === edge || other === previous[edge] || (share > 0 && previous[other] === edge)) return;
    const curve = curves[other];
    const t = nearestShare(curve, p[0], p[1]);
    pointAt(curve, t, q);
    const dx = q[0] - p[0];
    const dy = q[1] - p[1];
    const gap = Math.hypot(dx, dy);
    if (gap > reach || gap === 0) return;
    const facing = (nx * dx + ny * dy) / gap;
    if (facing < FACING) return;
    if (gap / facing < across * size[edge]) wishes.push({ edge, t: share, size: gap / facing / across });
    if (t === 0 || t === 1) return;
    const back = directionAt(curve, t);
    if ((Math.sin(back) * dx - Math.cos(back) * dy) / gap < FACING) return;
    if (gap < across * size[other]) wishes.push({ edge: other, t, size: gap / across });
  };

  /** Looks from the share t of the edge; returns the least size wished there. */
  const lookFrom = (curve: Curve, t: number, direction: number): number => {
    const before = wishes.length;
    share = t;
    pointAt(curve, t, p);
    // Inward is left of the direction of travel.
    nx = -Math.sin(direction);
    ny = Math.cos(direction);
    reach = across * (grid ? size[edge] : largest);
    if (grid) grid.near(p[0] - reach, p[1] - reach, p[0] + reach, p[1] + reach, look);
    else for (let other = 0; other < count; other += 1) look(other);
    let least = Number.POSITIVE_INFINITY;
    for (let i = before; i < wishes.length; i += 1) {
      if (wishes[i].edge === edge) least = Math.min(least, wishes[i].size);
    }
    return least;
  };
  /** Between two places, closer together the narrower the gap: growth must not bridge it unseen. */
  const between = (curve: Curve, from: number, to: number, depth: number): void => {
    const middle = (from + to) / 2;
    const wish = lookFrom(curve, middle, directionAt(curve, middle));
    if ((to - from) * curve.length < WIDE_SIGHT * wish || depth === MOST_HALVINGS) return;
    between(curve, from, middle, depth + 1);
    between(curve, middle, to, depth + 1);
  };

  for (edge = 0; edge < count; edge += 1) {
    const curve = curves[edge];
    // At a vertex, halfway between its two edges.
    const leaving = directionAt(curve, 0);
    const turn = directionAt(curves[previous[edge]], 1) - leaving;
    lookFrom(curve, 0, leaving + Math.atan2(Math.sin(turn), Math.cos(turn)) / 2);
    const samples = grid ? 1 : Math.min(8, Math.max(1, Math.round(curve.length / (2 * size[edge]))));
    for (let k = 0; k < samples; k += 1) between(curve, k / samples, (k + 1) / samples, 0);
  }
  return wishes;
}

function boxes(curves: readonly Curve[]): Float64Array {
  const box = new Float64Array(4 * curves.length);
  curves.forEach((curve, i) => {
    // The arc stays within its sagitta of the chord's box.
    const spare = Math.abs(Math.tan(curve.sweep / 4)) * Math.hypot(curve.x1 - curve.x0, curve.y1 - curve.y0);
    box[4 * i] = Math.min(curve.x0, curve.x1) - spare;
    box[4 * i + 1] = Math.min(curve.y0, curve.y1) - spare;
    box[4 * i + 2] = Math.max(curve.x0, curve.x1) + spare;
    box[4 * i + 3] = Math.max(curve.y0, curve.y1) + spare;
  });
  return box;
}
