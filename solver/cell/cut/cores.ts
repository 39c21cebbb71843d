import type { Chip } from '../../chip/chip.ts';
import { discOf } from '../../chip/geometry/area.ts';
import { type Body, commonCorners } from '../../chip/geometry/body.ts';
import { byPair } from '../../chip/geometry/by-pair.ts';
import { tangentAt } from '../../chip/geometry/curve.ts';
import type { Graph } from '../../chip/graph.ts';
import { type Drawing, layerNumbers } from '../../chip/read-graph-drawing.ts';
import { BEND_TURN } from './bounds.ts';
import { bends } from './core-bends.ts';
import { endOnEnd, type Joint, jointOf } from './core-joints.ts';
import { chambers, holeContacts } from './core-places.ts';
import { addReach, addSource, type Hole, type Reach, reachOf, type Sources } from './sources.ts';

/**
 * Everything that needs a cell, as stretches along channels: where covered areas overlap (junctions,
 * ends on ends with a turn or a step), corners and tight bends, steep tapers, chambers, holes.
 */
export function findCores(chip: Chip, graph: Graph, drawing: Drawing): Sources {
  const found: Sources = {
    cores: [],
    weak: [],
    taper: [],
    chambers: new Map(),
    holes: holesOf(chip, graph),
    holesOf: new Map(),
  };
  overlaps(chip, drawing, found);
  bends(chip, drawing, found);
  chambers(chip, drawing, found);
  holeContacts(drawing, found);
  return found;
}

function holesOf(chip: Chip, graph: Graph): Hole[] {
  const layers = layerNumbers(chip);
  const siteOfVia = new Map<string, number>();
  graph.sites.forEach((site, i) => {
    for (const id of site.vias) siteOfVia.set(id, i);
  });
  const holes: Hole[] = [];
  for (const v of chip.vias) {
    const site = siteOfVia.get(v.id)!;
    const [x, y] = v.at;
    const radius = v.diameter / 2;
    for (const l of v.layers) holes.push({ x, y, radius, layer: layers.get(l)!, site, area: discOf(v) });
  }
  chip.ports.forEach((p, i) => {
    if (p.diameter <= 0) return;
    const [x, y] = p.at;
    const radius = p.diameter / 2;
    const site = graph.portSite[i]!;
    holes.push({ x, y, radius, layer: layers.get(p.layer)!, site, area: discOf(p) });
  });
  return holes;
}

/** Elements of one layer that overlap, other than neighbours in one channel. */
function overlaps(chip: Chip, drawing: Drawing, found: Sources): void {
  const { elements, layerOf } = drawing;
  const { channel } = elements;
  for (let i = 0; i < elements.count; i++) {
    const near = drawing.near(i);
    for (let k = 0; k < near.length; k++) {
      const j = near[k]!;
      const a = channel[i]!;
      const b = channel[j]!;
      if (layerOf[a] !== layerOf[b] || (a === b && j <= i + 1)) continue;
      const p = drawing.body(i);
      const q = drawing.body(j);
      const find = (): Shared | null => sharedOf(drawing, i, j);
      const shared = drawing.keeps ? sharedBy(p, q, find) : find();
      if (!shared) continue;
      if (shared.joint) {
        endOnEnd(found, chip, drawing, shared.joint);
        continue;
      }
      const source = addSource(found);
      const margin = filletReach(chip, drawing, p, q);
      addReach(found, p, shared.ofP, source, margin);
      addReach(found, q, shared.ofQ, source, margin);
    }
  }
}

/** What two elements have in common: the point that their channels both end on, or how far their common ground reaches. */
interface Shared {
  readonly joint: Joint | undefined;
  readonly ofP: Reach | null;
  readonly ofQ: Reach | null;
}

/** What was found of two bodies, which depends on nothing else. */
const sharedBy = byPair<Body, Shared | null>();

/** null where they do not overlap, or only beside a slight bend of their one channel. */
function sharedOf(drawing: Drawing, i: number, j: number): Shared | null {
  if (!drawing.overlap(i, j)) return null;
  const p = drawing.body(i);
  const q = drawing.body(j);
  if (p.element.channel === q.element.channel && sameBend(p, q)) return null;
  const joint = jointOf(p, q, drawing);
  const corners = joint ? [] : commonCorners(p, q);
  return { joint, ofP: reachOf(p, corners), ofQ: reachOf(q, corners) };
}

/** Parts of one channel that overlap beside a slight bend, which is no cell. */
function sameBend(p: Body, q: Body): boolean {
  const between = q.element.s0 - p.element.s1;
  if (between >= 2 * Math.min(p.element.h1, q.element.h0)) return false;
  const [ax, ay] = tangentAt(p.element.curve, p.element.curve.length);
  const { ux, uy } = q.element.curve;
  return Math.abs(Math.atan2(ax * uy - ay * ux, ax * ux + ay * uy)) <= BEND_TURN;
}

/** How far the fillets of the sharpest corner between two crossing strips reach along them. */
function filletReach(chip: Chip, drawing: Drawing, p: Body, q: Body): number {
  const { fillet } = chip.layers[drawing.layerOf[p.element.channel]!]!;
  if (fillet === 0) return 0;
  const a = p.element.curve;
  const b = q.element.curve;
  const sine = Math.abs(a.ux * b.uy - a.uy * b.ux);
  const cosine = Math.abs(a.ux * b.ux + a.uy * b.uy);
  // tangent length of an arc in the acute corner; between parallel strips there is none
  return sine < 0.05 ? fillet : Math.min(20, (1 + cosine) / sine) * fillet;
}
