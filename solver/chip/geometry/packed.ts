import { MITRE_TURN } from './body.ts';
import { meet } from './curve.ts';
import {
  CURVATURE,
  type Elements,
  H0,
  H1,
  LENGTH,
  STRIDE,
  TURN0,
  TURN1,
  UX,
  UY,
  X0,
  X1,
  Y0,
  Y1,
} from './elements.ts';
import { TOUCH } from './tolerance.ts';

/** At most six corners, x and y. */
export const CORNERS = 12;

/**
 * Corners of the convex polygon that straight element `id` covers, counter-clockwise, into `out`
 * (x, y, …); returns how many numbers. Square ends, with its share of the mitred or bevelled outer
 * corners at its vertices.
 */
export function corners(elements: Elements, id: number, out: Float64Array): number {
  const d = elements.data;
  const k = id * STRIDE;
  const ux = d[k + UX]!;
  const uy = d[k + UY]!;
  const h0 = d[k + H0]!;
  const h1 = d[k + H1]!;
  const x0 = d[k + X0]!;
  const y0 = d[k + Y0]!;
  const x1 = d[k + X1]!;
  const y1 = d[k + Y1]!;
  const turn0 = d[k + TURN0]!;
  const turn1 = d[k + TURN1]!;
  // how far the outer corners go on along the side
  const e0 = Math.abs(turn0) > MITRE_TURN ? 0 : Math.tan(turn0 / 2) * h0;
  const e1 = Math.abs(turn1) > MITRE_TURN ? 0 : Math.tan(turn1 / 2) * h1;
  const right0 = Math.max(e0, 0);
  const right1 = Math.max(e1, 0);
  const left0 = e0 < 0 ? -e0 : 0;
  const left1 = e1 < 0 ? -e1 : 0;
  let n = 0;
  out[n++] = x0 + uy * h0 - ux * right0;
  out[n++] = y0 - ux * h0 - uy * right0;
  out[n++] = x1 + uy * h1 + ux * right1;
  out[n++] = y1 - ux * h1 + uy * right1;
  if (Math.abs(turn1) > MITRE_TURN) n = bevel(out, n, x1, y1, ux, uy, h1, turn1);
  out[n++] = x1 - uy * h1 + ux * left1;
  out[n++] = y1 + ux * h1 + uy * left1;
  out[n++] = x0 - uy * h0 - ux * left0;
  out[n++] = y0 + ux * h0 - uy * left0;
  if (Math.abs(turn0) > MITRE_TURN) n = bevel(out, n, x0, y0, -ux, -uy, h0, -turn0);
  return n;
}

/** Middle of the bevel's edge, which the elements on both sides share. */
function bevel(
  out: Float64Array,
  n: number,
  x: number,
  y: number,
  ux: number,
  uy: number,
  half: number,
  turn: number,
): number {
  const a = turn / 2 - Math.sign(turn) * (Math.PI / 2);
  const reach = half * Math.cos(turn / 2);
  out[n] = x + reach * (ux * Math.cos(a) - uy * Math.sin(a));
  out[n + 1] = y + reach * (uy * Math.cos(a) + ux * Math.sin(a));
  return n + 2;
}

/** Box of what element `id` covers, into box[at … at + 3] as least x, least y, greatest x, greatest y. */
export function elementBox(
  elements: Elements,
  id: number,
  scratch: Float64Array,
  box: Float64Array,
  at: number,
): void {
  const d = elements.data;
  const k = id * STRIDE;
  let minX = Infinity;
  let minY = Infinity;
  let maxX = -Infinity;
  let maxY = -Infinity;
  const curvature = Math.abs(d[k + CURVATURE]!);
  if (curvature === 0) {
    const n = corners(elements, id, scratch);
    for (let i = 0; i < n; i += 2) {
      const x = scratch[i]!;
      const y = scratch[i + 1]!;
      if (x < minX) minX = x;
      if (x > maxX) maxX = x;
      if (y < minY) minY = y;
      if (y > maxY) maxY = y;
    }
  } else {
    // an arc rises at most its sagitta (or its diameter) above the chord
    const half = (curvature * d[k + LENGTH]!) / 2;
    const rise = half < Math.PI / 2 ? (1 - Math.cos(half)) / curvature : 2 / curvature;
    const out = rise + Math.max(d[k + H0]!, d[k + H1]!);
    minX = Math.min(d[k + X0]!, d[k + X1]!) - out;
    minY = Math.min(d[k + Y0]!, d[k + Y1]!) - out;
    maxX = Math.max(d[k + X0]!, d[k + X1]!) + out;
    maxY = Math.max(d[k + Y0]!, d[k + Y1]!) + out;
  }
  box[at] = minX;
  box[at + 1] = minY;
  box[at + 2] = maxX;
  box[at + 3] = maxY;
}

