import type { Area } from '../../chip/geometry/area.ts';
import type { Body } from '../../chip/geometry/body.ts';
import { nearest } from '../../chip/geometry/curve.ts';

/** A stretch of a channel where its flow cannot be that of a duct. */
export interface Core {
  readonly channel: number;
  low: number;
  high: number;
  /** What makes it so; cores of one source belong to one cell. */
  readonly source: number;
}

/** The hole of a port or via on one layer. */
export interface Hole {
  readonly x: number;
  readonly y: number;
  /** Of the rim as it is cut, nm. */
  radius: number;
  readonly layer: number;
  readonly site: number;
  area: Area;
}

export interface Sources {
  readonly cores: Core[];
  /** Sources that count only if a cell reaches them: channels that go straight on into each other. */
  readonly weak: boolean[];
  /** Sources that are steep tapers. */
  readonly taper: boolean[];
  /** Chambers of each source. */
  readonly chambers: Map<number, number[]>;
  readonly holes: readonly Hole[];
  /** Holes that a source's ground touches. */
  readonly holesOf: Map<number, Set<number>>;
}

/** A new source; weak ones count only if a cell reaches them. */
export function addSource(found: Sources, weak = false, taper = false): number {
  found.weak.push(weak);
  found.taper.push(taper);
  return found.weak.length - 1;
}

/** From where to where along a channel. */
export type Reach = readonly [low: number, high: number];

/** The stretch of a body's channel over which it has ground in common with something; null without corners. */
export function reachOf(b: Body, corners: readonly (readonly [number, number])[]): Reach | null {
  const e = b.element;
  let low = Infinity;
  let high = -Infinity;
  for (const [x, y] of corners) {
    const s = e.s0 + nearest(e.curve, x, y);
    low = Math.min(low, s);
    high = Math.max(high, s);
  }
  return low <= high ? [low, high] : null;
}

/** Adds a stretch of a body's channel, so much longer at both ends. */
export function addReach(found: Sources, b: Body, reach: Reach | null, source: number, margin: number): void {
  if (!reach) return;
  const [low, high] = reach;
  found.cores.push({ channel: b.element.channel, low: low - margin, high: high + margin, source });
}

/** Adds the stretch of a body's channel over which it has ground in common with something. */
export function span(
  found: Sources,
  b: Body,
  corners: readonly (readonly [number, number])[],
  source: number,
  margin: number,
): void {
  addReach(found, b, reachOf(b, corners), source, margin);
}
