import { Clipper, FillRule, type Paths64 } from 'clipper2-ts';
import Flatbush from 'flatbush';
import { metres } from '../../solver/chip/units.ts';
import type { Deviation } from '../contract/bring-in.ts';
import type { Work } from './work.ts';

/** Vertices of the difference that are measured at most. */
const MOST = 20_000;
/** Edges looked at for the nearest. */
const NEAREST = 12;

/** How far `made` lies off `drawn`, nm paths in, SI out. */
export function deviation(drawn: Paths64, made: Paths64, work: Work): Deviation {
  const area = Clipper.areaPaths(drawn);
  let perimeter = 0;
  for (const path of drawn) {
    path.forEach((p, i) => {
      const q = path[(i + 1) % path.length];
      perimeter += Math.hypot(q.x - p.x, q.y - p.y);
    });
  }
  work.at(0.2);
  const off = Clipper.xor(drawn, made, FillRule.NonZero);
  const difference = off.reduce((sum, path) => sum + Clipper.area(path), 0);
  work.at(0.5);
  const near = new Near(off);
  const [fromDrawn, fromMade] = [new Edges(drawn, near), new Edges(made, near)];
  const count = off.reduce((sum, path) => sum + path.length, 0);
  const stride = Math.max(1, Math.ceil(count / MOST));
  let furthest = 0;
  let at: [number, number] | null = null;
  let k = 0;
  for (const path of off) {
    // Where there is nothing to measure from, what is missing is as thick as it is.
    const { left, top, right, bottom } = Clipper.getBounds(path);
    const most = Math.min(right - left, bottom - top);
    for (const { x, y } of path) {
      k += 1;
      if (k % stride !== 0) continue;
      work.at(0.5 + (0.5 * k) / count);
      const d = Math.min(most, Math.max(fromDrawn.distance(x, y), fromMade.distance(x, y)));
      if (d > furthest) [furthest, at] = [d, [x, y]];
    }
  }
  return {
    area: area * metres(1) ** 2,
    perimeter: metres(perimeter),
    difference: difference * metres(1) ** 2,
    share: area > 0 ? difference / area : 0,
    meanOffset: perimeter > 0 ? metres(difference / perimeter) : 0,
    furthest: metres(furthest),
    furthestAt: at && [metres(at[0]), metres(at[1])],
  };
}

/** Where there is any difference: what lies elsewhere need not be kept to measure from. */
class Near {
  readonly #index: Flatbush | null;

  constructor(paths: Paths64) {
    this.#index = paths.length > 0 ? new Flatbush(paths.length) : null;
    for (const path of paths) {
      const { left, top, right, bottom } = Clipper.getBounds(path);
      this.#index?.add(left, top, right, bottom);
    }
    this.#index?.finish();
  }

  touches({
    left,
    top,
    right,
    bottom,
  }: {
    left: number;
    top: number;
    right: number;
    bottom: number;
  }): boolean {
    return (this.#index?.search(left, top, right, bottom).length ?? 0) > 0;
  }
}

/** Edges to measure from, of the outlines that have a difference near them. */
class Edges {
  readonly #ends: Float64Array;
  readonly #index: Flatbush | null;

  constructor(all: Paths64, near: Near) {
    const paths = all.filter((path) => near.touches(Clipper.getBounds(path)));
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
