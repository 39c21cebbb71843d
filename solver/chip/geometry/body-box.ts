import type { Curve } from './curve.ts';

/**
 * The box round what an element covers that reaches `half` to either side, square at both ends, and `room` more, nm:
 * least x, least y, greatest x, greatest y into box[at … at + 3].
 */
export function bodyBox(c: Curve, half: number, room: number, box: Float64Array, at: number): void {
  let vx = c.ux;
  let vy = c.uy;
  if (c.curvature !== 0) {
    const a = c.curvature * c.length;
    const cos = Math.cos(a);
    const sin = Math.sin(a);
    vx = c.ux * cos - c.uy * sin;
    vy = c.uy * cos + c.ux * sin;
  }
  const ax = Math.abs(c.uy) * half;
  const ay = Math.abs(c.ux) * half;
  const bx = Math.abs(vy) * half;
  const by = Math.abs(vx) * half;
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
  box[at] = x0 - room;
  box[at + 1] = y0 - room;
  box[at + 2] = x1 + room;
  box[at + 3] = y1 + room;
}
