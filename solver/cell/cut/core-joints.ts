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
  /** Angle between going straight on and going on in the other, rad. */
  readonly turn: number;
  /** Whether their widths differ. */
  readonly step: boolean;
  /** How far along p and along q its wall meets the other's, nm. */
  readonly cornerP: number;
  readonly cornerQ: number;
}

export function jointOf(p: Body, q: Body, drawing: Drawing): Joint | undefined {
  for (const a of ends(p, drawing)) {
    for (const b of ends(q, drawing)) if (Math.hypot(a.x - b.x, a.y - b.y) <= 2 * TOUCH) return joined(a, b);
  }
  return undefined;
}

function joined(p: End, q: End): Joint {
  const cosine = p.ux * q.ux + p.uy * q.uy;
  const sine = Math.abs(p.ux * q.uy - p.uy * q.ux);
  const turn = Math.atan2(sine, -cosine);
  const step = Math.abs(p.half - q.half) > STEP * Math.max(p.half, q.half);
  const straight = turn <= BEND_TURN;
  const cornerP = straight ? 0 : Math.max(0, (q.half + p.half * cosine) / sine);
  const cornerQ = straight ? 0 : Math.max(0, (p.half + q.half * cosine) / sine);
  return { p, q, turn, step, cornerP, cornerQ };
}

/**
 * Channels that end on each other: as far along each as to where its wall meets the other's, fillet
 * included; where they go straight on and are alike in width, a joint that needs no cell of its own.
 */
export function endOnEnd(found: Sources, chip: Chip, drawing: Drawing, joint: Joint): void {
  const { p, q, turn, step, cornerP, cornerQ } = joint;
  const { fillet } = chip.layers[drawing.layerOf[p.channel]!]!;
  const source = addSource(found, turn <= BEND_TURN && !step);
  const rounding = turn <= BEND_TURN ? (step ? fillet : 0) : fillet * Math.tan(turn / 2);
  addEnd(found, p, cornerP + rounding, source);
  addEnd(found, q, cornerQ + rounding, source);
}

function addEnd(
  found: Sources,
  { channel, total, room, atStart }: End,
  wanted: number,
  source: number,
): void {
  const reach = Math.min(wanted, room);
  found.cores.push({
    channel,
    low: atStart ? 0 : total - reach,
    high: atStart ? reach : total,
    source,
  });
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
