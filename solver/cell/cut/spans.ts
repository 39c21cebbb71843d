import { TOUCH } from '../../chip/geometry/tolerance.ts';
import type { Graph } from '../../chip/graph.ts';
import type { Drawing } from '../../chip/read-graph-drawing.ts';
import { BEND_TURN, decayLength, legLength, NEAR_END } from './bounds.ts';
import { type Clusters, depthOf } from './clusters.ts';
import type { CutOptions } from './spec.ts';
import { widthAt } from './width.ts';

/** How a span of channel ends: cut by a face, at a port without a hole (its site), or by the channel's end wall. */
export type SpanEnd =
  | { readonly kind: 'cut'; readonly s: number }
  | { readonly kind: 'port'; readonly s: number; readonly site: number }
  | { readonly kind: 'wall'; readonly s: number };

/** What of a channel a cell takes up. */
export interface Span {
  readonly cluster: number;
  readonly channel: number;
  /** The stretch that needs the cell, without the legs. */
  readonly core: readonly [number, number];
  readonly low: SpanEnd;
  readonly high: SpanEnd;
}

/** A port without a hole, as a place on a channel. */
export interface Barrier {
  readonly s: number;
  readonly site: number;
}

export interface Spans {
  readonly byChannel: readonly (readonly Span[])[];
  /** Clusters with a port without a hole in their midst, and the site of that port. */
  readonly pierced: ReadonlyMap<number, number>;
}

/** Faces closer to a port than this share of the width leave no room for a leg. */
const LEAST_LEG = 0.2;

/** Lays legs on the cores of every channel and puts the faces between cells. */
export function laySpans(drawing: Drawing, graph: Graph, clusters: Clusters, options: CutOptions): Spans {
  const barriers = barriersOf(drawing, graph);
  const pierced = new Map<number, number>();
  const byChannel = clusters.byChannel.map((_, c) => {
    const runs = runsOf(drawing, clusters, c, options.mergeWithin);
    const stops = barriers[c]!;
    for (const run of runs) {
      const room = LEAST_LEG * widthAt(drawing, c, run.low);
      const inside = stops.find((b) => b.s > run.low - room && b.s < run.high + room);
      if (inside) pierced.set(run.cluster, inside.site);
    }
    return runs.map((run, k): Span => {
      return {
        cluster: run.cluster,
        channel: c,
        core: [run.low, run.high],
        low: edge(drawing, c, run.low, -1, runs[k - 1]?.high, stops),
        high: edge(drawing, c, run.high, 1, runs[k + 1]?.low, stops),
      };
    });
  });
  return { byChannel, pierced };
}

interface Run {
  readonly cluster: number;
  readonly low: number;
  high: number;
}

/** Neighbouring cores of one cluster are one run, unless a face fits between them. */
function runsOf(drawing: Drawing, clusters: Clusters, channel: number, within: number): Run[] {
  const runs: Run[] = [];
  const depth = depthOf(drawing, channel);
  for (const core of clusters.byChannel[channel]!) {
    const cluster = clusters.of[core.source]!;
    if (cluster < 0) continue;
    const last = runs[runs.length - 1];
    // two faces of one cell on one cut would be none
    const width = widthAt(drawing, channel, core.low);
    const reach = Math.max(within * decayLength(width, depth), 2 * legLength(width, depth));
    const near = last && core.low - last.high <= 1.01 * reach;
    if (last && near && last.cluster === cluster) {
      last.high = Math.max(last.high, core.high);
    } else runs.push({ cluster, low: core.low, high: core.high });
  }
  return runs;
}

/** The end of a span on one side (1: towards the channel's last point) of a core that ends at `s`. */
function edge(
  drawing: Drawing,
  channel: number,
  s: number,
  side: 1 | -1,
  next: number | undefined,
  barriers: readonly Barrier[],
): SpanEnd {
  const total = drawing.elements.total(channel);
  const depth = depthOf(drawing, channel);
  let leg = legLength(widthAt(drawing, channel, s), depth);
  leg = legLength(Math.max(widthAt(drawing, channel, s), widthAt(drawing, channel, s + side * leg)), depth);
  const room = (to: number) => side * (to - s);
  let port: Barrier | undefined;
  for (const b of barriers) {
    if (room(b.s) <= 0 || (next !== undefined && room(b.s) > room(next))) continue;
    if (!port || room(b.s) < room(port.s)) port = b;
  }
  if (port) {
    if (room(port.s) <= NEAR_END * leg) return { kind: 'port', s: port.s, site: port.site };
  } else if (next !== undefined) {
    if (room(next) < 2 * leg) {
      // both neighbours reckon the same middle, from the lower side
      const [a, b] = side > 0 ? [s, next] : [next, s];
      return { kind: 'cut', s: clear(drawing, channel, (a + b) / 2, 1) };
    }
  } else {
    const end = side > 0 ? total : 0;
    if (room(end) <= NEAR_END * leg) return { kind: 'wall', s: end };
  }
  return { kind: 'cut', s: clear(drawing, channel, s + side * leg, side) };
}

/** Moves a cut off a slight corner of the path, beyond where the square end of the next side reaches back. */
function clear(drawing: Drawing, channel: number, s: number, side: 1 | -1): number {
  const { elements } = drawing;
  const first = elements.first[channel]!;
  const last = elements.first[channel + 1]! - 1;
  for (let tries = 0; tries < 8; tries++) {
    const id = drawing.elementAt(channel, s);
    const e = elements.at(id);
    const before = id > first && slight(e.turn0) ? e.h0 * (Math.sin(Math.abs(e.turn0)) + 0.01) : 0;
    const after = id < last && slight(e.turn1) ? e.h1 * (Math.sin(Math.abs(e.turn1)) + 0.01) : 0;
    if (before > 0 && s < e.s0 + before) s = side > 0 ? e.s0 + before : e.s0 - before;
    else if (after > 0 && s > e.s1 - after) s = side > 0 ? e.s1 + after : e.s1 - after;
    else return s;
  }
  return s;
}

/** Sharper corners are cells themselves: no cut comes near them. */
function slight(turn: number): boolean {
  return Math.abs(turn) > 1e-9 && Math.abs(turn) < 2 * BEND_TURN;
}

/** Ports without a hole on each channel. */
export function barriersOf(drawing: Drawing, graph: Graph): Barrier[][] {
  const { chip } = drawing;
  const list: Barrier[][] = chip.channels.map(() => []);
  chip.ports.forEach((p, i) => {
    if (p.diameter > 0) return;
    const site = graph.portSite[i]!;
    for (const arm of graph.sites[site]!.arms) {
      const piece = graph.pieces[arm.piece]!;
      const s = arm.end === 'from' ? piece.start : piece.stop;
      // an end that was taken on to the port's channel does not cover the port
      if (s < -TOUCH || s > drawing.elements.total(piece.channelIndex) + TOUCH) continue;
      const known = list[piece.channelIndex]!;
      if (!known.some((b) => b.site === site && Math.abs(b.s - s) < 1)) known.push({ s, site });
    }
  });
  return list;
}
