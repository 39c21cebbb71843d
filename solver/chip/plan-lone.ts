import type { Edge } from '../mesh/mesh.ts';
import { type Curve, pointAt, tangentAt } from './geometry/curve.ts';
import type { Drawing } from './read-graph-drawing.ts';

/** Arcs that turn further (radians) may meet themselves: a union tells. */
const WIDEST_TURN = 3.3;
/** Most elements of which every two are compared. */
const MANY = 40;
/** Room between boxes, nm, that rounding cannot bridge. */
const ROOM = 10;
/** Corners that are one, nm, as in the outcome of a union. */
const SAME = 0.05;

/**
 * The outline of a channel that nothing else touches, straight or with rounded bends, by its own walls:
 * counter-clockwise, from its leftmost, then lowest corner on, as a union gives it. Undefined where only a
 * union can tell: mitred corners, tapers with bends, bends tighter than the channel is wide, stretches that
 * come near one another.
 */
export function loneOutline({ elements }: Drawing, channel: number): Edge[] | undefined {
  const first = elements.first[channel]!;
  const last = elements.first[channel + 1]! - 1;
  if (last - first >= MANY) return undefined;
  const sides: Side[] = [];
  const boxes: Box[] = [];
  for (let id = first; id <= last; id++) {
    const { curve: c, h0, h1, turn1 } = elements.at(id);
    if (turn1 !== 0 || (last > first && h0 !== h1)) return undefined;
    const turn = c.length * c.curvature;
    if (c.curvature !== 0) {
      if (1 / Math.abs(c.curvature) <= Math.max(h0, h1) + ROOM) return undefined;
      if (Math.abs(turn) > WIDEST_TURN) return undefined;
    }
    const box = boxOf(c, Math.max(h0, h1));
    for (let k = 0; k + 1 < boxes.length; k++) if (meet(boxes[k]!, box)) return undefined;
    boxes.push(box);
    const before = sides[sides.length - 1];
    // Lines that go straight on, and arcs that go round on, are one side.
    if (before && goesOn(before.last, c)) {
      before.last = c;
      before.turn += turn;
      before.h1 = h1;
    } else sides.push({ first: c, last: c, turn, h0, h1 });
  }
  const right = sides.map(({ first: c, turn, h0 }) =>
    edge(c.x0 + c.uy * h0, c.y0 - c.ux * h0, Math.tan(turn / 4)),
  );
  const left = sides.toReversed().map(({ last: c, turn, h1 }) => {
    const [ux, uy] = tangentAt(c, c.length);
    return edge(c.x1 - uy * h1, c.y1 + ux * h1, -Math.tan(turn / 4));
  });
  const { first: start, h0 } = sides[0]!;
  const { last: end, h1 } = sides[sides.length - 1]!;
  const [vx, vy] = tangentAt(end, end.length);
  return fromLeast([
    ...right,
    edge(end.x1 + vy * h1, end.y1 - vx * h1, 0),
    ...left,
    edge(start.x0 - start.uy * h0, start.y0 + start.ux * h0, 0),
  ]);
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

const edge = (x: number, y: number, bulge: number): Edge => ({ x, y, bulge, tag: 0 });

type Box = readonly [number, number, number, number];

const meet = (a: Box, b: Box): boolean => a[0] <= b[2] && b[0] <= a[2] && a[1] <= b[3] && b[1] <= a[3];

/** What an element covers lies within it. */
function boxOf(c: Curve, half: number): Box {
  const xs = [c.x0, c.x1];
  const ys = [c.y0, c.y1];
  if (c.curvature !== 0) {
    // Where the arc turns furthest to each side.
    const start = Math.atan2(c.y0 - c.cy, c.x0 - c.cx);
    const sweep = c.length * c.curvature;
    for (let k = 0; k < 4; k++) {
      const way = Math.PI * 2;
      let by = ((k * Math.PI) / 2 - start) * Math.sign(sweep);
      by -= Math.floor(by / way) * way;
      if (by >= Math.abs(sweep)) continue;
      const [x, y] = pointAt(c, by / Math.abs(c.curvature));
      xs.push(x);
      ys.push(y);
    }
  }
  const reach = half + ROOM;
  return [Math.min(...xs) - reach, Math.min(...ys) - reach, Math.max(...xs) + reach, Math.max(...ys) + reach];
}

function fromLeast(loop: Edge[]): Edge[] {
  let k = 0;
  for (let i = 1; i < loop.length; i++) {
    const dx = loop[i]!.x - loop[k]!.x;
    if (dx < -SAME || (dx <= SAME && loop[i]!.y < loop[k]!.y)) k = i;
  }
  return k === 0 ? loop : [...loop.slice(k), ...loop.slice(0, k)];
}
