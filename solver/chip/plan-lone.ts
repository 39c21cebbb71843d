import type { Edge } from '../mesh/mesh.ts';
import { bodyBox } from './geometry/body-box.ts';
import { type Curve, part, tangentAt } from './geometry/curve.ts';
import type { PlanBody } from './plan.ts';
import type { Drawing } from './read-graph-drawing.ts';

/** Arcs that turn further (radians) may meet themselves: a union tells. */
const WIDEST_TURN = 3.3;
/** Most elements of which every two are compared. */
const MANY = 40;
/** Room between boxes, nm, that rounding cannot bridge. */
const ROOM = 10;
/** Corners that are one, nm, as in the outcome of a union. */
const SAME = 0.05;

type Strip = PlanBody & { kind: 'strip' };

/**
 * The outline of what a strip covers that nothing else touches, straight or with rounded bends, by its own
 * walls: counter-clockwise, from its leftmost, then lowest corner on, as a union gives it. Undefined where only
 * a union can tell: mitred corners, tapers with bends, bends tighter than the channel is wide, stretches that
 * come near one another.
 */
export function loneOutline(drawing: Drawing, strip: Strip): Edge[] | undefined {
  const { elements } = drawing;
  const from = Math.max(0, strip.from);
  const to = Math.min(elements.total(strip.channel), strip.to);
  const end = elements.first[strip.channel + 1]!;
  const first = drawing.elementAt(strip.channel, from);
  const sides: Side[] = [];
  let boxes = 0;
  for (let id = first; id < end; id++) {
    const e = elements.at(id);
    const last = e.s1 >= to || id + 1 === end;
    const slope = (e.h1 - e.h0) / (e.s1 - e.s0);
    const c = part(e.curve, from - e.s0, to - e.s0);
    if (c.length === 0) return undefined;
    const h0 = from > e.s0 ? e.h0 + slope * (from - e.s0) : e.h0;
    const h1 = to < e.s1 ? e.h0 + slope * (to - e.s0) : e.h1;
    if (!last && e.turn1 !== 0) return undefined;
    if ((!last || id > first) && h0 !== h1) return undefined;
    const turn = c.length * c.curvature;
    if (c.curvature !== 0) {
      if (1 / Math.abs(c.curvature) <= Math.max(h0, h1) + ROOM) return undefined;
      if (Math.abs(turn) > WIDEST_TURN) return undefined;
    }
    if (boxes >= MANY) return undefined;
    bodyBox(c, Math.max(h0, h1), ROOM, BOXES, 4 * boxes);
    for (let k = 0; k + 1 < boxes; k++) if (meet(4 * k, 4 * boxes)) return undefined;
    boxes += 1;
    const before = sides[sides.length - 1];
    // Lines that go straight on, and arcs that go round on, are one side.
    if (before && goesOn(before.last, c)) {
      before.last = c;
      before.turn += turn;
      before.h1 = h1;
    } else sides.push({ first: c, last: c, turn, h0, h1 });
    if (last) break;
  }
  const loop: Edge[] = [];
  for (const { first: c, turn, h0 } of sides)
    loop.push(edge(c.x0 + c.uy * h0, c.y0 - c.ux * h0, Math.tan(turn / 4)));
  const { last: stop, h1: stopHalf } = sides[sides.length - 1]!;
  const [vx, vy] = tangentAt(stop, stop.length);
  loop.push(edge(stop.x1 + vy * stopHalf, stop.y1 - vx * stopHalf, 0, strip.tagTo));
  for (let k = sides.length - 1; k >= 0; k--) {
    const { last: c, turn, h1 } = sides[k]!;
    const [ux, uy] = tangentAt(c, c.length);
    loop.push(edge(c.x1 - uy * h1, c.y1 + ux * h1, -Math.tan(turn / 4)));
  }
  const { first: start, h0 } = sides[0]!;
  loop.push(edge(start.x0 - start.uy * h0, start.y0 + start.ux * h0, 0, strip.tagFrom));
  return fromLeast(loop);
}

/** Elements that have one wall on either side in common. */
interface Side {
  readonly first: Curve;
  last: Curve;
  turn: number;
  readonly h0: number;
  h1: number;
}

function goesOn(a: Curve, b: Curve): boolean {
  if (a.curvature === 0 || b.curvature === 0) return a.curvature === b.curvature;
  if (Math.abs(1 / a.curvature - 1 / b.curvature) > SAME) return false;
  return Math.hypot(a.cx - b.cx, a.cy - b.cy) <= SAME;
}

const edge = (x: number, y: number, bulge: number, tag = 0): Edge => ({ x, y, bulge, tag });

const BOXES = new Float64Array(4 * MANY);

const meet = (a: number, b: number): boolean =>
  BOXES[a]! <= BOXES[b + 2]! &&
  BOXES[b]! <= BOXES[a + 2]! &&
  BOXES[a + 1]! <= BOXES[b + 3]! &&
  BOXES[b + 1]! <= BOXES[a + 3]!;

function fromLeast(loop: Edge[]): Edge[] {
  let k = 0;
  for (let i = 1; i < loop.length; i++) {
    const dx = loop[i]!.x - loop[k]!.x;
    if (dx < -SAME || (dx <= SAME && loop[i]!.y < loop[k]!.y)) k = i;
  }
  return k === 0 ? loop : [...loop.slice(k), ...loop.slice(0, k)];
}
