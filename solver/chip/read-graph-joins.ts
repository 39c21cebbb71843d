import { halfAt, overlap } from './geometry/body.ts';
import { meet, pointAt } from './geometry/curve.ts';
import type { Drawing } from './read-graph-drawing.ts';
import type { Links } from './read-graph-links.ts';

/** Pairs of elements (numbers into Drawing.bodies, a < b) that the index brought together. */
export interface Encounters {
  /** Pairs whose centrelines meet. */
  readonly metA: number[];
  readonly metB: number[];
  /** Pairs whose covered areas overlap though their centrelines do not meet. */
  readonly overA: number[];
  readonly overB: number[];
  /** Whether two centrelines run along the same line somewhere. */
  sameLine: boolean;
}

/**
 * Joins between channels of one layer: centrelines that cross, touch or end on one another; and a
 * list of what overlaps without that. Candidates come from the index, never from all pairs.
 */
export function joinChannels(drawing: Drawing, links: Links): Encounters {
  const { bodies, layerOf, index } = drawing;
  const found: Encounters = { metA: [], metB: [], overA: [], overB: [], sameLine: false };
  if (!index) return found;
  for (let i = 0; i < bodies.length; i++) {
    const a = bodies[i]!;
    const layer = layerOf[a.element.channel]!;
    const near = index.search(a.minX, a.minY, a.maxX, a.maxY, (j) => j > i);
    if (near.length > 1) near.sort((p, q) => p - q);
    for (const j of near) {
      const b = bodies[j]!;
      if (layerOf[b.element.channel] !== layer) continue;
      const same = a.element.channel === b.element.channel;
      if (same && b.element.index === a.element.index + 1) continue;
      let meetings = 0;
      meet(a.element.curve, b.element.curve, (s, t) => {
        // a loop that closes on its own start is met here too, at its two ends
        meetings++;
        const [x, y] = pointAt(a.element.curve, s);
        const node = links.addNode(x, y);
        const sa = a.element.s0 + s;
        const sb = b.element.s0 + t;
        links.addMark(node, a.element.channel, sa, sa, halfAt(a.element, sa));
        links.addMark(node, b.element.channel, sb, sb, halfAt(b.element, sb));
      });
      if (meetings > 0) {
        found.metA.push(i);
        found.metB.push(j);
        if (meetings > 1 && a.element.curve.curvature === b.element.curve.curvature) found.sameLine = true;
      } else if (overlap(a, b)) {
        found.overA.push(i);
        found.overB.push(j);
      }
    }
  }
  return found;
}
