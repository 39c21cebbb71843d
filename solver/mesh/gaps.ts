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
  const sight = new Sight(curves, previous, size, largest, across);
  const { grid } = sight;
  for (let edge = 0; edge < curves.length; edge += 1) {
    const curve = curves[edge];
    sight.edge = edge;
    // At a vertex, halfway between its two edges.
    const leaving = directionAt(curve, 0);
    const turn = directionAt(curves[previous[edge]], 1) - leaving;
    sight.lookFrom(curve, 0, leaving + Math.atan2(Math.sin(turn), Math.cos(turn)) / 2);
    const samples = grid ? 1 : Math.min(8, Math.max(1, Math.round(curve.length / (2 * size[edge]))));
    for (let k = 0; k < samples; k += 1) sight.between(curve, k / samples, (k + 1) / samples, 0);
  }
  return sight.wishes;
}

/** Looks across the fluid from places on one edge after the other. A class, whose code is compiled once for all shapes. */
class Sight {
  readonly wishes: EdgeWish[] = [];
  readonly grid: Grid | null;
  /** The edge looked from, and the share of it. */
  edge = 0;
  #share = 0;
  #nx = 0;
  #ny = 0;
  #reach = 0;
  readonly #p = [0, 0];
  readonly #q = [0, 0];
  readonly #curves: readonly Curve[];
  readonly #previous: Int32Array;
  readonly #size: Float64Array;
  readonly #largest: number;
  readonly #across: number;

  constructor(
    curves: readonly Curve[],
    previous: Int32Array,
    size: Float64Array,
    largest: number,
    across: number,
  ) {
    this.#curves = curves;
    this.#previous = previous;
    this.#size = size;
    this.#largest = largest;
    this.#across = across;
    this.grid = curves.length > ALL_PAIRS ? new Grid(boxes(curves)) : null;
  }

  #look(other: number): void {
    const { edge } = this;
    const previous = this.#previous;
    // A vertex lies on both of its edges; other places make no gap with either neighbour.
    if (other === edge || other === previous[edge] || (this.#share > 0 && previous[other] === edge)) return;
    const curve = this.#curves[other];
    const p = this.#p;
    const q = this.#q;
    const across = this.#across;
    const t = nearestShare(curve, p[0], p[1]);
    pointAt(curve, t, q);
    const dx = q[0] - p[0];
    const dy = q[1] - p[1];
    const gap = Math.hypot(dx, dy);
    if (gap > this.#reach || gap === 0) return;
    const facing = (this.#nx * dx + this.#ny * dy) / gap;
    if (facing < FACING) return;
    if (gap / facing < across * this.#size[edge])
      this.wishes.push({ edge, t: this.#share, size: gap / facing / across });
    if (t === 0 || t === 1) return;
    const back = directionAt(curve, t);
    if ((Math.sin(back) * dx - Math.cos(back) * dy) / gap < FACING) return;
    if (gap < across * this.#size[other]) this.wishes.push({ edge: other, t, size: gap / across });
  }

  /** Looks from the share t of the edge; returns the least size wished there. */
  lookFrom(curve: Curve, t: number, direction: number): number {
    const { wishes, grid, edge } = this;
    const before = wishes.length;
    this.#share = t;
    const p = this.#p;
    pointAt(curve, t, p);
    // Inward is left of the direction of travel.
    this.#nx = -Math.sin(direction);
    this.#ny = Math.cos(direction);
    const reach = this.#across * (grid ? this.#size[edge] : this.#largest);
    this.#reach = reach;
    if (grid) grid.near(p[0] - reach, p[1] - reach, p[0] + reach, p[1] + reach, (other) => this.#look(other));
    else for (let other = 0; other < this.#curves.length; other += 1) this.#look(other);
    let least = Number.POSITIVE_INFINITY;
    for (let i = before; i < wishes.length; i += 1) {
      if (wishes[i].edge === edge) least = Math.min(least, wishes[i].size);
    }
    return least;
  }

  /** Between two places, closer together the narrower the gap: growth must not bridge it unseen. */
  between(curve: Curve, from: number, to: number, depth: number): void {
    const middle = (from + to) / 2;
    const wish = this.lookFrom(curve, middle, directionAt(curve, middle));
    if ((to - from) * curve.length < WIDE_SIGHT * wish || depth === MOST_HALVINGS) return;
    this.between(curve, from, middle, depth + 1);
    this.between(curve, middle, to, depth + 1);
  }
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
