import { type Curve, tangentAt } from './curve.ts';

export type PlanBox = readonly [x0: number, y0: number, x1: number, y1: number];

/** The box round what an element covers that reaches `half` to either side, square at both ends, and `room` more; nm. */
export function bodyBox(c: Curve, half: number, room: number): PlanBox {
  const [vx, vy] = tangentAt(c, c.length);
  const [ax, ay] = [Math.abs(c.uy) * half, Math.abs(c.ux) * half];
  const [bx, by] = [Math.abs(vy) * half, Math.abs(vx) * half];
  let x0 = Math.min(c.x0 - ax, c.x1 - bx);
  let y0 = Math.min(c.y0 - ay, c.y1 - by);
  let x1 = Math.max(c.x0 + ax, c.x1 + bx);
  let y1 = Math.max(c.y0 + ay, c.y1 + by);
  if (c.curvature !== 0) {
    // the outer wall may reach further where it runs level or upright in between
    const outer = Math.abs(1 / c.curvature) + half;
    const start = Math.atan2(c.y0 - c.cy, c.x0 - c.cx);
    const sweep = c.length * c.curvature;
    for (let k = 0; k < 4; k++) {
      let turn = ((k * Math.PI) / 2 - start) * Math.sign(sweep);
      turn -= Math.floor(turn / (2 * Math.PI)) * 2 * Math.PI;
      if (turn > Math.abs(sweep)) continue;
      if (k === 0) x1 = Math.max(x1, c.cx + outer);
      else if (k === 1) y1 = Math.max(y1, c.cy + outer);
      else if (k === 2) x0 = Math.min(x0, c.cx - outer);
      else y0 = Math.min(y0, c.cy - outer);
    }
  }
  return [x0 - room, y0 - room, x1 + room, y1 + room];
}
