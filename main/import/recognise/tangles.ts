import type { Paths64 } from 'clipper2-ts';
import Flatbush from 'flatbush';
import { Problem } from '../../../solver/problem/problem.ts';
import type { Work } from '../work.ts';

/** Crossings of outlines that are united at most: their number, not that of the outlines, is what uniting costs. */
const MOST_CROSSINGS = 200_000;
/** Pairs of edges looked at for it. */
const MOST_PAIRS = 20_000_000;

/** Refuses outlines of a layer that cross so often that uniting them would not end. */
export class Tangles {
  readonly #where: string;
  readonly #work: Work;
  #crossings = 0;
  #pairs = 0;

  constructor(where: string, work: Work) {
    this.#where = where;
    this.#work = work;
  }

  /** Counts the crossings of outlines that are to be united with one another. */
  count(paths: Paths64): void {
    const count = paths.reduce((sum, path) => sum + path.length, 0);
    if (count === 0) return;
    const ends = new Float64Array(4 * count);
    const index = new Flatbush(count);
    let k = 0;
    for (const path of paths) {
      let p = path[path.length - 1];
      for (const q of path) {
        ends[k] = p.x;
        ends[k + 1] = p.y;
        ends[k + 2] = q.x;
        ends[k + 3] = q.y;
        index.add(Math.min(p.x, q.x), Math.min(p.y, q.y), Math.max(p.x, q.x), Math.max(p.y, q.y));
        p = q;
        k += 4;
      }
    }
    index.finish();
    for (let i = 0; i < count; i += 1) {
      const [ax, ay, bx, by] = [ends[4 * i], ends[4 * i + 1], ends[4 * i + 2], ends[4 * i + 3]];
      this.#work.tick();
      index.search(Math.min(ax, bx), Math.min(ay, by), Math.max(ax, bx), Math.max(ay, by), (j) => {
        if (j <= i) return false;
        this.#pairs += 1;
        const [cx, cy, dx, dy] = [ends[4 * j], ends[4 * j + 1], ends[4 * j + 2], ends[4 * j + 3]];
        const c = (bx - ax) * (cy - ay) - (by - ay) * (cx - ax);
        const d = (bx - ax) * (dy - ay) - (by - ay) * (dx - ax);
        const a = (dx - cx) * (ay - cy) - (dy - cy) * (ax - cx);
        const b = (dx - cx) * (by - cy) - (dy - cy) * (bx - cx);
        if (c * d < 0 && a * b < 0) this.#crossings += 1;
        return false;
      });
      if (this.#crossings <= MOST_CROSSINGS && this.#pairs <= MOST_PAIRS) continue;
      throw new Problem(
        'too-many',
        `The outlines of this layer cross each other more than ${MOST_CROSSINGS.toLocaleString('en')} times.`,
        this.#where,
        'Unite them in the program that drew them, or leave the layer out.',
      );
    }
  }
}
