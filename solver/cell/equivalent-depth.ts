import { rectangleSection } from '../section/rectangle.ts';
import { sectionOf } from '../section/section-of.ts';
import type { CellShape } from './shape.ts';

/**
 * Cells are extruded: another profile is stood in for by a rectangle of the same mask width and of the
 * depth at which the arms carry as much per length as their true section does,
 *   product over the faces of K(true) / K(rectangle w x d) = 1.
 */
export interface Equivalent {
  readonly depth: number;
  /** Bound of the relative error that this brings. */
  readonly error: number;
}

export function equivalentDepth(shape: CellShape, where: string): Equivalent {
  const { profile, depth } = shape;
  if (profile.kind === 'rectangle') return { depth, error: 0 };
  const widths = faceWidths(shape);
  const wanted = widths.map((width) => sectionOf(profile, width, depth, where).conductance);
  const miss = (d: number): number[] =>
    widths.map((width, i) => Math.log(wanted[i] / rectangleSection(width, d).conductance));
  let low = depth / 20;
  let high = depth * 20;
  for (let step = 0; step < 60; step += 1) {
    const middle = Math.sqrt(low * high);
    if (miss(middle).reduce((sum, value) => sum + value, 0) > 0) low = middle;
    else high = middle;
  }
  const equal = Math.sqrt(low * high);
  const spread = Math.max(...miss(equal).map(Math.abs));
  return { depth: equal, error: spread + CORE };
}

/** What the middle of a cell adds where all arms are met exactly. */
const CORE = 0.03;

/** Chord from end to end of each face's edges. */
function faceWidths(shape: CellShape): number[] {
  const widths = new Array<number>(shape.faces).fill(0);
  for (const loop of shape.loops)
    loop.forEach((edge, i) => {
      if (edge.tag === 0) return;
      const next = loop[(i + 1) % loop.length];
      widths[edge.tag - 1] += Math.hypot(next.x - edge.x, next.y - edge.y);
    });
  return widths;
}
