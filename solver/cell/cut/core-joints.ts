import type { Chip } from '../../chip/chip.ts';
import type { Body } from '../../chip/geometry/body.ts';
import { tangentAt } from '../../chip/geometry/curve.ts';
import { TOUCH } from '../../chip/geometry/tolerance.ts';
import type { Drawing } from '../../chip/read-graph-drawing.ts';
import { BEND_TURN, STEP } from './bounds.ts';
import { addSource, type Sources } from './sources.ts';

/** Two ends of channels at one point. */
export interface Joint {
  readonly p: End;
  readonly q: End;
}

export function jointOf(p: Body, q: Body, drawing: Drawing): Joint | undefined {
  for (const a of ends(p, drawing)) {
    for (const b of ends(q, drawing))
      if (Math.hypot(a.x - b.x, a.y - b.y) <= 2 * TOUCH) return { p: a, q: b };
  }
  return undefined;
}

/**
 * Channels that end on each other: as far along each as to where its wall meets the other's, fillet
 * included; where they go straight on and are alike in width, a joint that needs no cell of its own.
 */
export function endOnEnd(found: Sources, chip: Chip, drawing: Drawing, { p, q }: Joint): void {
  const { fillet } = chip.layers[drawing.layerOf[p.channel]!]!;
  const cosine = p.ux * q.ux + p.uy * q.uy;
  const sine = Math.abs(p.ux * q.uy - p.uy * q.ux);
  const turn = Math.atan2(sine, -cosine);
  const step = Math.abs(p.half - q.half) > STEP * Math.max(p.half, q.half);
  const source = addSource(found, turn <= BEND_TURN && !step);
  for (const [own, other] of [
    [p, q],
    [q, p],
  ] as const) {
    const corner = turn <= BEND_TURN ? 0 : Math.max(0, (other.half + own.half * cosine) / sine);
    const rounding = turn <= BEND_TURN ? (step ? fillet : 0) : fillet * Math.tan(turn / 2);
    const reach = Math.min(corner + rounding, own.room);
    const [low, high] = own.atStart ? [0, reach] : [own.total - reach, own.total];
    found.cores.push({ channel: own.channel, low, high, source });
  }
}

interface End {
  readonly x: number;
  readonly y: number;
  /** Into the channel. */
  readonly ux: number;
  readonly uy: number;
  readonly half: number;
  readonly channel: number;
  readonly atStart: boolean;
  /** Length of the channel, and of the element there. */
  readonly total: number;
  readonly room: number;
}

function ends(b: Body, drawing: Drawing): End[] {
  const e = b.element;
  const c = e.curve;
  const { channel } = e;
  const total = drawing.elements.total(channel);
  const common = { channel, total, room: c.length };
  const list: End[] = [];
  if (e.s0 === 0) list.push({ ...common, x: c.x0, y: c.y0, ux: c.ux, uy: c.uy, half: e.h0, atStart: true });
  if (e.s1 === total) {
    const [ux, uy] = tangentAt(c, c.length);
    list.push({ ...common, x: c.x1, y: c.y1, ux: -ux, uy: -uy, half: e.h1, atStart: false });
  }
  return list;
}
