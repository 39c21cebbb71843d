import { Clipper, FillRule, type Path64, type Paths64 } from 'clipper2-ts';
import Flatbush from 'flatbush';
import { metres } from '../../solver/chip/units.ts';
import type { Deviation } from '../contract/bring-in.ts';
import { type Box, boxAround, clusters } from './recognise/clusters.ts';

/** Vertices of the difference that are measured at most, but for the least of every patch. */
const MOST = 20_000;
const LEAST = 8;
/** Edges looked at for the nearest. */
const NEAREST = 12;

/** Paths that lie apart from all others, by their numbers among those that were drawn and made. */
export interface Patch {
  readonly drawn: readonly number[];
  readonly made: readonly number[];
}

export interface Comparison {
  readonly deviation: Deviation;
  /** Where a wall lies further off than was let pass. */
  readonly off: readonly Patch[];
}

/** How far `made` lies off `drawn`, nm paths in, SI out; `pass`: furthest that walls may lie off, m. */
export function compare(
  drawn: Paths64,
  made: Paths64,
  pass: number,
  told: (share: number) => void,
): Comparison {
  let area = 0;
  let perimeter = 0;
  for (const path of drawn) {
    area += Clipper.area(path);
    let p = path[path.length - 1];
    for (const q of path) {
      perimeter += Math.hypot(q.x - p.x, q.y - p.y);
      p = q;
    }
  }
  const all = [...drawn, ...made];
  const boxes = all.map((path) => boxAround([path]));
  const groups = clusters(boxes);
  // What differs, group by group: most groups are alike to the vertex.
  const unlike: { patch: Patch; off: Paths64 }[] = [];
  let difference = 0;
  let count = 0;
  groups.forEach((group, g) => {
    told((0.6 * g) / groups.length);
    const patch: Patch = {
      drawn: group.filter((i) => i < drawn.length),
      made: group.filter((i) => i >= drawn.length).map((i) => i - drawn.length),
    };
    const [here, there] = [patch.drawn.map((i) => drawn[i]), patch.made.map((i) => made[i])];
    if (alike(here, there)) return;
    const off = Clipper.xor(here, there, FillRule.NonZero);
    if (off.length === 0) return;
    unlike.push({ patch, off });
    for (const path of off) {
      difference += Clipper.area(path);
      count += path.length;
    }
  });
  const stride = Math.max(1, Math.ceil(count / MOST));
  let furthest = 0;
  let at: readonly [number, number] | null = null;
  let k = 0;
  const off: Patch[] = [];
  for (const { patch, off: paths } of unlike) {
    const near = new Near(paths);
    const fromDrawn = new Edges(patch.drawn, all, boxes, near);
    const fromMade = new Edges(
      patch.made.map((i) => i + drawn.length),
      all,
      boxes,
      near,
    );
    let worst = 0;
    const own = paths.reduce((sum, path) => sum + path.length, 0);
    const step = Math.min(stride, Math.max(1, Math.floor(own / LEAST)));
    for (const path of paths) {
      // Where there is nothing to measure from, what is missing is as thick as it is.
      const { left, top, right, bottom } = boxAround([path]);
      const most = Math.min(right - left, bottom - top);
      for (const { x, y } of path) {
        k += 1;
        if (k % step !== 0) continue;
        told(0.6 + (0.4 * k) / count);
        const d = Math.min(most, Math.max(fromDrawn.distance(x, y), fromMade.distance(x, y)));
        worst = Math.max(worst, d);
        if (d > furthest) [furthest, at] = [d, [x, y]];
      }
    }
    if (!(metres(worst) <= pass)) off.push(patch);
  }
  return {
    off,
    deviation: {
      area: area * metres(1) ** 2,
      perimeter: metres(perimeter),
      difference: difference * metres(1) ** 2,
      share: area > 0 ? difference / area : 0,
      meanOffset: perimeter > 0 ? metres(difference / perimeter) : 0,
      furthest: metres(furthest),
      furthestAt: at && [metres(at[0]), metres(at[1])],
    },
  };
}

/** Whether both hold the same loops, wherever each begins. */
function alike(one: Paths64, other: Paths64): boolean {
  if (one.length !== other.length || one.length > 8) return false;
  const left = [...other];
  return one.every((path) => {
    const k = left.findIndex((loop) => sameLoop(path, loop));
    if (k >= 0) left.splice(k, 1);
    return k >= 0;
  });
}

function sameLoop(a: Path64, b: Path64): boolean {
  const n = a.length;
  if (n !== b.length || n === 0) return false;
  const from = b.findIndex(({ x, y }) => x === a[0].x && y === a[0].y);
  if (from < 0) return false;
  return a.every(({ x, y }, k) => {
    const q = b[(from + k) % n];
    return x === q.x && y === q.y;
  });
}

/** Where there is any difference: what lies elsewhere need not be kept to measure from. */
class Near {
  readonly #index: Flatbush;

  constructor(paths: Paths64) {
    this.#index = new Flatbush(paths.length);
    for (const path of paths) {
      const { left, top, right, bottom } = boxAround([path]);
      this.#index.add(left, top, right, bottom);
    }
    this.#index.finish();
  }

  touches({ left, top, right, bottom }: Box): boolean {
    return this.#index.search(left, top, right, bottom).length > 0;
  }
}

/** Edges to measure from, of the outlines that have a difference near them. */
class Edges {
  readonly #ends: Float64Array;
  readonly #index: Flatbush | null;

  constructor(which: readonly number[], all: Paths64, boxes: readonly Box[], near: Near) {
    const paths = which.filter((i) => near.touches(boxes[i])).map((i) => all[i]);
    const count = paths.reduce((sum, path) => sum + path.length, 0);
    this.#ends = new Float64Array(4 * count);
    this.#index = count > 0 ? new Flatbush(count) : null;
    let k = 0;
    for (const path of paths) {
      let p = path[path.length - 1];
      for (const q of path) {
        this.#ends[k] = p.x;
        this.#ends[k + 1] = p.y;
        this.#ends[k + 2] = q.x;
        this.#ends[k + 3] = q.y;
        k += 4;
        this.#index?.add(Math.min(p.x, q.x), Math.min(p.y, q.y), Math.max(p.x, q.x), Math.max(p.y, q.y));
        p = q;
      }
    }
    this.#index?.finish();
  }

  distance(x: number, y: number): number {
    const ends = this.#ends;
    let best = Infinity;
    for (const i of this.#index?.neighbors(x, y, NEAREST) ?? []) {
      const k = 4 * i;
      const [dx, dy] = [ends[k + 2] - ends[k], ends[k + 3] - ends[k + 1]];
      const dd = dx * dx + dy * dy;
      const t = dd > 0 ? Math.min(1, Math.max(0, ((x - ends[k]) * dx + (y - ends[k + 1]) * dy) / dd)) : 0;
      best = Math.min(best, Math.hypot(x - ends[k] - t * dx, y - ends[k + 1] - t * dy));
    }
    return best;
  }
}
