import { Problem } from '../problem/problem.ts';
import { curveOf, twiceSegmentArea } from './arc.ts';
import type { Edge, Shape } from './mesh.ts';

/** Vertices closer than this share of the shape's extent are one. */
const COINCIDENT = 1e-7;
const REMEDY = 'Give an outline that encloses an area and does not touch itself.';

/**
 * The shape with coincident neighbours merged, the outer loop counter-clockwise first, holes
 * clockwise. Throws a `Problem` where no area can be enclosed; crossings show only in meshing.
 */
export function checkShape(shape: Shape, where: string): Shape {
  const outer = shape[0];
  if (!outer || outer.length < 2) throw new Problem('shape', 'The outline has no edges.', where, REMEDY);
  let [x0, y0, x1, y1] = [Infinity, Infinity, -Infinity, -Infinity];
  for (const loop of shape) {
    for (const { x, y, bulge } of loop) {
      if (!Number.isFinite(x) || !Number.isFinite(y) || !Number.isFinite(bulge)) {
        throw new Problem('shape', 'The outline has a point that is no number.', where, REMEDY);
      }
      [x0, y0, x1, y1] = [Math.min(x0, x), Math.min(y0, y), Math.max(x1, x), Math.max(y1, y)];
    }
  }
  const least = COINCIDENT * Math.hypot(x1 - x0, y1 - y0);
  return shape.map((loop, l) => {
    const kept = merged(loop, least);
    const area = kept.length < 2 ? 0 : twiceArea(kept);
    if (Math.abs(area) <= least * least) {
      throw new Problem(
        'shape',
        l === 0 ? 'The outline encloses nothing.' : 'A hole encloses nothing.',
        where,
        REMEDY,
      );
    }
    return area > 0 === (l === 0) ? kept : reversed(kept);
  });
}

/** Without edges shorter than `least`; the edge before takes over their end. */
function merged(loop: readonly Edge[], least: number): Edge[] {
  const kept: Edge[] = [];
  for (let i = 0; i < loop.length; i += 1) {
    const here = loop[i];
    const next = loop[(i + 1) % loop.length];
    if (Math.hypot(next.x - here.x, next.y - here.y) > least) kept.push(here);
  }
  return kept;
}

/** Twice the signed area, arcs included. */
export function twiceArea(loop: readonly Edge[]): number {
  const { x: ox, y: oy } = loop[0];
  let sum = 0;
  for (let i = 0; i < loop.length; i += 1) {
    const a = loop[i];
    const b = loop[i + 1 === loop.length ? 0 : i + 1];
    sum += (a.x - ox) * (b.y - oy) - (b.x - ox) * (a.y - oy);
    if (a.bulge !== 0) sum += twiceSegmentArea(curveOf(a.x, a.y, b.x, b.y, a.bulge));
  }
  return sum;
}

function reversed(loop: readonly Edge[]): Edge[] {
  const n = loop.length;
  return loop.map((_, k) => {
    const start = loop[(n - k) % n];
    const edge = loop[(2 * n - 1 - k) % n];
    return { x: start.x, y: start.y, bulge: -edge.bulge, tag: edge.tag };
  });
}