/** Where two centrelines meet: distances along both from their elements' starts. Filled by `meetElements`. */
export class Meetings {
  count = 0;
  readonly s: number[] = [];
  readonly t: number[] = [];

  /** Adds a meeting unless it is the one before, met from the other side. */
  readonly add = (s: number, t: number): void => {
    const k = this.count;
    if (k > 0 && Math.abs(s - this.s[k - 1]!) <= TOUCH && Math.abs(t - this.t[k - 1]!) <= TOUCH) return;
    this.s[k] = s;
    this.t[k] = t;
    this.count = k + 1;
  };
}

/** Sines of angles below this are treated with care: ends may touch far from where the lines cross. */
const SHALLOW = 0.01;

/** `meet` of the centrelines of two elements, without making objects where both are straight. */
export function meetElements(elements: Elements, i: number, j: number, found: Meetings): void {
  found.count = 0;
  const d = elements.data;
  const a = i * STRIDE;
  const b = j * STRIDE;
  if (d[a + CURVATURE] === 0 && d[b + CURVATURE] === 0) {
    const ax = d[a + UX]!;
    const ay = d[a + UY]!;
    const bx = d[b + UX]!;
    const by = d[b + UY]!;
    const dx = d[b + X0]! - d[a + X0]!;
    const dy = d[b + Y0]! - d[a + Y0]!;
    const sine = ax * by - ay * bx;
    const m = d[a + LENGTH]!;
    const n = d[b + LENGTH]!;
    if (sine > SHALLOW || sine < -SHALLOW) {
      const s = (dx * by - dy * bx) / sine;
      const t = (dx * ay - dy * ax) / sine;
      if (s >= -TOUCH && s <= m + TOUCH && t >= -TOUCH && t <= n + TOUCH) {
        found.add(s < 0 ? 0 : Math.min(s, m), t < 0 ? 0 : Math.min(t, n));
        return;
      }
      const far = (2 * TOUCH) / SHALLOW;
      if (s < -far || s > m + far || t < -far || t > n + far) return;
    } else {
      // nearly parallel: an end of one must come near the line of the other
      const ex = d[b + X1]! - d[a + X0]!;
      const ey = d[b + Y1]! - d[a + Y0]!;
      const off0 = dx * ay - dy * ax;
      const off1 = ex * ay - ey * ax;
      if ((off0 > 2 * TOUCH && off1 > 2 * TOUCH) || (off0 < -2 * TOUCH && off1 < -2 * TOUCH)) return;
      // one ends where the other starts, and they go straight on
      const along0 = dx * ax + dy * ay;
      const along1 = ex * ax + ey * ay;
      if (Math.abs(off0) <= TOUCH && Math.abs(off1) <= TOUCH) {
        if (along0 >= m && along1 >= m && Math.min(along0, along1) <= m + TOUCH) {
          found.add(m, along0 < along1 ? 0 : n);
          return;
        }
        if (along0 <= 0 && along1 <= 0 && Math.max(along0, along1) >= -TOUCH) {
          found.add(0, along0 > along1 ? 0 : n);
          return;
        }
      }
    }
  }
  meet(elements.curve(i), elements.curve(j), found.add);
}

/** Whether an edge of convex polygon p (n numbers) has all of q (m numbers) beyond it by more than TOUCH. */
export function apart(p: Float64Array, n: number, q: Float64Array, m: number): boolean {
  for (let i = 0; i < n; i += 2) {
    const j = i + 2 === n ? 0 : i + 2;
    const px = p[i]!;
    const py = p[i + 1]!;
    const dx = p[j]! - px;
    const dy = p[j + 1]! - py;
    const limit = -TOUCH * Math.sqrt(dx * dx + dy * dy);
    let beyond = true;
    for (let k = 0; k < m; k += 2) {
      if (dx * (q[k + 1]! - py) - dy * (q[k]! - px) >= limit) {
        beyond = false;
        break;
      }
    }
    if (beyond) return true;
  }
  return false;
}
