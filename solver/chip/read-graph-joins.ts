import { Problem } from '../problem/problem.ts';
import { pointAt } from './geometry/curve.ts';
import { CURVATURE, type Elements, H0, H1, LENGTH, S0, STRIDE, UX, UY, X0, Y0 } from './geometry/elements.ts';
import { Meetings, meetElements } from './geometry/packed.ts';
import type { Drawing } from './read-graph-drawing.ts';
import type { Links } from './read-graph-links.ts';

/** Pairs of elements (a < b) that the index brought together. */
export interface Encounters {
  /** Pairs whose covered areas overlap though their centrelines do not meet. */
  readonly overA: number[];
  readonly overB: number[];
  /** Whether two centrelines run along the same line somewhere. */
  sameLine: boolean;
}

/** Pairs of elements near each other beyond which a drawing is no network but a heap. */
const MOST_PAIRS = 2e7;

function tooMany(drawing: Drawing): Problem {
  return new Problem(
    'too-many',
    `More than ${MOST_PAIRS / 1e6} million pairs of the ${drawing.elements.count} stretches of channel lie over each other.`,
    'channels',
    'Spread the channels out, or remove copies that lie on top of each other.',
  );
}

/**
 * Joins between channels of one layer: centrelines that cross, touch or end on one another; and a
 * list of what overlaps without that. Candidates come from the index, never from all pairs.
 */
export function joinChannels(drawing: Drawing, links: Links): Encounters {
  const { elements, layerOf } = drawing;
  const found: Encounters = { overA: [], overB: [], sameLine: false };
  const { data, channel } = elements;
  const meetings = new Meetings();
  const here: Here = { node: -1, s: 0 };
  let pairs = 0;
  for (let i = 0; i < elements.count; i++) {
    const near = drawing.near(i);
    const a = channel[i]!;
    here.node = -1;
    for (const j of near) {
      const b = channel[j]!;
      if (layerOf[b] !== layerOf[a] || (a === b && j === i + 1)) continue;
      meetElements(elements, i, j, meetings);
      const { count } = meetings;
      for (let k = 0; k < count; k++) addJoin(elements, links, here, i, meetings.s[k]!, j, meetings.t[k]!);
      if (++pairs > MOST_PAIRS) throw tooMany(drawing);
      if (count > 0) {
        const bent = data[i * STRIDE + CURVATURE] !== data[j * STRIDE + CURVATURE];
        if (count > 1 && !bent) found.sameLine = true;
      } else if (drawing.overlap(i, j)) {
        found.overA.push(i);
        found.overB.push(j);
      }
    }
  }
  return found;
}

/** The node last made on an element, and where: several channels that meet in one point make one. */
interface Here {
  node: number;
  s: number;
}

/** nm; what is nearer is one point but for rounding, and much less than what counts as touching. */
const ONE_POINT = 1e-3;

function addJoin(
  elements: Elements,
  links: Links,
  here: Here,
  i: number,
  s: number,
  j: number,
  t: number,
): void {
  const { data: d, channel } = elements;
  const a = i * STRIDE;
  const b = j * STRIDE;
  if (here.node < 0 || Math.abs(s - here.s) > ONE_POINT) {
    let x = d[a + X0]! + d[a + UX]! * s;
    let y = d[a + Y0]! + d[a + UY]! * s;
    if (d[a + CURVATURE] !== 0) [x, y] = pointAt(elements.curve(i), s);
    const sa = d[a + S0]! + s;
    const halfA = d[a + H0]! + ((d[a + H1]! - d[a + H0]!) * s) / d[a + LENGTH]!;
    here.node = links.addNode(x, y);
    here.s = s;
    links.addMark(here.node, channel[i]!, sa, sa, halfA);
  }
  const sb = d[b + S0]! + t;
  const halfB = d[b + H0]! + ((d[b + H1]! - d[b + H0]!) * t) / d[b + LENGTH]!;
  links.addMark(here.node, channel[j]!, sb, sb, halfB);
}
