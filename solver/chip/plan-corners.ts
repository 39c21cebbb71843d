import { tangentAt } from './geometry/curve.ts';
import { TOUCH } from './geometry/tolerance.ts';
import type { Graph } from './graph.ts';
import type { PlanBody } from './plan.ts';
import type { Drawing } from './read-graph-drawing.ts';

/** An arm as it leaves its site: where its centreline starts, which way it goes, half its width there. */
interface Arm {
  readonly channel: number;
  readonly number: number;
  readonly x: number;
  readonly y: number;
  readonly ux: number;
  readonly uy: number;
  readonly half: number;
  readonly angle: number;
}

/**
 * Outer corners of channels that end on one another at a site: where the sector between two
 * neighbouring arms exceeds half a turn, they are joined as one path would be. With `covered`, only arms
 * whose channel is covered at that distance count.
 */
export function siteCorners(
  drawing: Drawing,
  graph: Graph,
  site: number,
  layer: number,
  covered: (channel: number, s: number) => boolean = () => true,
): PlanBody[] {
  const left = armsAt(drawing, graph, site, layer, covered);
  const corners: PlanBody[] = [];
  while (left.length > 1) {
    const first = left.shift()!;
    const here = [first];
    for (let k = left.length - 1; k >= 0; k--) {
      const a = left[k]!;
      if (Math.hypot(a.x - first.x, a.y - first.y) <= 2 * TOUCH) here.push(...left.splice(k, 1));
    }
    if (here.length > 1) openSector(here, corners);
  }
  return corners;
}

function openSector(arms: Arm[], corners: PlanBody[]): void {
  arms.sort((a, b) => a.angle - b.angle);
  for (let k = 0; k < arms.length; k++) {
    const a = arms[k]!;
    const b = arms[(k + 1) % arms.length]!;
    const sector = b.angle - a.angle + (k + 1 === arms.length ? 2 * Math.PI : 0);
    if (sector <= Math.PI + 1e-9) continue;
    // a path that goes on through its own vertex has its corner already
    if (a.channel === b.channel && Math.abs(a.number - b.number) === 1) continue;
    corners.push({
      kind: 'corner',
      x: a.x,
      y: a.y,
      into: { ux: -a.ux, uy: -a.uy, half: a.half },
      out: { ux: b.ux, uy: b.uy, half: b.half },
    });
  }
}

function armsAt(
  drawing: Drawing,
  graph: Graph,
  site: number,
  layer: number,
  covered: (channel: number, s: number) => boolean,
): Arm[] {
  const arms: Arm[] = [];
  for (const { piece, end } of graph.sites[site]!.arms) {
    const p = graph.pieces[piece]!;
    const s = end === 'from' ? p.start : p.stop;
    const total = drawing.elements.total(p.channelIndex);
    // an end taken on to another centreline covers nothing more
    if (p.layerIndex !== layer || s < -TOUCH || s > total + TOUCH || !covered(p.channelIndex, s)) continue;
    const id = end === 'to' ? drawing.elementAt(p.channelIndex, s) : drawing.elementAfter(p.channelIndex, s);
    const e = drawing.elements.at(id);
    const d = Math.min(Math.max(s - e.s0, 0), e.curve.length);
    const [tx, ty] = tangentAt(e.curve, d);
    const sign = end === 'from' ? 1 : -1;
    const t = d / e.curve.length;
    const { x, y } = p.path[end === 'from' ? 0 : p.path.length - 1]!;
    arms.push({
      channel: p.channelIndex,
      number: p.number,
      x,
      y,
      ux: sign * tx,
      uy: sign * ty,
      half: e.h0 + (e.h1 - e.h0) * t,
      angle: Math.atan2(sign * ty, sign * tx),
    });
  }
  return arms;
}
